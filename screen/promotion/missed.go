package promotion

import (
	"math"
	"math/rand/v2"
	"slices"

	"gonum.org/v1/gonum/stat/distuv"

	"torsieve/internal/units"
)

// draws is the number of worlds that an estimate looks at: the share of a 5 %
// tail is then known to 1 % (binomial standard error).
const draws = 512

// farthest clips a prediction to so many of its scales: what lies beyond says
// more about the tail of Student's t than about conformers.
const farthest = 5

// An Estimate is the Boltzmann weight at the higher tier of all candidates that
// have no energy there, as a share of the whole.
type Estimate struct {
	Temperature float64   // kelvin
	Mean        float64   // expected share
	P95         float64   // the share is below this in 95 of 100 draws
	Failed      float64   // the part of Mean that failed candidates hold: it cannot be won
	Draws       []float64 // the shares of all draws, in rising order

	reachable float64 // the 95th percentile of what waiting candidates hold
}

// Missed returns the missed weight as it is known now, one estimate per
// temperature. While nothing is computed, it is all there is: 1.
func (p *Plan) Missed() []Estimate {
	out := slices.Clone(p.look().estimates)
	for k := range out {
		out[k].Draws = slices.Clone(out[k].Draws)
	}
	return out
}

// An outlook is what the plan expects of the candidates without an energy.
type outlook struct {
	fit       *fit // nil: nothing is known
	estimates []Estimate
	worst     int       // the estimate that decides
	shares    []float64 // expected share of each candidate in the whole, where it is worst
	alone     []float64 // expected share of each beside the computed ones alone, at the first temperature
}

func (p *Plan) look() *outlook {
	if p.fresh == nil {
		p.fresh = p.newOutlook()
	}
	return p.fresh
}

func (p *Plan) newOutlook() *outlook {
	o := &outlook{shares: make([]float64, len(p.entries)), alone: make([]float64, len(p.entries))}
	var known []int
	var energies []float64
	for i := range p.entries {
		if e := &p.entries[i]; e.state == computed || e.state == merged {
			known = append(known, i)
			energies = append(energies, e.upper)
		}
	}
	f, ok := newFit(p.model, p.prior, known, energies)
	if !ok || len(p.list(computed)) == 0 {
		for _, t := range p.settings.Temperatures {
			o.estimates = append(o.estimates, Estimate{Temperature: t, Mean: 1, P95: 1, Draws: []float64{1}, reachable: 1})
		}
		return o
	}
	o.fit = f
	p.newWorlds(f).look(o)
	return o
}

// worlds draws what the candidates without an energy may have. Energies are
// kcal/mol above the lowest that is known.
type worlds struct {
	plan    *Plan
	fit     *fit
	lowest  float64
	unknown []unknown
	shares  [][]float64 // by temperature, then as unknown: summed over draws
	logZ    []float64   // of the computed ones, by temperature
	y       []float64   // of one draw, as unknown; +Inf for one that merges
	weights []float64   // of one draw at one temperature, as unknown
	betas   []float64   // of one draw: the regression's coefficients
	rate    distuv.Beta // of merging; Alpha 0: none did
}

type unknown struct {
	index         int
	centre, reach float64
	copies        float64 // log of the statistical weight
	failed        bool
}

// negligible in units of kT: exp(-36) is the precision of a double.
const negligible = 36

func (p *Plan) newWorlds(f *fit) *worlds {
	w := &worlds{plan: p, fit: f, lowest: math.Inf(1)}
	for _, i := range p.list(computed) {
		w.lowest = math.Min(w.lowest, (p.entries[i].upper-f.zero)/units.KcalPerMol)
	}
	hottest := slices.Max(p.settings.Temperatures) * kcal
	for i := range p.entries {
		s := p.entries[i].state
		if s == computed || s == merged {
			continue
		}
		centre, scale := f.predict(i)
		u := unknown{index: i, centre: centre - w.lowest, copies: math.Log(p.candidates[i].Copies), failed: s == failed}
		u.reach = farthest * math.Max(p.prior.Scale/units.KcalPerMol, scale)
		if u.centre-u.reach < negligible*hottest {
			w.unknown = append(w.unknown, u)
		}
	}
	w.y, w.weights = make([]float64, len(w.unknown)), make([]float64, len(w.unknown))
	w.betas = make([]float64, f.design.columns)
	for _, t := range p.settings.Temperatures {
		w.shares = append(w.shares, make([]float64, len(w.unknown)))
		w.logZ = append(w.logZ, w.known(t))
	}
	n := float64(len(p.list(merged)))
	w.rate = distuv.Beta{Alpha: n, Beta: float64(len(p.list(computed)) + 1)}
	return w
}

