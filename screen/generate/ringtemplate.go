package generate

import (
	"bytes"
	_ "embed"
	"encoding/json"
	"fmt"
	"math"
	"sync"

	"torsieve/internal/geom"
	"torsieve/internal/units"
)

//go:embed data/ring_puckers.json
var puckersJSON []byte

// puckerTable is data/ring_puckers.json as it stands.
type puckerTable struct {
	Title, Unit, Source, Verification, Build string
	Templates                                []struct {
		N            int
		Name, Kind   string
		CP           map[string][]float64
		Z            []float64 // angstrom
		RingTorsions []float64 `json:"ring_torsions"` // entry i is atoms i-1, i, i+1, i+2; degree
	}
}

// A ringTemplate is a usual shape of a ring of so many atoms.
type ringTemplate struct {
	name     string
	z        []float64 // bohr, out of the mean plane
	torsions []float64 // radians; entry i about the bond of atoms i and i+1
}

// ringTemplates decodes the table once, by ring size. The heights of an entry
// must be those of its amplitudes and phases.
var ringTemplates = sync.OnceValues(func() (map[int][]ringTemplate, error) {
	var t puckerTable
	dec := json.NewDecoder(bytes.NewReader(puckersJSON))
	dec.DisallowUnknownFields()
	if err := dec.Decode(&t); err != nil {
		return nil, fmt.Errorf("generate: ring shapes: %w", err)
	}
	if t.Source == "" {
		return nil, fmt.Errorf("generate: ring shapes: no source")
	}
	bySize := make(map[int][]ringTemplate)
	for _, e := range t.Templates {
		if len(e.Z) != e.N || len(e.RingTorsions) != e.N {
			return nil, fmt.Errorf("generate: ring shape %q: want %d heights and torsions", e.Name, e.N)
		}
		r := ringTemplate{name: e.Name}
		for j := range e.N {
			r.z = append(r.z, e.Z[j]*units.Angstrom)
			r.torsions = append(r.torsions, e.RingTorsions[j]*degree)
		}
		if err := r.check(e.CP); err != nil {
			return nil, err
		}
		bySize[e.N] = append(bySize[e.N], r)
	}
	return bySize, nil
})

// check compares the heights with the amplitudes (angstrom) and phases (degree).
func (r ringTemplate) check(cp map[string][]float64) error {
	n := len(r.z)
	amplitudes, phases := geom.PuckeringModes(n)
	if amplitudes == 0 || n == 4 && len(cp) == 0 {
		return nil
	}
	p := geom.Puckering{Amplitude: make([]float64, amplitudes), Phase: make([]float64, phases)}
	for k := range amplitudes {
		v := cp[fmt.Sprintf("q%d", k+2)]
		if len(v) == 0 {
			return fmt.Errorf("generate: ring shape %q: no amplitude q%d", r.name, k+2)
		}
		p.Amplitude[k] = v[0] * units.Angstrom
		if k < phases && len(v) > 1 {
			p.Phase[k] = v[1] * degree
		}
	}
	for j, z := range p.Heights(n) {
		if math.Abs(z-r.z[j]) > 2e-4*units.Angstrom {
			return fmt.Errorf("generate: ring shape %q: height %d does not fit its amplitudes", r.name, j)
		}
	}
	return nil
}

// coordinates builds the ring with bonds of mean length b.
func (r ringTemplate) coordinates(b float64) []float64 {
	n := len(r.z)
	// With all atoms on a circle of radius R a bond is sqrt(c R^2 + dz^2) long;
	// R is adjusted until the mean is b.
	c := 2 - 2*math.Cos(2*math.Pi/float64(n))
	radius := b / math.Sqrt(c)
	for range 50 {
		var mean float64
		for j := range n {
			mean += math.Hypot(math.Sqrt(c)*radius, r.z[(j+1)%n]-r.z[j]) / float64(n)
		}
		radius *= b / mean
	}
	x := make([]float64, 0, 3*n)
	for j := range n {
		sin, cos := math.Sincos(2 * math.Pi * float64(j) / float64(n))
		x = append(x, radius*sin, radius*cos, r.z[j])
	}
	return x
}
