package molecule

// A Point is what a tier found at one geometry.
type Point struct {
	Energy     float64   // hartree
	Parts      []Part    // named contributions that sum to Energy
	Charges    []float64 // one per atom, e; nil where the tier has none
	Dipole     []float64 // x, y, z in e bohr; nil where the tier has none
	Iterations int       // self-consistency cycles; 0 where there are none
	Warnings   []string  // doubts that a chemist should read
}

// A Part is one named contribution to an energy, in hartree.
type Part struct {
	Name   string
	Energy float64
}
