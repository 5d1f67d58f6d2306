package screen

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"torsieve/molecule"
	"torsieve/molecule/load"
)

// An Intake turns records into ligands: it makes ids unique, settles salts and
// unstated stereo as it was told, and writes down everything that it did.
type Intake struct {
	StripSalts   bool   // keep the largest organic fragment; else several are refused
	ExpandStereo bool   // take all isomers of unstated stereo; else it is refused
	Solvent      string // what will surround the ligands, for warnings; empty: the gas phase

	ids   map[string]string // id: where it was first read
	stems *namer
	count int
}

// NewIntake returns an Intake that refuses what is not one stated molecule.
func NewIntake() *Intake {
	return &Intake{ids: map[string]string{}, stems: newNamer()}
}

// Take returns the ligands of a record of a file: none are lost, a record that
// could not be read and one that is refused come back as a ligand with an Err.
func (in *Intake) Take(file string, rec load.Record) []*Ligand {
	l := &Ligand{Mol: rec.Mol, Place: place(file, rec), Order: in.count, Warnings: slices.Clone(rec.Warnings)}
	in.count++
	in.name(l, rec)
	if rec.Err != nil {
		l.Err, l.Status = rec.Err, Unreadable
		return []*Ligand{l}
	}
	if n := l.Mol.NumAtoms(); n > MaxAtoms {
		return refused(l, fmt.Errorf("%d atoms are over the limit of %d", n, MaxAtoms))
	}
	x := rec.X
	if err := in.salts(l, &x); err != nil {
		return refused(l, err)
	}
	if err := Refuse(l.Mol); err != nil {
		return refused(l, err)
	}
	if x != nil {
		if err := load.CheckGeometry(l.Mol.Numbers(), x); err != nil {
			return refused(l, err)
		}
		l.Starts = [][]float64{x}
	}
	l.warnOfCharges(in.Solvent)
	return in.isomers(l)
}

func refused(l *Ligand, err error) []*Ligand {
	l.Err, l.Status = err, Refused
	return []*Ligand{l}
}

// place says where a record stands in words for a message.
func place(file string, rec load.Record) string {
	if rec.Line > 0 {
		file = fmt.Sprintf("%s:%d", file, rec.Line)
	}
	return fmt.Sprintf("%s: record %d", file, rec.Record)
}

// name gives the ligand an id that no other has.
func (in *Intake) name(l *Ligand, rec load.Record) {
	id := strings.TrimSpace(rec.ID)
	var parse *molecule.ParseError
	if id == "" && errors.As(rec.Err, &parse) {
		id = strings.TrimSpace(parse.ID)
	}
	if id == "" {
		id = fmt.Sprintf("record-%d", rec.Record)
	}
	l.ID = in.unique(id)
	if l.ID != id {
		l.warnf("the id %q stands at %s already: this one (%s) is called %q", id, in.ids[id], l.Place, l.ID)
	}
	in.ids[l.ID] = l.Place
	l.Stem = in.stems.stem(l.ID)
}

// unique returns id, or id with the next free -2, -3, ...
func (in *Intake) unique(id string) string {
	name := id
	for k := 2; ; k++ {
		if _, taken := in.ids[name]; !taken {
			return name
		}
		name = fmt.Sprintf("%s-%d", id, k)
	}
}

func (l *Ligand) warnf(format string, args ...any) {
	l.Warnings = append(l.Warnings, fmt.Sprintf(format, args...))
}
