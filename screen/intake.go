package screen

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"torsieve/molecule"
	"torsieve/molecule/load"
)

// maxIsomers is the largest number of stereoisomers that a record expands to.
const maxIsomers = 8

// An Intake turns records into ligands: it makes ids unique, settles salts and
// unstated stereo as it was told, and writes down everything that it did.
type Intake struct {
	StripSalts   bool // keep the largest organic fragment; else several are refused
	ExpandStereo bool // take all isomers of unstated stereo; else it is refused

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
	l.warnOfCharges()
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

// salts leaves one fragment of several, where that is wanted and can be done
// with a good conscience: counter-ions of the main groups go, metal complexes
// are never taken apart.
func (in *Intake) salts(l *Ligand, x *[]float64) error {
	fragments := l.Mol.Fragments()
	if !in.StripSalts || len(fragments) < 2 {
		return nil
	}
	if err := metals(l.Mol); err != nil {
		return err
	}
	all := formulas(l.Mol)
	keep := largestOrganic(l.Mol)
	if keep < 0 {
		return fmt.Errorf("%d fragments (%s), none of them organic", len(fragments), strings.Join(all, " + "))
	}
	m, err := l.Mol.Subset(fragments[keep])
	if err != nil {
		return fmt.Errorf("fragment %s: %w", all[keep], err)
	}
	if *x != nil {
		*x = subset(*x, fragments[keep])
	}
	l.Mol = m
	l.warnf("salt: kept %s, dropped %s", all[keep], strings.Join(slices.Delete(slices.Clone(all), keep, keep+1), " + "))
	return nil
}

// largestOrganic returns the index of the fragment with the most heavy atoms
// among those with carbon, the first of equal ones, or -1.
func largestOrganic(m *molecule.Molecule) int {
	best, most := -1, 0
	for k, atoms := range m.Fragments() {
		heavy, carbon := 0, false
		for _, i := range atoms {
			z := m.Atom(i).Number
			if z > 1 {
				heavy++
			}
			carbon = carbon || z == 6
		}
		if carbon && heavy > most {
			best, most = k, heavy
		}
	}
	return best
}

func subset(x []float64, atoms []int) []float64 {
	out := make([]float64, 0, 3*len(atoms))
	for _, i := range atoms {
		out = append(out, x[3*i:3*i+3]...)
	}
	return out
}

// isomers settles unstated stereo: as many ligands as there are isomers, each
// with the record's id and "~1", "~2", ...
func (in *Intake) isomers(l *Ligand) []*Ligand {
	n := l.Mol.UnspecifiedStereo()
	if n == 0 {
		l.SMILES = l.Mol.SMILES()
		return []*Ligand{l}
	}
	what := unstated(l.Mol)
	if !in.ExpandStereo {
		return refused(l, fmt.Errorf("stereo not stated: %s", what))
	}
	isomers, err := l.Mol.Isomers(maxIsomers)
	if err != nil {
		return refused(l, fmt.Errorf("stereo not stated (%s): %w", what, err))
	}
	if len(isomers) == 1 {
		l.Mol, l.SMILES = isomers[0], isomers[0].SMILES()
		return []*Ligand{l}
	}
	out := make([]*Ligand, len(isomers))
	for k, m := range isomers {
		one := *l
		one.Mol, one.SMILES, one.Parent, one.Starts = m, m.SMILES(), l.ID, nil
		one.Order += k
		one.ID = in.unique(fmt.Sprintf("%s~%d", l.ID, k+1))
		in.ids[one.ID] = l.Place
		one.Stem = in.stems.stem(one.ID)
		one.Warnings = slices.Clone(l.Warnings)
		one.warnf("stereo not stated (%s): this is isomer %d of %d", what, k+1, len(isomers))
		for _, x := range l.Starts {
			if m.StereoMatches(x) == nil {
				one.Starts = append(one.Starts, x)
			}
		}
		out[k] = &one
	}
	in.count += len(out) - 1
	return out
}

// unstated names the stereo elements that the input does not state.
func unstated(m *molecule.Molecule) string {
	var names []string
	for _, c := range m.Centres() {
		if c.Parity == 0 {
			names = append(names, "centre "+label(m, c.Atom))
		}
	}
	for _, b := range m.StereoBonds() {
		if !b.Known {
			names = append(names, fmt.Sprintf("double bond %s=%s", label(m, b.J), label(m, b.K)))
		}
	}
	return strings.Join(names, ", ")
}

// warnOfCharges tells what a chemist should know of a charge in a gas phase.
func (l *Ligand) warnOfCharges() {
	plus, minus := separateCharges(l.Mol)
	switch {
	case plus > 0 && minus > 0:
		l.warnf("zwitterion in the gas phase: it folds onto itself, and a proton may move")
	case l.Mol.Charge() != 0:
		l.warnf("charge %+d in the gas phase: charged groups fold back more than in water", l.Mol.Charge())
	}
}

// separateCharges counts charged atoms whose neighbours do not balance them, as
// those of a nitro group or an N-oxide do.
func separateCharges(m *molecule.Molecule) (plus, minus int) {
	for i, a := range m.Atoms() {
		around := a.Charge
		for _, j := range m.Neighbours(i) {
			if q := m.Atom(j).Charge; q*a.Charge < 0 {
				around = 0
			}
		}
		switch {
		case around > 0:
			plus++
		case around < 0:
			minus++
		}
	}
	return plus, minus
}

func (l *Ligand) warnf(format string, args ...any) {
	l.Warnings = append(l.Warnings, fmt.Sprintf(format, args...))
}
