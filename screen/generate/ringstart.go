package generate

import (
	"math"

	"torsieve/internal/geom"
	"torsieve/internal/units"
	"torsieve/molecule"
	"torsieve/screen/generate/embed"
)

// flattest is the endocyclic dihedral that a flat ring bond may have in a
// template.
const flattest = 25 * degree

// ringProblems returns one embedding problem for each usual shape of the model's
// ring, where it has one flexible ring of at most seven atoms that shares no
// atom with another ring but aromatic ones. The shapes of other ring systems
// come from repeated embedding.
func (f *fragment) ringProblems(base *embed.Problem) ([]*embed.Problem, error) {
	ring := f.templateRing()
	if ring == nil {
		return nil, nil
	}
	templates, err := ringTemplates()
	if err != nil {
		return nil, err
	}
	h := hybrids(f.model)
	var problems []*embed.Problem
	for _, t := range templates[len(ring)] {
		if !t.suits(f.model, h, ring) {
			continue
		}
		if p := t.hold(base, ring); p != nil {
			problems = append(problems, p)
		}
	}
	return problems, nil
}

// templateRing returns the one flexible ring of the core, nil if there are more
// or it is too large.
func (f *fragment) templateRing() []int {
	var found []int
	h := hybrids(f.model)
	for _, ring := range f.model.Rings() {
		if ring[0] >= len(f.core) || !flexible(f.model, h, ring) {
			continue
		}
		if found != nil || len(ring) < 4 || len(ring) > 7 {
			return nil
		}
		found = ring
	}
	return found
}

func flexible(m *molecule.Molecule, h []hybrid, ring []int) bool {
	loose := 0
	for j, i := range ring {
		k, _ := m.BondBetween(i, ring[(j+1)%len(ring)])
		if !stiffBond(m, h, k) {
			loose++
		}
	}
	return loose >= 2 && len(ring) > 3
}

func stiffBond(m *molecule.Molecule, h []hybrid, k int) bool {
	b := m.Bond(k)
	return b.Aromatic || h[b.A] == trigonal && h[b.B] == trigonal
}

// suits says whether a template is flat where the ring is.
func (t ringTemplate) suits(m *molecule.Molecule, h []hybrid, ring []int) bool {
	puckered := false
	for j, i := range ring {
		k, _ := m.BondBetween(i, ring[(j+1)%len(ring)])
		if stiffBond(m, h, k) && math.Abs(t.torsions[j]) > flattest {
			return false
		}
		puckered = puckered || math.Abs(t.torsions[j]) > 5*degree
	}
	return puckered
}

// hold adds a template's distances and the signs of its dihedrals to a problem.
// It returns nil where the bounds do not admit them.
func (t ringTemplate) hold(base *embed.Problem, ring []int) *embed.Problem {
	const slack = 0.15 * units.Angstrom
	n := len(ring)
	p := &embed.Problem{Bounds: base.Bounds.Clone(), Chiral: base.Chiral, Planar: base.Planar}
	var bond float64
	for j := range ring {
		l, u := base.Bounds.At(ring[j], ring[(j+1)%n])
		bond += (l + u) / 2 / float64(n)
	}
	x := t.coordinates(bond)
	for i := range n {
		for j := range i {
			if i-j < 2 || i-j > n-2 {
				continue
			}
			d := geom.Distance(x, i, j)
			l, u := p.Bounds.At(ring[i], ring[j])
			if l, u = math.Max(l, d-slack), math.Min(u, d+slack); l < u {
				p.Bounds.Set(ring[i], ring[j], l, u)
			}
		}
	}
	if p.Bounds.Smooth() != nil {
		return nil
	}
	for j := range n {
		q := [4]int{(j + n - 1) % n, j, (j + 1) % n, (j + 2) % n}
		v := geom.SignedVolume(x, q[0], q[1], q[2], q[3])
		if math.Abs(t.torsions[j]) < 20*degree || n < 5 {
			continue
		}
		twist := embed.Volume{P: [4]int{ring[q[0]], ring[q[1]], ring[q[2]], ring[q[3]]}, Low: 0.5 * v, High: 1.5 * v}
		if v < 0 {
			twist.Low, twist.High = twist.High, twist.Low
		}
		p.Twist = append(p.Twist, twist)
	}
	return p
}
