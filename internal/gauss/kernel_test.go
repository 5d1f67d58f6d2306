package gauss

import (
	"math"
	"math/rand/v2"
	"testing"

	"torsieve/internal/linalg"
)

// Every kernel that this processor runs gives what portable Go gives, at near
// and far distances, at zero, and on both sides of the end of the table.
func TestPotentialKernels(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 6))
	var want, got batch
	fill := func(b *batch) {
		b.lanes = maxLanes - 3
		for k := range b.lanes {
			b.q[k] = math.Exp(rng.Float64()*8 - 2)
			b.c[k] = rng.Float64() - 0.5
			scale := math.Exp(rng.Float64()*6 - 3)
			b.x[k], b.y[k], b.z[k] = scale*rng.Float64(), -scale*rng.Float64(), scale*rng.Float64()
		}
		b.x[0], b.y[0], b.z[0] = 0.5, -0.2, 0.1 // the bra's centre
	}
	names := map[string][]string{"avx512": {"avx512", "avx2"}, "avx2": {"avx2"}}[linalg.Kernel()]
	for _, name := range names {
		for trial := range 40 {
			fill(&want)
			got = want
			p := primitive{p: math.Exp(rng.Float64()*8 - 2), x: 0.5, y: -0.2, z: 0.1, c: 1.7}
			for k := range 8 { // t at the end of the table, to either side
				q := want.q[k+8]
				r := math.Sqrt((fastEnd + 0.01*float64(k-4)) * (p.p + q) / (p.p * q))
				want.x[k+8], want.y[k+8], want.z[k+8] = p.x+r, p.y, p.z
				got.x[k+8], got.y[k+8], got.z[k+8] = want.x[k+8], want.y[k+8], want.z[k+8]
			}
			top := trial % (fastTop + 1)
			potentialsGo(&want, &p, top)
			potentialsFor(name)(&got, &p, top)
			for k := range want.lanes {
				if got.dx[k] != want.dx[k] || got.dy[k] != want.dy[k] || got.dz[k] != want.dz[k] {
					t.Fatalf("%s: distance of lane %d differs", name, k)
				}
				for m := range top + 1 {
					g, w := got.g[m][k], want.g[m][k]
					// what is at stake is a share of the value at distance zero
					rho := p.p * want.q[k] / (p.p + want.q[k])
					scale := math.Abs(p.c*want.c[k]) / math.Sqrt(p.p+want.q[k]) * math.Pow(2*rho, float64(m))
					if !(math.Abs(g-w) <= 1e-14*scale) {
						t.Fatalf("%s: order %d of %d, lane %d: %.17g, want %.17g", name, m, top, k, g, w)
					}
				}
			}
		}
	}
}

// The orders of portable Go meet the general Boys function.
func TestPotentialsMatchBoys(t *testing.T) {
	var b, high batch
	b.lanes = maxLanes
	for k := range b.lanes {
		b.q[k], b.c[k], b.x[k] = 0.7, 1, 0.06*float64(k)
	}
	high = b
	p := primitive{p: 1.3, c: 1}
	for top := range fastTop + 1 {
		potentialsGo(&b, &p, top)
		high.highPotentials(&p, top)
		for m := range top + 1 {
			for k := range b.lanes {
				if d := b.g[m][k] - high.g[m][k]; math.Abs(d) > 3e-15 {
					t.Errorf("order %d of %d at distance %g: off by %.1e", m, top, b.x[k], d)
				}
			}
		}
	}
}
