package gauss

import (
	"math"
	"math/rand/v2"
	"testing"

	"torsieve/internal/linalg"
)

// Every kernel that this processor runs gives what portable Go gives, for rows of
// all lengths that chunks have.
func TestLaneKernels(t *testing.T) {
	rng := rand.New(rand.NewPCG(11, 12))
	random := func(n int) []float64 {
		x := make([]float64, n)
		for i := range x {
			x[i] = rng.NormFloat64()
		}
		return x
	}
	same := func(what string, got, want []float64) {
		t.Helper()
		for i := range want {
			if math.Abs(got[i]-want[i]) > 1e-12 {
				t.Fatalf("%s: number %d is %g, want %g", what, i, got[i], want[i])
			}
		}
	}
	for _, name := range map[string][]string{"avx512": {"avx512", "avx2"}, "avx2": {"avx2"}}[linalg.Kernel()] {
		k := lanesFor(name)
		for stride := 8; stride <= maxChunk; stride += 8 {
			steps := hermiteSteps()[1:hermiteCount(5)]
			cur, x := random(hermiteCount(4)*stride), random(3*stride)
			got, want := make([]float64, len(steps)*stride), make([]float64, len(steps)*stride)
			raiseGo(want, cur, x, steps, stride)
			k.raise(got, cur, x, steps, stride)
			same(name+" raise", got, want)

			h := laneHarmonics(2, 3)
			src := random(hermiteCount(5) * stride)
			got, want = make([]float64, len(h.counts)*stride), make([]float64, len(h.counts)*stride)
			combineGo(want, src, h.terms, h.counts, stride)
			k.combine(got, src, h.terms, h.counts, stride)
			same(name+" combine", got, want)
		}
	}
}

// The Boys functions of lanes meet the general one up to the highest order, near,
// far, and on both sides of the end of the table.
func TestLaneBoys(t *testing.T) {
	const top = 12
	ch := auxiliaryChunk{}
	for range 64 {
		ch.q, ch.c = append(ch.q, 0.7), append(ch.c, 1)
	}
	ch.stride = len(ch.q)
	ch.centres = make([]float64, 3*ch.stride)
	for k := range 64 {
		ch.centres[k] = -0.17 * float64(k)
	}
	p := primitive{p: 1.3, c: 1}
	g, d := make([]float64, (top+1)*ch.stride), make([]float64, 3*ch.stride)
	rho := p.p * 0.7 / (p.p + 0.7)
	var f [top + 1]float64
	for order := range top + 1 {
		laneBoys(g, d, &p, &ch, order)
		for k := range 64 {
			x := 0.17 * float64(k)
			Boys(f[:order+1], rho*x*x)
			scale := 1 / math.Sqrt(p.p+0.7)
			for m := range order + 1 {
				if got := g[m*ch.stride+k] / scale; math.Abs(got-f[m]) > 5e-15 {
					t.Errorf("order %d of %d at %g: %.17g, want %.17g", m, order, rho*x*x, got, f[m])
				}
				scale *= -2 * rho
			}
		}
	}
}
