package thermo

import (
	"context"
	"math"
	"testing"

	"torsieve/internal/geom"
	"torsieve/internal/units"
)

// springs is a molecule held together by springs between atoms, k(r-r0)^2/2,
// with r0 the distances of the geometry that it was made from: a minimum.
type springs struct {
	pairs [][2]int
	k, r0 []float64
}

func newSprings(x []float64, pairs [][2]int, k ...float64) *springs {
	s := &springs{pairs: pairs, k: k}
	for _, p := range pairs {
		s.r0 = append(s.r0, geom.Distance(x, p[0], p[1]))
	}
	return s
}

func (s *springs) Gradient(_ context.Context, grad, x []float64) (float64, error) {
	clear(grad)
	var energy float64
	for n, p := range s.pairs {
		d := geom.Distance(x, p[0], p[1]) - s.r0[n]
		energy += s.k[n] * d * d / 2
		geom.AddDistance(grad, x, p[0], p[1], s.k[n]*d)
	}
	return energy, nil
}

// tetrahedron is a crooked molecule of four atoms with six springs.
func tetrahedron() (x, masses []float64, s *springs) {
	x = []float64{0, 0, 0, 2.1, 0.2, -0.1, -0.4, 2.3, 0.3, 0.5, 0.6, 1.9}
	masses = Masses([]int{6, 1, 8, 17}, nil)
	s = newSprings(x, [][2]int{{0, 1}, {0, 2}, {0, 3}, {1, 2}, {1, 3}, {2, 3}}, 0.3, 0.5, 0.2, 0.05, 0.02, 0.1)
	return x, masses, s
}

func mustModes(t *testing.T, s *springs, x, masses []float64) Modes {
	t.Helper()
	h, err := Differences(t.Context(), s, x, 1e-3)
	if err != nil {
		t.Fatal(err)
	}
	m, err := NormalModes(h.Matrix, x, masses)
	if err != nil {
		t.Fatal(err)
	}
	return m
}

// near fails where got is further than tol from want.
func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s: %.10g, want %.10g within %.1g", what, got, want, tol)
	}
}

const wavenumber = units.Wavenumber
