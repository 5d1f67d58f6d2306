package molecule

import "maps"

// Limits of the search through Kekule forms: beyond them the form stays as the
// input has it.
const (
	maxFormAtoms = 60
	maxForms     = 64
	maxFormSteps = 5000
)

// tryOtherForms looks at the other Kekule forms of the ring systems in which a
// double bond found no aromatic ring, and keeps the form with the most aromatic
// atoms, then bonds.
func (p *hueckel) tryOtherForms() {
	for _, system := range p.openSystems() {
		f := &formSearch{p: p, system: system, mate: make(map[int]int), best: p.drawnForm(system)}
		f.enumerate(0)
		best := *p
		for _, form := range f.forms {
			f.draw(form)
			q := newHueckel(p.g)
			q.run()
			if more := count(q.atom) - count(best.atom); more > 0 || more == 0 && count(q.bond) > count(best.bond) {
				best, f.best = *q, form
			}
		}
		f.draw(f.best)
		*p = best
	}
}

// ringDouble returns the partner of atom i in a double bond of a ring.
func (p *hueckel) ringDouble(i int) (j int, ok bool) {
	k := p.double[i]
	if k < 0 || !p.g.inRing[k] {
		return 0, false
	}
	j = p.g.other(k, i)
	return j, p.double[j] == k
}

// openSystems returns the sets of atoms with ring double bonds that ring bonds
// join, as far as one of the double bonds is not aromatic and there is more
// than one.
func (p *hueckel) openSystems() [][]int {
	var systems [][]int
	seen := make([]bool, len(p.g.atoms))
	for start := range p.g.atoms {
		if _, ok := p.ringDouble(start); !ok || seen[start] {
			continue
		}
		seen[start] = true
		system := []int{start}
		open := false
		for at := 0; at < len(system); at++ {
			i := system[at]
			open = open || !p.bond[p.double[i]]
			for n, j := range p.g.neighbours[i] {
				if _, ok := p.ringDouble(j); ok && !seen[j] && p.g.inRing[p.g.neighbourBonds[i][n]] {
					seen[j] = true
					system = append(system, j)
				}
			}
		}
		if open && len(system) > 2 && len(system) <= maxFormAtoms {
			systems = append(systems, system)
		}
	}
	return systems
}

func (p *hueckel) drawnForm(system []int) map[int]int {
	form := make(map[int]int, len(system))
	for _, i := range system {
		form[i], _ = p.ringDouble(i)
	}
	return form
}

// A formSearch enumerates the perfect pairings of a ring system.
type formSearch struct {
	p      *hueckel
	system []int
	mate   map[int]int
	forms  []map[int]int // atom -> partner
	best   map[int]int
	steps  int
}

// enumerate pairs the atoms from place at on in every way.
func (f *formSearch) enumerate(at int) {
	f.steps++
	if len(f.forms) >= maxForms || f.steps > maxFormSteps {
		return
	}
	for at < len(f.system) {
		if _, paired := f.mate[f.system[at]]; !paired {
			break
		}
		at++
	}
	if at == len(f.system) {
		f.forms = append(f.forms, maps.Clone(f.mate))
		return
	}
	g, i := f.p.g, f.system[at]
	for n, j := range g.neighbours[i] {
		if _, ok := f.p.ringDouble(j); !ok || !g.inRing[g.neighbourBonds[i][n]] {
			continue
		}
		if _, paired := f.mate[j]; paired {
			continue
		}
		f.mate[i], f.mate[j] = j, i
		f.enumerate(at + 1)
		delete(f.mate, i)
		delete(f.mate, j)
	}
}

// draw gives the bonds of the system the orders of a form.
func (f *formSearch) draw(form map[int]int) {
	g := f.p.g
	for _, i := range f.system {
		for n, j := range g.neighbours[i] {
			if _, ok := form[j]; !ok || !g.inRing[g.neighbourBonds[i][n]] {
				continue
			}
			b := &g.bonds[g.neighbourBonds[i][n]]
			b.Order = 1
			if form[i] == j {
				b.Order = 2
			}
		}
	}
}
