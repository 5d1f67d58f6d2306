package molecule

import "fmt"

// Special values of a Builder's input.
const (
	AromaticOrder = 4  // bond order: aromatic, the Kekule form is to be found
	FillHydrogens = -1 // BuilderAtom.Hydrogens: as many as the usual valence asks for
	LonePair      = -1 // neighbour of a centre: its lone pair
	ImplicitH     = -2 // neighbour of a centre: a hydrogen that Build adds
)

// A BuilderAtom is an atom as an input states it.
type BuilderAtom struct {
	Number    int  // atomic number
	Charge    int  // formal charge, e
	Isotope   int  // mass number, 0 if not stated
	Radical   int  // unpaired electrons where the input states them, else 0
	Class     int  // atom class or map number, 0 if none
	Aromatic  bool // written as aromatic (lower case)
	Hydrogens int  // FillHydrogens, or how many to add besides those that are atoms already
}

// A BuildError says which atom of an input makes no molecule, and why.
type BuildError struct {
	Atom int // atom index, -1 if no single atom is at fault
	Msg  string
}

func (e *BuildError) Error() string { return e.Msg }

func atomError(atom int, format string, args ...any) error {
	return &BuildError{Atom: atom, Msg: fmt.Sprintf("atom %d ", atom+1) + fmt.Sprintf(format, args...)}
}

// A Builder collects the graph that a reader finds and makes a Molecule of it.
// The zero value is ready for use. Atoms keep their indices; the hydrogens that
// Build adds stand behind them, in the order of the atoms that carry them.
type Builder struct {
	atoms   []BuilderAtom
	bonds   []Bond
	pairs   map[[2]int]int
	centres []statedCentre
	doubles []statedDouble
}

type statedCentre struct {
	atom       int
	neighbours []int
	parity     Parity
}

type statedDouble struct {
	i, j, a, b int
	cis        bool
}

// NewBuilder returns an empty Builder.
func NewBuilder() *Builder { return new(Builder) }

// AddAtom adds an atom and returns its index.
func (b *Builder) AddAtom(a BuilderAtom) int {
	b.atoms = append(b.atoms, a)
	return len(b.atoms) - 1
}

// NumAtoms returns the number of atoms added so far.
func (b *Builder) NumAtoms() int { return len(b.atoms) }

// AddBond joins two atoms and returns the index of the bond. The order is 1 to
// 3 or AromaticOrder. A bond of an atom with itself, a second bond between two
// atoms and any other order are errors; an index out of range panics.
func (b *Builder) AddBond(i, j, order int) (int, error) {
	b.check(i)
	b.check(j)
	if i == j {
		return 0, atomError(i, "is bonded to itself")
	}
	if order < 1 || order > AromaticOrder {
		return 0, atomError(i, "has a bond of order %d: want 1, 2, 3 or aromatic", order)
	}
	i, j = min(i, j), max(i, j)
	if _, ok := b.pairs[[2]int{i, j}]; ok {
		return 0, atomError(i, "has two bonds to atom %d", j+1)
	}
	if b.pairs == nil {
		b.pairs = map[[2]int]int{}
	}
	k := len(b.bonds)
	b.pairs[[2]int{i, j}] = k
	b.bonds = append(b.bonds, Bond{A: i, B: j, Order: order})
	return k, nil
}

// HasBond says whether i and j are bonded already.
func (b *Builder) HasBond(i, j int) bool {
	_, ok := b.pairs[[2]int{min(i, j), max(i, j)}]
	return ok
}

// SetCentre states the handedness of a tetrahedral centre with respect to its
// neighbours in the given order: atom indices, LonePair, ImplicitH. Three
// neighbours stand for three atoms followed by the lone pair or hydrogen that
// is left. A mark without meaning is dropped by Build.
func (b *Builder) SetCentre(atom int, neighbours []int, p Parity) {
	b.check(atom)
	b.centres = append(b.centres, statedCentre{atom, append([]int(nil), neighbours...), p})
}

// SetDoubleBond states that a, bonded to i, and bb, bonded to j, are on the
// same side (cis) or on opposite sides of the double bond i=j.
func (b *Builder) SetDoubleBond(i, j, a, bb int, cis bool) {
	for _, k := range [...]int{i, j, a, bb} {
		b.check(k)
	}
	b.doubles = append(b.doubles, statedDouble{i, j, a, bb, cis})
}

func (b *Builder) check(i int) {
	if i < 0 || i >= len(b.atoms) {
		panic("molecule: atom index out of range")
	}
}

// Build makes the molecule: it assigns a Kekule form to aromatic bonds, adds
// hydrogens, checks valences, finds rings, aromaticity and stereo elements. The
// warnings name what was odd but could be read. An error is a *BuildError.
func (b *Builder) Build() (*Molecule, []string, error) {
	d := newDraft(b)
	if err := d.checkAtoms(); err != nil {
		return nil, nil, err
	}
	d.normalise()
	if err := d.assignKekule(); err != nil {
		return nil, nil, err
	}
	if err := d.addHydrogens(); err != nil {
		return nil, nil, err
	}
	g := newGraph(d.atoms, d.bonds)
	d.warnings = append(d.warnings, g.perceiveAromaticity(d.writtenAtoms, d.writtenBonds)...)
	g.settle()
	m := d.withStereo(g)
	return m, d.warnings, nil
}

// DoubleBonds returns the ends of the bonds of order 2 added so far.
func (b *Builder) DoubleBonds() [][2]int {
	var ends [][2]int
	for _, bond := range b.bonds {
		if bond.Order == 2 {
			ends = append(ends, [2]int{bond.A, bond.B})
		}
	}
	return ends
}
