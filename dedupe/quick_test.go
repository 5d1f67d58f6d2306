package dedupe

import (
	"math"
	"math/rand/v2"
	"testing"

	"torsieve/internal/geom"
)

func randomPoints(n int, seed uint64) []float64 {
	r := rand.New(rand.NewPCG(seed, 7))
	x := make([]float64, 3*n)
	for i := range x {
		x[i] = 6*r.Float64() - 3
	}
	return x
}

func identity(n int) []int {
	p := make([]int, n)
	for i := range p {
		p[i] = i
	}
	return p
}

// distances returns the RMSD of a and the renumbered b as they are, and mirrored.
func distances(a, b cloud, p []int) (same, mirrored float64) {
	var m moments
	for k, q := range p {
		m.add(a.x, b.x, k, q)
	}
	start := (a.g + b.g) / 2
	rms := func(mirrored bool) float64 {
		return math.Sqrt(math.Max(0, 2*(start-m.overlap(mirrored, start, math.Inf(-1)))) / float64(len(p)))
	}
	return rms(false), rms(true)
}

// The quick way meets the plain one, which has outside values of its own.
func TestDistancesMatchSuperposition(t *testing.T) {
	flat := randomPoints(9, 5)
	for i := 2; i < len(flat); i += 3 {
		flat[i] = 0
	}
	for _, c := range []struct {
		name string
		a, b []float64
	}{
		{"crooked", randomPoints(12, 1), randomPoints(12, 2)},
		{"two points", randomPoints(2, 1), randomPoints(2, 2)},
		{"flat onto crooked", flat, randomPoints(9, 3)},
		{"flat onto itself", flat, append([]float64(nil), flat...)},
		{"one point", []float64{1, 2, 3}, []float64{4, 5, 6}},
	} {
		same, mirrored := geom.RMSD(c.a, c.b)
		a, b := newCloud(append([]float64(nil), c.a...)), newCloud(append([]float64(nil), c.b...))
		gotSame, gotMirrored := distances(a, b, identity(len(c.a)/3))
		if math.Abs(gotSame-same) > 2e-5 || math.Abs(gotMirrored-mirrored) > 2e-5 {
			t.Errorf("%s: %g and %g, want %g and %g", c.name, gotSame, gotMirrored, same, mirrored)
		}
	}
}

// The two sets and their RMSD by singular value decomposition are those of
// testdata/reference/uff/generation_checks.json.
func TestReferenceDistances(t *testing.T) {
	a := newCloud([]float64{0.4571, -1.56, 1.1257, 1.4108, -2.9266, -1.9533, 0.1918, -0.4744, -0.0252,
		-1.2796, 1.3191, 1.1667, 0.099, 1.6909, 0.7013, -1.2889, 0.5531, -1.4383})
	b := newCloud([]float64{3.0179, -2.6009, 0.4772, 2.2964, -2.4749, -2.9846, 1.3172, -2.1899, 0.2666,
		0.2772, -2.1527, 2.5865, 0.71, -0.9543, 1.7508, -0.9626, -2.5862, 0.2361})
	same, mirrored := distances(a, b, identity(6))
	if math.Abs(same-0.15218016) > 1e-7 || math.Abs(mirrored-1.01530175) > 1e-7 {
		t.Errorf("%.8f and mirrored %.8f, want 0.15218016 and 1.01530175", same, mirrored)
	}
}

func BenchmarkDistances(b *testing.B) {
	x, y, p := newCloud(randomPoints(30, 1)), newCloud(randomPoints(30, 2)), identity(30)
	for b.Loop() {
		distances(x, y, p)
	}
}
