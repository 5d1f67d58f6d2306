package handbook

import (
	"context"
	"fmt"
	"math"
	"strings"
	"testing"
)

// A row is a fact beside what the tiers say.
type row struct {
	specimen    string
	fact        fact
	class       class
	uff, field  float64
	gfn2, hf    float64
	led         bool
	uffE, gfn2E error
}

// A verdict compares a tier's value with a fact.
type verdict string

const (
	within  verdict = "within"  // the fact's uncertainty and the tier's known error
	beyond  verdict = "beyond"  // that, but not twice the known error
	outside verdict = "outside" // twice the known error
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

// examine asks all questions about a specimen.
func examine(t *testing.T, s specimen, all []fact, levels ...level) []row {
	t.Helper()
	ctx := t.Context()
	from, err := searchFor(ctx, s.smiles)
	if err != nil {
		t.Fatal(err)
	}
	rows := make([]row, len(s.questions))
	for n, q := range s.questions {
		rows[n] = row{specimen: s.name, fact: factNamed(t, all, q.fact), class: q.class, uff: none, field: none, gfn2: none, hf: none}
	}
	for _, l := range levels {
		sub, err := subjectAt(ctx, from, l, s.hydrogens(from.m.Numbers()))
		if err != nil {
			t.Fatal(err)
		}
		for n, q := range s.questions {
			rows[n].record(t, l, ask(ctx, t, sub, q))
		}
	}
	return rows
}

// ask allows a force field to have no minimum of a shape; GFN2-xTB must say
// something about each.
func ask(ctx context.Context, t *testing.T, sub *subject, q question) answer {
	t.Helper()
	a, err := q.ask(ctx, sub)
	if err == nil {
		return a
	}
	if sub.level.name == gfn2.name {
		t.Errorf("%s: %s: %v", q.fact, sub.level.name, err)
	}
	return answer{value: none, hf: none}
}

func (r *row) record(_ *testing.T, l level, a answer) {
	switch l.name {
	case uff.name:
		r.uff = a.value
	case field.name:
		r.field = a.value
	default:
		r.gfn2, r.hf, r.led = a.value, a.hf, a.led
	}
}

// markdown is the table of all rows.
func markdown(rows []row) string {
	var b strings.Builder
	fmt.Fprintln(&b, "| molecule | quantity | handbook | UFF | force field | GFN2-xTB | HF-3c | known errors | verdict |")
	fmt.Fprintln(&b, "|---|---|---:|---:|---:|---:|---:|---|---|")
	for _, r := range rows {
		fmt.Fprintf(&b, "| %s | %s | %s ± %s %s | %s | %s | %s | %s | %s | %s |\n",
			r.specimen, r.fact.Quantity, number(r.fact.Value), number(r.fact.Uncertainty), r.fact.Unit,
			number(r.uff), number(r.field), number(r.gfn2), number(r.hf), r.class.name,
			fmt.Sprintf("%s, %s, %s", judge(r.field, r.class.field, r.fact), judge(r.gfn2, r.class.gfn2, r.fact), judge(r.hf, r.class.hf, r.fact)))
	}
	return b.String()
}

func number(v float64) string {
	if math.IsNaN(v) {
		return "-"
	}
	return fmt.Sprintf("%.2f", v)
}
