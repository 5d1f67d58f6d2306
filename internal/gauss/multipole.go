package gauss

import "math"

// axialBlock holds a block of integrals of two shells, element (a, b) at
// maxAxial a + b.
type axialBlock [32][Operators]float64

// maxIntegrals and maxPrimitives bound an AxialPair: two d shells have fewer
// integrals, two shells of six Gaussians 36 products.
const (
	maxIntegrals  = 128
	maxPrimitives = 36
)

// A Scratch is the memory that an AxialPair works in; one per goroutine.
type Scratch struct {
	gauss, weighted [maxPrimitives]float64
	local, half     axialBlock
}

// Size returns how many different integrals there are.
func (p *AxialPair) Size() int { return len(p.integrals) }

// Integrals writes the different integrals at a distance into value, and their
// derivatives by the distance into slope unless it is nil. Beyond the pair's
// reach all are zero.
func (p *AxialPair) Integrals(s *Scratch, r float64, value, slope []float64) {
	n := p.gaussians(s, r*r)
	if slope != nil {
		p.slopes(s, n, r, value, slope)
		return
	}
	r2, gauss := r*r, s.gauss[:n]
	for k := range p.integrals {
		in := &p.integrals[k]
		var sum float64
		for t := in.first + in.rows - 1; t >= in.first; t-- {
			sum = sum*r2 + dot(p.rows[t*len(p.mu):], gauss)
		}
		if in.odd == 1 {
			sum *= r
		}
		value[k] = sum
	}
}

