package screen

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"time"

	"torsieve/internal/thermo"
	"torsieve/screen/generate"
	"torsieve/screen/store"
)

// An account is the part of the ledger that belongs to one structure. A nil
// account remembers nothing.
type account struct {
	*ledger
	structure int64
}

func (l *ledger) account(of *Ligand) *account {
	if l == nil {
		return nil
	}
	return &account{l, l.structures[of]}
}

// shapes looks the generator's answer up. known is false where there is none;
// failed is why it had none.
func (a *account) shapes(ctx context.Context, stage string) (found generate.Result, took time.Duration, failed error, known bool, err error) {
	if a == nil {
		return found, 0, nil, false, nil
	}
	err = a.store.View(ctx, func(v *store.View) error {
		g, there, err := v.Generation(a.structure, a.keys[stage])
		if err != nil || !there {
			return err
		}
		known, took, failed = true, seconds(g.Seconds), failureOf(g.Failure)
		found = generate.Result{
			Starts: g.Starts, Embedded: g.Embedded, Relaxed: g.Relaxed, Found: g.Found, Complete: g.Complete, Warnings: g.Warnings,
		}
		xs, err := v.Geometries(a.structure, a.keys[stage])
		for i, s := range g.Shapes {
			found.Conformers = append(found.Conformers, generate.Conformer{X: xs[i+1], Energy: s.Energy, Family: s.Family, Hits: s.Hits})
		}
		return err
	})
	if err != nil {
		return generate.Result{}, 0, nil, false, a.failed(ctx, err)
	}
	return found, took, failed, known, nil
}

// keepShapes writes the generator's answer down.
func (a *account) keepShapes(ctx context.Context, stage string, found generate.Result, took time.Duration, failed error) error {
	if a == nil {
		return nil
	}
	g := store.Generation{
		Structure: a.structure, Key: a.keys[stage], Failure: failure(failed),
		Starts: found.Starts, Embedded: found.Embedded, Relaxed: found.Relaxed, Found: found.Found, Complete: found.Complete,
		Warnings: found.Warnings, Work: store.Work{Seconds: took.Seconds()},
	}
	for _, c := range found.Conformers {
		g.Shapes = append(g.Shapes, store.Shape{Energy: c.Energy, Family: c.Family, Hits: c.Hits, X: c.X})
	}
	return a.commit(ctx, store.Batch{Generations: []store.Generation{g}})
}

// outcomes looks up what a stage has answered, by conformer.
func (a *account) outcomes(ctx context.Context, stage string) (map[int]outcome, error) {
	known := map[int]outcome{}
	if a == nil {
		return known, nil
	}
	err := a.store.View(ctx, func(v *store.View) error {
		answers, err := v.Answers(a.structure, a.keys[stage])
		if err != nil || len(answers) == 0 {
			return err
		}
		xs, err := v.Geometries(a.structure, a.keys[stage])
		if err != nil {
			return err
		}
		for _, answer := range answers {
			o := outcome{
				x: xs[answer.Conformer], energy: answer.Energy, doubts: answer.Doubts,
				gradients: answer.Gradients, took: seconds(answer.Seconds), err: failureOf(answer.Failure),
			}
			if !math.IsNaN(answer.Solvation) {
				o.solvation, o.solvated = answer.Solvation, true
			}
			if answer.Details != "" {
				o.modes = new(thermo.Modes)
				if err := json.Unmarshal([]byte(answer.Details), o.modes); err != nil {
					return fmt.Errorf("vibrations of conformer %d: %w", answer.Conformer, err)
				}
			}
			known[answer.Conformer] = o
		}
		return nil
	})
	if err != nil {
		return nil, a.failed(ctx, err)
	}
	return known, nil
}

