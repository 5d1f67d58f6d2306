package semiempirical

import (
	"bytes"
	_ "embed"
	"encoding/json"
	"fmt"
	"sync"

	"torsieve/internal/units"
)

//go:embed data/gfn2.json
var gfn2JSON []byte

//go:embed data/sto-ng.json
var stoJSON []byte

// hartreeEV is the electronvolts in a hartree that GFN2-xTB was fitted with,
// and boltzmann (hartree/K) the constant of its electronic temperature. Both
// are older than units': with the modern values these parameters would mean
// something else.
const (
	hartreeEV = 27.21138505
	boltzmann = 3.166808578545117e-6
)

// MaxZ is the highest atomic number with parameters.
const MaxZ = 86

// table is data/gfn2.json as it stands.
type table struct {
	Method, DOI string
	Source      []string
	Units       map[string]string
	Elements    []element
}

// An element holds the parameters of one, as tabulated; decoding turns the
// lengths into bohr, the energies into hartree and percent into shares.
type element struct {
	Symbol            string
	Z                 int
	Hardness          float64
	ThirdOrder        float64 `json:"third_order"`
	RepulsionAlpha    float64 `json:"repulsion_alpha"`
	RepulsionCharge   float64 `json:"repulsion_charge"`
	DipoleKernel      float64 `json:"dipole_kernel"`
	QuadrupoleKernel  float64 `json:"quadrupole_kernel"`
	MultipoleRadius   float64 `json:"multipole_radius"`
	MultipoleCN       float64 `json:"multipole_cn"`
	Electronegativity float64
	CNRadius          float64 `json:"cn_radius"`
	AtomicRadius      float64 `json:"atomic_radius"`
	Shells            []shell
}

// A shell holds the parameters of one valence shell.
type shell struct {
	N, L       int
	Gaussians  int
	Zeta       float64 // 1/bohr
	Level      float64 // of the atom alone, hartree
	CNShift    float64 `json:"cn_shift"` // fall of the level per neighbour, hartree
	Polynomial float64 // of the distance in H0
	Occupation float64 // of the neutral atom
	Kappa      float64 // hardness is the element's times 1+Kappa
}

// fits is data/sto-ng.json as it stands.
type fits struct {
	DOI    string
	Source []string
	Fits   []fit
}

// A fit is a Slater function with exponent 1 as a sum of normalised Gaussians.
type fit struct {
	N, L                    int
	Exponents, Coefficients []float64
}

// gfn2 decodes the embedded parameters once.
var gfn2 = sync.OnceValues(func() (*table, error) {
	t := new(table)
	if err := decode(gfn2JSON, t); err != nil {
		return nil, fmt.Errorf("semiempirical: data/gfn2.json: %w", err)
	}
	if t.DOI == "" || len(t.Elements) != MaxZ {
		return nil, fmt.Errorf("semiempirical: data/gfn2.json: no DOI, or %d elements instead of %d", len(t.Elements), MaxZ)
	}
	for i := range t.Elements {
		e := &t.Elements[i]
		if e.Z != i+1 || len(e.Shells) == 0 {
			return nil, fmt.Errorf("semiempirical: data/gfn2.json: element %d of the list is number %d", i+1, e.Z)
		}
		e.CNRadius *= units.Angstrom
		e.AtomicRadius *= units.Angstrom
		for k := range e.Shells {
			s := &e.Shells[k]
			s.Level /= hartreeEV
			s.CNShift /= hartreeEV
			s.Polynomial *= 0.01
		}
	}
	return t, nil
})

// slaterFits decodes the embedded expansions once.
var slaterFits = sync.OnceValues(func() (*fits, error) {
	t := new(fits)
	if err := decode(stoJSON, t); err != nil {
		return nil, fmt.Errorf("semiempirical: data/sto-ng.json: %w", err)
	}
	if t.DOI == "" {
		return nil, fmt.Errorf("semiempirical: data/sto-ng.json: no DOI")
	}
	return t, nil
})

func decode(data []byte, into any) error {
	d := json.NewDecoder(bytes.NewReader(data))
	d.DisallowUnknownFields()
	return d.Decode(into)
}

// find returns the expansion with so many Gaussians.
func (t *fits) find(n, l, gaussians int) (*fit, error) {
	for i := range t.Fits {
		if f := &t.Fits[i]; f.N == n && f.L == l && len(f.Exponents) == gaussians && len(f.Coefficients) == gaussians {
			return f, nil
		}
	}
	return nil, fmt.Errorf("semiempirical: data/sto-ng.json: no expansion of n = %d, l = %d in %d Gaussians", n, l, gaussians)
}
