// Package screen is the run: which ligands there are, what each of them goes
// through and in which order, what is refused, and how the work is dealt out to
// the cores. It knows tiers by their interface alone.
package screen

import (
	"context"
	"errors"
	"fmt"
	"hash/fnv"
	"sync"
	"time"

	"golang.org/x/sync/errgroup"

	"torsieve/dedupe"
)

// machine is what all ligands of a run share.
type machine struct {
	tiers   []Tier
	options Options
	pool    *pool
	ledger  *ledger    // nil: nothing is remembered
	telling sync.Mutex // Watch and keep are called by one goroutine at a time
}

// Run computes the ligands, each on its own, and calls keep for each of them as
// it ends: in the order of ending, one call at a time. A result and its ligand
// belong to keep. What one ligand meets never stops another; an error of keep
// (a full disk) stops all.
//
// tiers[0] must be the force field that the generator relaxes in; each further
// one takes what the one before it let up. Ligands with one structure, and
// enantiomers, are computed once. When ctx ends, Run returns ctx's cause after keep has been told
// of the ligands that were not finished.
//
// With o.Store every finished unit of work is kept as soon as it is done, and
// what stands there from an earlier run with the same settings is not computed
// again. An error of the store is a *StoreError and stops all.
//
// Results are a function of the ligands, the tiers and the options, not of
// Jobs, Memory, the clock or the order of ending.
func Run(ctx context.Context, ligands []*Ligand, tiers []Tier, o Options, keep func(*Result) error) error {
	if err := o.Check(); err != nil {
		return err
	}
	all := groups(ligands)
	ledger, err := openLedger(ctx, all, tiers, o)
	if err != nil {
		return err
	}
	if all, err = ledger.finishedFirst(ctx, all); err != nil {
		return err
	}
	m := &machine{tiers: tiers, options: o, pool: newPool(o.Jobs, o.Memory), ledger: ledger}
	g, inner := errgroup.WithContext(ctx)
	g.SetLimit(o.Jobs) // more ligands at a time would only be finished later
	for _, same := range all {
		g.Go(func() error { return m.group(inner, same, keep) })
	}
	if err := g.Wait(); err != nil {
		return err
	}
	if ctx.Err() != nil {
		return context.Cause(ctx)
	}
	return nil
}

// group computes the first ligand and hands its result to all.
func (m *machine) group(ctx context.Context, g *group, keep func(*Result) error) error {
	first, err := m.ligand(ctx, g.first)
	if err != nil {
		return err
	}
	results := []*Result{first}
	for _, l := range g.others {
		results = append(results, results[0].sharedWith(l))
	}
	for _, res := range results { // keep may take a result apart
		if err := m.end(res, keep); err != nil {
			return err
		}
	}
	return nil
}

func (m *machine) end(res *Result, keep func(*Result) error) error {
	m.tell(Event{Kind: Ended, Ligand: res.Ligand.ID, Took: total(res.Took), Result: res})
	m.telling.Lock()
	defer m.telling.Unlock()
	return keep(res)
}

// ligand computes one ligand. What goes wrong with it is in the result; the error
// is the ledger's, which concerns all.
func (m *machine) ligand(ctx context.Context, l *Ligand) (*Result, error) {
	n := len(m.tiers)
	res := &Result{Ligand: l, Mol: l.Mol, Status: Done, Tiers: names(m.tiers), Entered: make([]int, n), Took: make([]time.Duration, n)}
	res.Warnings = append(res.Warnings, l.Warnings...)
	if l.Err != nil {
		res.Status, res.Reason = l.Status, l.Err.Error()
		return res, nil //nolint:nilerr // it is in the result
	}
	if ctx.Err() != nil {
		res.Status, res.Reason = Stopped, "the run was stopped before its turn"
		return res, nil //nolint:nilerr // it is in the result
	}
	m.tell(Event{Kind: Begun, Ligand: l.ID})
	r := &ligandRun{
		machine: m, ligand: l, result: res, account: m.ledger.account(l),
		comparer: dedupe.NewComparer(l.Mol, dedupe.Options{PolarHydrogens: true}),
	}
	err := Guard(func() error { return r.run(ctx) })
	if errors.As(err, new(*StoreError)) {
		return nil, err
	}
	res.Conformers = r.conformers
	switch {
	case err == nil:
	case ctx.Err() != nil:
		res.Status, res.Reason = Stopped, "the run was stopped"
	case errors.As(err, new(refusal)):
		res.Status, res.Reason = Refused, err.Error()
	default:
		res.Status, res.Reason = Failed, err.Error()
		m.tellFault(l, err)
	}
	return res, r.account.keepEnd(ctx, res)
}

func (m *machine) tell(e Event) {
	if m.options.Watch == nil {
		return
	}
	m.telling.Lock()
	defer m.telling.Unlock()
	m.options.Watch(e)
}

// tellFault sends the stack of a fault of the program to the watcher.
func (m *machine) tellFault(l *Ligand, err error) {
	var fault *Fault
	if errors.As(err, &fault) {
		m.tell(Event{Kind: Computed, Ligand: l.ID, Err: err, Stack: fault.Stack})
	}
}

func (r *ligandRun) tellEntered(stage string, total int) {
	r.tell(Event{Kind: Entered, Ligand: r.ligand.ID, Tier: stage, Total: total})
}

func (r *ligandRun) tellComputed(stage string, c *Conformer, o outcome, stored bool) {
	e := Event{
		Kind: Computed, Ligand: r.ligand.ID, Tier: stage, Stored: stored,
		Conformer: c.Number, Took: o.took, Energy: o.energy, Gradients: o.gradients, Err: o.err,
	}
	var fault *Fault
	if errors.As(o.err, &fault) {
		e.Stack = fault.Stack
	}
	r.tell(e)
}

func (r *ligandRun) warnf(format string, args ...any) {
	r.result.Warnings = append(r.result.Warnings, fmt.Sprintf(format, args...))
}

func names(tiers []Tier) []string {
	out := make([]string, len(tiers))
	for i, t := range tiers {
		out[i] = t.Name()
	}
	return out
}

func total(parts []time.Duration) time.Duration {
	var sum time.Duration
	for _, d := range parts {
		sum += d
	}
	return sum
}

// hash is the stream of random numbers that belongs to a text.
func hash(text string) uint64 {
	h := fnv.New64a()
	h.Write([]byte(text)) // never fails
	return h.Sum64()
}
