package generate

import (
	"slices"

	"torsieve/molecule"
)

// An assembly puts a molecule together from shapes of its fragments and angles
// of its rotors. It holds scratch memory: one goroutine at a time.
type assembly struct {
	m      *molecule.Molecule
	frags  []*fragment
	turns  []torsion
	steps  []step // in the order of placing; the first is the root
	screen *clashScreen
	points [][]float64 // by fragment: core and outside in space
	placed []int       // atoms placed so far
}

// A step places one fragment on one that is placed already.
type step struct {
	frag   int
	turn   int // index of the rotor between them; -1 for the root
	parent int
	// numbers within the parent's shape: the bond and the end of the dihedral
	root, tip, beside int
	local             [][]float64 // by shape: its points in the frame of the bond
}

// A recipe is a conformer in the terms of an assembly.
type recipe struct {
	shapes []int     // by fragment
	angles []float64 // by rotor, radians
}

func (r recipe) clone() recipe {
	return recipe{slices.Clone(r.shapes), slices.Clone(r.angles)}
}

func newAssembly(m *molecule.Molecule, screen *clashScreen, frags []*fragment, turns []torsion) *assembly {
	a := &assembly{m: m, frags: frags, turns: turns, screen: screen}
	for _, f := range frags {
		a.points = append(a.points, make([]float64, 3*(len(f.core)+len(f.outside))))
	}
	a.order()
	return a
}

// order walks from the largest fragment outwards, breadth first, larger
// branches first, so that clashes show early.
func (a *assembly) order() {
	root := 0
	for k, f := range a.frags {
		if len(f.core) > len(a.frags[root].core) {
			root = k
		}
	}
	owner := make(map[int]int)
	for k, f := range a.frags {
		for _, i := range f.core {
			owner[i] = k
		}
	}
	a.steps = []step{{frag: root, turn: -1, parent: -1}}
	for at := 0; at < len(a.steps); at++ {
		from := a.steps[at]
		f := a.frags[from.frag]
		joints := slices.Clone(f.joints)
		slices.SortStableFunc(joints, func(p, q joint) int {
			return len(a.frags[owner[q.outside]].core) - len(a.frags[owner[p.outside]].core)
		})
		for _, j := range joints {
			if j.rotor != from.turn {
				a.steps = append(a.steps, a.step(from.frag, owner[j.outside], j))
			}
		}
	}
}

// step prepares the placing of child on parent over joint j of the parent.
func (a *assembly) step(parent, child int, j joint) step {
	t, p, c := a.turns[j.rotor], a.frags[parent], a.frags[child]
	near, far := t.a, t.d
	if t.b != j.inside {
		near, far = t.d, t.a
	}
	s := step{frag: child, turn: j.rotor, parent: parent,
		root: p.place(j.inside), tip: p.place(j.outside), beside: p.place(near)}
	for _, shape := range c.shapes {
		f := bondFrame(shape.x, c.place(j.inside), c.place(j.outside), c.place(far))
		local := make([]float64, len(shape.x))
		f.into(local, shape.x)
		s.local = append(s.local, local)
	}
	return s
}

// place returns the number of atom i within the fragment's shapes.
func (f *fragment) place(i int) int {
	if k, ok := slices.BinarySearch(f.core, i); ok {
		return k
	}
	k, ok := slices.BinarySearch(f.outside, i)
	if !ok {
		panic("generate: atom is not in the fragment")
	}
	return len(f.core) + k
}

// put places the fragment of step k with the recipe's shape and angle into x
// and returns its crowding with what is placed already (infinite: a clash).
func (a *assembly) put(k int, r recipe, x []float64) float64 {
	s := a.steps[k]
	points := a.points[s.frag]
	if s.turn < 0 {
		a.placed = a.placed[:0]
		copy(points, a.frags[s.frag].shapes[r.shapes[s.frag]].x)
	} else {
		f := bondFrame(a.points[s.parent], s.root, s.tip, s.beside).turned(r.angles[s.turn])
		f.outOf(points, s.local[r.shapes[s.frag]])
	}
	core := a.frags[s.frag].core
	for n, i := range core {
		copy(x[3*i:3*i+3], points[3*n:])
	}
	return a.screen.between(x, a.placed, core)
}

// settle counts the fragment of step k as placed; unsettle takes it back.
func (a *assembly) settle(k int) { a.placed = append(a.placed, a.frags[a.steps[k].frag].core...) }

func (a *assembly) unsettle(k int) {
	a.placed = a.placed[:len(a.placed)-len(a.frags[a.steps[k].frag].core)]
}

// force makes the whole structure without regard for clashes.
func (a *assembly) force(r recipe, x []float64) {
	for k := range a.steps {
		a.put(k, r, x)
		a.settle(k)
	}
}
