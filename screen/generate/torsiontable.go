package generate

import (
	"bytes"
	_ "embed"
	"encoding/json"
	"fmt"
	"math"
	"sync"

	"torsieve/molecule"
	"torsieve/screen/generate/pattern"
)

//go:embed data/torsions.json
var torsionsJSON []byte

// torsionTable is data/torsions.json as it stands.
type torsionTable struct {
	Title, Unit  string
	HowToUse     string          `json:"how_to_use"`
	SmartsSubset json.RawMessage `json:"smarts_subset"`
	Sources      []string
	Verification string
	Classes      []tableClass
}

type tableClass struct {
	Name, Smarts string
	Period       float64 // degree
	Peaks        []struct{ Angle, Spread, Weight float64 }
	Source, Note string
	Measured     json.RawMessage
}

// A torsionClass is a kind of bond with the angles that it likes.
type torsionClass struct {
	name    string
	pattern *pattern.Pattern
	period  float64 // radians
	peaks   []state
}

// A state is a preferred angle of a rotor.
type state struct {
	angle  float64 // radians, IUPAC sign
	spread float64 // radians, one standard deviation
	weight float64 // rough share before steric effects
}

// torsionClasses decodes the table once, in the order in which classes are tried.
var torsionClasses = sync.OnceValues(func() ([]torsionClass, error) {
	var t torsionTable
	dec := json.NewDecoder(bytes.NewReader(torsionsJSON))
	dec.DisallowUnknownFields()
	if err := dec.Decode(&t); err != nil {
		return nil, fmt.Errorf("generate: torsion table: %w", err)
	}
	if len(t.Sources) == 0 {
		return nil, fmt.Errorf("generate: torsion table: no sources")
	}
	var classes []torsionClass
	for _, c := range t.Classes {
		p, err := pattern.Parse(c.Smarts)
		if err != nil {
			return nil, fmt.Errorf("generate: torsion class %q: %w", c.Name, err)
		}
		if p.ChainLength() < 4 || c.Period <= 0 || len(c.Peaks) == 0 {
			return nil, fmt.Errorf("generate: torsion class %q: want four atoms, a period and peaks", c.Name)
		}
		class := torsionClass{name: c.Name, pattern: p, period: c.Period * degree}
		for _, k := range c.Peaks {
			class.peaks = append(class.peaks, state{k.Angle * degree, k.Spread * degree, k.Weight})
		}
		classes = append(classes, class)
	}
	return classes, nil
})

// classify returns the first class that fits bond b-c, and the atoms a and d
// whose dihedral a-b-c-d its angles mean.
func classify(m *molecule.Molecule, b, c int) (class torsionClass, a, d int, err error) {
	classes, err := torsionClasses()
	if err != nil {
		return torsionClass{}, 0, 0, err
	}
	if k, _ := m.BondBetween(b, c); m.Bond(k).Order == 2 {
		return turningDouble(m, b, c)
	}
	for _, class := range classes {
		pairs := class.pattern.Torsions(m, b, c)
		for _, p := range class.pattern.Torsions(m, c, b) {
			pairs = append(pairs, [2]int{p[1], p[0]})
		}
		if len(pairs) == 0 {
			continue
		}
		best := pairs[0]
		for _, p := range pairs[1:] {
			if better(m, p, best) {
				best = p
			}
		}
		return class, best[0], best[1], nil
	}
	return torsionClass{}, 0, 0, fmt.Errorf("no torsion class fits the bond between %s and %s", atomLabel(m, b), atomLabel(m, c))
}

// turningDouble is for the drawn double bond of a delocalised cation and for
// imines that turn over: flat, either way round.
func turningDouble(m *molecule.Molecule, b, c int) (class torsionClass, a, d int, err error) {
	best := [2]int{-1, -1}
	for _, i := range m.Neighbours(b) {
		for _, j := range m.Neighbours(c) {
			if p := [2]int{i, j}; i != c && j != b && (best[0] < 0 || better(m, p, best)) {
				best = p
			}
		}
	}
	class = torsionClass{name: "double bond that turns over", period: 2 * math.Pi, peaks: []state{
		{angle: 0, spread: 10 * degree, weight: 0.5}, {angle: math.Pi, spread: 10 * degree, weight: 0.5},
	}}
	return class, best[0], best[1], nil
}

// better ranks pairs of ends: heavy atoms first, then those that carry more of
// them, then the lower numbers.
func better(m *molecule.Molecule, p, q [2]int) bool {
	heavy := func(i int) int {
		if m.Atom(i).Number > 1 {
			return 1
		}
		return 0
	}
	carried := func(i int) int {
		n := 0
		for _, j := range m.Neighbours(i) {
			n += heavy(j)
		}
		return n
	}
	if hp, hq := heavy(p[0])+heavy(p[1]), heavy(q[0])+heavy(q[1]); hp != hq {
		return hp > hq
	}
	if cp, cq := carried(p[0])+carried(p[1]), carried(q[0])+carried(q[1]); cp != cq {
		return cp > cq
	}
	return p[0] < q[0] || p[0] == q[0] && p[1] < q[1]
}
