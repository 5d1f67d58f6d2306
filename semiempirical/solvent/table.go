package solvent

import (
	"bytes"
	_ "embed"
	"encoding/json"
	"fmt"
	"slices"
	"sync"

	"torsieve/internal/units"
)

// MaxZ is the highest atomic number in the tables, radon. Not every element
// below it was fitted; see Unsupported.
const MaxZ = 86

//go:embed data/alpb.json
var alpbJSON []byte

// A table is data/alpb.json, with the columns of all elements in its units.
type table struct {
	About, Source, DOI string
	Units              map[string]string
	RadiiSource        string     `json:"radii_source"`
	Radii              []float64  // of the elements from hydrogen, bohr once decoded
	KernelZeta         float64    `json:"kernel_zeta"`
	ShapeAlpha         float64    `json:"shape_alpha"`
	BornPolynomial     [3]float64 `json:"born_polynomial"`
	Smoothing          float64    // bohr once decoded
	Unfitted           []int      // atomic numbers
	Solvents           []fit
}

// A fit is what belongs to one solvent, in the units of the file until decoded
// and in atomic units then. Columns start with hydrogen.
type fit struct {
	Name         string
	Permittivity float64
	BornScale    float64   `json:"born_scale"`
	Probe        float64   // radius, bohr
	Shift        float64   // hartree
	Descreening  []float64 // factor on the radius of an atom that displaces solvent
	Tension      []float64 // hartree/bohr^2
	HydrogenBond []float64 `json:"hydrogen_bond"` // strength, hartree/e^2; not positive
}

// alpb decodes the table once. It is part of the program: one that does not
// decode is a broken build, hence the panic.
var alpb = sync.OnceValue(func() *table {
	t := new(table)
	decode("alpb.json", alpbJSON, t)
	if t.DOI == "" {
		panic("solvent: alpb.json: no DOI")
	}
	t.Smoothing *= units.Angstrom
	toAtomic("radii", t.Radii, units.Angstrom)
	for i := range t.Solvents {
		f := &t.Solvents[i]
		f.Probe *= units.Angstrom
		f.Shift *= units.KcalPerMol
		toAtomic(f.Name+" descreening", f.Descreening, 1)
		toAtomic(f.Name+" tension", f.Tension, 1e-5)
		toAtomic(f.Name+" hydrogen bonds", f.HydrogenBond, 1)
		for z, h := range f.HydrogenBond {
			f.HydrogenBond[z] = -h * h * units.KcalPerMol
		}
	}
	return t
})

// toAtomic multiplies a column by the size of its unit.
func toAtomic(name string, column []float64, unit float64) {
	if len(column) != MaxZ {
		panic(fmt.Sprintf("solvent: alpb.json: %s has %d elements, want %d", name, len(column), MaxZ))
	}
	for i := range column {
		column[i] *= unit
	}
}

// decode reads an embedded file into a struct that knows all its fields.
func decode(name string, data []byte, into any) {
	dec := json.NewDecoder(bytes.NewReader(data))
	dec.DisallowUnknownFields()
	if err := dec.Decode(into); err != nil {
		panic(fmt.Sprintf("solvent: %s: %v", name, err))
	}
}

// fitOf returns the parameters of a solvent by its own name.
func (t *table) fitOf(name string) *fit {
	i := slices.IndexFunc(t.Solvents, func(f fit) bool { return f.Name == name })
	if i < 0 {
		panic("solvent: no parameters for " + name)
	}
	return &t.Solvents[i]
}

// check looks for elements without parameters.
func (t *table) check(numbers []int) error {
	for a, z := range numbers {
		if z < 1 || z > MaxZ || slices.Contains(t.Unfitted, z) {
			return &Unsupported{Atom: a, Z: z}
		}
	}
	return nil
}

// column picks the numbers of a molecule's atoms from a column of elements.
func column(numbers []int, elements []float64) []float64 {
	c := make([]float64, len(numbers))
	for a, z := range numbers {
		c[a] = elements[z-1]
	}
	return c
}
