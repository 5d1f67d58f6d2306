package main

import (
	"errors"
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"

	"torsieve/dedupe"
	"torsieve/internal/atomicfile"
	"torsieve/internal/units"
	"torsieve/molecule/load"
	"torsieve/molecule/sdf"
)

// dedupeCommand drops structures that another one of the file shows already.
type dedupeCommand struct {
	File        string       `arg:"" help:"Conformers with 3D coordinates, of one or several molecules, atoms of each in one order: .sdf or .xyz, also gzip'd."`
	Out         string       `help:"SD file for what is left, in the file's order." required:"" placeholder:"FILE.sdf"`
	EnergyField string       `help:"Data item with the energy in hartree, or in kcal/mol if its name says kcal: the lowest of each shape stays (without: the first)." placeholder:"NAME"`
	Input       inputOptions `embed:""`
}

// Run reads all records, compares those of one molecule with each other, and
// writes what is left.
func (c *dedupeCommand) Run(s *session) error {
	var t tally
	pile, err := c.read(s, &t)
	if err != nil {
		return err
	}
	if t.done == 0 {
		return t.status()
	}
	molecules, left := c.drop(pile), 0
	err = atomicfile.Write(c.Out, func(w io.Writer) error {
		for _, one := range pile {
			if one.dropped {
				continue
			}
			left++
			out := sdf.Out{Mol: one.rec.Mol, X: one.rec.X, Title: recordID(one.rec), Fields: one.rec.Fields}
			if err := sdf.Write(w, out); err != nil {
				return err
			}
		}
		return nil
	})
	if err != nil {
		return err
	}
	s.voice.note("%d structures of %d molecules read, %d distinct ones written to %s", t.done, molecules, left, c.Out)
	return t.status()
}

// read piles up the records that have a shape, and an energy where one is asked
// for.
func (c *dedupeCommand) read(s *session, t *tally) (pile []shape, err error) {
	err = s.records(c.File, c.Input, func(rec load.Record) error {
		one := shape{rec: rec}
		err := usable3D(rec)
		if err == nil && c.EnergyField != "" {
			one.energy, err = energyOf(rec, c.EnergyField)
		}
		if err == nil {
			t.done++
			one.key = rec.Mol.SMILES()
			pile = append(pile, one)
			return nil
		}
		t.failed++
		s.voice.failed("%s", failedAt(c.File, rec, err).said)
		return nil
	})
	return pile, err
}

// A shape is one record and what became of it.
type shape struct {
	rec     load.Record
	key     string  // structure
	energy  float64 // hartree
	dropped bool
}

// drop marks what is there already and returns the number of molecules. Records
// are compared where they have one structure and one order of the atoms.
func (c *dedupeCommand) drop(pile []shape) int {
	var molecules [][]int
	place := map[string]int{}
	for i, one := range pile {
		key := one.key + atomOrder(one.rec)
		k, seen := place[key]
		if !seen {
			k = len(molecules)
			place[key] = k
			molecules = append(molecules, nil)
		}
		molecules[k] = append(molecules[k], i)
	}
	for _, members := range molecules {
		xs := make([][]float64, len(members))
		energies := make([]float64, len(members))
		for k, i := range members {
			xs[k], energies[k] = pile[i].rec.X, pile[i].energy
		}
		comparer := dedupe.NewComparer(pile[members[0]].rec.Mol, dedupe.Options{PolarHydrogens: true})
		for _, g := range dedupe.Unique(comparer, xs, energies, dedupe.DefaultThresholds()) {
			for _, m := range g.Members {
				pile[members[m]].dropped = m != g.Keep
			}
		}
	}
	return len(molecules)
}

// atomOrder is a text that two records share if their bonds join the same atoms.
func atomOrder(rec load.Record) string {
	var b strings.Builder
	for _, z := range rec.Mol.Numbers() {
		fmt.Fprintf(&b, " %d", z)
	}
	for _, bond := range rec.Mol.Bonds() {
		fmt.Fprintf(&b, " %d-%d", bond.A, bond.B)
	}
	return b.String()
}

// energyOf reads a record's energy in hartree.
func energyOf(rec load.Record, name string) (float64, error) {
	for _, f := range rec.Fields {
		if f.Name != name {
			continue
		}
		v, err := strconv.ParseFloat(strings.TrimSpace(f.Value), 64)
		if err != nil || math.IsNaN(v) || math.IsInf(v, 0) {
			return 0, fmt.Errorf("%s: want an energy, have %q", name, f.Value)
		}
		return v * energyUnit(name), nil
	}
	return 0, errors.New("no data item is named " + strconv.Quote(name))
}

// energyUnit is the unit that a data item's name ends with: kcal/mol where it
// says so, else hartree.
func energyUnit(name string) float64 {
	if strings.Contains(strings.ToLower(name), "kcal") {
		return units.KcalPerMol
	}
	return 1
}
