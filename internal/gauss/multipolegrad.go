package gauss

// Weights are the factors with which the integrals of two shells enter a
// quantity: Overlap of the overlap, and Density times Operator[op] of the other
// operators (Operator[0] is not used). Element (a, b) of both matrices stands
// at WeightsRow a + b.
type Weights struct {
	Overlap, Density [32]float64
	Operator         [16]float64
}

// WeightsRow is the length of a row of Weights.
const WeightsRow = maxAxial

// ToBond takes the operators' weights into the axes of the bond, which Slope
// expects of them.
func (w *Weights) ToBond(f *Frame) {
	turn3(f, w.Operator[1:4])
	turn5(f, w.Operator[4:9])
}

// Slope returns the derivative of
//
//	sum_ab Overlap[a,b] S_ab + sum_ab sum_op Density[a,b] Operator[op] X_ab,op
//
// with respect to the position of the first atom, the origin of the operators
// riding on the second; with respect to the second it is the negative. value
// and slope hold what Integrals gave. The matrices are given in the molecule's
// axes and come back in the bond's; Operator is in the bond's.
//
// Along the bond it is the slope of the integrals with the distance; moving an
// atom across the bond by dx turns the bond by dx/R, and the block turns with
// it.
func (p *AxialPair) Slope(f *Frame, value, slope []float64, w *Weights) [3]float64 {
	w.turn(f, p.la, p.lb)
	along := p.places.contract(slope, w)
	x := p.turned[0].contract(value, w) / f.R
	y := p.turned[1].contract(value, w) / f.R
	var g [3]float64
	for k := range g {
		g[k] = f.axes[0][k]*x + f.axes[1][k]*y + f.axes[2][k]*along
	}
	return g
}

func (p *axialPlaces) contract(numbers []float64, w *Weights) float64 {
	var overlap, dipole, quadrupole float64
	for _, at := range p.overlap {
		overlap += at.factor * numbers[at.integral] * w.Overlap[at.ab&31]
	}
	for _, at := range p.dipole {
		dipole += at.factor * numbers[at.integral] * w.Density[at.ab&31] * w.Operator[at.op&15]
	}
	for _, at := range p.quadrupole {
		quadrupole += at.factor * numbers[at.integral] * w.Density[at.ab&31] * w.Operator[at.op&15]
	}
	return overlap + dipole + quadrupole
}

// turn takes both matrices into the bond's axes.
func (w *Weights) turn(f *Frame, la, lb int) {
	turnMatrix(&w.Overlap, f, la, lb)
	turnMatrix(&w.Density, f, la, lb)
}

func turnMatrix(m *[32]float64, f *Frame, la, lb int) {
	switch lb {
	case 1:
		for a := range 2*la + 1 {
			turn3(f, m[maxAxial*a:])
		}
	case 2:
		for a := range 2*la + 1 {
			turn5(f, m[maxAxial*a:])
		}
	}
	if la == 0 {
		return
	}
	for b := range 2*lb + 1 {
		column := [maxAxial]float64{m[b], m[maxAxial+b], m[2*maxAxial+b], m[3*maxAxial+b], m[4*maxAxial+b]}
		if la == 1 {
			turn3(f, column[:])
		} else {
			turn5(f, column[:])
		}
		for a := range 2*la + 1 {
			m[maxAxial*a+b] = column[a]
		}
	}
}

// turn3 takes the weights of x, y and z into the bond's axes.
func turn3(f *Frame, w []float64) {
	u, v, x := w[0], w[1], w[2]
	for k := range 3 {
		axis := &f.axes[k]
		w[k] = axis[0]*u + axis[1]*v + axis[2]*x
	}
}

// turn5 takes the weights of the five d harmonics into the bond's axes.
func turn5(f *Frame, w []float64) {
	in := [5]float64(w)
	for k := range 5 {
		d := &f.d[k]
		w[k] = d[0]*in[0] + d[1]*in[1] + d[2]*in[2] + d[3]*in[3] + d[4]*in[4]
	}
}
