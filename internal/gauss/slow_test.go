package gauss

import (
	"math"
	"math/rand/v2"
	"testing"
)

// slowERI is the plain way to the repulsion integral of four primitives: the
// recursion of S. Obara, A. Saika, J. Chem. Phys. 1986, 84, 3963, eq. 39, for
// all four centres, one integral at a time. It shares no formula with the fast
// ways but the Boys function, which has check values of its own, and is the
// judge of both.
type slowERI struct {
	exps   [4]float64
	centre [4][3]float64
	known  map[slowKey]float64
}

type slowKey struct {
	n [4][3]int
	m int
}

// value returns [ab|cd]^(m) for monomials of the powers n[centre][axis].
func (s *slowERI) value(n [4][3]int, m int) float64 {
	key := slowKey{n, m}
	v, ok := s.known[key]
	if !ok {
		v = s.make(n, m)
		s.known[key] = v
	}
	return v
}

func (s *slowERI) make(n [4][3]int, m int) float64 {
	p, q := s.exps[0]+s.exps[1], s.exps[2]+s.exps[3]
	var pp, qq, w [3]float64
	for k := range 3 {
		pp[k] = (s.exps[0]*s.centre[0][k] + s.exps[1]*s.centre[1][k]) / p
		qq[k] = (s.exps[2]*s.centre[2][k] + s.exps[3]*s.centre[3][k]) / q
		w[k] = (p*pp[k] + q*qq[k]) / (p + q)
	}
	rho := p * q / (p + q)
	for c := range 4 {
		for k := range 3 {
			if n[c][k] == 0 {
				continue
			}
			n[c][k]-- // now the powers of "a" in a+1_k
			own, e, other := pp[k], p, c^1
			if c >= 2 {
				own, e = qq[k], q
			}
			v := (own-s.centre[c][k])*s.value(n, m) + (w[k]-own)*s.value(n, m+1)
			lower := func(c int) ([4][3]int, float64) {
				d := n
				d[c][k]--
				return d, float64(n[c][k])
			}
			for _, at := range []int{c, other} {
				if d, f := lower(at); f > 0 {
					v += f / (2 * e) * (s.value(d, m) - rho/e*s.value(d, m+1))
				}
			}
			far := 2 - c/2*2 // the other electron's centres
			for _, at := range []int{far, far + 1} {
				if d, f := lower(at); f > 0 {
					v += f / (2 * (p + q)) * s.value(d, m+1)
				}
			}
			return v
		}
	}
	var pq2, ab2, cd2 float64
	for k := range 3 {
		pq2 += (pp[k] - qq[k]) * (pp[k] - qq[k])
		ab2 += (s.centre[0][k] - s.centre[1][k]) * (s.centre[0][k] - s.centre[1][k])
		cd2 += (s.centre[2][k] - s.centre[3][k]) * (s.centre[2][k] - s.centre[3][k])
	}
	f := make([]float64, m+1)
	Boys(f, rho*pq2)
	over := math.Exp(-s.exps[0]*s.exps[1]/p*ab2 - s.exps[2]*s.exps[3]/q*cd2)
	return 2 * math.Pow(math.Pi, 2.5) / (p * q * math.Sqrt(p+q)) * over * f[m]
}

// slowQuartet returns the integrals of four shells at x, last function fastest.
func slowQuartet(sh [4]*Shell, x []float64) []float64 {
	var out []float64
	rows := [4][][]float64{components(sh[0]), components(sh[1]), components(sh[2]), components(sh[3])}
	cart := map[[4]int]float64{}
	eachPrimitive(sh, x, func(s *slowERI, coef float64) {
		for i, a := range Powers(sh[0].L) {
			for j, b := range Powers(sh[1].L) {
				for k, c := range Powers(sh[2].L) {
					for l, d := range Powers(sh[3].L) {
						n := [4][3]int{{a.X, a.Y, a.Z}, {b.X, b.Y, b.Z}, {c.X, c.Y, c.Z}, {d.X, d.Y, d.Z}}
						cart[[4]int{i, j, k, l}] += coef * s.value(n, 0)
					}
				}
			}
		}
	})
	for _, ra := range rows[0] {
		for _, rb := range rows[1] {
			for _, rc := range rows[2] {
				for _, rd := range rows[3] {
					v := 0.0
					for i, a := range ra {
						for j, b := range rb {
							for k, c := range rc {
								for l, d := range rd {
									if f := a * b * c * d; f != 0 {
										v += f * cart[[4]int{i, j, k, l}]
									}
								}
							}
						}
					}
					out = append(out, v)
				}
			}
		}
	}
	return out
}

func eachPrimitive(sh [4]*Shell, x []float64, f func(*slowERI, float64)) {
	var s slowERI
	for c := range 4 {
		copy(s.centre[c][:], x[3*sh[c].Atom:])
	}
	for i, a := range sh[0].Exps {
		for j, b := range sh[1].Exps {
			for k, c := range sh[2].Exps {
				for l, d := range sh[3].Exps {
					s.exps = [4]float64{a, b, c, d}
					s.known = map[slowKey]float64{}
					f(&s, sh[0].Coefs[i]*sh[1].Coefs[j]*sh[2].Coefs[k]*sh[3].Coefs[l])
				}
			}
		}
	}
}

func randomShell(rng *rand.Rand, atom, l, prims int) Shell {
	s := Shell{Atom: atom, L: l, Exps: make([]float64, prims), Coefs: make([]float64, prims)}
	for k := range prims {
		s.Exps[k] = math.Exp(rng.Float64()*3 - 1.8)
		s.Coefs[k] = rng.Float64() - 0.3
	}
	Normalise(s.Coefs, l, s.Exps, s.Coefs)
	return s
}

