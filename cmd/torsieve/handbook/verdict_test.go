package handbook

import (
	"errors"
	"math"
	"testing"
)

// A verdict compares a tier's value with a fact.
type verdict string

const (
	within  verdict = "within"  // misses by the fact's uncertainty and the tier's known error, or less
	beyond  verdict = "beyond"  // by more, up to twice the known error
	outside verdict = "outside" // by more than twice the known error
	absent  verdict = "absent"  // the tier has no such minimum
	silent  verdict = "-"       // no value, or no known error
)

func judge(value, known float64, f fact) verdict {
	off := math.Abs(value-f.Value) - f.Uncertainty
	switch {
	case math.IsNaN(off) || math.IsNaN(known):
		return silent
	case off <= known:
		return within
	case off <= 2*known:
		return beyond
	}
	return outside
}

func TestJudge(t *testing.T) {
	f := fact{Value: 2, Uncertainty: 0.25}
	for _, c := range []struct {
		value, known float64
		want         verdict
	}{
		{2.7, 0.5, within},
		{1.3, 0.5, within},
		{3.2, 0.5, beyond},
		{0.7, 0.5, outside},
		{2.25, 0, within},
		{2.5, 0, outside},
		{none, 0.5, silent},
		{2, none, silent},
	} {
		if got := judge(c.value, c.known, f); got != c.want {
			t.Errorf("%g for 2 ± 0.25, known error %g: %s, want %s", c.value, c.known, got, c.want)
		}
	}
}

// A row is a fact beside what the tiers say.
type row struct {
	fact                 fact
	class                class
	uff, field, quantum  answer
	fieldErr, quantumErr error
}

// verdicts are those of the force field, GFN2-xTB and HF-3c.
func (r row) verdicts() (field, gfn2, hf verdict) {
	field = judge(r.field.value, r.class.field, r.fact)
	if errors.Is(r.fieldErr, errNoMinimum) {
		field = absent
	}
	gfn2 = judge(r.quantum.value, r.class.gfn2, r.fact)
	if errors.Is(r.quantumErr, errNoMinimum) {
		gfn2 = absent
	}
	return field, gfn2, judge(r.quantum.hf, r.class.hf, r.fact)
}
