package linalg

import (
	"math"
	"math/rand/v2"
	"testing"
)

// everyKernel runs a test with each kernel that this processor has.
func everyKernel(t *testing.T, test func(t *testing.T)) {
	t.Helper()
	for _, k := range available() {
		t.Run("kernel="+k.name, func(t *testing.T) {
			defer func(before *kernel) { active = before }(active)
			active = k
			test(t)
		})
	}
}

func randomMatrix(r *rand.Rand, n int) []float64 {
	x := make([]float64, n)
	for i := range x {
		x[i] = r.NormFloat64()
	}
	return x
}

func randomSymmetric(r *rand.Rand, n int) []float64 {
	a := randomMatrix(r, n*n)
	for i := range n {
		for j := range i {
			a[j*n+i] = a[i*n+j]
		}
	}
	return a
}

func newRand(seed uint64) *rand.Rand { return rand.New(rand.NewPCG(seed, 1)) }

func largest(x []float64) float64 {
	l := 0.0
	for _, v := range x {
		l = math.Max(l, math.Abs(v))
		if math.IsNaN(v) {
			return v
		}
	}
	return l
}

// poison fills scratch memory with what must not get into a result.
func poison(scratch ...[]float64) {
	for _, s := range scratch {
		s = s[:cap(s)]
		for i := range s {
			s[i] = math.NaN()
		}
	}
}

func TestKernelNames(t *testing.T) {
	defer func(before *kernel) { active = before }(active)
	if Kernel() != available()[0].name {
		t.Errorf("kernel %s, want the first of those that the processor has", Kernel())
	}
	UsePortable()
	if Kernel() != "portable" {
		t.Errorf("kernel %s after UsePortable", Kernel())
	}
}
