package generate

import (
	"bytes"
	_ "embed"
	"encoding/json"
	"fmt"
	"strings"
	"sync"

	"torsieve/internal/element"
	"torsieve/internal/units"
	"torsieve/molecule"
)

//go:embed data/bonds_angles.json
var bondsJSON []byte

// bondTable is data/bonds_angles.json as it stands.
type bondTable struct {
	Title, Unit, Source, Verification, Use, Match string
	Bonds                                         []struct {
		Bond, Match string
		R           float64 // angstrom
	}
	Angles []struct {
		Angle string
		Deg   float64
	}
}

// bondLengths maps a pair like "C3-N2" to its length in bohr, in both orders.
var bondLengths = sync.OnceValues(func() (map[string]float64, error) {
	var t bondTable
	dec := json.NewDecoder(bytes.NewReader(bondsJSON))
	dec.DisallowUnknownFields()
	if err := dec.Decode(&t); err != nil {
		return nil, fmt.Errorf("generate: bond lengths: %w", err)
	}
	if t.Source == "" {
		return nil, fmt.Errorf("generate: bond lengths: no source")
	}
	lengths := make(map[string]float64)
	for _, b := range t.Bonds {
		for _, key := range strings.Fields(b.Match) {
			at := strings.IndexAny(key, "-=#:")
			if at < 0 || b.R <= 0 {
				return nil, fmt.Errorf("generate: bond lengths: entry %q", b.Bond)
			}
			r := b.R * units.Angstrom
			lengths[key] = r
			lengths[key[at+1:]+key[at:at+1]+key[:at]] = r
		}
	}
	return lengths, nil
})

// bondLength returns the usual length of bond k, bohr: from the table or, for
// pairs that it does not have, the sum of the covalent radii, shortened for
// multiple bonds.
func bondLength(table map[string]float64, m *molecule.Molecule, h []hybrid, k int) float64 {
	b := m.Bond(k)
	symbol := "-"
	switch {
	case b.Aromatic:
		symbol = ":"
	case b.Order > 1:
		symbol = "-=#"[b.Order-1 : b.Order]
	}
	if r, ok := table[bondSide(m, h, b.A)+symbol+bondSide(m, h, b.B)]; ok {
		return r
	}
	shrink := [...]float64{1, 1, 0.87, 0.78}[b.Order]
	if b.Aromatic {
		shrink = 0.91
	}
	return shrink * (element.CovalentRadius(m.Atom(b.A).Number) + element.CovalentRadius(m.Atom(b.B).Number))
}

func bondSide(m *molecule.Molecule, h []hybrid, i int) string {
	a := m.Atom(i)
	kind := "3"
	switch {
	case a.Aromatic:
		kind = "a"
	case a.Number == 7 && a.Charge == 1 && h[i] == tetrahedral:
		kind = "+"
	case h[i] == linear:
		kind = "1"
	case h[i] == trigonal:
		kind = "2"
	}
	return element.Symbol(a.Number) + kind
}
