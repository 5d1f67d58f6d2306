package molecule

import "sync"

// shared is what the stereoisomers of a graph have in common and what is worked
// out from the finished graph.
type shared struct {
	node        []int // by atom: number in the view of its fragment, -1 for plain hydrogens
	fragment    []int // by atom
	delocalised delocalised
	classes     func() []int
	distances   func() [][]int32
}

// settle prepares what depends on the aromatic flags.
func (g *graph) settle() {
	g.shared.node, g.shared.fragment = g.numberNodes()
	g.shared.delocalised = g.findDelocalised()
	g.shared.classes = sync.OnceValue(g.classes)
	g.shared.distances = sync.OnceValue(g.allDistances)
}

// lazy holds what a molecule works out on first use.
type lazy struct {
	smiles func() string
	chiral func() bool
	rotors func() []Rotor
}

func newMolecule(g *graph, centres []Centre, bonds []StereoBond) *Molecule {
	m := &Molecule{graph: g, centres: centres, stereoBonds: bonds}
	m.lazy.smiles = sync.OnceValue(m.writeSMILES)
	m.lazy.chiral = sync.OnceValue(m.findChirality)
	m.lazy.rotors = sync.OnceValue(m.findRotors)
	return m
}
