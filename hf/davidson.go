package hf

import (
	"context"
	"math"

	"torsieve/internal/linalg"
)

// lowest returns the lowest eigenvalue of H and its vector.
func (s *stability) lowest(ctx context.Context) (float64, []float64, error) {
	d := s.diagonal()
	v := make([]float64, s.size)
	for k, e := range d {
		v[k] = (1 + 0.3*math.Sin(float64(3*k+1))) / (e * e * e) // of all symmetries
	}
	var space, images [][]float64
	for {
		if norm := orthonormalise(v, space); norm < 1e-6 {
			break
		}
		h, err := s.apply(ctx, v, d)
		if err != nil {
			return 0, nil, err
		}
		space, images = append(space, v), append(images, h)
		value, y, err := ritz(space, images)
		if err != nil {
			return 0, nil, err
		}
		x, r := combine(space, y), combine(images, y)
		largest := 0.0
		for k := range r {
			r[k] -= value * x[k]
			largest = max(largest, math.Abs(r[k]))
		}
		if len(space) == min(davidsonSteps, s.size) || largest < 1e-3 || value < 20*unstable && len(space) > 3 {
			return value, x, nil
		}
		for k := range r {
			down := d[k] - value
			if math.Abs(down) < 0.05 {
				down = math.Copysign(0.05, down)
			}
			r[k] /= down
		}
		v = r
	}
	value, y, err := ritz(space, images)
	return value, combine(space, y), err
}

// orthonormalise takes what of v lies in the space off it, twice for rounding,
// and gives it length one; it returns the length before.
func orthonormalise(v []float64, space [][]float64) float64 {
	begin := math.Sqrt(inner(v, v))
	for range 2 {
		for _, u := range space {
			c := inner(u, v)
			for k := range v {
				v[k] -= c * u[k]
			}
		}
	}
	norm := math.Sqrt(inner(v, v))
	for k := range v {
		v[k] /= norm
	}
	return norm / begin
}

// ritz solves the eigenproblem in the space.
func ritz(space, images [][]float64) (float64, []float64, error) {
	n := len(space)
	a, w := make([]float64, n*n), make([]float64, n)
	for i := range n {
		for j := range i + 1 {
			a[i*n+j] = (inner(space[i], images[j]) + inner(space[j], images[i])) / 2
		}
	}
	err := linalg.NewEigen(n).Solve(a, w, a)
	return w[0], a[:n], err
}

func combine(vectors [][]float64, c []float64) []float64 {
	out := make([]float64, len(vectors[0]))
	for k, v := range vectors {
		for i, x := range v {
			out[i] += c[k] * x
		}
	}
	return out
}
