package promotion

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"

	"torsieve/internal/units"
)

// An Audit is a candidate that was computed though the model had not asked for
// it: drawn at random from all that waited, and compared with what had been
// predicted.
type Audit struct {
	Candidate int
	Inclusion float64 // probability with which it was drawn
	Expected  float64 // share beside the computed ones that was expected of it
	Found     float64 // share that it has
	Score     float64 // its energy as a normal deviate: 0 as predicted, 2 in one of twenty
	Failed    bool    // the higher tier could not compute it: Found and Score are not known
}

// farOff is the score from which an audit says that the model does not hold for
// its ligand: one in two thousand by chance.
const farOff = 3.5

// Disagrees says that the energy lies far outside what was predicted.
func (a Audit) Disagrees() bool { return !a.Failed && math.Abs(a.Score) > farOff }

// Audits returns the audits that have an answer, in the order of the answers.
func (p *Plan) Audits() []Audit { return append([]Audit(nil), p.audits...) }

// A prediction is what an audit will be compared with.
type prediction struct {
	Audit
	fit           *fit
	centre, scale float64 // kcal/mol above the fit's zero
	lowest, logZ  float64 // of the ones computed before
}

// drawAudits hands out the audits that are due: one in ten evaluations, drawn
// from all that wait.
func (p *Plan) drawAudits() {
	o := p.look()
	left := p.list(waiting)
	due := int(float64(p.handed)/auditsOneIn+p.due) - len(p.audits)
	due = min(due, len(left), p.room())
	if due <= 0 || o.fit == nil {
		return
	}
	w := p.newWorlds(o.fit)
	order := p.random(streamPick).Perm(len(left))
	for _, k := range order[:due] {
		i := left[k]
		centre, scale := o.fit.predict(i)
		p.pending = append(p.pending, prediction{
			Audit: Audit{Candidate: i, Inclusion: 1 / float64(len(left)), Expected: o.alone[i]},
			fit:   o.fit, centre: centre, scale: scale, lowest: w.lowest, logZ: w.logZ[0],
		})
		p.hand(i, asAudit)
	}
}

// audit compares candidate i with its prediction.
func (p *Plan) audit(i int) {
	for k, was := range p.pending {
		if was.Candidate != i {
			continue
		}
		p.pending = append(p.pending[:k], p.pending[k+1:]...)
		p.audits = append(p.audits, was.compare(&p.entries[i], p.candidates[i].Copies, p.settings.Temperatures[0]))
		return
	}
}

func (was prediction) compare(e *entry, copies, temperature float64) Audit {
	a := was.Audit
	if e.state == failed {
		a.Failed = true
		return a
	}
	y := (e.upper - was.fit.zero) / units.KcalPerMol
	tail := was.fit.student().CDF(-math.Abs(y-was.centre) / was.scale)
	a.Score = math.Copysign(-distuv.UnitNormal.Quantile(math.Max(tail, 1e-15)), y-was.centre)
	if e.state == computed { // a merged one adds nothing
		weight := math.Log(copies) - (y-was.lowest)/(kcal*temperature) - was.logZ
		a.Found = 1 / (1 + math.Exp(-weight))
	}
	return a
}