// keep writes down what a stage answered for a conformer that lay at before.
func (a *account) keep(ctx context.Context, stage string, c *Conformer, o outcome) error {
	if a == nil {
		return nil
	}
	answer := store.Answer{
		Structure: a.structure, Key: a.keys[stage], Conformer: c.Number, Failure: failure(o.err),
		Energy: o.energy, Solvation: math.NaN(), Doubts: o.doubts, Gradients: o.gradients,
		Work: store.Work{Seconds: o.took.Seconds()},
	}
	if o.err != nil {
		answer.Energy = math.NaN()
		return a.commit(ctx, store.Batch{Answers: []store.Answer{answer}})
	}
	if o.solvated {
		answer.Solvation = o.solvation
	}
	if len(o.x) > 0 && len(c.X) > 0 && &o.x[0] != &c.X[0] { // it was moved
		answer.X = o.x
	}
	if o.modes != nil {
		text, err := json.Marshal(o.modes)
		if err != nil {
			return &StoreError{err}
		}
		answer.Details = string(text)
	}
	return a.commit(ctx, store.Batch{Answers: []store.Answer{answer}})
}

// keepEnd writes down what became of the structure.
func (a *account) keepEnd(ctx context.Context, r *Result) error {
	if a == nil || r.Status == Stopped {
		return nil
	}
	e := store.Ensemble{
		Structure: a.structure, Key: a.keys[ensembleStage], Status: string(r.Status), Reason: r.Reason,
		Entered: map[string]int{}, MissedWeight: math.NaN(), MissedP95: math.NaN(),
		Warnings: r.Warnings[len(r.Ligand.Warnings):],
	}
	for i, n := range r.Entered {
		e.Entered[r.Tiers[i]] = n
	}
	for i := range r.Conformers {
		c := &r.Conformers[i]
		m := store.Member{
			Conformer: c.Number, Rank: c.Rank, Copies: c.Copies, LastTier: r.Tiers[c.Last],
			Energy: math.NaN(), Thermal: math.NaN(), Why: c.Why,
		}
		if c.Rank > 0 {
			m.Energy = c.Final()
		}
		if c.Thermal != nil {
			m.Thermal = c.Thermal[0]
		}
		e.Members = append(e.Members, m)
	}
	for _, w := range r.Ensembles {
		e.Weights = append(e.Weights, storedWeights(r, w))
	}
	return a.commit(ctx, store.Batch{Ensembles: []store.Ensemble{e}})
}

func storedWeights(r *Result, w Weights) store.Weights {
	out := store.Weights{Temperature: w.Temperature, FreeEnergy: w.FreeEnergy, Energy: w.Energy, Entropy: w.Entropy}
	for k, i := range r.Kept {
		p := store.Population{Conformer: r.Conformers[i].Number, Fraction: w.Populations[k], Low: math.NaN(), High: math.NaN()}
		if w.Bars != nil {
			p.Low, p.High = w.Bars[k].Low, w.Bars[k].High
		}
		out.Populations = append(out.Populations, p)
	}
	return out
}

// commit does not end with ctx: what is finished is kept.
func (a *account) commit(ctx context.Context, b store.Batch) error {
	if _, err := a.store.Commit(context.WithoutCancel(ctx), b); err != nil {
		return &StoreError{err}
	}
	return nil
}

// failed tells the end of ctx from a failure of the store.
func (a *account) failed(ctx context.Context, err error) error {
	if ctx.Err() != nil {
		return ctx.Err()
	}
	return &StoreError{err}
}

func seconds(s float64) time.Duration { return time.Duration(s * float64(time.Second)) }

// failure is an error as it is written down; a fault of the program has its
// stack.
func failure(err error) store.Failure {
	if err == nil {
		return store.Failure{}
	}
	f := store.Failure{Error: err.Error()}
	var fault *Fault
	if errors.As(err, &fault) {
		f.Stack = fault.Stack
	}
	return f
}

func failureOf(f store.Failure) error {
	if f == (store.Failure{}) {
		return nil
	}
	return errors.New(f.Error)
}
