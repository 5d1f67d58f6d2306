package drawing

import (
	"math"
	"math/cmplx"
	"slices"
)

// Rounds of flips: one is enough for most molecules, more help where parts have
// to make room for each other.
const flipRounds = 4

// tidy turns parts over about the bond that holds them wherever that leaves less
// of the drawing on top of itself. Double bonds are left alone: a flip would
// make cis of trans.
func (s *sketch) tidy() {
	score := s.disorder()
	for range flipRounds {
		before := score
		for k, b := range s.m.Bonds() {
			if score < 1e-6 {
				return
			}
			if !s.flips(k) {
				continue
			}
			side := s.side(b.A, b.B)
			s.mirror(side, b.A, b.B)
			if after := s.disorder(); after < score-1e-6 {
				score = after
			} else {
				s.mirror(side, b.A, b.B)
			}
		}
		if score > before-1e-6 {
			return
		}
	}
}

// flips says whether turning over about bond k can change the drawing.
func (s *sketch) flips(k int) bool {
	b := s.m.Bond(k)
	return b.Order == 1 && !s.m.BondInRing(k) && len(s.next[b.A]) > 1 && len(s.next[b.B]) > 1
}

// side returns the drawn atoms on j's side of the bond i-j, j among them.
func (s *sketch) side(i, j int) []int {
	side := []int{j}
	for at := 0; at < len(side); at++ {
		for _, n := range s.next[side[at]] {
			if n != i && !slices.Contains(side, n) {
				side = append(side, n)
			}
		}
	}
	return side
}

// mirror reflects atoms on the line through i and j.
func (s *sketch) mirror(atoms []int, i, j int) {
	p, axis := s.at[i], unit(s.at[j]-s.at[i])
	for _, a := range atoms {
		s.at[a] = p + axis*cmplx.Conj((s.at[a]-p)/axis)
	}
}

// disorder counts bonds that cross and atoms that are too near.
func (s *sketch) disorder() float64 {
	var sum float64
	for n, i := range s.atoms {
		for _, j := range s.atoms[:n] {
			if _, bonded := s.m.BondBetween(i, j); !bonded {
				sum += overlap(cmplx.Abs(s.at[i] - s.at[j]))
			}
		}
	}
	bonds := s.drawnBonds()
	for n, k := range bonds {
		for _, l := range bonds[:n] {
			if s.cross(k, l) {
				sum++
			}
		}
	}
	return sum
}

// overlap is what two atoms at distance r that are not bonded cost.
func overlap(r float64) float64 {
	const room = 0.85
	if r > room {
		return 0
	}
	return 4 * (room - r) * (room - r)
}

func (s *sketch) drawnBonds() []int {
	var ks []int
	for k, b := range s.m.Bonds() {
		if slices.Contains(s.next[b.A], b.B) {
			ks = append(ks, k)
		}
	}
	return ks
}

// cross says whether two bonds without a common atom cross.
func (s *sketch) cross(k, l int) bool {
	a, b := s.m.Bond(k), s.m.Bond(l)
	if a.A == b.A || a.A == b.B || a.B == b.A || a.B == b.B {
		return false
	}
	p, q, u, v := s.at[a.A], s.at[a.B], s.at[b.A], s.at[b.B]
	return left(q-p, u-p)*left(q-p, v-p) < 0 && left(v-u, p-u)*left(v-u, q-u) < 0
}

// level turns every fragment so that it is widest and lowest, by multiples of 30
// degrees, which keeps edges of rings upright.
func (s *sketch) level() {
	for _, fragment := range s.m.Fragments() {
		best, lowest := complex128(1), math.Inf(1)
		for step := range 6 {
			turn := cmplx.Rect(1, float64(step)*math.Pi/6)
			if h := s.height(fragment, turn); h < lowest-0.05 {
				best, lowest = turn, h
			}
		}
		for _, i := range fragment {
			s.at[i] *= best
		}
	}
}

func (s *sketch) height(fragment []int, turn complex128) float64 {
	low, high := math.Inf(1), math.Inf(-1)
	for _, i := range fragment {
		if s.placed[i] {
			y := imag(s.at[i] * turn)
			low, high = math.Min(low, y), math.Max(high, y)
		}
	}
	return high - low
}

// besideEachOther puts fragments in a row.
func (s *sketch) besideEachOther() {
	x := 0.0
	for _, fragment := range s.m.Fragments() {
		leftmost, rightmost, bottom, top := math.Inf(1), math.Inf(-1), math.Inf(1), math.Inf(-1)
		for _, i := range fragment {
			if s.placed[i] {
				leftmost, rightmost = math.Min(leftmost, real(s.at[i])), math.Max(rightmost, real(s.at[i]))
				bottom, top = math.Min(bottom, imag(s.at[i])), math.Max(top, imag(s.at[i]))
			}
		}
		for _, i := range fragment {
			s.at[i] += complex(x-leftmost, -(bottom+top)/2)
		}
		x += rightmost - leftmost + 2
	}
}
