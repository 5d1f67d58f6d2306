package store

import (
	"errors"
	"fmt"
	"path/filepath"
	"strings"
	"testing"
)

// slices of one list, joined, are the list.
func TestMergedSlicesAreTheWhole(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		var parts []*Reader
		for i := range 3 {
			part := place{t, filepath.Join(t.TempDir(), "run.db")}
			fill(t, part.open(), 3*i+1, 3*i+3)
			parts = append(parts, part.reader())
		}
		whole := place{t, filepath.Join(t.TempDir(), "run.db")}.open()
		f := fill(t, whole, 1, 9)
		into := p.open()
		// The second part goes first: places count, not the order of the folders.
		parts[0], parts[1] = parts[1], parts[0]
		got, err := Merge(t.Context(), into, parts, nil)
		must(t, err)
		perLigand := 2 + 2*sampleShapes
		same(t, "merged", got, Merged{Ligands: 9, Results: 9 * perLigand})
		got, err = Merge(t.Context(), into, append(parts, parts[0]), nil)
		must(t, err)
		same(t, "merged again", got, Merged{Ligands: 9, Doubles: 12 * perLigand})
		checkFilled(t, &into.Reader, moveTo(t, into, f))
	})
}

// moveTo writes into f the ids that its structures have in s, and the places that
// a merge gives.
func moveTo(t *testing.T, s *Store, f filled) filled {
	t.Helper()
	ids := map[int64]int64{}
	view(t, &s.Reader, func(v *View) error {
		for i := range f.ligands {
			l := &f.ligands[i]
			found, err := v.StructuresOf(l.SMILES)
			if err != nil || len(found) != 1 {
				return fmt.Errorf("%d structures of %s: %w", len(found), l.SMILES, err)
			}
			ids[l.Structure] = found[0].ID
			l.Structure, l.Order = found[0].ID, i
		}
		return nil
	})
	for i := range f.generations {
		f.generations[i].Structure = ids[f.generations[i].Structure]
		f.ensembles[i].Structure = ids[f.ensembles[i].Structure]
	}
	for _, list := range f.answers {
		for i := range list {
			list[i].Structure = ids[list[i].Structure]
		}
	}
	return f
}

func TestMergeRefusesWhatDoesNotFit(t *testing.T) {
	ctx := t.Context()
	part := func(change func(*Run, *Ligand)) *Reader {
		p := place{t, filepath.Join(t.TempDir(), "run.db")}
		run, l := Run{Chain: ladder("298.15")}, Ligand{ID: "a", Stem: "a", Place: "l.smi:1"}
		change(&run, &l)
		must(t, p.open().SetRun(ctx, run, []Ligand{l}))
		return p.reader()
	}
	plain := part(func(*Run, *Ligand) {})
	into := place{t, filepath.Join(t.TempDir(), "run.db")}.open()
	_, err := Merge(ctx, into, []*Reader{plain, part(func(r *Run, _ *Ligand) { r.Chain[2].Settings = "{}" })}, nil)
	if !errors.Is(err, ErrOtherSettings) || !strings.Contains(err.Error(), "hf") {
		t.Errorf("have %v, want %v and the tier's name", err, ErrOtherSettings)
	}
	other := part(func(_ *Run, l *Ligand) { l.Place, l.Stem = "m.smi:1", "A" })
	_, err = Merge(ctx, into, []*Reader{plain, other}, nil)
	if err == nil || !strings.Contains(err.Error(), "l.smi:1") || !strings.Contains(err.Error(), other.Where()) {
		t.Errorf("have %v, want an error that names both", err)
	}
	n := 0
	got, err := Merge(ctx, into, []*Reader{plain, other}, func(l *Ligand) {
		n++
		l.ID, l.Stem = fmt.Sprint(l.ID, n), fmt.Sprint(l.Stem, n)
	})
	must(t, err)
	same(t, "merged", got, Merged{Ligands: 2})
	empty := place{t, filepath.Join(t.TempDir(), "run.db")}
	empty.open()
	if _, err := Merge(ctx, into, []*Reader{empty.reader()}, nil); !errors.Is(err, ErrMissing) {
		t.Errorf("have %v, want %v", err, ErrMissing)
	}
}
