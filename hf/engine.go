package hf

import (
	"context"
	"math"

	"torsieve/internal/linalg"
)

// A density is what the orbitals of each spin make up.
type density struct {
	each    float64     // electrons in an occupied orbital: 2 closed-shell, 1
	total   []float64   // of both spins, n by n
	spins   [][]float64 // of each set of orbitals, one electron an orbital
	factors []factor    // of the same
}

// A factor holds rows c_k over functions with density = sum of c_k c_k^T:
// occupied orbitals, if it is that of a determinant.
type factor struct {
	rows int
	c    []float64
}

// An engine makes Coulomb and exchange matrices of densities at one geometry
// after another. It owns its memory and serves one goroutine at a time.
type engine interface {
	// place takes the atoms to x (3N, bohr). Integrals below threshold (hartree)
	// are left out.
	place(ctx context.Context, x []float64, threshold float64) error
	// forget drops what is left of builds of an earlier run of densities.
	forget()
	// release gives up memory that the next place makes anew.
	release()
	// build writes the Coulomb matrix of d.total into j and the exchange matrix
	// of each of d.spins into ks, all n by n and symmetric.
	build(ctx context.Context, d *density, j []float64, ks [][]float64) error
}

// An exactEngine uses four-centre integrals. Where they do not all fit its
// memory, it is the change of the density since the last build that they are
// computed for.
type exactEngine struct {
	*fockBuilder
	increment *increment
}

func newExactEngine(f *fockBuilder) *exactEngine {
	return &exactEngine{fockBuilder: f, increment: newIncrement(f.n)}
}

func (e *exactEngine) place(ctx context.Context, x []float64, threshold float64) error {
	e.forget()
	return e.fockBuilder.place(ctx, x, threshold)
}

func (e *exactEngine) forget() { e.increment.forget() }

func (e *exactEngine) release() { e.values = nil }

func (e *exactEngine) build(ctx context.Context, d *density, j []float64, ks [][]float64) error {
	if e.complete() {
		return e.fockBuilder.build(ctx, d.total, d.spins, j, ks)
	}
	return e.increment.build(ctx, e.fockBuilder, d.total, d.spins, j, ks)
}

// factorise returns a factor of a density that has no negative occupations but
// by rounding: its eigenvectors times the roots of the eigenvalues.
func factorise(p []float64, n int) (factor, error) {
	values, vectors := make([]float64, n), append([]float64(nil), p...)
	if err := linalg.NewEigen(n).Solve(vectors, values, vectors); err != nil {
		return factor{}, err
	}
	f := factor{}
	for k, v := range values {
		if v < 1e-10 {
			continue
		}
		root := math.Sqrt(v)
		for _, c := range vectors[k*n : (k+1)*n] {
			f.c = append(f.c, root*c)
		}
		f.rows++
	}
	return f, nil
}
