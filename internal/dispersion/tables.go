package dispersion

import (
	"bytes"
	"compress/gzip"
	_ "embed"
	"encoding/json"
	"fmt"
	"math"
	"sync"

	"torsieve/internal/units"
)

// MaxZ is the highest atomic number with parameters, radon.
const MaxZ = 86

//go:embed data/atomic.json
var atomicJSON []byte

// atomic holds what D3, D4 and EEQ share about an element. Index 0 is unused.
type atomic struct {
	radius            [MaxZ + 1]float64 // covalent, times 4/3, bohr
	multipole         [MaxZ + 1]float64 // Q of C8 = 3 QA QB C6, bohr
	electronegativity [MaxZ + 1]float64 // Pauling scale
	hardness          [MaxZ + 1]float64 // hartree
	zeff              [MaxZ + 1]float64 // nuclear charge without the core replaced by a potential
}

// atomicTable decodes data/atomic.json once.
//
// The tables are part of the program: one that does not decode is a broken
// build, hence the panic here and for the other tables of this package.
var atomicTable = sync.OnceValue(func() *atomic {
	var file struct {
		About, Units      string
		Source            map[string]string
		Symbols           []string
		CovalentRadius    []float64 `json:"covalent_radius_angstrom"`
		R4OverR2          []float64 `json:"r4_over_r2"`
		Electronegativity []float64
		Hardness, Zeff    []float64
	}
	decodeTable("atomic.json", atomicJSON, &file)
	t := new(atomic)
	perElement("covalent radii", &t.radius, file.CovalentRadius)
	perElement("r4/r2", &t.multipole, file.R4OverR2)
	perElement("electronegativities", &t.electronegativity, file.Electronegativity)
	perElement("hardnesses", &t.hardness, file.Hardness)
	perElement("effective charges", &t.zeff, file.Zeff)
	for z := 1; z <= MaxZ; z++ {
		t.radius[z] *= 4.0 / 3.0 * units.Angstrom
		t.multipole[z] = math.Sqrt(0.5 * math.Sqrt(float64(z)) * t.multipole[z])
	}
	return t
})

// perElement copies a column that starts with hydrogen.
func perElement(name string, dst *[MaxZ + 1]float64, column []float64) {
	if len(column) != MaxZ {
		panic(fmt.Sprintf("dispersion: table of %s has %d elements, want %d", name, len(column), MaxZ))
	}
	copy(dst[1:], column)
}

// decodeTable decodes an embedded JSON file into a struct that knows all its
// fields.
func decodeTable(name string, data []byte, into any) {
	dec := json.NewDecoder(bytes.NewReader(data))
	dec.DisallowUnknownFields()
	if err := dec.Decode(into); err != nil {
		panic(fmt.Sprintf("dispersion: %s: %v", name, err))
	}
}

// decodeGzip is decodeTable for a compressed file.
func decodeGzip(name string, data []byte, into any) {
	r, err := gzip.NewReader(bytes.NewReader(data))
	if err != nil {
		panic(fmt.Sprintf("dispersion: %s: %v", name, err))
	}
	dec := json.NewDecoder(r)
	dec.DisallowUnknownFields()
	if err := dec.Decode(into); err != nil {
		panic(fmt.Sprintf("dispersion: %s: %v", name, err))
	}
}

// checkNumbers panics for an element without parameters.
func checkNumbers(numbers []int) {
	for _, z := range numbers {
		if z < 1 || z > MaxZ {
			panic("dispersion: atomic number out of range")
		}
	}
}
