// Package linalg multiplies matrices and solves symmetric eigenproblems, fast
// enough for self-consistency loops: with AVX-512 or AVX2 where the processor
// has them, and in portable Go elsewhere.
//
// Matrices are stored row by row. Sets of vectors, eigenvectors above all, are
// stored one vector a row. Results differ between kernels in the last digits,
// and are the same for the same kernel.
package linalg

// A kernel is one way to run the inner loops.
type kernel struct {
	name string
	gemm tile // micro is nil where gonum multiplies
	// rotate applies a chain of plane rotations; see rotateGo.
	rotate func(x []float64, start, stride int, cs []float64)
	// update is one step through four rows of a reduction; see updateGo.
	update func(r *reduction, i int)
}

var portable = kernel{name: "portable", rotate: rotateGo, update: updateGo}

// active is chosen when the program starts; only UsePortable and tests change
// it.
var active = best()

// best returns the fastest kernel that the processor has.
func best() *kernel { return available()[0] }

// Kernel names the kernel in use: "avx512", "avx2" or "portable".
func Kernel() string { return active.name }

// UsePortable switches to plain Go, whatever the processor has. Call it before
// anything else of this package, from one goroutine.
func UsePortable() { active = &portable }
