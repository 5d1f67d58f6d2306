package relax

import (
	"gonum.org/v1/gonum/floats"
)

// A frame is a scheme at one geometry: B, the derivatives of m internal by n
// Cartesian coordinates, row by row without the zeros, and the rigid motions,
// which no internal coordinate feels.
type frame struct {
	n     int
	q     []float64     // m values
	rows  [][12]float64 // m rows of B, three numbers for each of the four atoms
	rigid [6][]float64  // orthonormal arrows over n: translations and rotations; 0 where there are fewer
}

func newFrame(n int) *frame {
	f := &frame{n: n}
	for k := range f.rigid {
		f.rigid[k] = make([]float64, n)
	}
	return f
}

// set takes the frame to x.
func (f *frame) set(s *scheme, x []float64) {
	m := len(s.coords)
	f.q = sized(f.q, m)
	f.rows = sized(f.rows, m)
	for c := range s.coords {
		f.q[c] = s.coords[c].value(x)
		s.coords[c].derivative(&f.rows[c], x)
	}
	f.setRigid(x)
}

// sized returns v with n elements, of any value.
func sized[T any](v []T, n int) []T {
	if cap(v) < n {
		return make([]T, n, n+n/4) // room for a scheme that is chosen anew
	}
	return v[:n]
}

// setRigid makes three translations and three rotations about the centre,
// orthonormal.
func (f *frame) setRigid(x []float64) {
	var centre [3]float64
	for i, v := range x {
		centre[i%3] += v / float64(len(x)/3)
	}
	for k, r := range f.rigid {
		clear(r)
		a, b := (k+1)%3, (k+2)%3
		for i := 0; i < len(x); i += 3 {
			if k < 3 {
				r[i+k] = 1
				continue
			}
			r[i+a], r[i+b] = centre[b]-x[i+b], x[i+a]-centre[a]
		}
		for range 2 { // twice is enough (B. N. Parlett)
			for _, o := range f.rigid[:k] {
				floats.AddScaled(r, -floats.Dot(o, r), o)
			}
		}
		if l := floats.Norm(r, 2); l > 1e-6 {
			floats.Scale(1/l, r)
		} else {
			clear(r) // a turn about the axis of a linear molecule
		}
	}
}

// internalOnly takes the rigid motions out of g.
func (f *frame) internalOnly(g []float64) {
	for _, r := range f.rigid {
		floats.AddScaled(g, -floats.Dot(r, g), r)
	}
}

// changes writes how far the internal coordinates went from f to g.
func (f *frame) changes(s *scheme, dq []float64, g *frame) {
	for c := range s.coords {
		dq[c] = s.coords[c].change(f.q[c], g.q[c])
	}
}

// down writes B d into q.
func (f *frame) down(s *scheme, q, d []float64) {
	for c := range s.coords {
		row := &f.rows[c]
		var sum float64
		for k, a := range s.coords[c].depends() {
			sum += row[3*k]*d[3*a] + row[3*k+1]*d[3*a+1] + row[3*k+2]*d[3*a+2]
		}
		q[c] = sum
	}
}

// up writes B^T v into d.
func (f *frame) up(s *scheme, d, v []float64) {
	clear(d)
	for c := range s.coords {
		row := &f.rows[c]
		for k, a := range s.coords[c].depends() {
			d[3*a] += v[c] * row[3*k]
			d[3*a+1] += v[c] * row[3*k+1]
			d[3*a+2] += v[c] * row[3*k+2]
		}
	}
}

// square writes the lower triangle of B^T W B into a (n*n), with unit curvature
// for the rigid motions and a ridge for what is left; w is the diagonal of W.
func (f *frame) square(s *scheme, a, w []float64, ridge float64) {
	n := f.n
	clear(a)
	for c := range s.coords {
		row := &f.rows[c]
		atoms := s.coords[c].depends()
		for k, p := range atoms {
			for l, q := range atoms {
				if q > p {
					continue
				}
				for e := range 3 {
					g := w[c] * row[3*k+e]
					out := a[(3*p+e)*n+3*q:]
					out[0] += g * row[3*l]
					out[1] += g * row[3*l+1]
					out[2] += g * row[3*l+2]
				}
			}
		}
	}
	f.hold(a, ridge)
}

// project writes the lower triangle of B^T H B into a, likewise; h is m*m, and
// scratch has 2*m*n numbers. Whole rows are added at a time: B has twelve
// numbers in a row, H has as many as there are coordinates.
func (f *frame) project(s *scheme, a, h, scratch []float64, ridge float64) {
	n, m := f.n, len(s.coords)
	bh, hb := scratch[:n*m], scratch[n*m:2*n*m]
	clear(bh)
	for r := range m {
		for k, p := range s.coords[r].depends() {
			for e := range 3 {
				i := 3*p + e
				floats.AddScaled(bh[i*m:i*m+m], f.rows[r][3*k+e], h[r*m:r*m+m])
			}
		}
	}
	for i := range n {
		for r, v := range bh[i*m : i*m+m] {
			hb[r*n+i] = v
		}
	}
	clear(a)
	for r := range m {
		for k, p := range s.coords[r].depends() {
			for e := range 3 {
				i := 3*p + e
				floats.AddScaled(a[i*n:i*n+i+1], f.rows[r][3*k+e], hb[r*n:r*n+i+1])
			}
		}
	}
	f.hold(a, ridge)
}

// hold adds unit curvature along the rigid motions, and ridge everywhere.
func (f *frame) hold(a []float64, ridge float64) {
	n := f.n
	for _, r := range f.rigid {
		for i, v := range r {
			if v != 0 {
				floats.AddScaled(a[i*n:i*n+i+1], v, r[:i+1])
			}
		}
	}
	for i := range n {
		a[i*n+i] += ridge
	}
}
