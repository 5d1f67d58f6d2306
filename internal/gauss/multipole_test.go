package gauss

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"torsieve/internal/gradcheck"
)

// plainBlock computes what AxialPair.Block does from Cartesian sums, primitive
// by primitive: slow, and the judge of the fast way. v is the vector from b to
// a, b stands at the origin.
func plainBlock(a, b *Shell, v [3]float64) [][][Operators]float64 {
	out := make([][][Operators]float64, 2*a.L+1)
	for i, ha := range axialHarmonics[a.L] {
		out[i] = make([][Operators]float64, 2*b.L+1)
		for j, hb := range axialHarmonics[b.L] {
			for op, ho := range axialOperators {
				out[i][j][op] = plainIntegral(a, b, v, ha, ho, hb)
			}
		}
	}
	return out
}

func plainIntegral(a, b *Shell, v [3]float64, ha, ho, hb []monomial) float64 {
	r2 := v[0]*v[0] + v[1]*v[1] + v[2]*v[2]
	var sum float64
	for i, alpha := range a.Exps {
		for j, beta := range b.Exps {
			p := alpha + beta
			pre := a.Coefs[i] * b.Coefs[j] * math.Exp(-alpha*beta/p*r2) * math.Pow(math.Pi/p, 1.5)
			for _, ma := range ha {
				for _, mo := range ho {
					for _, mb := range hb {
						sum += pre * ma.coef * mo.coef * mb.coef *
							plainMoment(ma.i, mo.i+mb.i, v[0], alpha, beta) *
							plainMoment(ma.j, mo.j+mb.j, v[1], alpha, beta) *
							plainMoment(ma.k, mo.k+mb.k, v[2], alpha, beta)
					}
				}
			}
		}
	}
	return sum
}

// plainMoment is the mean of (x-A)^a x^b over the product Gaussian, by
// Gauss-Hermite quadrature with five points, exact up to power 9. Nodes and
// weights: Abramowitz, Stegun, Handbook of Mathematical Functions (1964), table 25.10.
func plainMoment(a, b int, xa, alpha, beta float64) float64 {
	nodes := [5]float64{-2.020182870456086, -0.958572464613819, 0, 0.958572464613819, 2.020182870456086}
	weights := [5]float64{1.995324205905e-2, 3.936193231522e-1, 9.453087204829e-1, 3.936193231522e-1, 1.995324205905e-2}
	p := alpha + beta
	var sum float64
	for k, u := range nodes {
		x := alpha*xa/p + u/math.Sqrt(p)
		sum += weights[k] * math.Pow(x-xa, float64(a)) * math.Pow(x, float64(b))
	}
	return sum / math.SqrtPi
}

// axialShells are one shell of each l with exponents of the size of GFN2's.
var axialShells = [3]Shell{
	{L: 0, Exps: []float64{2.1, 0.9, 0.27}, Coefs: []float64{0.21, 0.5, 0.4}},
	{L: 1, Exps: []float64{1.4, 0.35}, Coefs: []float64{0.31, -0.6}},
	{L: 2, Exps: []float64{0.8, 0.22}, Coefs: []float64{0.44, 0.25}},
}

// bonds are a general vector and those along which axes are degenerate.
var bonds = [][3]float64{{1.1, -0.7, 1.9}, {0, 0, 2.2}, {0, 0, -2.2}, {2.2, 0, 0}, {0, -2.2, 0}, {-3.1, 2.4, 0}, {4, 4, 4}}

func TestAxialBlocks(t *testing.T) {
	var s Scratch
	for la := range 3 {
		for lb := range 3 {
			a, b := &axialShells[la], &axialShells[lb]
			pair := NewAxialPair(a, b)
			for _, v := range bonds {
				want := plainBlock(a, b, v)
				stride := (2*lb + 1) * Operators
				got := make([]float64, (2*la+1)*stride)
				for k := range got {
					got[k] = math.NaN() // must be overwritten
				}
				f := NewFrame(v)
				value := make([]float64, pair.Size())
				pair.Integrals(&s, f.R, value, nil)
				pair.Block(&s, &f, value, got, stride)
				for i := range want {
					for j := range want[i] {
						for op, w := range want[i][j] {
							// the tabulated quadrature weights have 12 digits
							if g := got[i*stride+j*Operators+op]; !(math.Abs(g-w) < 2e-11) {
								t.Errorf("l %d %d, v %v: (%d %d) op %d: %.14g, plain %.14g", la, lb, v, i, j, op, g, w)
							}
						}
					}
				}
			}
		}
	}
}

