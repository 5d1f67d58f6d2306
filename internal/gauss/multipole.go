package gauss

import "math"

// axialBlock holds a block of integrals, or weights, of two shells.
type axialBlock [maxAxial][maxAxial][Operators]float64

// maxIntegrals and maxPrimitives bound an AxialPair's scratch: two d shells
// have fewer integrals, two shells of six Gaussians 36 products.
const (
	maxIntegrals  = 160
	maxPrimitives = 36
)

// A Scratch is the memory that an AxialPair works in; one per goroutine.
type Scratch struct {
	gauss, weighted [maxPrimitives]float64
	value, slope    [maxIntegrals]float64
	local, half     axialBlock
}

// Block writes the integrals of the pair at the bond of frame f: element
// (a, b, op) goes to dst[a*stride + b*Operators + op], in the molecule's axes.
// Beyond the pair's reach all are zero. Panics where dst is too short.
func (p *AxialPair) Block(s *Scratch, f *Frame, dst []float64, stride int) {
	na, nb := 2*p.la+1, 2*p.lb+1
	p.values(s, f.R)
	for a := range na {
		for b := range nb {
			s.local[a][b] = [Operators]float64{}
		}
	}
	p.spread(s, f)
	turnSecond(&s.half, &s.local, f, na, p.lb)
	turnFirst(&s.local, &s.half, f, p.la, nb)
	for a := range na {
		row := dst[a*stride : a*stride+nb*Operators]
		for b := range nb {
			copy(row[b*Operators:], s.local[a][b][:])
		}
	}
}

// values fills s.value with the pair's distinct integrals.
func (p *AxialPair) values(s *Scratch, r float64) {
	r2 := r * r
	n := p.gaussians(s, r2)
	gauss := s.gauss[:n]
	for k := range p.integrals {
		in := &p.integrals[k]
		var sum float64
		for t := in.first + in.rows - 1; t >= in.first; t-- {
			sum = sum*r2 + dot(p.rows[t*len(p.mu):], gauss)
		}
		if in.odd == 1 {
			sum *= r
		}
		s.value[k] = sum
	}
}

// slopes fills s.value and s.slope with the integrals and their derivatives
// with respect to the distance.
func (p *AxialPair) slopes(s *Scratch, r float64) {
	r2 := r * r
	n := p.gaussians(s, r2)
	gauss, weighted := s.gauss[:n], s.weighted[:n]
	for k, mu := range p.mu[:n] {
		weighted[k] = mu * gauss[k]
	}
	for k := range p.integrals {
		in := &p.integrals[k]
		// sum_t R^2t c_t, its derivative by R^2 at fixed Gaussians, and that of the Gaussians
		var sum, inner, outer float64
		for t := in.first + in.rows - 1; t >= in.first; t-- {
			row := p.rows[t*len(p.mu):]
			inner = inner*r2 + sum
			sum = sum*r2 + dot(row, gauss)
			outer = outer*r2 + dot(row, weighted)
		}
		s.value[k], s.slope[k] = sum, 2*r*(inner-outer)
		if in.odd == 1 {
			s.value[k], s.slope[k] = r*sum, sum+r*s.slope[k]
		}
	}
}

// gaussians fills s.gauss and returns how many are not negligible.
func (p *AxialPair) gaussians(s *Scratch, r2 float64) int {
	for k, mu := range p.mu {
		if mu*r2 > axialCut {
			return k
		}
		s.gauss[k] = math.Exp(-mu * r2)
	}
	return len(p.mu)
}

func dot(x, y []float64) float64 {
	var s0, s1 float64
	x = x[:len(y)]
	k := 0
	for ; k+1 < len(y); k += 2 {
		s0 += x[k] * y[k]
		s1 += x[k+1] * y[k+1]
	}
	if k < len(y) {
		s0 += x[k] * y[k]
	}
	return s0 + s1
}

// spread puts the integrals into s.local, the operators turned into the
// molecule's axes already.
func (p *AxialPair) spread(s *Scratch, f *Frame) {
	for k := range p.places {
		at := &p.places[k]
		v := at.factor * s.value[at.integral]
		to := &s.local[at.a][at.b]
		switch {
		case at.op == 0:
			to[0] = v
		case at.op < 4:
			axis := &f.axes[at.op-1]
			to[1] += v * axis[0]
			to[2] += v * axis[1]
			to[3] += v * axis[2]
		default:
			d := &f.d[at.op-4]
			to[4] += v * d[0]
			to[5] += v * d[1]
			to[6] += v * d[2]
			to[7] += v * d[3]
			to[8] += v * d[4]
		}
	}
}

// turnSecond turns the second index of a block into the molecule's axes.
func turnSecond(dst, src *axialBlock, f *Frame, na, lb int) {
	for a := range na {
		switch lb {
		case 0:
			dst[a][0] = src[a][0]
		case 1:
			x, y, z := &src[a][0], &src[a][1], &src[a][2]
			for i := range 3 {
				combine3(&dst[a][i], x, y, z, f.axes[0][i], f.axes[1][i], f.axes[2][i])
			}
		default:
			for i := range 5 {
				d := &dst[a][i]
				combine3(d, &src[a][0], &src[a][1], &src[a][2], f.d[0][i], f.d[1][i], f.d[2][i])
				add2(d, &src[a][3], &src[a][4], f.d[3][i], f.d[4][i])
			}
		}
	}
}

// turnFirst turns the first index of a block into the molecule's axes.
func turnFirst(dst, src *axialBlock, f *Frame, la, nb int) {
	for b := range nb {
		switch la {
		case 0:
			dst[0][b] = src[0][b]
		case 1:
			x, y, z := &src[0][b], &src[1][b], &src[2][b]
			for i := range 3 {
				combine3(&dst[i][b], x, y, z, f.axes[0][i], f.axes[1][i], f.axes[2][i])
			}
		default:
			for i := range 5 {
				d := &dst[i][b]
				combine3(d, &src[0][b], &src[1][b], &src[2][b], f.d[0][i], f.d[1][i], f.d[2][i])
				add2(d, &src[3][b], &src[4][b], f.d[3][i], f.d[4][i])
			}
		}
	}
}

func combine3(dst, x, y, z *[Operators]float64, a, b, c float64) {
	for op := range dst {
		dst[op] = a*x[op] + b*y[op] + c*z[op]
	}
}

func add2(dst, x, y *[Operators]float64, a, b float64) {
	for op := range dst {
		dst[op] += a*x[op] + b*y[op]
	}
}

// OneCentre returns the integrals of two shells on one atom, in the layout of
// Block with the stride of b's functions.
func OneCentre(s *Scratch, a, b *Shell) []float64 {
	stride := b.Size() * Operators
	dst := make([]float64, a.Size()*stride)
	f := NewFrame([3]float64{0, 0, 1})
	f.R = 0
	NewAxialPair(a, b).Block(s, &f, dst, stride)
	return dst
}
