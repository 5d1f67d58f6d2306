package gauss

// Weights are the factors with which the integrals of two shells enter a
// quantity: Overlap[a][b] of the overlap, and Density[a][b] times Operator[op]
// of the other operators (Operator[0] is not used).
type Weights struct {
	Overlap, Density [maxAxial][maxAxial]float64
	Operator         [Operators]float64
}

// Slope returns the derivative of
//
//	sum_ab Overlap[a][b] S_ab + sum_ab sum_op Density[a][b] Operator[op] X_ab,op
//
// with respect to the position of the first atom, the origin of the operators
// riding on the second; with respect to the second it is the negative. The
// weights are given in the molecule's axes and come back in the bond's.
//
// Along the bond it is the slope of the integrals with the distance; moving an
// atom across the bond by dx turns the bond by dx/R, and the block turns with
// it.
func (p *AxialPair) Slope(s *Scratch, f *Frame, w *Weights) [3]float64 {
	p.slopes(s, f.R)
	w.turnDensities(f, p.la, p.lb)
	w.turnOperator(f)
	along := p.contract(p.places, s.slope[:], w)
	x := p.contract(p.turned[0], s.value[:], w) / f.R
	y := p.contract(p.turned[1], s.value[:], w) / f.R
	var g [3]float64
	for k := range g {
		g[k] = f.axes[0][k]*x + f.axes[1][k]*y + f.axes[2][k]*along
	}
	return g
}

func (p *AxialPair) contract(places []axialPlace, numbers []float64, w *Weights) float64 {
	var sum float64
	for k := range places {
		at := &places[k]
		v := at.factor * numbers[at.integral]
		if at.op == 0 {
			sum += v * w.Overlap[at.a][at.b]
		} else {
			sum += v * w.Density[at.a][at.b] * w.Operator[at.op]
		}
	}
	return sum
}

// turnDensities takes both matrices into the bond's axes.
func (w *Weights) turnDensities(f *Frame, la, lb int) {
	for _, m := range []*[maxAxial][maxAxial]float64{&w.Overlap, &w.Density} {
		if lb > 0 {
			for a := range 2*la + 1 {
				f.toBond(lb, &m[a])
			}
		}
		if la > 0 {
			for b := range 2*lb + 1 {
				var column [maxAxial]float64
				for a := range 2*la + 1 {
					column[a] = m[a][b]
				}
				f.toBond(la, &column)
				for a := range 2*la + 1 {
					m[a][b] = column[a]
				}
			}
		}
	}
}

func (w *Weights) turnOperator(f *Frame) {
	var p, d [maxAxial]float64
	copy(p[:], w.Operator[1:4])
	copy(d[:], w.Operator[4:])
	f.toBond(1, &p)
	f.toBond(2, &d)
	copy(w.Operator[1:4], p[:])
	copy(w.Operator[4:], d[:])
}

// toBond takes the weights of a shell's functions into the bond's axes.
func (f *Frame) toBond(l int, w *[maxAxial]float64) {
	in := *w
	switch l {
	case 1:
		for k := range 3 {
			axis := &f.axes[k]
			w[k] = axis[0]*in[0] + axis[1]*in[1] + axis[2]*in[2]
		}
	case 2:
		for k := range 5 {
			d := &f.d[k]
			w[k] = d[0]*in[0] + d[1]*in[1] + d[2]*in[2] + d[3]*in[3] + d[4]*in[4]
		}
	}
}
