package linalg

import "math"

// A reduction turns a symmetric matrix into tridiagonal form by Householder
// reflections, from the last row to the first.
//
// Source: J. H. Wilkinson, C. Reinsch, Handbook for Automatic Computation II
// (1971), II/2. What differs: the update by one reflection and the product that
// the next one needs are done in the same pass through the matrix.
//
// Only the lower triangle of m is kept, but for blocks of 8 by 8 numbers on the
// diagonal, which are kept whole. Rows and vectors are padded with zeros to
// multiples of 8.
type reduction struct {
	n, ld      int
	m          []float64 // in the end, row i holds the vector of reflection i
	tau        []float64 // reflection i is 1 - tau u u^T
	u          []float64 // the current reflection's vector
	v, w       []float64 // the update that is due: m -= v w^T + w v^T
	product    []float64 // m u
	d, e       []float64
	reflectors reflectors
}

// groupRows is how many rows an update takes at a time, blockWidth the size of
// the blocks on the diagonal.
const (
	groupRows  = 4
	blockWidth = 8
)

func newReduction(n int) *reduction {
	ld := paddedRow(n)
	rows := roundUp(n, blockWidth)
	return &reduction{
		n: n, ld: ld,
		m:   make([]float64, rows*ld),
		tau: make([]float64, n),
		u:   make([]float64, ld), v: make([]float64, ld), w: make([]float64, ld), product: make([]float64, ld),
		d: make([]float64, n), e: make([]float64, n),
		reflectors: newReflectors(n),
	}
}

// load copies the lower triangle of a, divided by scale.
func (r *reduction) load(a []float64, inverseScale float64) {
	n := r.n
	clear(r.m[n*r.ld:])
	for i := range n {
		row := r.m[i*r.ld : (i+1)*r.ld]
		for j, v := range a[i*n : i*n+i+1] {
			row[j] = v * inverseScale
		}
		clear(row[i+1:])
		// The other half of the block on the diagonal.
		for j := i &^ (blockWidth - 1); j < i; j++ {
			r.m[j*r.ld+i] = row[j]
		}
	}
	clear(r.v)
	clear(r.w)
	clear(r.u)
}

// run computes d, e and the reflections.
func (r *reduction) run() {
	for i := r.n - 1; i > 0; i-- {
		row := r.m[i*r.ld : (i+1)*r.ld]
		subtract(row[:i+1], r.v[i], r.w, r.w[i], r.v)
		r.v[i], r.w[i] = 0, 0
		r.d[i] = row[i]
		clear(row[i:])
		r.e[i-1], r.tau[i] = reflect(row[:i])
		r.u[i] = 0
		copy(r.u[:i], row)
		r.updateAndMultiply(i)
		r.nextUpdate(i)
	}
	r.d[0] = r.m[0]
	r.tau[0] = 0
	r.e[r.n-1] = 0
}

// updateAndMultiply brings the first rows of m up to date and computes their
// product with u.
func (r *reduction) updateAndMultiply(rows int) {
	clear(r.product[:roundUp(rows, blockWidth)])
	for i := 0; i < rows; i += groupRows {
		active.update(r, i)
	}
	clear(r.product[rows:roundUp(rows, blockWidth)])
}

// nextUpdate finds v and w for the reflection in u of the given length.
func (r *reduction) nextUpdate(length int) {
	tau := r.tau[length]
	u, p := r.u[:length], r.product[:length]
	k := 0.5 * tau * tau * dot(u, p)
	v, w := r.v[:length], r.w[:length]
	for j, x := range u {
		v[j] = x
		w[j] = tau*p[j] - k*x
	}
}

// subtract computes row -= a x + b y.
func subtract(row []float64, a float64, x []float64, b float64, y []float64) {
	x, y = x[:len(row)], y[:len(row)]
	for j := range row {
		row[j] -= a*x[j] + b*y[j]
	}
}

// reflect turns x into the vector u, with 1 as last component, of the
// reflection 1 - tau u u^T that turns x into (0, ..., 0, beta).
func reflect(x []float64) (beta, tau float64) {
	last := len(x) - 1
	alpha := x[last]
	norm := dot(x[:last], x[:last])
	x[last] = 1
	if norm < tiny*tiny {
		clear(x[:last])
		return alpha, 0
	}
	beta = -math.Copysign(math.Sqrt(alpha*alpha+norm), alpha)
	scale := 1 / (alpha - beta)
	for j := range x[:last] {
		x[j] *= scale
	}
	return beta, (beta - alpha) / beta
}

// dot has four sums, which the processor can form at the same time.
func dot(x, y []float64) float64 {
	y = y[:len(x)]
	var s0, s1, s2, s3 float64
	j := 0
	for ; j+4 <= len(x); j += 4 {
		s0 += x[j] * y[j]
		s1 += x[j+1] * y[j+1]
		s2 += x[j+2] * y[j+2]
		s3 += x[j+3] * y[j+3]
	}
	for ; j < len(x); j++ {
		s0 += x[j] * y[j]
	}
	return (s0 + s1) + (s2 + s3)
}

// updateGo does one group of rows, i to i+3: it subtracts v w^T + w v^T, and
// adds to the product what these rows and, by symmetry, these columns have.
func updateGo(r *reduction, i int) {
	diagonal := i &^ (blockWidth - 1)
	for k := i; k < i+groupRows; k++ {
		row := r.m[k*r.ld : k*r.ld+diagonal+blockWidth]
		v, w, u, p := r.v[:len(row)], r.w[:len(row)], r.u[:len(row)], r.product[:len(row)]
		vk, wk, uk, sum := r.v[k], r.w[k], r.u[k], 0.0
		for j := range diagonal {
			x := row[j] - vk*w[j] - wk*v[j]
			row[j] = x
			sum += x * u[j]
			p[j] += x * uk
		}
		for j := diagonal; j < len(row); j++ {
			x := row[j] - vk*w[j] - wk*v[j]
			row[j] = x
			sum += x * u[j]
		}
		r.product[k] += sum
	}
}
