package scf

import "math"

// A DIIS proposes the combination of the last states whose residuals, combined
// alike, are smallest. The coefficients sum to one.
//
// Residuals of different iterations differ by orders of magnitude, so their
// matrix of inner products is scaled to a unit diagonal before it is solved,
// and as long as it is singular to rounding the oldest iteration is dropped.
//
// Source: P. Pulay, J. Comput. Chem. 1982, 3, 556, doi:10.1002/jcc.540030413.
type DIIS struct {
	keep      int
	states    [][]float64 // oldest first
	residuals [][]float64
	products  [][]float64 // of residuals k and l <= k
	state     []float64   // what Next returns
	matrix    []float64
	weights   []float64
}

var _ Mixer = (*DIIS)(nil)

// NewDIIS returns a mixer that remembers keep iterations of states of n numbers.
func NewDIIS(n, keep int) *DIIS {
	if keep < 1 {
		panic("scf: DIIS that remembers nothing")
	}
	return &DIIS{keep: keep, state: make([]float64, n), matrix: make([]float64, keep*keep), weights: make([]float64, keep)}
}

// Restart forgets all iterations.
func (d *DIIS) Restart() {
	d.states, d.residuals, d.products = d.states[:0], d.residuals[:0], d.products[:0]
}

// Next implements Mixer. The states combined are those that came out of the
// steps; residuals may be of any length, but all of the same.
func (d *DIIS) Next(_ []float64, out Output) []float64 {
	if len(out.State) != len(d.state) {
		panic("scf: DIIS is for another length")
	}
	if len(d.states) == d.keep {
		d.dropOldest()
	}
	d.remember(out)
	for !d.solve() {
		d.dropOldest()
	}
	clear(d.state)
	for k, s := range d.states {
		w := d.weights[k]
		for i, v := range s {
			d.state[i] += w * v
		}
	}
	return d.state
}

// remember appends a copy of the iteration, in memory that was used before
// where there is some.
func (d *DIIS) remember(out Output) {
	k := len(d.states)
	if cap(d.states) == k || d.states[:k+1][k] == nil {
		d.states = append(d.states, make([]float64, len(out.State)))
		d.residuals = append(d.residuals, make([]float64, len(out.Residual)))
		d.products = append(d.products, make([]float64, d.keep))
	} else {
		d.states, d.residuals, d.products = d.states[:k+1], d.residuals[:k+1], d.products[:k+1]
	}
	copy(d.states[k], out.State)
	copy(d.residuals[k], out.Residual)
	for l := range k + 1 {
		d.products[k][l] = inner(d.residuals[k], d.residuals[l])
	}
}

// dropOldest moves the oldest slices behind the newest, to be used again.
func (d *DIIS) dropOldest() {
	n := len(d.states) - 1
	state, residual, products := d.states[0], d.residuals[0], d.products[0]
	copy(d.states, d.states[1:])
	copy(d.residuals, d.residuals[1:])
	copy(d.products, d.products[1:])
	d.states[n], d.residuals[n], d.products[n] = state, residual, products
	for _, row := range d.products[:n] {
		copy(row, row[1:])
	}
	d.states, d.residuals, d.products = d.states[:n], d.residuals[:n], d.products[:n]
}

// diisSmallest is the pivot, of a matrix with a unit diagonal, that counts as
// zero.
const diisSmallest = 1e-13

// solve finds the weights, or reports that the matrix is singular: c = B^-1 1,
// brought to the sum one, by a Cholesky decomposition of the scaled B.
func (d *DIIS) solve() bool {
	n := len(d.states)
	a, x := d.matrix, d.weights[:n]
	if n == 1 || d.products[n-1][n-1] == 0 {
		clear(x)
		x[n-1] = 1
		return true
	}
	for i := range n {
		for j := range i + 1 {
			v := d.products[i][j] / math.Sqrt(d.products[i][i]*d.products[j][j])
			for k := range j {
				v -= a[i*n+k] * a[j*n+k]
			}
			switch {
			case i != j:
				a[i*n+j] = v / a[j*n+j]
			case v > diisSmallest:
				a[i*n+i] = math.Sqrt(v)
			default:
				return false
			}
		}
	}
	d.backward(a, x, n)
	return true
}

// backward solves L L^T y = D^-1/2 1 and makes weights of y.
func (d *DIIS) backward(a, x []float64, n int) {
	for i := range n {
		x[i] = 1 / math.Sqrt(d.products[i][i])
		for k := range i {
			x[i] -= a[i*n+k] * x[k]
		}
		x[i] /= a[i*n+i]
	}
	sum := 0.0
	for i := n - 1; i >= 0; i-- {
		for k := i + 1; k < n; k++ {
			x[i] -= a[k*n+i] * x[k]
		}
		x[i] /= a[i*n+i]
	}
	for i := range n {
		x[i] /= math.Sqrt(d.products[i][i])
		sum += x[i]
	}
	for i := range n {
		x[i] /= sum
	}
}
