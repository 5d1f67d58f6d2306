package forcefield

import "math"

// A nonbonded term is the sum over all pairs of atoms three or more bonds
// apart, row by row of their first atom:
//
//   - van der Waals: d [(x/r)^12 - 2 (x/r)^6]. Source: Rappe et al., J. Am.
//     Chem. Soc. 1992, 114, 10024, eq. 20, with the geometric combination rules
//     of eqs. 21b and 22;
//   - electrostatic: qq / (screening r^2 + offset), see electrostatic.go.
//
// Both share one loop, in which a ligand spends half of its time.
type nonbonded struct {
	rows  []row
	pairs []pair
}

// A row is atom i and its pairs[from:to].
type row struct{ i, from, to int32 }

type pair struct {
	j  int32
	x2 float64 // square of the distance of the minimum, bohr^2
	d  float64 // depth of the well, hartree
	qq float64 // product of the charges, scaled, hartree
}

// add appends a pair; the first atoms must come in order.
func (n *nonbonded) add(i int, p pair) {
	if len(n.rows) == 0 || n.rows[len(n.rows)-1].i != int32(i) {
		n.rows = append(n.rows, row{int32(i), int32(len(n.pairs)), int32(len(n.pairs))})
	}
	n.pairs = append(n.pairs, p)
	n.rows[len(n.rows)-1].to++
}

// addTo returns both energies in hartree and, where grad is not nil, adds dE/dx
// into it.
func (n *nonbonded) addTo(grad, x []float64) (vdw, electrostatic float64) {
	if grad == nil {
		return n.energy(x)
	}
	for _, r := range n.rows {
		a0, a1, a2 := x[3*r.i], x[3*r.i+1], x[3*r.i+2]
		var g0, g1, g2 float64
		ps := n.pairs[r.from:r.to]
		for k := range ps {
			p := &ps[k]
			b := x[3*p.j : 3*p.j+3 : 3*p.j+3]
			d0, d1, d2 := a0-b[0], a1-b[1], a2-b[2]
			r2 := d0*d0 + d1*d1 + d2*d2
			inv := 1 / r2
			q := p.x2 * inv
			q = q * q * q
			e := p.d * q
			vdw += e*q - 2*e
			screened := 1 / (screening*r2 + screeningOffset)
			c := p.qq * screened
			electrostatic += c
			f := -12*e*(q-1)*inv - 2*screening*c*screened
			gb := grad[3*p.j : 3*p.j+3 : 3*p.j+3]
			g0 += f * d0
			g1 += f * d1
			g2 += f * d2
			gb[0] -= f * d0
			gb[1] -= f * d1
			gb[2] -= f * d2
		}
		ga := grad[3*r.i : 3*r.i+3 : 3*r.i+3]
		ga[0] += g0
		ga[1] += g1
		ga[2] += g2
	}
	return vdw, electrostatic
}

func (n *nonbonded) energy(x []float64) (vdw, electrostatic float64) {
	for _, r := range n.rows {
		for _, p := range n.pairs[r.from:r.to] {
			d := arrow(x, r.i, p.j)
			r2 := dot(d, d)
			q := p.x2 / r2
			q = q * q * q
			vdw += p.d * q * (q - 2)
			electrostatic += p.qq / (screening*r2 + screeningOffset)
		}
	}
	return vdw, electrostatic
}

// softCore is where the soft repulsion begins, as a share of the distance of
// the minimum: inside it the van der Waals energy goes on along its tangent, so
// that overlapping atoms part without violence. Own choice, for starting
// structures, which have no charges either: opposite ones would pull
// overlapping atoms together.
const softCore = 0.6

// addSoftTo is addTo with the soft core and without charges.
func (n *nonbonded) addSoftTo(grad, x []float64) float64 {
	q6 := math.Pow(softCore, -6)
	touch, slope := q6*q6-2*q6, -12*(q6*q6-q6)/softCore // in units of d, d/x
	var energy float64
	for _, row := range n.rows {
		for _, p := range n.pairs[row.from:row.to] {
			d := arrow(x, row.i, p.j)
			r2 := dot(d, d)
			var e, f float64
			if r2 >= softCore*softCore*p.x2 {
				q := p.x2 / r2
				q = q * q * q
				e, f = p.d*q*(q-2), -12*p.d*q*(q-1)/r2
			} else {
				x0, r := math.Sqrt(p.x2), math.Sqrt(r2)
				e = p.d * (touch + slope*(r/x0-softCore))
				f = p.d * slope / (x0 * math.Max(r, 1e-10))
			}
			energy += e
			if grad != nil {
				push(grad, row.i, f, d)
				push(grad, p.j, -f, d)
			}
		}
	}
	return energy
}
