package promotion

import (
	"fmt"
	"math"

	"torsieve/internal/units"
)

// Why says in plain words why candidate i went up, or why it stays where it is.
func (p *Plan) Why(i int) string {
	e := &p.entries[i]
	switch e.state {
	case waiting:
		return p.whyWaiting(i)
	case asked:
		return "goes up: " + e.because()
	case merged:
		return fmt.Sprintf("went up: %s; became the same minimum as conformer %d", e.because(), e.into+1)
	case failed:
		return fmt.Sprintf("went up: %s; could not be computed: %s; what it may weigh counts as missed", e.because(), e.failed)
	}
	return "went up: " + e.because()
}

func (e *entry) because() string {
	switch e.why {
	case asAll:
		return "there are so few conformers that all do"
	case asSpread:
		return "one of those that show how the two tiers differ"
	case asLowest:
		return "among the lowest of the tier below"
	case asWeighty:
		return fmt.Sprintf("expected to hold %s of the weight", percent(e.share))
	case asAudit:
		return "drawn at random to check the prediction"
	}
	return "not yet decided"
}

func (p *Plan) whyWaiting(i int) string {
	o := p.look()
	if o.fit == nil {
		return "stays: nothing is known of the tier above yet"
	}
	w := p.newWorlds(o.fit)
	centre, scale := o.fit.predict(i)
	reach := -o.fit.student().Quantile(0.05) * scale
	// With the two-sided 90 % interval, the low end is passed by 5 %.
	low := math.Log(p.candidates[i].Copies) - (centre-reach-w.lowest)/(kcal*p.settings.Temperatures[o.worst]) - w.logZ[o.worst]
	said := fmt.Sprintf("expected %.1f kcal/mol above the lowest (%.1f to %.1f), at most %s of the weight",
		centre-w.lowest, centre-reach-w.lowest, centre+reach-w.lowest, percent(1/(1+math.Exp(-low))))
	switch p.End() {
	case Enough:
		return "stays: " + said
	case Spent:
		return "stays: the budget of evaluations was spent; " + said
	}
	return "waits: " + said
}

// Explain says in plain words how the plan ended.
func (p *Plan) Explain() string {
	o := p.look()
	e := o.estimates[o.worst]
	missed := fmt.Sprintf("missed weight %s expected, under %s with 95 %% probability (%g K)", percent(e.Mean), percent(e.P95), e.Temperature)
	if e.Failed > 1e-3 {
		missed += fmt.Sprintf("; %s of it in conformers that could not be computed", percent(e.Failed))
	}
	counts := fmt.Sprintf("%d of %d conformers went up", p.handed, len(p.entries))
	switch p.End() {
	case Enough:
		return fmt.Sprintf("%s: the rest is under the tolerance of %s; %s", counts, percent(p.settings.Tolerance), missed)
	case Everything:
		if e.Mean == 0 {
			return counts + ": none is left"
		}
		return fmt.Sprintf("%s: none is left; %s", counts, missed)
	case Spent:
		return fmt.Sprintf("%s: the budget is spent; %s", counts, missed)
	case NoneCame:
		return counts + ", and none of them could be computed"
	}
	return fmt.Sprintf("%s so far; %s", counts, missed)
}

func percent(share float64) string {
	switch {
	case share < 0.0001:
		return "under 0.01 %"
	case share < 0.01:
		return fmt.Sprintf("%.2f %%", 100*share)
	}
	return fmt.Sprintf("%.1f %%", 100*share)
}

// Residual returns the ligand's own scatter of the higher tier about the lower
// one as learnt so far, in hartree, its degrees of freedom and the slope; ok is
// false while nothing is computed.
func (p *Plan) Residual() (scale, freedom, slope float64, ok bool) {
	o := p.look()
	if o.fit == nil {
		return 0, 0, 0, false
	}
	return o.fit.scale * units.KcalPerMol, o.fit.freedom, o.fit.mean[1], true
}
