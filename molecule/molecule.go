// Package molecule knows what a molecule is: atoms, bonds, stereo, rings,
// aromaticity, symmetry and rotors. It knows nothing of energies or runs.
//
// A Molecule is a graph. Coordinates travel apart from it, as a flat []float64
// of length 3N in bohr, atom by atom.
package molecule

// An Atom is one nucleus of the graph. Every hydrogen of a Molecule is an atom
// of its own: readers add the implicit ones behind the atoms of the input.
type Atom struct {
	Number   int  // atomic number
	Charge   int  // formal charge, e
	Isotope  int  // mass number where the input states one, else 0
	Radical  int  // unpaired electrons that the input states or valence implies
	Class    int  // atom class or map number of the input, else 0
	Aromatic bool // member of an aromatic ring
}

// A Bond joins two atoms of the graph.
type Bond struct {
	A, B     int  // atom indices, A < B
	Order    int  // 1, 2, 3 of one Kekule form
	Aromatic bool // bond of an aromatic ring
}

// A Parity is the handedness of a tetrahedral centre with respect to the order
// of its neighbours: seen from the first, the other three run anticlockwise
// (+1, SMILES @) or clockwise (-1, SMILES @@); 0 where it is not stated.
//
// In space the parity of p1..p4 is the sign of (p1-p4).[(p2-p4)x(p3-p4)].
type Parity int8

// A Centre is an atom whose inversion alone gives another stereoisomer.
type Centre struct {
	Atom       int
	Neighbours [4]int // atom indices; -1 stands for the lone pair
	Parity     Parity // 0: not stated
}

// A StereoBond is a double bond with two configurations.
type StereoBond struct {
	Bond  int // index into Bonds
	J, K  int // its ends
	A, B  int // reference substituents on J and on K
	Cis   bool
	Known bool // false: the input does not state the configuration
}

// A Rotor is a single bond about which conformers differ.
type Rotor struct {
	Bond      int   // index into Bonds
	J, K      int   // its ends, atom indices
	Moving    []int // the atoms on K's side, K left out, ascending; always the smaller side
	Counted   bool  // counts as a rotatable bond in the usual sense (see RotatableBonds)
	PeriodJ   int   // order of the graph symmetry of J's end about the bond (methyl 3, phenyl 2, else 1)
	PeriodK   int   // likewise for K's end
	Idle      bool  // an end is methyl, NH3+, CF3, t-butyl or the like: one staggered state, no other conformer
	AmideLike bool  // two planar states: C-N of an amide, thioamide, urea, carbamate, amidine or guanidine
}

// A Molecule is a perceived graph. It is made by a Builder, does not change
// afterwards and may be shared between goroutines. Slices that its methods
// return must not be written to.
type Molecule struct {
	*graph
	centres     []Centre
	stereoBonds []StereoBond
	lazy        lazy
}
