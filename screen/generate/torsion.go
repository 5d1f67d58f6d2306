package generate

import (
	"math"

	"torsieve/molecule"
)

// A torsion is a rotor with the angles that it may take.
type torsion struct {
	rotor      molecule.Rotor
	a, b, c, d int // b is rotor.J, c is rotor.K
	class      string
	turn       float64 // the states repeat after this angle, by the symmetry of the ends
	states     []state
}

// torsions finds the states of every rotor.
func torsions(m *molecule.Molecule, rotors []molecule.Rotor) ([]torsion, error) {
	list := make([]torsion, 0, len(rotors))
	for _, r := range rotors {
		class, a, d, err := classify(m, r.J, r.K)
		if err != nil {
			return nil, err
		}
		symmetry := lcm(max(1, r.PeriodJ), max(1, r.PeriodK))
		t := torsion{rotor: r, a: a, b: r.J, c: r.K, d: d, class: class.name, turn: 2 * math.Pi / float64(symmetry)}
		t.states = class.states(symmetry)
		list = append(list, t)
	}
	return list, nil
}

// states unfolds the peaks over the full turn and folds them again by the
// symmetry of the rotor's ends; equal ones add their weights.
func (c torsionClass) states(symmetry int) []state {
	const same = 3 * degree
	turn := 2 * math.Pi / float64(symmetry)
	var list []state
	for repeat := range int(math.Round(2 * math.Pi / c.period)) {
		for _, p := range c.peaks {
			p.angle = wrap(p.angle+float64(repeat)*c.period, turn)
			if k := find(list, p.angle, turn, same); k >= 0 {
				list[k].weight += p.weight
				continue
			}
			list = append(list, p)
		}
	}
	var sum float64
	for _, s := range list {
		sum += s.weight
	}
	for k := range list {
		list[k].weight /= sum
		if list[k].angle > math.Pi {
			list[k].angle -= 2 * math.Pi
		}
	}
	return list
}

func find(list []state, angle, turn, tolerance float64) int {
	for k, s := range list {
		off := math.Abs(wrap(s.angle-angle, turn))
		if math.Min(off, turn-off) < tolerance {
			return k
		}
	}
	return -1
}

// wrap brings an angle into 0 <= angle < turn.
func wrap(angle, turn float64) float64 {
	angle = math.Mod(angle, turn)
	if angle < -1e-9 {
		angle += turn
	}
	if angle > turn-1e-9 {
		angle = 0
	}
	return math.Max(0, angle)
}

func lcm(a, b int) int {
	x, y := a, b
	for y != 0 {
		x, y = y, x%y
	}
	return a / x * b
}
