package forcefield

import (
	"math"

	"torsieve/internal/units"
)

// A skeleton is what the terms are built from: atoms with types, bonds with
// orders and natural lengths. It knows nothing of chemistry beyond that.
type skeleton struct {
	types []*atomType
	links []link
	arms  [][]arm // by atom, in bond order
}

// A link is a bond: its order in the force field's sense (aromatic 1.5, amide
// 1.41) and its natural length in bohr.
type link struct {
	i, j   int
	order  float64
	length float64
}

// An arm is a neighbour and the bond that leads there.
type arm struct{ atom, link int }

func newSkeleton(types []*atomType, links []link) *skeleton {
	s := &skeleton{types: types, links: links, arms: make([][]arm, len(types))}
	for n := range links {
		l := &links[n]
		if l.length == 0 {
			l.length = naturalLength(types[l.i], types[l.j], l.order)
		}
		s.arms[l.i] = append(s.arms[l.i], arm{l.j, n})
		s.arms[l.j] = append(s.arms[l.j], arm{l.i, n})
	}
	return s
}

func (s *skeleton) stretches() stretches {
	var out stretches
	for _, l := range s.links {
		k := stretchConstant(s.types[l.i], s.types[l.j], l.length)
		out = append(out, stretch{int32(l.i), int32(l.j), k, l.length})
	}
	return out
}

// trigonalAngle is the 120 degrees of the table. Tabulated whole fractions of a
// turn are exact after conversion, see atomType.
const trigonalAngle = 2 * math.Pi / 3

// An angleRule replaces the natural angle of one bend, or returns 0.
type angleRule func(i, j, k int) float64

// With open set, trigonal centres take the general form: theirs vanishes at 0
// degrees too, where starting structures would collapse.
func (s *skeleton) bends(special angleRule, open bool) bends {
	var out bends
	for j, arms := range s.arms {
		for n, a := range arms {
			for _, b := range arms[n+1:] {
				angle := 0.0
				if special != nil {
					angle = special(a.atom, j, b.atom)
				}
				if t := s.types[j]; open && angle == 0 && t.Angle == trigonalAngle {
					angle = trigonalAngle
				}
				out = append(out, bend{int32(a.atom), int32(j), int32(b.atom), s.bendShape(a, j, b, angle)})
			}
		}
	}
	return out
}

// bendShape chooses the form by the centre's natural angle and its number of
// neighbours; angle, where not 0, replaces the natural one.
func (s *skeleton) bendShape(a arm, j int, b arm, angle float64) [5]float64 {
	t, neighbours := s.types[j], len(s.arms[j])
	crowded := t.MainGroup && t.digit() == '3' && neighbours > 4
	natural := t.Angle
	switch {
	case angle != 0:
		natural = angle
	case crowded:
		natural = math.Pi / 2
	}
	c0 := math.Cos(natural)
	k := bendConstant(s.types[a.atom], s.types[b.atom], s.links[a.link].length, s.links[b.link].length, c0)
	switch {
	case angle != 0:
		return generalBend(k, c0)
	case crowded && neighbours != 6:
		return crowdedBend(k)
	case crowded:
		return squareBend(k)
	}
	switch {
	case natural == math.Pi:
		return linearBend(k)
	case natural == trigonalAngle:
		return trigonalBend(k)
	case natural == math.Pi/2 && (t.digit() == '4' || t.digit() == '6'):
		return squareBend(k)
	case natural == math.Pi/2:
		return rightBend(k)
	}
	return generalBend(k, c0)
}

// torsions adds one term a path about every bond that has a rule; scale, where
// not nil, multiplies the barrier of a bond.
func (s *skeleton) torsions(scale func(n int) float64) torsions {
	var out torsions
	for n, l := range s.links {
		r := torsionRule(s.types[l.i], s.types[l.j], l.order, s.flatNeighbour(l.i, l.j), s.flatNeighbour(l.j, l.i))
		if r.barrier == 0 {
			continue
		}
		if scale != nil {
			r.barrier *= scale(n)
		}
		first := len(out)
		s.paths(l.i, l.j, func(i, k int) {
			out = append(out, torsion{int32(i), int32(l.i), int32(l.j), int32(k), r.n, 0, r.sign})
		})
		for m := first; m < len(out); m++ {
			out[m].v = r.barrier / 2 / float64(len(out)-first)
		}
	}
	return out
}

