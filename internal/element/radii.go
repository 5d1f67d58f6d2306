package element

import (
	"bytes"
	_ "embed"
	"encoding/json"
	"fmt"

	"torsieve/internal/units"
)

//go:embed data/covalent_radii.json
var covalentJSON []byte

//go:embed data/vdw_radii.json
var vdwJSON []byte

var covalent, vdw [MaxZ + 1]float64 // bohr; 0 where not known

// CovalentRadius returns the single-bond radius of z in bohr, or 0 where the
// source has none (beyond curium). Carbon's is that of sp3; Mn, Fe and Co have
// their high-spin radius.
//
// Source: Cordero et al., Dalton Trans. 2008, 2832, doi:10.1039/b801115j, Table 2.
func CovalentRadius(z int) float64 {
	check(z)
	return covalent[z]
}

// VdwRadius returns the van der Waals radius of z in bohr, or 0 where no source
// has one (Pm and beyond Es).
//
// Source: Bondi, J. Phys. Chem. 1964, 68, 441, with hydrogen of Rowland and
// Taylor (1996) and the main-group elements of Mantina et al. (2009); metals
// that these leave out from Alvarez, Dalton Trans. 2013, 42, 8617,
// doi:10.1039/C3DT50599E, whose radii run a little larger.
func VdwRadius(z int) float64 {
	check(z)
	return vdw[z]
}

// highSpin and the sp3 label say which of several radii of an element is meant.
var chosenLabel = map[string]string{
	"C_sp3": "C", "Mn_highspin": "Mn", "Fe_highspin": "Fe", "Co_highspin": "Co",
}

var otherLabel = map[string]bool{
	"C_sp2": true, "C_sp": true, "Mn_lowspin": true, "Fe_lowspin": true, "Co_lowspin": true,
}

// The tables are part of the program: one that does not decode is a broken
// build, and nothing can be done without it.
func init() {
	if err := decodeCovalent(); err != nil {
		panic(err)
	}
	if err := decodeVdw(); err != nil {
		panic(err)
	}
}

func decodeCovalent() error {
	var t struct {
		Title, Unit, Source, Verification, Use string
		Radii                                  []struct {
			Label string
			R     float64
			Esd   *float64
			NData *int `json:"n_data"`
		}
	}
	if err := decode(covalentJSON, &t); err != nil {
		return fmt.Errorf("element: covalent radii: %w", err)
	}
	for _, r := range t.Radii {
		if otherLabel[r.Label] {
			continue
		}
		symbol := r.Label
		if s, ok := chosenLabel[symbol]; ok {
			symbol = s
		}
		if err := set(&covalent, symbol, r.R); err != nil {
			return err
		}
	}
	return nil
}

func decodeVdw() error {
	type radius struct {
		Element string
		R       float64
		New     bool `json:"new_2009"`
	}
	type column struct {
		Source, Verification, Note string
		Radii                      []radius
	}
	var t struct {
		Title, Unit string
		Bondi       column `json:"bondi_mantina"`
		Alvarez     column
	}
	if err := decode(vdwJSON, &t); err != nil {
		return fmt.Errorf("element: van der Waals radii: %w", err)
	}
	for _, radii := range [][]radius{t.Alvarez.Radii, t.Bondi.Radii} { // the later one wins
		for _, r := range radii {
			if err := set(&vdw, r.Element, r.R); err != nil {
				return err
			}
		}
	}
	return nil
}

func decode(data []byte, into any) error {
	dec := json.NewDecoder(bytes.NewReader(data))
	dec.DisallowUnknownFields()
	return dec.Decode(into)
}

func set(table *[MaxZ + 1]float64, symbol string, angstrom float64) error {
	z, ok := Number(symbol)
	if !ok || angstrom <= 0 {
		return fmt.Errorf("element: radius %g for %q", angstrom, symbol)
	}
	table[z] = angstrom * units.Angstrom
	return nil
}
