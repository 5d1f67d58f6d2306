//go:build linux

package hf

import (
	"fmt"
	"os"
	"strconv"
	"syscall"
	"testing"
	"time"

	"torsieve/internal/linalg"
)

// Each single point is reported with its processor time, its atoms and functions,
// and with the time of one product of matrices of 500 rows measured beside it: the
// ratio says how far a run is from what products alone would take, whatever the
// machine. The peak is that of the whole process: run one size at a time for it.
func BenchmarkEnergy(b *testing.B) {
	for _, c := range []struct {
		method, basis string
		atoms         []int
	}{
		{"hf-3c", "MINIX", []int{20, 30, 40, 50, 60}},
		{"hf", "def2-SVP", []int{20, 30, 40, 50}},
		{"hf", "def2-TZVP", []int{20, 30}},
		{"mp2", "def2-SVP", []int{20, 40}},
	} {
		for _, atoms := range c.atoms {
			b.Run(fmt.Sprintf("%s/%s/%d", c.method, c.basis, atoms), func(b *testing.B) {
				benchmarkEnergy(b, c.method, c.basis, atoms)
			})
		}
	}
}

func benchmarkEnergy(b *testing.B, method, basisName string, atoms int) {
	s := ofSize(b, atoms)
	o := Options{Method: method, Basis: basisName, MemoryBytes: memory()}
	surface, err := New(s.numbers(b), 0, 1, o)
	if err != nil {
		b.Fatal(err)
	}
	estimate, err := MemoryEstimate(s.numbers(b), o)
	if err != nil {
		b.Fatal(err)
	}
	product := productSeconds()
	iterations, began := 0, processorSeconds(b)
	for b.Loop() {
		p, err := surface.Energy(b.Context(), s.coordinates())
		if err != nil {
			b.Fatal(err)
		}
		iterations = p.Iterations
	}
	seconds := (processorSeconds(b) - began) / float64(b.N)
	product = min(product, productSeconds())
	b.ReportMetric(seconds, "cpu-s")
	b.ReportMetric(peakMegabytes(b), "peak-MB")
	b.ReportMetric(float64(estimate)/(1<<20), "estimate-MB")
	b.ReportMetric(seconds/product, "products500")
	b.ReportMetric(0.25/product, "GFLOP/s")
	if e, ok := surface.engine.(*fittedEngine); ok && surface.beyond == nil {
		b.ReportMetric(seconds/(product*4*floor(e, surface.occupied[0], iterations)), "floors")
	}
	b.ReportMetric(float64(atoms), "atoms")
	b.ReportMetric(float64(surface.offsets[len(surface.shells)]), "functions")
	b.ReportMetric(float64(iterations), "iterations")
}

// floor is the work of a fitted run that products of matrices alone would do, in
// 1e9 operations: N_aux^2 N(N+1)/2 for the fit, 3 N_aux N^2 n_occ for each exchange
// matrix, no pair left out. One product of 500 rows has 0.25 of them.
func floor(e *fittedEngine, occupied, iterations int) float64 {
	n, aux := float64(e.n), float64(e.aux)
	return (aux*aux*n*(n+1)/2 + 3*aux*n*n*float64(occupied)*float64(iterations+1)) / 1e9
}

// memory is what a run may hold: 8 GiB, or as many MB as the environment says.
func memory() int64 {
	if mb, err := strconv.ParseInt(os.Getenv("TORSIEVE_BENCH_MB"), 10, 64); err == nil {
		return mb << 20
	}
	return 8 << 30
}

// processorSeconds is the processor time of this process so far.
func processorSeconds(b *testing.B) float64 {
	var u syscall.Rusage
	if err := syscall.Getrusage(syscall.RUSAGE_SELF, &u); err != nil {
		b.Fatal(err)
	}
	return float64(u.Utime.Nano()+u.Stime.Nano()) / 1e9
}

// peakMegabytes is the largest memory that the process has had so far.
func peakMegabytes(b *testing.B) float64 {
	var u syscall.Rusage
	if err := syscall.Getrusage(syscall.RUSAGE_SELF, &u); err != nil {
		b.Fatal(err)
	}
	return float64(u.Maxrss) / 1024
}

// ofSize returns the benchmark molecule of that many atoms.
func ofSize(b *testing.B, atoms int) *referenceSystem {
	for _, s := range readReference(b, "benchmark-molecules.json.gz") {
		if len(s.Atoms) == atoms {
			return &s
		}
	}
	b.Fatalf("no molecule of %d atoms", atoms)
	return nil
}

// productSeconds is the time of one product of matrices of 500 rows, the best of
// several.
func productSeconds() float64 {
	const n = 500
	x, y := make([]float64, n*n), make([]float64, n*n)
	for i := range x {
		x[i] = float64(i%7) - 3
	}
	best := time.Hour
	for range 20 {
		start := time.Now()
		linalg.Gemm(false, false, n, n, n, 1, x, n, x, n, 0, y, n)
		best = min(best, time.Since(start))
	}
	return best.Seconds()
}
