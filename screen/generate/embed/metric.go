package embed

import (
	"errors"
	"math"
	"math/rand/v2"

	"gonum.org/v1/gonum/mat"
)

// dimensions of the first coordinates; the fourth is squeezed out later.
const dimensions = 4

var errFlatMetric = errors.New("the sampled distances span less than three dimensions")

// sample fills d, n x n, with squared distances drawn evenly from the bounds.
func (b *Bounds) sample(r *rand.Rand, d []float64) {
	n := b.n
	for i := range n {
		d[i*n+i] = 0
		for j := i + 1; j < n; j++ {
			l, u := b.At(i, j)
			x := l + (u-l)*r.Float64()
			d[i*n+j], d[j*n+i] = x*x, x*x
		}
	}
}

// metric turns squared distances into coordinates in four dimensions, n x 4:
// the leading eigenvectors of the matrix of scalar products about the centroid.
// Where an eigenvalue is not positive its column is noise of a tenth of a bohr,
// so that no shape starts out flat by accident.
//
// Source: Crippen, Havel (1988), section 6.2; G_ij = (d_i0^2 + d_j0^2 - d_ij^2)/2.
func metric(d []float64, n int, r *rand.Rand) ([]float64, error) {
	fromCentre := make([]float64, n)
	var total float64
	for i := range n {
		for j := range i {
			total += d[i*n+j]
		}
	}
	for i := range n {
		var sum float64
		for j := range n {
			sum += d[i*n+j]
		}
		fromCentre[i] = sum/float64(n) - total/float64(n*n)
	}
	g := mat.NewSymDense(n, nil)
	for i := range n {
		for j := i; j < n; j++ {
			g.SetSym(i, j, (fromCentre[i]+fromCentre[j]-d[i*n+j])/2)
		}
	}
	var eigen mat.EigenSym
	if !eigen.Factorize(g, true) {
		return nil, errors.New("the metric matrix could not be diagonalised")
	}
	return leading(&eigen, n, r)
}

func leading(eigen *mat.EigenSym, n int, r *rand.Rand) ([]float64, error) {
	values := eigen.Values(nil) // ascending
	var vectors mat.Dense
	eigen.VectorsTo(&vectors)
	x := make([]float64, dimensions*n)
	positive := 0
	for c := range dimensions {
		k := n - 1 - c
		usable := k >= 0 && values[k] > 1e-6
		if usable {
			positive++
		}
		for i := range n {
			if usable {
				x[dimensions*i+c] = math.Sqrt(values[k]) * vectors.At(i, k)
			} else {
				x[dimensions*i+c] = 0.1 * (2*r.Float64() - 1)
			}
		}
	}
	if positive < min(3, n-1) {
		return nil, errFlatMetric
	}
	return x, nil
}
