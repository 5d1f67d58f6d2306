package hf

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

//go:embed data/d3-r0ab.json.gz
var pairRadiiGzip []byte

// pairRadii decodes the cut-off radii of pairs of elements, in bohr;
// [za-1][zb-1] with zb <= za.
var pairRadii = sync.OnceValues(func() ([][]float64, error) {
	var t struct {
		About, Source, Unit string
		R0                  [][]float64
	}
	r, err := gzip.NewReader(bytes.NewReader(pairRadiiGzip))
	if err != nil {
		return nil, fmt.Errorf("hf: pair radii: %w", err)
	}
	dec := json.NewDecoder(r)
	dec.DisallowUnknownFields()
	if err := dec.Decode(&t); err != nil {
		return nil, fmt.Errorf("hf: pair radii: %w", err)
	}
	for _, row := range t.R0 {
		for i := range row {
			row[i] *= units.Angstrom
		}
	}
	return t.R0, nil
})

// srb is the short-range basis term of HF-3c for one molecule: it takes off
// what the small basis makes bonds of light elements too long.
//
// Source: R. Sure, S. Grimme, J. Comput. Chem. 2013, 34, 1672,
// doi:10.1002/jcc.23317. Pairs with an element beyond argon have no
// such term, as in the authors' program.
type srb struct {
	scale []float64 // hartree, one a pair (a, b < a)
	decay []float64 // 1/bohr
}

// The two fitted numbers of HF-3c, and the heaviest element with the term.
const (
	srbScale   = 0.03
	srbGamma   = 0.7
	srbHighest = 18
)

// newSRB prepares for a molecule.
func newSRB(numbers []int) (*srb, error) {
	radii, err := pairRadii()
	if err != nil {
		return nil, err
	}
	s := new(srb)
	for a, za := range numbers {
		for _, zb := range numbers[:a] {
			scale, decay := 0.0, 0.0
			if max(za, zb) <= srbHighest {
				r0 := radii[max(za, zb)-1][min(za, zb)-1]
				scale = srbScale * math.Pow(float64(za*zb), 1.5)
				decay = srbGamma * math.Pow(r0, 0.75)
			}
			s.scale, s.decay = append(s.scale, scale), append(s.decay, decay)
		}
	}
	return s, nil
}

// energy returns the term at x (3N, bohr) in hartree and, where grad is not
// nil, adds its gradient in hartree/bohr.
func (s *srb) energy(x, grad []float64) float64 {
	return sumPairs(x, grad, func(k, _, _ int, r float64) (float64, float64) {
		e := -s.scale[k] * math.Exp(-s.decay[k]*r)
		return e, -s.decay[k] * e
	})
}