func (p *AxialPair) slopes(s *Scratch, n int, r float64, value, slope []float64) {
	r2, gauss, weighted := r*r, s.gauss[:n], s.weighted[:n]
	for k, mu := range p.mu[:n] {
		weighted[k] = mu * gauss[k]
	}
	for k := range p.integrals {
		in := &p.integrals[k]
		// sum_t R^2t c_t, its derivative by R^2 at fixed Gaussians, and that of the Gaussians
		var sum, inner, outer float64
		for t := in.first + in.rows - 1; t >= in.first; t-- {
			c, d := dots(p.rows[t*len(p.mu):], gauss, weighted)
			inner = inner*r2 + sum
			sum = sum*r2 + c
			outer = outer*r2 + d
		}
		value[k], slope[k] = sum, 2*r*(inner-outer)
		if in.odd == 1 {
			value[k], slope[k] = r*sum, sum+r*slope[k]
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

// dots multiplies x by two vectors at once.
func dots(x, y, z []float64) (xy, xz float64) {
	x, z = x[:len(y)], z[:len(y)]
	for k, v := range y {
		xy += x[k] * v
		xz += x[k] * z[k]
	}
	return xy, xz
}

// Block writes the block of integrals at the bond of frame f, of which value
// holds what Integrals gave: element (a, b, op) goes to dst[a*stride +
// b*Operators + op], in the molecule's axes. Panics where dst is too short.
func (p *AxialPair) Block(s *Scratch, f *Frame, value, dst []float64, stride int) {
	na, nb := 2*p.la+1, 2*p.lb+1
	for a := range na {
		for b := range nb {
			s.local[maxAxial*a+b] = [Operators]float64{}
		}
	}
	p.spread(s, f, value)
	turnSecond(&s.half, &s.local, f, na, p.lb)
	turnFirst(&s.local, &s.half, f, p.la, nb)
	for a := range na {
		row := dst[a*stride : a*stride+nb*Operators]
		for b := range nb {
			copy(row[b*Operators:], s.local[maxAxial*a+b][:])
		}
	}
}

// spread puts the integrals into s.local, the operators turned into the
// molecule's axes already.
func (p *AxialPair) spread(s *Scratch, f *Frame, value []float64) {
	for _, at := range p.places.overlap {
		s.local[at.ab&31][0] = at.factor * value[at.integral]
	}
	for _, at := range p.places.dipole {
		v := at.factor * value[at.integral]
		to, axis := &s.local[at.ab&31], &f.axes[at.op-1]
		to[1] += v * axis[0]
		to[2] += v * axis[1]
		to[3] += v * axis[2]
	}
	for _, at := range p.places.quadrupole {
		v := at.factor * value[at.integral]
		to, d := &s.local[at.ab&31], &f.d[at.op-4]
		to[4] += v * d[0]
		to[5] += v * d[1]
		to[6] += v * d[2]
		to[7] += v * d[3]
		to[8] += v * d[4]
	}
}

// turnSecond turns the second index of a block into the molecule's axes.
func turnSecond(dst, src *axialBlock, f *Frame, na, lb int) {
	for a := range na {
		switch lb {
		case 0:
			dst[maxAxial*a] = src[maxAxial*a]
		case 1:
			x, y, z := &src[maxAxial*a+0], &src[maxAxial*a+1], &src[maxAxial*a+2]
			for i := range 3 {
				combine3(&dst[maxAxial*a+i], x, y, z, f.axes[0][i], f.axes[1][i], f.axes[2][i])
			}
		default:
			for i := range 5 {
				d := &dst[maxAxial*a+i]
				combine3(d, &src[maxAxial*a+0], &src[maxAxial*a+1], &src[maxAxial*a+2], f.d[0][i], f.d[1][i], f.d[2][i])
				add2(d, &src[maxAxial*a+3], &src[maxAxial*a+4], f.d[3][i], f.d[4][i])
			}
		}
	}
}

// turnFirst turns the first index of a block into the molecule's axes.
func turnFirst(dst, src *axialBlock, f *Frame, la, nb int) {
	for b := range nb {
		switch la {
		case 0:
			dst[b] = src[b]
		case 1:
			x, y, z := &src[b], &src[maxAxial+b], &src[2*maxAxial+b]
			for i := range 3 {
				combine3(&dst[maxAxial*i+b], x, y, z, f.axes[0][i], f.axes[1][i], f.axes[2][i])
			}
		default:
			for i := range 5 {
				d := &dst[maxAxial*i+b]
				combine3(d, &src[b], &src[maxAxial+b], &src[2*maxAxial+b], f.d[0][i], f.d[1][i], f.d[2][i])
				add2(d, &src[3*maxAxial+b], &src[4*maxAxial+b], f.d[3][i], f.d[4][i])
			}
		}
	}
}

func combine3(dst, x, y, z *[Operators]float64, a, b, c float64) {
	dst[0] = a*x[0] + b*y[0] + c*z[0]
	dst[1] = a*x[1] + b*y[1] + c*z[1]
	dst[2] = a*x[2] + b*y[2] + c*z[2]
	dst[3] = a*x[3] + b*y[3] + c*z[3]
	dst[4] = a*x[4] + b*y[4] + c*z[4]
	dst[5] = a*x[5] + b*y[5] + c*z[5]
	dst[6] = a*x[6] + b*y[6] + c*z[6]
	dst[7] = a*x[7] + b*y[7] + c*z[7]
	dst[8] = a*x[8] + b*y[8] + c*z[8]
}

func add2(dst, x, y *[Operators]float64, a, b float64) {
	dst[0] += a*x[0] + b*y[0]
	dst[1] += a*x[1] + b*y[1]
	dst[2] += a*x[2] + b*y[2]
	dst[3] += a*x[3] + b*y[3]
	dst[4] += a*x[4] + b*y[4]
	dst[5] += a*x[5] + b*y[5]
	dst[6] += a*x[6] + b*y[6]
	dst[7] += a*x[7] + b*y[7]
	dst[8] += a*x[8] + b*y[8]
}

// OneCentre returns the integrals of two shells on one atom, in the layout of
// Block with the stride of b's functions.
func OneCentre(a, b *Shell) []float64 {
	var s Scratch
	p, f := NewAxialPair(a, b), NewFrame([3]float64{0, 0, 1})
	value := make([]float64, p.Size())
	p.Integrals(&s, 0, value, nil)
	stride := b.Size() * Operators
	dst := make([]float64, a.Size()*stride)
	p.Block(&s, &f, value, dst, stride)
	return dst
}
