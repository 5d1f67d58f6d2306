package hf

import (
	"math"
	"math/rand/v2"
	"testing"

	"torsieve/internal/gauss"
)

// randomSymmetric fills an n by n matrix.
func randomSymmetric(rng *rand.Rand, n int) []float64 {
	m := make([]float64, n*n)
	for i := range n {
		for j := range i + 1 {
			v := rng.Float64() - 0.5
			m[i*n+j], m[j*n+i] = v, v
		}
	}
	return m
}

// Coulomb and exchange matrices of random densities are what the plain sums
// over all n^4 integrals give, for shells of every kind, one spin and two; and
// what is left in scratch memory does not matter.
func TestBuildMatchesPlainSums(t *testing.T) {
	s := find(t, "CH3OH")
	for _, basisName := range []string{"MINIX", "6-31G*", "def2-SVP"} {
		surface, err := New(s.numbers(t), 0, 1, Options{Method: "hf", Basis: basisName, TwoElectron: "exact"})
		if err != nil {
			t.Fatal(err)
		}
		f, x := exactOf(t, surface), s.coordinates()
		n := f.n
		all := plainIntegrals(surface.shells, x, n)
		rng := rand.New(rand.NewPCG(7, 8))
		total := randomSymmetric(rng, n)
		spins := [][]float64{randomSymmetric(rng, n), randomSymmetric(rng, n)}
		for _, budget := range []int64{1 << 30, 0} {
			f.budget = budget
			if err := f.place(t.Context(), x, 1e-13); err != nil {
				t.Fatal(err)
			}
			j, ks := make([]float64, n*n), [][]float64{make([]float64, n*n), make([]float64, n*n)}
			for _, scratch := range [][]float64{f.packed, f.coulomb, f.columns, f.near.p, f.near.k, j, ks[0], ks[1]} {
				for i := range scratch {
					scratch[i] = math.NaN()
				}
			}
			if err := f.build(t.Context(), total, spins, j, ks); err != nil {
				t.Fatal(err)
			}
			for a := range n {
				for b := range n {
					var wantJ float64
					var wantK [2]float64
					for c := range n {
						for d := range n {
							wantJ += total[c*n+d] * all[((a*n+b)*n+c)*n+d]
							for s := range spins {
								wantK[s] += spins[s][c*n+d] * all[((a*n+c)*n+b)*n+d]
							}
						}
					}
					if math.Abs(j[a*n+b]-wantJ) > 1e-10 {
						t.Fatalf("%s: J %d,%d = %.12f, want %.12f", basisName, a, b, j[a*n+b], wantJ)
					}
					for s := range spins {
						if math.Abs(ks[s][a*n+b]-wantK[s]) > 1e-10 {
							t.Fatalf("%s: K %d,%d = %.12f, want %.12f", basisName, a, b, ks[s][a*n+b], wantK[s])
						}
					}
				}
			}
		}
	}
}

// exactOf returns the builder of a surface with four-centre integrals.
func exactOf(t testing.TB, s *Surface) *fockBuilder {
	t.Helper()
	e, ok := s.engine.(*exactEngine)
	if !ok {
		t.Fatalf("engine %T, want an exact one", s.engine)
	}
	return e.fockBuilder
}

// plainIntegrals lists all n^4 integrals.
func plainIntegrals(shells []gauss.Shell, x []float64, n int) []float64 {
	all := make([]float64, n*n*n*n)
	r := gauss.NewRepulsion(shells)
	r.Place(x, 1e-14)
	first, second := r.Functions()
	for bra := range r.Pairs() {
		spans, rows := r.Rows(nil, bra)
		lo, hi := r.Columns(bra)
		v := make([]float64, rows*(hi-lo))
		r.Block(v, bra, nil)
		at := 0
		for _, s := range spans {
			for k := s.Begin; k < s.End; k++ {
				for c := lo; c < hi; c++ {
					a, b, c, d := int(first[c]), int(second[c]), int(first[k]), int(second[k])
					for _, p := range [][4]int{{a, b, c, d}, {b, a, c, d}, {a, b, d, c}, {b, a, d, c}, {c, d, a, b}, {d, c, a, b}, {c, d, b, a}, {d, c, b, a}} {
						all[((p[0]*n+p[1])*n+p[2])*n+p[3]] += v[at]
					}
					at++
				}
			}
		}
	}
	return all
}

// A build allocates nothing where the integrals are kept.
func TestBuildAllocations(t *testing.T) {
	s := find(t, "CH3OH")
	surface, err := New(s.numbers(t), 0, 1, Options{})
	if err != nil {
		t.Fatal(err)
	}
	f := exactOf(t, surface)
	if err := f.place(t.Context(), s.coordinates(), 1e-10); err != nil {
		t.Fatal(err)
	}
	p := randomSymmetric(rand.New(rand.NewPCG(1, 1)), f.n)
	j, k, spins := make([]float64, len(p)), [][]float64{make([]float64, len(p))}, [][]float64{p}
	build := func() {
		if err := f.build(t.Context(), p, spins, j, k); err != nil {
			t.Fatal(err)
		}
	}
	build()
	if n := testing.AllocsPerRun(5, build); n > 0 {
		t.Errorf("%g allocations a build", n)
	}
}

// benchmarkCase is a molecule of 33 atoms (C, H, N, O) in MINIX.
func benchmarkCase(b *testing.B) (*fockBuilder, []float64) {
	s := readReference(b, "drug-like.json")[3]
	surface, err := New(s.numbers(b), s.Charge, 1, Options{})
	if err != nil {
		b.Fatal(err)
	}
	return exactOf(b, surface), s.coordinates()
}

func BenchmarkIntegrals(b *testing.B) {
	f, x := benchmarkCase(b)
	for b.Loop() {
		if err := f.place(b.Context(), x, integralCut); err != nil {
			b.Fatal(err)
		}
	}
	b.ReportMetric(float64(len(f.values))*float64(b.N)/b.Elapsed().Seconds(), "integrals/s")
}

func BenchmarkBuild(b *testing.B) {
	f, x := benchmarkCase(b)
	if err := f.place(b.Context(), x, integralCut); err != nil {
		b.Fatal(err)
	}
	p := randomSymmetric(rand.New(rand.NewPCG(1, 1)), f.n)
	j, k := make([]float64, len(p)), [][]float64{make([]float64, len(p))}
	b.ReportAllocs()
	for b.Loop() {
		if err := f.build(b.Context(), p, [][]float64{p}, j, k); err != nil {
			b.Fatal(err)
		}
	}
	b.ReportMetric(float64(len(f.values))*float64(b.N)/b.Elapsed().Seconds(), "integrals/s")
}
