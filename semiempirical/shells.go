package semiempirical

import (
	"math"
	"slices"

	"torsieve/internal/gauss"
)

// A basis is the valence shells of a molecule, atom by atom in the order of
// the parameter table, and the tables that give their integrals.
type basis struct {
	elements []*element // of each atom
	kind     []int      // of each atom: a place in kinds
	kinds    []kind

	shells     []*shell // of all atoms
	shellAtom  []int
	shellStart []int // first function of each shell, and the number of functions
	atomShell  []int // first shell of each atom, and the number of shells
	atomStart  []int // first function of each atom, and the number of functions
	funcShell  []int // shell of each function
}

// A kind is one element of the molecule.
type kind struct {
	element *element
	shells  []gauss.Shell
	first   []int           // first function of each shell within the atom
	size    int             // functions
	onsite  []float64       // one-centre integrals, size x size x gauss.Operators
	with    []*diatomicKind // this kind first, that one second
}

// A diatomicKind holds what two elements have in common at any distance: for
// each shell of the first, for each of the second.
type diatomicKind struct {
	integrals []*gauss.AxialPair
	first     []int     // of each pair of shells: its first number in a link's values; and how many there are
	h0        []float64 // the part of H0's factor that does not depend on the distance
	reach     float64   // bohr; no overlap beyond it
}

func newBasis(numbers []int) (*basis, error) {
	t, err := gfn2()
	if err != nil {
		return nil, err
	}
	b := &basis{}
	for atom, z := range numbers {
		if z < 1 || z > MaxZ {
			return nil, &Unsupported{Atom: atom, Z: z}
		}
		if err := b.addAtom(&t.Elements[z-1]); err != nil {
			return nil, err
		}
	}
	b.shellStart = append(b.shellStart, len(b.funcShell))
	b.atomShell = append(b.atomShell, len(b.shells))
	b.atomStart = append(b.atomStart, len(b.funcShell))
	for i := range b.kinds {
		for j := range b.kinds {
			b.kinds[i].with = append(b.kinds[i].with, newDiatomicKind(&b.kinds[i], &b.kinds[j]))
		}
	}
	return b, nil
}

// addAtom appends an atom's shells and functions.
func (b *basis) addAtom(e *element) error {
	k := slices.IndexFunc(b.kinds, func(k kind) bool { return k.element == e })
	if k < 0 {
		k = len(b.kinds)
		made, err := newKind(e)
		if err != nil {
			return err
		}
		b.kinds = append(b.kinds, made)
	}
	atom := len(b.elements)
	b.elements = append(b.elements, e)
	b.kind = append(b.kind, k)
	b.atomShell = append(b.atomShell, len(b.shells))
	b.atomStart = append(b.atomStart, len(b.funcShell))
	for i := range e.Shells {
		s := &e.Shells[i]
		b.shellAtom = append(b.shellAtom, atom)
		b.shellStart = append(b.shellStart, len(b.funcShell))
		for range 2*s.L + 1 {
			b.funcShell = append(b.funcShell, len(b.shells))
		}
		b.shells = append(b.shells, s)
	}
	return nil
}

func (b *basis) atoms() int     { return len(b.elements) }
func (b *basis) functions() int { return len(b.funcShell) }

func newKind(e *element) (kind, error) {
	k := kind{element: e}
	for i := range e.Shells {
		s, err := slater(&e.Shells[i])
		if err != nil {
			return k, err
		}
		k.shells = append(k.shells, s)
		k.first = append(k.first, k.size)
		k.size += s.Size()
	}
	k.onsite = make([]float64, k.size*k.size*gauss.Operators)
	for i := range k.shells {
		for j := range k.shells {
			block := gauss.OneCentre(&k.shells[i], &k.shells[j])
			width := k.shells[j].Size() * gauss.Operators
			for a := range k.shells[i].Size() {
				to := ((k.first[i]+a)*k.size + k.first[j]) * gauss.Operators
				copy(k.onsite[to:], block[a*width:(a+1)*width])
			}
		}
	}
	return k, nil
}

// slater returns the shell of the Slater function with exponent zeta as
// Gaussians. Each primitive is normalised; the sum is not, as the method has it.
func slater(s *shell) (gauss.Shell, error) {
	all, err := slaterFits()
	if err != nil {
		return gauss.Shell{}, err
	}
	f, err := all.find(s.N, s.L, s.Gaussians)
	if err != nil {
		return gauss.Shell{}, err
	}
	out := gauss.Shell{L: s.L}
	oddFactorial := [...]float64{1, 1, 3}[s.L] // (2l-1)!!
	for i, e := range f.Exponents {
		alpha := e * s.Zeta * s.Zeta
		norm := math.Pow(2*alpha/math.Pi, 0.75) * math.Pow(4*alpha, float64(s.L)/2) / math.Sqrt(oddFactorial)
		out.Exps = append(out.Exps, alpha)
		out.Coefs = append(out.Coefs, norm*f.Coefficients[i])
	}
	return out, nil
}

func newDiatomicKind(a, b *kind) *diatomicKind {
	d := &diatomicKind{first: []int{0}}
	for i := range a.shells {
		for j := range b.shells {
			pair := gauss.NewAxialPair(&a.shells[i], &b.shells[j])
			d.integrals = append(d.integrals, pair)
			d.first = append(d.first, d.first[len(d.first)-1]+pair.Size())
			d.reach = max(d.reach, pair.Reach())
			d.h0 = append(d.h0, h0Factor(a.element, b.element, i, j))
		}
	}
	return d
}

// size is how many different integrals there are.
func (d *diatomicKind) size() int { return d.first[len(d.integrals)] }
