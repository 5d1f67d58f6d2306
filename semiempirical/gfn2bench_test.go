package semiempirical

import "testing"

// Times of one energy and of one energy with gradient from the neutral guess,
// and of a gradient that starts from the charges of the same geometry.
func BenchmarkSurface(b *testing.B) {
	for _, name := range []string{"glycine", "pdb-1pa9", "csd-SLFNMF02", "csd-VIMYUL", "pdb-1d4l"} {
		m := named(b, name)
		x, grad := m.coordinates(), make([]float64, len(m.X))
		s := m.surface(b, 1)
		run := func(kind string, cold bool, f func() (int, error)) {
			b.Run("molecule="+name+"/"+kind, func(b *testing.B) {
				b.ReportAllocs()
				cycles := 0
				for b.Loop() {
					if cold {
						s.Reset()
					}
					n, err := f()
					if err != nil {
						b.Fatal(err)
					}
					cycles = n
				}
				b.ReportMetric(float64(cycles), "cycles")
				b.ReportMetric(float64(len(m.Elements)), "atoms")
			})
		}
		energy := func() (int, error) {
			p, err := s.Energy(b.Context(), x)
			return p.Iterations, err
		}
		gradient := func() (int, error) {
			p, err := s.Gradient(b.Context(), grad, x)
			return p.Iterations, err
		}
		run("energy", true, energy)
		run("gradient", true, gradient)
		run("warm-gradient", false, gradient)
	}
}

func BenchmarkNew(b *testing.B) {
	m := named(b, "csd-VIMYUL")
	for b.Loop() {
		m.surface(b, 1)
	}
}