func TestAxialSlope(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 1))
	var s Scratch
	for la := range 3 {
		for lb := range 3 {
			pair := NewAxialPair(&axialShells[la], &axialShells[lb])
			var w Weights
			for a := range 2*la + 1 {
				for b := range 2*lb + 1 {
					w.Overlap[WeightsRow*a+b], w.Density[WeightsRow*a+b] = rng.NormFloat64(), rng.NormFloat64()
				}
			}
			for op := range Operators {
				w.Operator[op] = rng.NormFloat64()
			}
			for _, v := range bonds {
				t.Run(fmt.Sprint(la, lb, v), func(t *testing.T) {
					gradcheck.Run(t, v[:], 1e-3, 1e-9, func(x, grad []float64) float64 {
						f := NewFrame([3]float64(x))
						if grad != nil {
							scratch := w // is turned
							scratch.ToBond(&f)
							value, slope := make([]float64, pair.Size()), make([]float64, pair.Size())
							pair.Integrals(&s, f.R, value, slope)
							g := pair.Slope(&f, value, slope, &scratch)
							copy(grad, g[:])
						}
						return weighted(pair, &s, &f, &w)
					})
				})
			}
		}
	}
}

// weighted is the sum whose derivative Slope gives.
func weighted(p *AxialPair, s *Scratch, f *Frame, w *Weights) float64 {
	stride := (2*p.lb + 1) * Operators
	x := make([]float64, (2*p.la+1)*stride)
	value := make([]float64, p.Size())
	p.Integrals(s, f.R, value, nil)
	p.Block(s, f, value, x, stride)
	var sum float64
	for a := range 2*p.la + 1 {
		for b := range 2*p.lb + 1 {
			at := x[a*stride+b*Operators:]
			sum += w.Overlap[WeightsRow*a+b] * at[0]
			for op := 1; op < Operators; op++ {
				sum += w.Density[WeightsRow*a+b] * w.Operator[op] * at[op]
			}
		}
	}
	return sum
}

// A normalised function at R = 0: unit overlap, no dipole, and the spread of a
// Gaussian, <x^2> = 1/(4 alpha) for s, three times that along x for p_x.
func TestAxialOneCentre(t *testing.T) {
	const alpha = 0.7
	for l := range 2 {
		norm := math.Pow(2*alpha/math.Pi, 0.75) * math.Pow(4*alpha, float64(l)/2)
		shell := Shell{L: l, Exps: []float64{alpha}, Coefs: []float64{norm}}
		x := OneCentre(&shell, &shell)
		last := x[len(x)-Operators:] // s, or p_z with itself
		if math.Abs(last[0]-1) > 1e-14 || last[3] != 0 {
			t.Errorf("l %d: overlap %.15g, dipole %g", l, last[0], last[3])
		}
		// z2 = zz - (xx+yy)/2: 0 for s; 3 - 1 times 1/(4 alpha) for p_z
		if want := 2 * float64(l) / (4 * alpha); math.Abs(last[6]-want) > 1e-14 {
			t.Errorf("l %d: quadrupole %.15g, want %.15g", l, last[6], want)
		}
	}
}

func BenchmarkAxialBlock(b *testing.B) {
	four := func(l int) Shell {
		return Shell{L: l, Exps: []float64{2.1, 0.9, 0.5, 0.27}, Coefs: []float64{0.2, 0.3, 0.5, 0.4}}
	}
	s0, p0 := four(0), four(1)
	for _, tc := range []struct {
		name string
		a, b *Shell
	}{{"ss", &s0, &s0}, {"sp", &s0, &p0}, {"pp", &p0, &p0}} {
		b.Run("shells="+tc.name, func(b *testing.B) {
			pair := NewAxialPair(tc.a, tc.b)
			var s Scratch
			dst := make([]float64, 9*Operators)
			f := NewFrame(bonds[0])
			value := make([]float64, pair.Size())
			b.ReportAllocs()
			for b.Loop() {
				pair.Integrals(&s, f.R, value, nil)
				pair.Block(&s, &f, value, dst, (2*tc.b.L+1)*Operators)
			}
		})
	}
}