// paths calls visit for every path i-j-k-l about the bond j-k, with i and l.
func (s *skeleton) paths(j, k int, visit func(i, l int)) {
	for _, a := range s.arms[j] {
		for _, b := range s.arms[k] {
			if a.atom != k && b.atom != j && a.atom != b.atom {
				visit(a.atom, b.atom)
			}
		}
	}
}

// flatNeighbour reports whether atom has an sp2 neighbour besides other.
func (s *skeleton) flatNeighbour(atom, other int) bool {
	for _, a := range s.arms[atom] {
		if a.atom != other && s.types[a.atom].Class == classSP2 {
			return true
		}
	}
	return false
}

// inversions adds the three terms of each centre with three neighbours that
// has a rule; nitrogen is the barrier of sp2 nitrogen, 0 in the paper.
func (s *skeleton) inversions(nitrogen float64) inversions {
	var out inversions
	for c, arms := range s.arms {
		if len(arms) != 3 {
			continue
		}
		v, ok := s.inversionRule(c, nitrogen)
		if !ok {
			continue
		}
		for n := range 3 {
			v.c, v.i, v.j, v.l = int32(c), int32(arms[(n+1)%3].atom), int32(arms[(n+2)%3].atom), int32(arms[n].atom)
			out = append(out, v)
		}
	}
	return out
}

func (s *skeleton) inversionRule(c int, nitrogen float64) (inversion, bool) {
	const degree = math.Pi / 180
	switch s.types[c].Name {
	case "C_2", "C_R":
		for _, a := range s.arms[c] {
			if s.types[a.atom].Name == "O_2" {
				return planarInversion(50 * units.KcalPerMol), true
			}
		}
		return planarInversion(6 * units.KcalPerMol), true
	case "N_2", "N_R":
		return planarInversion(nitrogen), nitrogen != 0
	case "P_3+3":
		return pyramidInversion(22*units.KcalPerMol, 84.4339*degree), true
	case "As3+3":
		return pyramidInversion(22*units.KcalPerMol, 86.9735*degree), true
	case "Sb3+3":
		return pyramidInversion(22*units.KcalPerMol, 87.7047*degree), true
	case "Bi3+3":
		return pyramidInversion(22*units.KcalPerMol, 90*degree), true
	}
	return inversion{}, false
}

// bondsApart returns the number of bonds between any two atoms, row by row, 4
// standing for 4 and more, and for no way at all.
func (s *skeleton) bondsApart() []int8 {
	n := len(s.types)
	apart := make([]int8, n*n)
	queue := make([]int, 0, n)
	for i := range n {
		row := apart[i*n : (i+1)*n]
		for j := range row {
			row[j] = 4
		}
		row[i] = 0
		queue = append(queue[:0], i)
		for q := 0; q < len(queue); q++ {
			at := queue[q]
			if row[at] == 3 {
				break
			}
			for _, a := range s.arms[at] {
				if row[a.atom] == 4 && row[at]+1 < 4 {
					row[a.atom] = row[at] + 1
					queue = append(queue, a.atom)
				}
			}
		}
	}
	return apart
}

// pairs are all atoms three or more bonds apart. polar, the share of x that a
// hydrogen on nitrogen, oxygen or sulfur keeps towards atoms more than three
// bonds away, is 1 in the paper; nearer, barriers of rotors depend on it.
func (s *skeleton) pairs(apart []int8, polar float64) *nonbonded {
	n := len(s.types)
	out := &nonbonded{pairs: make([]pair, 0, n*n/2)}
	for i := range n {
		for j := i + 1; j < n; j++ {
			if apart[i*n+j] < 3 {
				continue
			}
			x2, d := wellOf(s.types[i], s.types[j])
			if apart[i*n+j] > 3 {
				for _, atom := range [2]int{i, j} {
					if s.polarHydrogen(atom) {
						x2 *= polar
					}
				}
			}
			out.add(i, pair{j: int32(j), x2: x2, d: d})
		}
	}
	return out
}

func (s *skeleton) polarHydrogen(i int) bool {
	if s.types[i].Number != 1 || len(s.arms[i]) != 1 {
		return false
	}
	switch s.types[s.arms[i][0].atom].Number {
	case 7, 8, 16:
		return true
	}
	return false
}
