package semiempirical

import (
	"context"
	"fmt"
	"slices"
	"testing"
	"time"

	"torsieve/internal/linalg"
	"torsieve/internal/relax"
)

// benchmarked are the molecules whose times are in BENCHMARKS.md, by size.
var benchmarked = []string{
	"glycine", "pdb-1pa9", "csd-SLFNMF02", "csd-BEHHOL10", "csd-VIMYUL",
	"pdb-2h42", "pdb-1kzk", "pdb-1d4l", "cluster-122", "cluster-200",
}

// Times of one energy with gradient: in the gas and in water; with the accuracy
// of single points (1) and of relaxations (0.1); with a new surface, cold (from
// the neutral guess) and warm, at the steps of a relaxation one after the
// other. Metrics are medians: ms, and products, which is ms over the time of a
// product of two 500 x 500 matrices on the same core, before and after.
func BenchmarkSurface(b *testing.B) {
	for _, name := range benchmarked {
		m := named(b, name)
		for _, around := range []string{"none", "water"} {
			var path [][]float64 // made when it is wanted
			for _, accuracy := range []float64{1, 0.1} {
				for _, start := range []string{"new", "cold", "warm"} {
					b.Run(fmt.Sprintf("molecule=%s/solvent=%s/accuracy=%g/start=%s", name, around, accuracy, start), func(b *testing.B) {
						if start == "warm" && path == nil {
							path = relaxationPath(b, m, around)
						}
						t := timing{molecule: m, solvent: around, accuracy: accuracy, path: path}
						if start != "warm" {
							t.path = [][]float64{m.coordinates()}
						}
						t.run(b, start)
					})
				}
			}
		}
	}
}

// A timing is a molecule and how it is computed.
type timing struct {
	molecule *referenceMolecule
	solvent  string
	accuracy float64
	path     [][]float64 // geometries of a relaxation
	surface  *Surface
	grad     []float64
}

func (t *timing) renew(b *testing.B) {
	b.Helper()
	m := t.molecule
	s, err := New(m.numbers(), m.Charge, m.Unpaired+1, Options{Accuracy: t.accuracy, Solvent: t.solvent})
	if err != nil {
		b.Fatal(err)
	}
	t.surface, t.grad = s, make([]float64, len(m.X))
}

func (t *timing) gradient(b *testing.B, step int) (cycles int) {
	b.Helper()
	p, err := t.surface.Gradient(b.Context(), t.grad, t.path[step])
	if err != nil {
		b.Fatal(err)
	}
	return p.Iterations
}

// run measures single points or, warm, whole relaxations, of which each step
// counts for the medians.
func (t *timing) run(b *testing.B, start string) {
	t.renew(b)
	t.gradient(b, 0)
	var times []time.Duration
	var cycles []int
	b.ReportAllocs()
	products := productTimes(nil)
	for b.Loop() {
		first := 0
		if start == "warm" {
			b.StopTimer()
			t.surface.Reset()
			t.gradient(b, 0)
			first = 1
			b.StartTimer()
		}
		for step := first; step < len(t.path); step++ {
			began := time.Now()
			switch start {
			case "new":
				t.renew(b)
			case "cold":
				t.surface.Reset()
			}
			cycles = append(cycles, t.gradient(b, step))
			times = append(times, time.Since(began))
		}
	}
	products = productTimes(products)
	b.ReportMetric(float64(len(t.molecule.Elements)), "atoms")
	b.ReportMetric(float64(median(cycles)), "cycles")
	b.ReportMetric(float64(median(times).Nanoseconds())/1e6, "ms")
	b.ReportMetric(float64(median(times))/float64(median(products)), "products")
}

// relaxationPath returns the geometries at which a relaxation asks for
// gradients, from the reference's geometry on.
func relaxationPath(b *testing.B, m *referenceMolecule, around string) [][]float64 {
	b.Helper()
	t := timing{molecule: m, solvent: around, accuracy: 0.1}
	t.renew(b)
	var path [][]float64
	x := m.coordinates()
	_, err := relax.Minimise(b.Context(), relax.Func(func(ctx context.Context, grad, x []float64) (float64, error) {
		path = append(path, slices.Clone(x))
		p, err := t.surface.Gradient(ctx, grad, x)
		return p.Energy, err
	}), x, relax.Settings{MaxGradients: 16, RMSGradient: 1e-9, Numbers: m.numbers()})
	if err != nil {
		b.Fatal(err)
	}
	return path
}

// productTimes appends the times of products of 500 x 500 matrices.
func productTimes(times []time.Duration) []time.Duration {
	const n = 500
	x, y, z := make([]float64, n*n), make([]float64, n*n), make([]float64, n*n)
	for i := range x {
		x[i], y[i] = float64(i%7)-3, float64(i%11)-5
	}
	var work linalg.Workspace
	for range 9 {
		began := time.Now()
		work.Gemm(false, false, n, n, n, 1, x, n, y, n, 0, z, n)
		times = append(times, time.Since(began))
	}
	return times
}

func median[T int | time.Duration](x []T) T {
	x = slices.Clone(x)
	slices.Sort(x)
	return x[len(x)/2]
}

func BenchmarkNew(b *testing.B) {
	for _, name := range benchmarked {
		m := named(b, name)
		b.Run(fmt.Sprintf("atoms=%d", len(m.Elements)), func(b *testing.B) {
			for b.Loop() {
				m.surface(b, 1)
			}
		})
	}
}
