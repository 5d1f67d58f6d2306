package screen

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"sync/atomic"
	"time"

	"golang.org/x/sync/errgroup"

	"torsieve/internal/geom"
	"torsieve/internal/relax"
	"torsieve/internal/thermo"
	"torsieve/molecule"
	"torsieve/molecule/load"
)

// An outcome is a tier's answer for one conformer: where it is and how high, or
// why there is none.
type outcome struct {
	x         []float64 // bohr
	energy    float64   // hartree
	solvation float64   // hartree, where solvated
	solvated  bool
	doubts    []string
	err       error
	took      time.Duration

	modes     *thermo.Modes // vibrations, where they were asked for
	gradients int           // of a relaxation, or of a Hessian
}

// A task is what is done for a conformer on a workplace.
type task func(ctx context.Context, p *workplace, c *Conformer) outcome

// compute does the task for every conformer in which on a surface of the tier,
// unless the ledger has its answer under the stage's name. out[i] belongs to
// which[i] however the work was dealt out. Only a tier that cannot take the
// molecule at all, the ledger or the end of ctx ends it early.
func (r *ligandRun) compute(ctx context.Context, tier int, stage string, which []int, do task) ([]outcome, error) {
	out := make([]outcome, len(which))
	known, err := r.account.outcomes(ctx, stage)
	if err != nil {
		return nil, err
	}
	var left []int // of out
	for k, i := range which {
		c := &r.conformers[i]
		o, there := known[c.Number]
		if !there {
			left = append(left, k)
			continue
		}
		if o.x == nil {
			o.x = c.X
		}
		out[k] = o
		r.tellComputed(stage, c, o, true)
	}
	if len(left) == 0 {
		return out, nil
	}
	workers := min(len(left), r.options.Jobs)
	g, ctx := errgroup.WithContext(ctx)
	var next atomic.Int64
	for range workers {
		g.Go(func() error {
			release, err := r.pool.hold(ctx, r.tiers[tier].Memory(r.ligand.Mol))
			if err != nil {
				return err
			}
			defer release()
			w := worker{run: r, tier: tier, do: do}
			for {
				n := int(next.Add(1)) - 1
				if n >= len(left) {
					return nil
				}
				k := left[n]
				c := &r.conformers[which[k]]
				if out[k], err = w.compute(ctx, c); err != nil {
					return err
				}
				if err := r.account.keep(ctx, stage, c, out[k]); err != nil {
					return err
				}
				r.tellComputed(stage, c, out[k], false)
			}
		})
	}
	err = g.Wait()
	return out, err
}

// A worker computes conformers one after the other on a workplace of its own.
type worker struct {
	run   *ligandRun
	tier  int
	do    task
	place *workplace // nil before the first
}

// compute does the worker's task for a conformer. What goes wrong with it is in
// the outcome; the error is about the tier and the molecule, or ctx.
func (w *worker) compute(ctx context.Context, c *Conformer) (o outcome, err error) {
	r := w.run
	if w.place == nil {
		err := r.pool.unit(ctx, func() (err error) {
			w.place, err = newWorkplace(r.tiers[w.tier], r.ligand.Mol)
			return err
		})
		if err != nil {
			return o, err
		}
	}
	err = r.pool.unit(ctx, func() error {
		begun := r.options.Clock()
		o = w.do(ctx, w.place, c)
		o.took = r.options.Clock().Sub(begun)
		return o.err
	})
	if ctx.Err() != nil {
		return o, ctx.Err()
	}
	o.err = err
	if errors.As(err, new(*Fault)) {
		w.place = nil // whatever state it was left in
	}
	return o, nil
}

// A workplace is what a worker computes on: a surface of the tier, and where
// that has a solvent, one without.
type workplace struct {
	surface Surface
	gas     Surface // nil: the tier has no solvent
}

func newWorkplace(t Tier, m *molecule.Molecule) (*workplace, error) {
	var p workplace
	var err error
	if p.surface, err = t.Surface(m); err != nil {
		return nil, err
	}
	if s, ok := inSolvent(t); ok {
		if p.gas, err = s.Gas(m); err != nil {
			return nil, err
		}
	}
	return &p, nil
}

// one computes one conformer: relaxed where the surface has a gradient, as it
// stands where not.
func (r *ligandRun) one(ctx context.Context, p *workplace, c *Conformer) outcome {
	if err := load.CheckGeometry(r.ligand.Mol.Numbers(), c.X); err != nil {
		return outcome{err: err}
	}
	p.surface.Reset() // or the answer would depend on who went before
	var out outcome
	if sloped, ok := p.surface.(Sloped); ok {
		out = r.relaxed(ctx, sloped, c.X)
	} else {
		point, err := p.surface.Energy(ctx, c.X)
		out = outcome{x: c.X, energy: point.Energy, doubts: point.Warnings, err: err}
	}
	if p.gas != nil && out.err == nil {
		p.dry(ctx, &out)
	}
	return out
}

// dry fills in by how much the solvent changes the energy.
func (p *workplace) dry(ctx context.Context, out *outcome) {
	p.gas.Reset()
	point, err := p.gas.Energy(ctx, out.x)
	if err != nil {
		out.err = fmt.Errorf("without the solvent: %w", err)
		return
	}
	out.solvation, out.solvated = out.energy-point.Energy, true
	for _, doubt := range point.Warnings {
		if !slices.Contains(out.doubts, doubt) {
			out.doubts = append(out.doubts, "without the solvent: "+doubt)
		}
	}
}

func (r *ligandRun) relaxed(ctx context.Context, surface Sloped, from []float64) outcome {
	x := offSaddle(r.ligand.Mol, from)
	// A solvent's surface may depend a little on how the molecule lies.
	geom.ToPrincipalAxes(x)
	set := r.options.relaxation()
	set.Numbers = r.ligand.Mol.Numbers()
	p, res, err := Relax(ctx, surface, x, set)
	if err != nil {
		return outcome{err: err, gradients: res.Gradients}
	}
	return outcome{x: x, energy: p.Energy, doubts: p.Warnings, gradients: res.Gradients}
}

// slope is a surface as the optimiser sees it; the whole answer of the last call
// is in last.
func slope(surface Sloped, last *molecule.Point) relax.Func {
	return func(ctx context.Context, grad, x []float64) (float64, error) {
		p, err := surface.Gradient(ctx, grad, x)
		*last = p
		return p.Energy, err
	}
}

// Relax moves x downhill on the surface, in place, and returns the point that
// was reached, and how. A relaxation that did not converge is an error.
func Relax(ctx context.Context, surface Sloped, x []float64, set relax.Settings) (molecule.Point, relax.Result, error) {
	var last molecule.Point
	res, err := relax.Minimise(ctx, slope(surface, &last), x, set)
	if err == nil {
		err = res.Status.Err()
	}
	if errors.Is(err, relax.ErrGradientLimit) {
		err = fmt.Errorf("not relaxed after %d gradients (rms %.1e hartree/bohr)", res.Gradients, res.RMSGradient)
	}
	if err != nil {
		return molecule.Point{}, res, err
	}
	last.Energy = res.Energy
	return last, res, nil
}
