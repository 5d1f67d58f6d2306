package generate

import (
	"math"

	"torsieve/internal/element"
	"torsieve/internal/units"
	"torsieve/molecule"
	"torsieve/screen/generate/embed"
)

const degree = math.Pi / 180

// A bounder writes what the graph says about distances into bounds.
//
// Sources of the rules: G. M. Crippen, T. F. Havel, Distance Geometry and
// Molecular Conformation (1988), chapter 5; the tolerances are our own, wide
// enough for the force field to have the last word.
type bounder struct {
	m       *molecule.Molecule
	h       []hybrid
	length  []float64 // by bond, bohr
	cis     map[int]doubleBond
	rings   [][]int
	onRing  [][]int // by atom: the rings it is in
	bounds  *embed.Bounds
	contact float64 // factor on the lower bounds of atoms far apart in the graph
}

// A doubleBond is a configuration to hold: a on one end of the bond and b on
// the other are cis or trans.
type doubleBond struct {
	j, k, a, b int
	cis        bool
}

// distanceBounds returns smoothed bounds for m. looseness 1 is the usual
// contact distance; smaller values let atoms far apart in the graph come closer.
func distanceBounds(m *molecule.Molecule, h []hybrid, held map[int]doubleBond, looseness float64) (*embed.Bounds, error) {
	table, err := bondLengths()
	if err != nil {
		return nil, err
	}
	g := &bounder{m: m, h: h, cis: held, rings: m.Rings(), contact: looseness}
	g.onRing = make([][]int, m.NumAtoms())
	for r, ring := range g.rings {
		for _, i := range ring {
			g.onRing[i] = append(g.onRing[i], r)
		}
	}
	g.bounds = embed.NewBounds(m.NumAtoms())
	g.length = make([]float64, len(m.Bonds()))
	for k := range m.Bonds() {
		g.length[k] = bondLength(table, m, h, k)
	}
	g.contacts()
	g.oneFour()
	g.oneThree()
	g.oneTwo()
	if err := g.bounds.Smooth(); err != nil {
		return nil, err
	}
	return g.bounds, nil
}

// contacts keeps atoms that are four bonds or more apart out of each other. A
// hydrogen on N, O or S may come close to an acceptor.
func (g *bounder) contacts() {
	n := g.m.NumAtoms()
	for i := range n {
		for j := range i {
			between := g.m.TopologicalDistance(i, j)
			if between < 3 {
				continue
			}
			sum := radius(g.m, i) + radius(g.m, j)
			if g.hydrogenBond(i, j) || g.hydrogenBond(j, i) {
				sum -= 0.5 * units.Angstrom
			}
			f := 0.85
			switch between {
			case 3, 4:
				f = 0.6
			case 5:
				f = 0.72
			}
			g.bounds.Set(i, j, f*g.contact*sum, embed.Far)
		}
	}
}

func radius(m *molecule.Molecule, i int) float64 {
	if r := element.VdwRadius(m.Atom(i).Number); r > 0 {
		return r
	}
	return 2 * units.Angstrom
}

func (g *bounder) hydrogenBond(h, acceptor int) bool {
	return polarHydrogen(g.m, h) && isPolar(g.m.Atom(acceptor).Number)
}

func polarHydrogen(m *molecule.Molecule, i int) bool {
	return m.Atom(i).Number == 1 && len(m.Neighbours(i)) == 1 && isPolar(m.Atom(m.Neighbours(i)[0]).Number)
}

func isPolar(number int) bool { return number == 7 || number == 8 || number == 16 }

func (g *bounder) oneTwo() {
	for k, b := range g.m.Bonds() {
		const slack = 0.01 * units.Angstrom
		g.bounds.Set(b.A, b.B, g.length[k]-slack, g.length[k]+slack)
	}
}

func (g *bounder) oneThree() {
	const slack = 0.03 * units.Angstrom
	for j := range g.m.Atoms() {
		near, bonds := g.m.Neighbours(j), g.m.NeighbourBonds(j)
		for p := range near {
			for q := range p {
				low, high := g.angle(near[p], j, near[q])
				a, b := g.length[bonds[p]], g.length[bonds[q]]
				if g.bonded(near[p], near[q]) {
					continue // a ring of three: the bond says it
				}
				g.tighten(near[p], near[q], thirdSide(a, b, low)-slack, thirdSide(a, b, high)+slack)
			}
		}
	}
}

func (g *bounder) bonded(i, j int) bool {
	_, ok := g.m.BondBetween(i, j)
	return ok
}

// tighten sets a pair, or widens it where another path of the same length has
// set it already: in small rings two paths speak of one pair.
func (g *bounder) tighten(i, j int, low, high float64) {
	if l, u := g.bounds.At(i, j); u < embed.Far {
		low, high = math.Min(l, low), math.Max(u, high)
	}
	g.bounds.Set(i, j, math.Max(0, low), high)
}

// thirdSide is the law of cosines.
func thirdSide(a, b, angle float64) float64 {
	return math.Sqrt(math.Max(0, a*a+b*b-2*a*b*math.Cos(angle)))
}

// oneFourDistance returns the distance of the ends of a chain of three bonds.
func oneFourDistance(a, b, c, alpha, beta, phi float64) float64 {
	sa, ca := math.Sincos(alpha)
	sb, cb := math.Sincos(beta)
	sp, cp := math.Sincos(phi)
	x, y, z := b-a*ca-c*cb, a*sa-c*sb*cp, c*sb*sp
	return math.Sqrt(x*x + y*y + z*z)
}

func (g *bounder) oneFour() {
	const slack = 0.06 * units.Angstrom
	for k, bond := range g.m.Bonds() {
		b, c := bond.A, bond.B
		for _, a := range g.m.Neighbours(b) {
			for _, d := range g.m.Neighbours(c) {
				if a == c || b == d || a == d || g.m.TopologicalDistance(a, d) != 3 {
					continue
				}
				low, high := g.dihedral(a, b, c, d, k)
				al, ah := g.angle(a, b, c)
				bl, bh := g.angle(b, c, d)
				ka, _ := g.m.BondBetween(a, b)
				kd, _ := g.m.BondBetween(c, d)
				near := oneFourDistance(g.length[ka], g.length[k], g.length[kd], al, bl, low)
				far := oneFourDistance(g.length[ka], g.length[k], g.length[kd], ah, bh, high)
				g.tighten(a, d, math.Min(near, far)-slack, math.Max(near, far)+slack)
			}
		}
	}
}
