package store

import (
	"cmp"
	"context"
	"errors"
	"fmt"
	"slices"
	"strings"
)

// A Merged says what came of a merge.
type Merged struct {
	Ligands int
	Results int // that are now in the store and were not before
	Doubles int // that were there already, from a part or from an earlier merge
}

// Merge joins runs of one chain of settings in one store: their ligands become
// one list, and results are copied as they are. Merging again is harmless, so a
// merge that was cut off is simply started again; until it has ended the store
// has no ligands.
//
// The places of the ligands are kept where no two ligands have one place, as in
// the slices of one list; else the parts follow one another. A ligand that stands
// in two parts in the same words is taken once. rename, if not nil, is shown every
// ligand in its order and may change its id and stem; two ligands with one id or
// one stem are an error that names both.
//
// The run's record is the first part's until SaveRecord.
func Merge(ctx context.Context, into *Store, parts []*Reader, rename func(*Ligand)) (m Merged, err error) {
	run, err := commonRun(ctx, parts)
	if err != nil {
		return m, err
	}
	if err := into.SetRun(ctx, run, nil); err != nil {
		return m, err
	}
	var ligands []placed
	for i, part := range parts {
		err := part.View(ctx, func(v *View) error {
			c := copier{view: v, into: into, keys: run.Chain.Keys(), ids: map[int64]int64{}}
			found, err := c.copy(ctx, &m)
			for _, l := range found {
				ligands = append(ligands, placed{l, i})
			}
			return err
		})
		if err != nil {
			return m, err
		}
	}
	list, err := oneList(ligands, parts, rename)
	if err != nil {
		return m, err
	}
	m.Ligands = len(list)
	return m, into.SetRun(ctx, run, list)
}

// commonRun returns the first part's run, if all have its settings.
func commonRun(ctx context.Context, parts []*Reader) (run Run, err error) {
	for i, part := range parts {
		err := part.View(ctx, func(v *View) error {
			r, there, err := v.Run()
			if err == nil && !there {
				err = ErrMissing
			}
			if i == 0 {
				run = r
			}
			if tier := firstOther(run.Chain, r.Chain); err == nil && tier != "" {
				err = fmt.Errorf("%w: those of %s are not those of %s", ErrOtherSettings, tier, parts[0].where)
			}
			return err
		})
		if err != nil {
			return run, err
		}
	}
	return run, nil
}

// firstOther names the first tier in which two chains differ, "" if none.
func firstOther(a, b Chain) string {
	for i := range max(len(a), len(b)) {
		switch {
		case i >= len(a):
			return b[i].Tier
		case i >= len(b) || a[i] != b[i]:
			return a[i].Tier
		}
	}
	return ""
}

// A copier copies the results of one part.
type copier struct {
	view *View
	into *Store
	keys []Key
	ids  map[int64]int64 // of a structure here: its id there
}

// copy copies the results of every structure of the part's ligands, one
// transaction a structure, and returns the ligands as they stand in the new store.
func (c *copier) copy(ctx context.Context, m *Merged) ([]Ligand, error) {
	ligands, err := c.view.Ligands()
	if err != nil {
		return nil, err
	}
	for i := range ligands {
		l := &ligands[i]
		if l.Structure == 0 {
			continue
		}
		id, known := c.ids[l.Structure]
		if !known {
			if id, err = c.structure(ctx, l.Structure, m); err != nil {
				return nil, fmt.Errorf("%s: %w", l.ID, err)
			}
			c.ids[l.Structure] = id
		}
		l.Structure = id
	}
	return ligands, nil
}

func (c *copier) structure(ctx context.Context, id int64, m *Merged) (int64, error) {
	st, there, err := c.view.Structure(id)
	if err != nil || !there {
		return 0, errors.Join(err, fmt.Errorf("structure %d: %w", id, ErrUnknown))
	}
	ids, err := c.into.AddStructures(ctx, []Structure{st})
	if err != nil {
		return 0, err
	}
	batch, err := c.results(id, ids[0])
	if err != nil {
		return 0, err
	}
	fresh, err := c.into.Commit(ctx, batch)
	m.Results += fresh
	m.Doubles += len(batch.Generations) + len(batch.Answers) + len(batch.Ensembles) - fresh
	return ids[0], err
}

// results are all that is known of a structure, for its new id.
func (c *copier) results(id, as int64) (b Batch, err error) {
	for _, key := range c.keys {
		moved, err := c.view.moved(id, key)
		if err != nil {
			return b, err
		}
		g, there, err := c.view.Generation(id, key)
		if err != nil {
			return b, err
		}
		if there {
			for i := range g.Shapes {
				g.Shapes[i].X = moved[i+1]
			}
			g.Structure = as
			b.Generations = append(b.Generations, g)
		}
		answers, err := c.view.Answers(id, key)
		if err != nil {
			return b, err
		}
		for _, a := range answers {
			a.Structure, a.X = as, moved[a.Conformer]
			b.Answers = append(b.Answers, a)
		}
		e, there, err := c.view.Ensemble(id, key)
		if err != nil {
			return b, err
		}
		if there {
			e.Structure = as
			b.Ensembles = append(b.Ensembles, e)
		}
	}
	return b, nil
}

// placed is a ligand and the part that it came from.
type placed struct {
	Ligand
	part int
}

// oneList puts the parts' ligands in order and numbers them anew.
func oneList(ligands []placed, parts []*Reader, rename func(*Ligand)) ([]Ligand, error) {
	ligands = once(ligands)
	places := map[int]bool{}
	for _, l := range ligands {
		places[l.Order] = true
	}
	slices.SortStableFunc(ligands, func(a, b placed) int {
		if len(places) < len(ligands) && a.part != b.part {
			return a.part - b.part
		}
		return cmp.Compare(a.Order, b.Order)
	})
	out := make([]Ligand, len(ligands))
	ids, stems := map[string]int{}, map[string]int{}
	for i := range ligands {
		l := &ligands[i].Ligand
		l.Order = i
		if rename != nil {
			rename(l)
		}
		first, taken := ids[l.ID]
		if !taken {
			first, taken = stems[strings.ToLower(l.Stem)]
		}
		if taken {
			other := ligands[first]
			return nil, fmt.Errorf("%s (%s, %s) and %s (%s, %s) cannot stand in one run: their ids, or the names of their files, are the same",
				other.ID, other.Place, parts[other.part].where, l.ID, l.Place, parts[ligands[i].part].where)
		}
		ids[l.ID], stems[strings.ToLower(l.Stem)] = i, i
		out[i] = *l
	}
	return out, nil
}

// once drops ligands that stand in several parts in the same words.
func once(ligands []placed) []placed {
	seen := map[string]bool{}
	return slices.DeleteFunc(ligands, func(l placed) bool {
		words := fmt.Sprintf("%q", []any{
			l.Order, l.ID, l.Stem, l.Parent, l.Place, l.SMILES, l.Structure, l.Mirrored, l.Status, l.Reason, l.Warnings,
		})
		before := seen[words]
		seen[words] = true
		return before
	})
}
