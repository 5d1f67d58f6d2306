package linalg

import "math"

// Eigen solves symmetric eigenproblems of one size. It owns its scratch memory
// and serves one goroutine at a time; nothing is allocated after the first
// solution.
type Eigen struct {
	n, ld     int
	reduction *reduction
	z         []float64 // n rows of ld numbers
	order     []int
	rotations *rotations
}

// NewEigen prepares for matrices of n rows.
func NewEigen(n int) *Eigen {
	ld := paddedRow(n)
	return &Eigen{
		n: n, ld: ld,
		reduction: newReduction(n),
		z:         make([]float64, n*ld),
		order:     make([]int, n),
		rotations: newRotations(n),
	}
}

// paddedRow is the length of a row in memory for n numbers: whole strips, and
// an odd number of cache lines, lest columns of different rows compete for the
// same places of the cache.
func paddedRow(n int) int { return roundUp(n, stripWidth) + 8 }

// Solve writes the eigenvalues of the symmetric matrix a into w, in rising
// order, and the eigenvectors into the rows of z: z[k*n:(k+1)*n] belongs to
// w[k] and has length one. a and z hold n*n numbers; only the lower triangle of
// a is read, and a may be overwritten: z may be a. The sign of a vector is
// arbitrary. Errors are ErrNotFinite and ErrNotConverged.
func (e *Eigen) Solve(a, w, z []float64) error {
	n := e.n
	if len(a) != n*n || len(z) != n*n || len(w) != n {
		panic("linalg: eigenproblem of the wrong size")
	}
	if n == 0 {
		return nil
	}
	exponent, err := magnitude(a, n)
	if err != nil {
		return err
	}
	r := e.reduction
	r.load(a, math.Ldexp(1, -exponent))
	r.run()
	r.transformation(e.z)
	if err := e.rotations.diagonalise(r.d, r.e, e.z, e.ld, n); err != nil {
		return err
	}
	e.sort(r.d)
	for k, from := range e.order {
		w[k] = math.Ldexp(r.d[from], exponent)
		copy(z[k*n:(k+1)*n], e.z[from*e.ld:])
	}
	return nil
}

// magnitude returns the power of two of the largest number in the lower
// triangle of a. Dividing by it makes squares safe from overflow and loses
// nothing.
func magnitude(a []float64, n int) (exponent int, err error) {
	largest, poisoned := 0.0, 0.0
	for i := range n {
		for _, v := range a[i*n : i*n+i+1] {
			if x := math.Abs(v); x > largest {
				largest = x
			}
			poisoned += 0 * v // NaN for NaN and infinity
		}
	}
	if poisoned != 0 {
		return 0, ErrNotFinite
	}
	_, exponent = math.Frexp(largest)
	return min(max(exponent, -1000), 1000), nil
}

// sort fills order with the indices of d from the lowest up. Insertion is fast
// enough, for d is almost sorted.
func (e *Eigen) sort(d []float64) {
	for k := range e.order {
		i := k
		for ; i > 0 && d[e.order[i-1]] > d[k]; i-- {
			e.order[i] = e.order[i-1]
		}
		e.order[i] = k
	}
}