// kcal is k_B in kcal/mol per kelvin.
const kcal = units.Kelvin / units.KcalPerMol

// known returns the log of the computed ones' partition function.
func (w *worlds) known(temperature float64) float64 {
	var sum float64
	for _, i := range w.plan.list(computed) {
		above := (w.plan.entries[i].upper-w.fit.zero)/units.KcalPerMol - w.lowest
		sum += w.plan.candidates[i].Copies * math.Exp(-above/(kcal*temperature))
	}
	return math.Log(sum)
}

// look fills in the outlook.
func (w *worlds) look(o *outlook) {
	source := w.plan.random(streamDraws)
	missed, reachable := w.table(), w.table()
	failed := make([]float64, len(missed))
	for d := range draws {
		w.draw(source)
		for t := range missed {
			all, waiting := w.weigh(t, o)
			missed[t][d], reachable[t][d] = all, waiting
			failed[t] += (all - waiting) / draws
		}
	}
	for t, temperature := range w.plan.settings.Temperatures {
		slices.Sort(missed[t])
		slices.Sort(reachable[t])
		o.estimates = append(o.estimates, Estimate{
			Temperature: temperature, Mean: mean(missed[t]), P95: missed[t][draws*95/100], Failed: failed[t],
			Draws: missed[t], reachable: reachable[t][draws*95/100],
		})
		if o.estimates[t].reachable > o.estimates[o.worst].reachable {
			o.worst = t
		}
	}
	for k, u := range w.unknown {
		o.shares[u.index] = w.shares[o.worst][k] / draws
	}
}

func (w *worlds) table() [][]float64 {
	out := make([][]float64, len(w.plan.settings.Temperatures))
	for t := range out {
		out[t] = make([]float64, draws)
	}
	return out
}

// draw fills y: one set of coefficients for all, a residual for each, and of
// each whether it falls into a minimum that is known.
func (w *worlds) draw(source *rand.Rand) {
	s := w.fit.draw(w.betas, distuv.ChiSquared{K: w.fit.freedom, Src: source}, source)
	var merging float64
	if w.rate.Alpha > 0 {
		w.rate.Src = source
		merging = w.rate.Rand()
	}
	residual := source.NormFloat64
	if source.Float64() < w.fit.heavy {
		residual = func() float64 { return heavy(source) }
	}
	for k := range w.unknown {
		u := &w.unknown[k]
		y := dot(w.fit.design.row(u.index), w.betas) + s*residual() - w.lowest
		y = math.Min(math.Max(y, u.centre-u.reach), u.centre+u.reach)
		if merging > 0 && source.Float64() < merging {
			y = math.Inf(1)
		}
		w.y[k] = y
	}
}

// weigh returns the share of all unknown ones in this draw, and of the waiting
// ones, and adds up what each contributes.
func (w *worlds) weigh(t int, o *outlook) (all, waiting float64) {
	kT := kcal * w.plan.settings.Temperatures[t]
	top := w.logZ[t]
	for k, y := range w.y {
		top = math.Max(top, w.unknown[k].copies-y/kT)
	}
	z := math.Exp(w.logZ[t] - top)
	for k, y := range w.y {
		w.weights[k] = math.Exp(w.unknown[k].copies - y/kT - top)
		all += w.weights[k]
		if !w.unknown[k].failed {
			waiting += w.weights[k]
		}
	}
	for k, weight := range w.weights {
		w.shares[t][k] += weight / (z + all)
		if t == 0 && weight > 0 {
			o.alone[w.unknown[k].index] += weight / (z + weight) / draws
		}
	}
	return all / (z + all), waiting / (z + all)
}

func mean(x []float64) float64 {
	var sum float64
	for _, v := range x {
		sum += v / float64(len(x))
	}
	return sum
}
