package screen

import (
	"context"
	"encoding/json"
	"fmt"

	"torsieve/molecule"
	"torsieve/screen/store"
)

// A ledger is where a run writes down every finished unit of work, and where it
// looks up what was done before. What a ligand goes through is decided by its
// results alone, so a run that was cut goes on by taking the same way again:
// each unit that stands here is taken from here.
//
// A nil ledger remembers nothing.
type ledger struct {
	store      *store.Store
	keys       map[string]store.Key // by stage
	structures map[*Ligand]int64    // of the ligands that are computed
}

// A StoreError says that the run's database failed: nothing more can be kept, so
// the run ends. What was committed before is safe.
type StoreError struct{ Err error }

func (e *StoreError) Error() string { return "the run's database: " + e.Err.Error() }
func (e *StoreError) Unwrap() error { return e.Err }

// ensembleStage is the last level of a run: what became of a structure.
const ensembleStage = "ensemble"

// openLedger tells the store what the run is, drops failures of an earlier one,
// which are tried again, and enters the ligands.
func openLedger(ctx context.Context, groups []*group, tiers []Tier, o Options) (*ledger, error) {
	if o.Store == nil {
		return nil, nil //nolint:nilnil // a run without a store is one that remembers nothing
	}
	chain, err := o.chain(tiers)
	if err != nil {
		return nil, err
	}
	l := &ledger{store: o.Store, keys: map[string]store.Key{}, structures: map[*Ligand]int64{}}
	for i, key := range chain.Keys() {
		l.keys[chain[i].Tier] = key
	}
	if err := l.enter(ctx, groups, store.Run{Version: o.Version, Begun: o.Begun, Chain: chain}); err != nil {
		return nil, &StoreError{err}
	}
	return l, nil
}

func (l *ledger) enter(ctx context.Context, groups []*group, run store.Run) error {
	var structures []store.Structure
	var computed []*Ligand
	for _, g := range groups {
		if g.first.Err != nil {
			continue
		}
		drawing, err := drawingOf(g.first.Mol)
		if err != nil {
			return err
		}
		computed = append(computed, g.first)
		structures = append(structures, store.Structure{
			SMILES: g.first.SMILES, NAtoms: g.first.Mol.NumAtoms(), Drawing: drawing, Starts: g.first.Starts,
		})
	}
	ids, err := l.store.AddStructures(ctx, structures)
	if err != nil {
		return err
	}
	for k, first := range computed {
		l.structures[first] = ids[k]
	}
	var rows []store.Ligand
	for _, g := range groups {
		rows = append(rows, l.row(g.first, g.first, false))
		for _, other := range g.others {
			rows = append(rows, l.row(other.Ligand, g.first, other.mirrored))
		}
	}
	if err := l.store.SetRun(ctx, run, rows); err != nil {
		return err
	}
	_, err = l.store.DropFailures(ctx)
	return err
}

// finishedFirst puts the structures that an earlier run has finished before the
// others: taking them from the ledger is quick, and a run that is stopped again
// soon has them among its outputs.
func (l *ledger) finishedFirst(ctx context.Context, groups []*group) ([]*group, error) {
	if l == nil {
		return groups, nil
	}
	var finished, others []*group
	err := l.store.View(ctx, func(v *store.View) error {
		for _, g := range groups {
			_, there, err := v.Ensemble(l.structures[g.first], l.keys[ensembleStage])
			if err != nil {
				return err
			}
			if there {
				finished = append(finished, g)
			} else {
				others = append(others, g)
			}
		}
		return nil
	})
	if err != nil && ctx.Err() == nil {
		return nil, &StoreError{err}
	}
	return append(finished, others...), ctx.Err()
}

func (l *ledger) row(of, first *Ligand, mirrored bool) store.Ligand {
	row := store.Ligand{
		Order: of.Order, ID: of.ID, Stem: of.Stem, Parent: of.Parent, Place: of.Place, SMILES: of.SMILES,
		Structure: l.structures[first], Mirrored: mirrored, Warnings: of.Warnings,
	}
	if of.Err != nil {
		row.Status, row.Reason = string(of.Status), of.Err.Error()
	}
	return row
}

// chain is the ladder of levels of a run, with all that decides the results of
// each. What decides how many conformers go on belongs to the last one.
func (o Options) chain(tiers []Tier) (store.Chain, error) {
	g := o.Generate
	g.Start, g.Seed = nil, o.Seed
	first, err := json.Marshal(map[string]any{"version": o.Version, "tier": tiers[0].Settings(), "generate": g})
	if err != nil {
		return nil, fmt.Errorf("settings of the generator: %w", err)
	}
	chain := store.Chain{{Tier: tiers[0].Name(), Settings: string(first)}}
	for i, t := range tiers[1:] {
		settings, err := json.Marshal(map[string]any{"tier": t.Settings(), "relax": o.relaxation()})
		if err != nil {
			return nil, fmt.Errorf("settings of %s: %w", t.Name(), err)
		}
		chain = append(chain, store.Level{Tier: t.Name(), Settings: string(settings)})
		if i == 0 && o.Thermal {
			chain = append(chain, store.Level{Tier: ThermalStage, Settings: "differences"})
		}
	}
	last, err := json.Marshal(map[string]any{
		"temperatures": o.Temperatures, "max_conformers": o.MaxConformers, "window": o.Window,
	})
	if err != nil {
		return nil, fmt.Errorf("settings of the ensemble: %w", err)
	}
	return append(chain, store.Level{Tier: ensembleStage, Settings: string(last)}), nil
}

// drawingOf writes a molecule's graph down in the order of its atoms: what tells
// two structures with one SMILES apart.
func drawingOf(m *molecule.Molecule) (string, error) {
	text, err := json.Marshal(struct {
		Atoms       []molecule.Atom
		Bonds       []molecule.Bond
		Centres     []molecule.Centre
		StereoBonds []molecule.StereoBond
	}{m.Atoms(), m.Bonds(), m.Centres(), m.StereoBonds()})
	if err != nil {
		return "", fmt.Errorf("drawing of %s: %w", m.SMILES(), err)
	}
	return string(text), nil
}