// Every class through (pp|pp) with its straight code, near and far, contracted,
// with shells on one centre too.
func TestFastClassesMatchSlow(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	for trial := range 6 {
		spread := []float64{1.5, 4, 12}[trial%3]
		x := make([]float64, 9)
		for i := range x {
			x[i] = spread * (rng.Float64() - 0.5)
		}
		var shells []Shell
		for atom := range 3 {
			for l := range 2 {
				shells = append(shells, randomShell(rng, atom, l, 1+rng.IntN(3)))
			}
		}
		compareBlocks(t, shells, x, 1e-12)
	}
}

// compareBlocks holds every block of a Repulsion against the judge.
func compareBlocks(t *testing.T, shells []Shell, x []float64, tol float64) {
	t.Helper()
	r := NewRepulsion(shells)
	r.Place(x, 1e-14)
	for bra := range r.Pairs() {
		spans, rows := r.Rows(nil, bra)
		lo, hi := r.Columns(bra)
		got := make([]float64, rows*(hi-lo))
		for i := range got {
			got[i] = math.NaN()
		}
		r.Block(got, bra, nil)
		for ket := range bra + 1 {
			b, k := &r.pairs[bra], &r.pairs[ket]
			if !inside(spans, k.first) {
				continue
			}
			want := slowQuartet([4]*Shell{&shells[b.i], &shells[b.j], &shells[k.i], &shells[k.j]}, x)
			one := r.one(b, k)
			for i, w := range want {
				if math.Abs(one[i]-w) > tol {
					t.Fatalf("shells l = %d %d %d %d, element %d: %.15g, slow %.15g", shells[b.i].L, shells[b.j].L,
						shells[k.i].L, shells[k.j].L, i, one[i], w)
				}
			}
			checkScatter(t, r, got, rowOf(spans, k.first), b, k, want, tol)
		}
	}
}

func inside(spans []Span, at int) bool { return rowOf(spans, at) >= 0 }

// rowOf returns the row of a pair of functions in a block, -1 if it is not
// there.
func rowOf(spans []Span, at int) int {
	row := 0
	for _, s := range spans {
		if at >= s.Begin && at < s.End {
			return row + at - s.Begin
		}
		row += s.End - s.Begin
	}
	return -1
}

// checkScatter compares one quartet's elements inside a block, factors and all.
func checkScatter(t *testing.T, r *Repulsion, block []float64, at int, b, k *shellPair, want []float64, tol float64) {
	t.Helper()
	for col := range b.unique {
		for c := range k.unique {
			f1, f2 := int(r.first[b.first+col]), int(r.second[b.first+col])
			f3, f4 := int(r.first[k.first+c]), int(r.second[k.first+c])
			a, bb := f1-r.offsets[b.i], f2-r.offsets[b.j]
			cc, d := f3-r.offsets[k.i], f4-r.offsets[k.j]
			w := want[((a*r.shells[b.j].Size()+bb)*r.shells[k.i].Size()+cc)*r.shells[k.j].Size()+d]
			if f1 == f2 {
				w /= 2
			}
			if f3 == f4 {
				w /= 2
			}
			if b == k {
				w /= 2
			}
			if got := block[(at+c)*b.unique+col]; !(math.Abs(got-w) <= tol) {
				t.Fatalf("block (%d %d|%d %d) = %.15g, want %.15g", f1, f2, f3, f4, got, w)
			}
		}
	}
}

// All classes through f by the general way, the s and p ones too.
func TestGeneralClassesMatchSlow(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	x := []float64{0, 0, 0, 0.9, -0.4, 0.8, -0.5, 0.9, 0.3, 0.2, 0.8, -0.7}
	const top = 3
	for la := range top + 1 {
		for lb := range la + 1 {
			for lc := range la + 1 {
				for ld := range lc + 1 {
					if lc == la && ld > lb {
						continue
					}
					shells := []Shell{randomShell(rng, 0, la, 1), randomShell(rng, 1, lb, 1),
						randomShell(rng, 2, lc, 1), randomShell(rng, 3, ld, 2)}
					compareGeneral(t, shells, x)
				}
			}
		}
	}
}

func compareGeneral(t *testing.T, shells []Shell, x []float64) {
	t.Helper()
	r := NewRepulsion(shells)
	r.general = true
	r.Place(x, 1e-14)
	find := func(i, j int) *shellPair {
		for k := range r.pairs {
			if p := &r.pairs[k]; p.i == i && p.j == j || p.i == j && p.j == i {
				return p
			}
		}
		t.Fatalf("no pair %d %d", i, j)
		return nil
	}
	b, k := find(0, 1), find(2, 3)
	got := append([]float64(nil), r.quartet.integrals(b, k)...)
	special := r.one(b, k) // the code for this class
	want := slowQuartet([4]*Shell{&shells[b.i], &shells[b.j], &shells[k.i], &shells[k.j]}, x)
	largest := 0.0
	for i, w := range want {
		largest = max(largest, math.Abs(w))
		if math.Abs(got[i]-w) > 1e-12 {
			t.Fatalf("l = %d %d %d %d, element %d: %.15g, slow %.15g", shells[b.i].L, shells[b.j].L,
				shells[k.i].L, shells[k.j].L, i, got[i], w)
		}
		if math.Abs(special[i]-w) > 1e-12 {
			t.Fatalf("l = %d %d %d %d, element %d: %.15g by its class, slow %.15g", shells[b.i].L, shells[b.j].L,
				shells[k.i].L, shells[k.j].L, i, special[i], w)
		}
	}
	if largest < 1e-4 {
		t.Errorf("l = %d %d %d %d: nothing but zeros (%g)", shells[0].L, shells[1].L, shells[2].L, shells[3].L, largest)
	}
}
