// Package basis holds the orbital basis sets of the Hartree-Fock tier, as
// published, and hands out the normalised shells of a molecule.
//
// Each file of data/ is one set, with the papers that it comes from. Numbers
// were taken from the Basis Set Exchange collection (B. P. Pritchard, D.
// Altarawy, B. Didier, T. D. Gibson, T. L. Windus, J. Chem. Inf. Model. 2019,
// 59, 4814, doi:10.1021/acs.jcim.9b00725).
package basis

import (
	"fmt"

	"torsieve/internal/element"
	"torsieve/internal/gauss"
)

// A Set is one basis set. It is immutable and safe to share.
type Set struct {
	Name     string // as published: "def2-SV(P)"
	elements map[int][]shell
	ecp      map[int]int // electrons that an effective core potential replaces
}

// A shell is a contraction as published; coefficients refer to normalised
// primitives.
type shell struct {
	l         int
	exps      []float64
	coefs     []float64
	cartesian bool
}

// A Missing error says that a set cannot describe an element.
type Missing struct {
	Basis string
	Z     int
	ECP   int // electrons in an effective core potential; 0: the set lacks Z
}

func (e *Missing) Error() string {
	if e.ECP > 0 {
		return fmt.Sprintf("%s needs an effective core potential of %d electrons in %s, which this build cannot evaluate",
			element.Symbol(e.Z), e.ECP, e.Basis)
	}
	return fmt.Sprintf("the basis %s has no functions for %s", e.Basis, element.Symbol(e.Z))
}

// Check returns a *Missing error for the first atom that the set cannot
// describe with all electrons.
func (s *Set) Check(numbers []int) error {
	for _, z := range numbers {
		if n := s.ecp[z]; n > 0 {
			return &Missing{Basis: s.Name, Z: z, ECP: n}
		}
		if len(s.elements[z]) == 0 {
			return &Missing{Basis: s.Name, Z: z}
		}
	}
	return nil
}

// Shells returns the shells of a molecule: atoms in the given order, shells in
// the order of the set's file (by l, then as published). Every contraction has
// unit norm. Errors are *Missing.
func (s *Set) Shells(numbers []int) ([]gauss.Shell, error) {
	if err := s.Check(numbers); err != nil {
		return nil, err
	}
	var out []gauss.Shell
	for atom, z := range numbers {
		for _, sh := range s.elements[z] {
			g := gauss.Shell{Atom: atom, L: sh.l, Exps: sh.exps, Cartesian: sh.cartesian}
			g.Coefs = make([]float64, len(sh.coefs))
			gauss.Normalise(g.Coefs, sh.l, sh.exps, sh.coefs)
			out = append(out, g)
		}
	}
	return out, nil
}

// Functions returns the number of basis functions on element z, 0 where the
// set has none.
func (s *Set) Functions(z int) int {
	n := 0
	for _, sh := range s.elements[z] {
		g := gauss.Shell{L: sh.l, Cartesian: sh.cartesian}
		n += g.Size()
	}
	return n
}
