package drawing

import (
	"math"
	"math/cmplx"
	"slices"

	"torsieve/molecule"
)

// setDoubleBonds turns over the far side of each double bond that came out the
// wrong way round. Those in rings cannot be turned.
func (s *sketch) setDoubleBonds() {
	for _, b := range s.m.StereoBonds() {
		if b.Known && !s.m.BondInRing(b.Bond) && s.drawnCis(b) != b.Cis {
			s.mirror(s.side(b.J, b.K), b.J, b.K)
		}
	}
}

// drawnCis says whether the references of a double bond are on one side of it.
func (s *sketch) drawnCis(b molecule.StereoBond) bool {
	axis := s.at[b.K] - s.at[b.J]
	return s.sideOf(b.J, b.A, b.K, axis)*s.sideOf(b.K, b.B, b.J, axis) > 0
}

// sideOf says on which side of the axis the substituent of end is drawn; of a
// hydrogen that is not drawn, the side that the other substituent leaves.
func (s *sketch) sideOf(end, substituent, other int, axis complex128) float64 {
	if s.placed[substituent] {
		return left(axis, s.at[substituent]-s.at[end])
	}
	for _, n := range s.next[end] {
		if n != other {
			return -left(axis, s.at[n]-s.at[end])
		}
	}
	return 0
}

// wedges chooses a bond for each stated centre, and what it has to be: by bond,
// the narrow end and the mark.
func (s *sketch) wedges() map[int]marked {
	marks := map[int]marked{}
	for _, c := range s.m.Centres() {
		if c.Parity == 0 {
			continue
		}
		best, score := -1, math.Inf(-1)
		for _, j := range s.next[c.Atom] {
			k, _ := s.m.BondBetween(c.Atom, j)
			if _, taken := marks[k]; taken || s.squeezed(c.Atom, j) || s.m.Bond(k).Order > 1 {
				continue
			}
			if v := s.fitness(k, j); v > score {
				best, score = j, v
			}
		}
		if best < 0 {
			continue
		}
		k, _ := s.m.BondBetween(c.Atom, best)
		mark := Hash
		if s.parity(c, best) == c.Parity {
			mark = Wedge
		}
		marks[k] = marked{c.Atom, mark}
	}
	return marks
}

// A marked bond begins at the atom narrow.
type marked struct {
	narrow int
	mark   Mark
}

// fitness prefers bonds that carry nothing else: out of the ring, to an atom
// that is no centre, to the end of a chain.
func (s *sketch) fitness(k, j int) float64 {
	v := -0.1 * float64(len(s.next[j]))
	if s.m.BondInRing(k) {
		v -= 4
	}
	if s.m.InRing(j) {
		v -= 0.5
	}
	if slices.ContainsFunc(s.m.Centres(), func(c molecule.Centre) bool { return c.Atom == j }) {
		v -= 2
	}
	return v
}

// squeezed says whether, of three bonds on one side of atom i, that to j is the
// one between: a wedge there could be read in two ways (J. Brecher, Pure Appl.
// Chem. 2006, 78, 1897).
func (s *sketch) squeezed(i, j int) bool {
	if len(s.next[i]) != 3 {
		return false
	}
	var others []complex128
	for _, n := range s.next[i] {
		if n != j {
			others = append(others, unit(s.at[n]-s.at[i]))
		}
	}
	middle := unit(s.at[j] - s.at[i])
	between := math.Abs(cmplx.Phase(others[0]/middle)) + math.Abs(cmplx.Phase(others[1]/middle))
	return between < 175*math.Pi/180
}

// parity is that of a centre if the bond to up is a wedge: every bond is a unit
// vector on paper, up is lifted, and what is not drawn lies behind.
func (s *sketch) parity(c molecule.Centre, up int) molecule.Parity {
	var v [4][3]float64
	for n, j := range c.Neighbours {
		if j < 0 || !s.placed[j] {
			v[n] = [3]float64{0, 0, -1}
			continue
		}
		d := unit(s.at[j] - s.at[c.Atom])
		v[n] = [3]float64{real(d), imag(d), 0}
		if j == up {
			v[n][2] = 1
		}
	}
	var d [3][3]float64
	for n := range d {
		for k := range 3 {
			d[n][k] = v[n][k] - v[3][k]
		}
	}
	p, q, r := d[0], d[1], d[2]
	volume := p[0]*(q[1]*r[2]-q[2]*r[1]) + p[1]*(q[2]*r[0]-q[0]*r[2]) + p[2]*(q[0]*r[1]-q[1]*r[0])
	if volume < 0 {
		return -1
	}
	return 1
}
