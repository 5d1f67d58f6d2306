package gauss

import (
	"cmp"
	"math"
	"slices"
)

// An auxiliarySet holds the fitting functions of a molecule, each on one centre,
// sorted for integrals in lanes.
//
// The solid harmonic S of degree l times a Gaussian of exponent q is that
// harmonic of the derivatives with respect to the centre, (2q)^-l S(d/dC)
// exp(-q (r-C)^2): one Hermite Gaussian degree, none of the lower ones.
//
// Source: E. W. Hobson, Theory of Spherical and Ellipsoidal Harmonics (1931),
// section 79; R. Ahlrichs, Phys. Chem. Chem. Phys. 2006, 8, 3072.
type auxiliarySet struct {
	shells []Shell
	chunks []auxiliaryChunk
	n      int // functions
	top    int // highest l
}

// An auxiliaryChunk holds some shells of one l. Its functions are numbered from
// first on: all shells with the first component, then all with the second.
type auxiliaryChunk struct {
	l, first, stride int
	plain            bool  // one primitive a shell
	begin            []int // lanes of each shell; at the end the number of lanes
	shells           []int // numbers in the given list
	atoms            []int // of each lane
	q, c             []float64
	centres          []float64 // x, then y, then z of all lanes
}

// maxChunk is the largest number of lanes of a chunk: rows of that length stay
// in the nearest cache.
const maxChunk = 64

func newAuxiliarySet(shells []Shell) *auxiliarySet {
	s := &auxiliarySet{shells: shells}
	order := make([]int, len(shells))
	for i := range order {
		order[i] = i
		if shells[i].Cartesian && shells[i].L > 1 {
			panic("gauss: fitting functions are solid harmonics")
		}
		s.top = max(s.top, shells[i].L)
	}
	slices.SortStableFunc(order, func(i, j int) int {
		a, b := &shells[i], &shells[j]
		return cmp.Or(cmp.Compare(a.L, b.L), cmp.Compare(min(len(a.Exps), 2), min(len(b.Exps), 2)))
	})
	for _, i := range order {
		s.add(i)
	}
	for k := range s.chunks {
		c := &s.chunks[k]
		c.first, s.n = s.n, s.n+len(c.shells)*(2*c.l+1)
		c.finish()
	}
	return s
}

// add puts a shell into the last chunk, or a new one. Shells of one primitive, which
// most are, keep to themselves: their lanes need no summing.
func (s *auxiliarySet) add(i int) {
	sh := &s.shells[i]
	k := len(s.chunks) - 1
	if k < 0 || s.chunks[k].l != sh.L || s.chunks[k].plain != (len(sh.Exps) == 1) || len(s.chunks[k].q)+len(sh.Exps) > maxChunk {
		s.chunks = append(s.chunks, auxiliaryChunk{l: sh.L, plain: len(sh.Exps) == 1})
		k++
	}
	c := &s.chunks[k]
	c.begin, c.shells = append(c.begin, len(c.q)), append(c.shells, i)
	for m, q := range sh.Exps {
		scale := pairFactor / q * math.Pow(-0.5/q, float64(sh.L)) // the sign: derivatives with respect to C, not P
		c.q, c.c, c.atoms = append(c.q, q), append(c.c, sh.Coefs[m]*scale), append(c.atoms, sh.Atom)
	}
}

// finish fills rows up to whole vectors with lanes that weigh nothing.
func (c *auxiliaryChunk) finish() {
	c.begin = append(c.begin, len(c.q))
	for len(c.q)%8 != 0 {
		c.q, c.c, c.atoms = append(c.q, 1), append(c.c, 0), append(c.atoms, c.atoms[0])
	}
	c.stride = len(c.q)
	c.centres = make([]float64, 3*c.stride)
}

// place takes the atoms to x.
func (s *auxiliarySet) place(x []float64) {
	for i := range s.chunks {
		c := &s.chunks[i]
		for k, atom := range c.atoms {
			for axis := range 3 {
				c.centres[axis*c.stride+k] = x[3*atom+axis]
			}
		}
	}
}

// place of function m of shell number i of the given list.
func (s *auxiliarySet) functions() [][]int {
	at := make([][]int, len(s.shells))
	for k := range s.chunks {
		c := &s.chunks[k]
		for j, i := range c.shells {
			for m := range 2*c.l + 1 {
				at[i] = append(at[i], c.first+m*len(c.shells)+j)
			}
		}
	}
	return at
}
