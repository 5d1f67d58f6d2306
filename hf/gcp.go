package hf

import (
	"bytes"
	_ "embed"
	"encoding/json"
	"fmt"
	"math"
	"strings"
	"sync"

	"torsieve/internal/element"
)

//go:embed data/gcp.json
var gcpJSON []byte

// gcpTable is data/gcp.json; columns start with hydrogen.
type gcpTable struct {
	About, Source, Units string
	Parameters           map[string]gcpParams // by "hf/" and the name of the basis
	Zeff                 []int                // the element of the columns that stands for each element
	SlaterExponent       []float64            `json:"slater_exponent"` // 1/bohr
	SlaterShell          []int                `json:"slater_shell"`
	Missing              map[string][]float64 `json:"e_miss"`    // hartree
	Virtual              map[string][]float64 `json:"n_virtual"` // basis functions less occupied orbitals
}

// gcpParams belong to one method and basis.
type gcpParams struct {
	Basis                   string // key of Missing and Virtual
	Sigma, Eta, Alpha, Beta float64
}

var gcpTables = sync.OnceValues(func() (*gcpTable, error) {
	t := new(gcpTable)
	dec := json.NewDecoder(bytes.NewReader(gcpJSON))
	dec.DisallowUnknownFields()
	if err := dec.Decode(t); err != nil {
		return nil, fmt.Errorf("hf: counterpoise parameters: %w", err)
	}
	return t, nil
})

// gcp is the geometric counterpoise correction of one molecule: it takes off
// the energy that atoms of a small basis gain by using their neighbours'
// functions.
//
// Source: H. Kruse, S. Grimme, J. Chem. Phys. 2012, 136, 154101,
// doi:10.1063/1.3700154.
type gcp struct {
	params gcpParams
	shell  []int     // principal quantum number of each atom's Slater function
	zeta   []float64 // its exponent, 1/bohr
	scale  []float64 // hartree, one a pair (a, b < a)
}

// newGCP prepares for a molecule. The name is that of the basis as published,
// in any case: "MINIX", "def2-SVP". An error says that there are no parameters
// for the basis or for an element.
func newGCP(numbers []int, basisName string) (*gcp, error) {
	t, err := gcpTables()
	if err != nil {
		return nil, err
	}
	params, ok := t.Parameters["hf/"+strings.ToLower(basisName)]
	if !ok {
		return nil, fmt.Errorf("hf: no counterpoise correction for the basis %s", basisName)
	}
	g := &gcp{params: params}
	missing, virtual := t.Missing[params.Basis], t.Virtual[params.Basis]
	columns := make([]int, len(numbers))
	for a, z := range numbers {
		if z < 1 || z > len(t.Zeff) || missing[t.Zeff[z-1]-1] == 0 {
			return nil, fmt.Errorf("hf: the counterpoise correction of %s has no parameters for %s", basisName, element.Symbol(z))
		}
		column := t.Zeff[z-1] - 1
		columns[a] = column
		g.shell = append(g.shell, t.SlaterShell[column])
		g.zeta = append(g.zeta, params.Eta*t.SlaterExponent[column])
	}
	for a, i := range columns {
		for _, j := range columns[:a] {
			g.scale = append(g.scale, params.Sigma*(share(missing[i], virtual[j])+share(missing[j], virtual[i])))
		}
	}
	return g, nil
}

// share is what an atom with an incomplete basis gains from a neighbour with
// so many virtual orbitals, before the decay.
func share(missing, virtual float64) float64 {
	if virtual < 0.5 {
		return 0
	}
	return missing / math.Sqrt(virtual)
}

// gcpSmallest ends the sum: pairs whose decay or overlap is below count as
// infinitely far apart.
const (
	gcpSmallest        = 1e-30
	gcpSmallestOverlap = 1e-200
)

// energy returns the correction at x (3N, bohr) in hartree and, where grad is
// not nil, adds its gradient in hartree/bohr.
func (g *gcp) energy(x, grad []float64) float64 {
	return sumPairs(x, grad, func(k, a, b int, r float64) (float64, float64) {
		decay := math.Exp(-g.params.Alpha * math.Pow(r, g.params.Beta))
		if decay < gcpSmallest {
			return 0, 0
		}
		s, slope := slaterOverlap(g.shell[a], g.shell[b], g.zeta[a], g.zeta[b], r)
		if s < gcpSmallestOverlap {
			return 0, 0
		}
		e := g.scale[k] * decay / math.Sqrt(s)
		return e, e * (-g.params.Alpha*g.params.Beta*math.Pow(r, g.params.Beta-1) - 0.5*slope/s)
	})
}

// sumPairs sums a pair energy, given with its derivative with respect to the
// distance r > 0, over all pairs a > b of atoms, and adds the gradient to grad
// where that is not nil; k counts the pairs.
func sumPairs(x, grad []float64, pair func(k, a, b int, r float64) (energy, slope float64)) float64 {
	sum, k := 0.0, 0
	for a := range len(x) / 3 {
		for b := range a {
			d := [3]float64{x[3*a] - x[3*b], x[3*a+1] - x[3*b+1], x[3*a+2] - x[3*b+2]}
			r := math.Sqrt(d[0]*d[0] + d[1]*d[1] + d[2]*d[2])
			e, slope := pair(k, a, b, r)
			sum += e
			if grad != nil {
				for c := range 3 {
					grad[3*a+c] += slope * d[c] / r
					grad[3*b+c] -= slope * d[c] / r
				}
			}
			k++
		}
	}
	return sum
}
