// Package calibration holds what reference energies taught about the tiers: how
// to combine them into one final energy, how far that lies from the truth, and
// how the energies of one tier scatter about those of the tier below.
//
// The numbers are a fit that the program in the folder fit makes anew from the
// published energies in testdata/reference/energies:
//
//	go run ./screen/calibration/fit testdata/reference/energies > screen/calibration/data/calibration.json
package calibration

import (
	"bytes"
	_ "embed"
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"sync"

	"torsieve/internal/units"
	"torsieve/screen/ensemble"
)

//go:embed data/calibration.json
var calibrationJSON []byte

// A Table is data/calibration.json as it stands.
type Table struct {
	Source       []string
	Command      string
	Combinations []Combination
	Pairs        []Pair
}

// Load returns the embedded table. A field that the code does not know is an
// error, and so is a table without its source.
var Load = sync.OnceValues(func() (*Table, error) {
	t := new(Table)
	dec := json.NewDecoder(bytes.NewReader(calibrationJSON))
	dec.DisallowUnknownFields()
	if err := dec.Decode(t); err != nil {
		return nil, fmt.Errorf("calibration: %w", err)
	}
	if len(t.Source) == 0 {
		return nil, errors.New("calibration: no source")
	}
	for _, c := range t.Combinations {
		if err := c.check(); err != nil {
			return nil, fmt.Errorf("calibration: %s: %w", c.Final, err)
		}
	}
	for _, p := range t.Pairs {
		if err := p.Residual.check(); err != nil {
			return nil, fmt.Errorf("calibration: %s to %s: %w", p.Lower, p.Upper, err)
		}
	}
	return t, nil
})

// A Law is the size of a residual within a molecule,
//
//	s = Scale (heavy atoms/25)^Heavy ((rotors+1)/6)^Rotors d^Disagreement,
//
// where d is by how much two tiers disagree on the molecule, in kcal/mol (see
// Disagreement). The variance of a molecule is Freedom s^2 / chi^2(Freedom).
type Law struct {
	Scale        float64 `json:"scale_kcal_mol"`
	Heavy        float64
	Rotors       float64
	Disagreement float64
	Freedom      float64
}

func (l Law) check() error {
	if !(l.Scale > 0 && l.Freedom > 0) || math.IsInf(l.Scale, 0) {
		return fmt.Errorf("residual %+v", l)
	}
	return nil
}

// Size returns s in kcal/mol, for a disagreement in hartree.
func (l Law) Size(heavy, rotors int, disagreement float64) float64 {
	d := disagreement / units.KcalPerMol
	return l.Scale * math.Pow(float64(max(heavy, 1))/25, l.Heavy) *
		math.Pow(float64(rotors+1)/6, l.Rotors) *
		math.Pow(math.Hypot(d, leastDisagreement), l.Disagreement)
}

// Scatter returns the law's scatter for a molecule: s in hartree and the freedom.
func (l Law) Scatter(heavy, rotors int, disagreement float64) ensemble.Scatter {
	return ensemble.Scatter{Scale: l.Size(heavy, rotors, disagreement) * units.KcalPerMol, Freedom: l.Freedom}
}

// leastDisagreement in kcal/mol keeps two tiers that happen to agree from being
// taken for the truth.
const leastDisagreement = 0.05

// Disagreement returns by how much two tiers differ within a molecule: the
// standard deviation of the differences between their energies, in hartree. It
// is 0 for a single conformer. Panics if there are more energies of one tier.
func Disagreement(a, b []float64) float64 {
	if len(a) != len(b) {
		panic("calibration: as many energies of one tier as of the other are wanted")
	}
	if len(a) < 2 {
		return 0
	}
	n := float64(len(a))
	var mean, square float64
	for i := range a {
		mean += ((a[i] - a[0]) - (b[i] - b[0])) / n
	}
	for i := range a {
		d := (a[i] - a[0]) - (b[i] - b[0]) - mean
		square += d * d
	}
	return math.Sqrt(square / (n - 1))
}
