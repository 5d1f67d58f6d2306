package screen

import (
	"context"
	"errors"
	"fmt"
	"math"
	"slices"
	"time"

	"torsieve/dedupe"
	"torsieve/screen/generate"
)

// ligandRun takes one ligand the whole way:
//
//	generate -> forcefield -> dedupe -> semiempirical -> dedupe -> hf -> ensemble
//
// Read run first: each line is a folder. The generator relaxes its shapes in
// the force field itself. How many geometries go on from a line to the next is
// decided in promote.go.
type ligandRun struct {
	*machine
	ligand     *Ligand
	account    *account // nil: nothing is remembered
	comparer   *dedupe.Comparer
	conformers []Conformer
	result     *Result
}

func (r *ligandRun) run(ctx context.Context) error {
	if err := r.accept(); err != nil {
		return refusal{err}
	}
	if err := r.generate(ctx); err != nil {
		return fmt.Errorf("generate: %w", err)
	}
	for tier := 1; tier < len(r.tiers); tier++ {
		if err := r.climb(ctx, tier); err != nil {
			return TierError(r.tiers[tier], err)
		}
	}
	if r.options.Thermal {
		if err := r.thermal(ctx); err != nil {
			return fmt.Errorf("thermal: %w", err)
		}
	}
	r.weigh()
	return nil
}

// A refusal says that the input is what is wrong.
type refusal struct{ error }

func (r refusal) Unwrap() error { return r.error }

// accept asks before any work whether every tier can take the molecule.
func (r *ligandRun) accept() error {
	if err := Refuse(r.ligand.Mol); err != nil {
		return err
	}
	for _, tier := range r.tiers {
		err := Guard(func() error {
			_, err := tier.Surface(r.ligand.Mol)
			return err
		})
		if err != nil {
			return TierError(tier, err)
		}
	}
	return nil
}

// generate finds the shapes and relaxes them in the force field.
func (r *ligandRun) generate(ctx context.Context) error {
	found, took, err := r.shapes(ctx)
	r.result.Took[0] = took
	if err != nil {
		return err
	}
	if len(found.Conformers) == 0 {
		return fmt.Errorf("no shape was found in %d starts", found.Starts)
	}
	r.result.Warnings = append(r.result.Warnings, found.Warnings...)
	for i, c := range found.Conformers {
		energies := make([]float64, len(r.tiers))
		for t := range energies {
			energies[t] = math.NaN()
		}
		energies[0] = c.Energy
		r.conformers = append(r.conformers, Conformer{Number: i + 1, X: c.X, Family: c.Family, Energies: energies})
	}
	r.result.Entered[0] = len(found.Conformers)
	r.dropDoubles(0, r.alive(0))
	return nil
}

// shapes looks the generator's answer up, or makes it and writes it down.
func (r *ligandRun) shapes(ctx context.Context) (found generate.Result, took time.Duration, err error) {
	stage := r.tiers[0].Name()
	found, took, failed, known, err := r.account.shapes(ctx, stage)
	if known || err != nil {
		return found, took, errors.Join(err, failed)
	}
	begun := r.options.Clock()
	err = r.pool.unit(ctx, func() (err error) {
		o := r.options.Generate
		o.Seed = r.options.Seed
		found, err = Shapes(ctx, r.ligand, o)
		return err
	})
	took = r.options.Clock().Sub(begun)
	if ctx.Err() != nil {
		return found, took, ctx.Err()
	}
	if keepErr := r.account.keepShapes(ctx, stage, found, took, err); keepErr != nil {
		return found, took, keepErr
	}
	return found, took, err
}

// climb takes the conformers that may go up to a tier and brings back those
// that the tier could compute, each shape once.
func (r *ligandRun) climb(ctx context.Context, tier int) error {
	up := r.promote(tier)
	r.result.Entered[tier] = len(up)
	name := r.tiers[tier].Name()
	r.tellEntered(name, len(up))
	outcomes, err := r.compute(ctx, tier, name, up, r.one)
	if err != nil {
		return err
	}
	var reached []int
	var lost losses
	for k, i := range up {
		r.result.Took[tier] += outcomes[k].took
		if err := r.settle(tier, &r.conformers[i], outcomes[k]); err != nil {
			lost.add(err)
			continue
		}
		reached = append(reached, i)
	}
	if len(reached) == 0 {
		return fmt.Errorf("none of %d conformers came through: %w", len(up), lost.first())
	}
	r.tellLosses(tier, len(up), lost)
	r.dropDoubles(tier, reached)
	return nil
}

// losses are the conformers that a tier could not bring back.
type losses struct {
	failed, changed []error
}

func (l *losses) add(err error) {
	if errors.As(err, new(changed)) {
		l.changed = append(l.changed, err)
		return
	}
	l.failed = append(l.failed, err)
}

func (l *losses) first() error { return append(l.failed, l.changed...)[0] }

// tellLosses: a conformer that became another molecule is no loss to the
// ensemble, one without an energy is.
func (r *ligandRun) tellLosses(tier, of int, l losses) {
	if n := len(l.changed); n > 0 {
		r.warnf("%s: %d of %d conformers became another molecule, the first: %v", r.tiers[tier].Name(), n, of, l.changed[0])
	}
	if n := len(l.failed); n > 0 {
		r.result.Status = Partial
		r.result.Reason = fmt.Sprintf("%s: %d of %d conformers could not be computed, the first: %v",
			r.tiers[tier].Name(), n, of, l.failed[0])
	}
}

// changed says that a relaxed geometry is no longer the ligand.
type changed struct{ error }

// settle writes a tier's answer into the conformer. A geometry that moved must
// still be the same molecule.
func (r *ligandRun) settle(tier int, c *Conformer, o outcome) error {
	err := o.err
	if err == nil && !slices.Equal(o.x, c.X) {
		if differs := SameMolecule(r.ligand.Mol, o.x); differs != nil {
			err = changed{differs}
		}
	}
	if err != nil {
		c.Why = TierError(r.tiers[tier], err).Error()
		return fmt.Errorf("conformer %d: %w", c.Number, err)
	}
	c.X, c.Energies[tier], c.Last = o.x, o.energy, tier
	c.Beside = c.Solvation
	if o.solvated {
		c.Solvation, c.Solvated, c.Beside = o.solvation, true, 0
	}
	for _, doubt := range o.doubts {
		c.Doubts = append(c.Doubts, r.tiers[tier].Name()+": "+doubt)
	}
	return nil
}

// dropDoubles keeps the lowest conformer of each shape.
func (r *ligandRun) dropDoubles(tier int, which []int) {
	xs := make([][]float64, len(which))
	energies := make([]float64, len(which))
	for k, i := range which {
		xs[k], energies[k] = r.conformers[i].X, r.conformers[i].Energies[tier]
	}
	for _, group := range dedupe.Unique(r.comparer, xs, energies, dedupe.DefaultThresholds()) {
		keep := &r.conformers[which[group.Keep]]
		for _, m := range group.Members {
			if m != group.Keep {
				r.conformers[which[m]].Why = fmt.Sprintf("same shape as %d", keep.Number)
			}
		}
	}
}
