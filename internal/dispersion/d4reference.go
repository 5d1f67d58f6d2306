package dispersion

import (
	_ "embed"
	"math"
	"sync"
)

//go:embed data/d4-reference.json.gz
var d4Gzip []byte

// d4Reference is data/d4-reference.json.gz: reference systems of each element
// and their polarizabilities at imaginary frequencies.
type d4Reference struct {
	About, Source string
	Frequency     []float64 `json:"frequency_hartree"`
	Weight        []float64 // of the integration over frequencies, hartree
	Constants     struct {
		Height    float64 `json:"ga"`
		Steepness float64 `json:"gc"`
		CN        float64 `json:"wf"`
	}
	Substituents map[int]struct {
		Scale float64
		Alpha []float64 // bohr^3
	}
	Elements map[int][]d4System
}

// A d4System is a molecule whose polarizability, without that of the
// substituents of the atom in question, is the atom's.
type d4System struct {
	Substituent int     `json:"sys"` // key of Substituents; 0: the reference is not used
	Share       float64 `json:"a"`   // one over the number of equivalent atoms
	Count       float64 `json:"h"`   // of substituents to be taken off
	CN          float64
	CND3        float64   // explains Gaussians, is not needed
	Gaussians   int       `json:"ngw"`
	QEEQ        float64   `json:"q_eeq"` // charge of the atom
	HEEQ        float64   `json:"h_eeq"` // charge of the substituent
	QGFN2       float64   `json:"q_gfn2"`
	HGFN2       float64   `json:"h_gfn2"`
	Alpha       []float64 // bohr^3
}

var d4Table = sync.OnceValue(func() *d4Reference {
	t := new(d4Reference)
	decodeGzip("d4-reference.json.gz", d4Gzip, t)
	return t
})

// A chargeModel says which charges the reference systems have.
type chargeModel struct {
	atom, substituent func(*d4System) float64
}

var (
	eeqModel = chargeModel{
		atom:        func(s *d4System) float64 { return s.QEEQ },
		substituent: func(s *d4System) float64 { return s.HEEQ },
	}
	mullikenModel = chargeModel{ // of GFN2-xTB
		atom:        func(s *d4System) float64 { return s.QGFN2 },
		substituent: func(s *d4System) float64 { return s.HGFN2 },
	}
)

func (t *d4Reference) references(z int) []reference {
	var refs []reference
	for _, s := range t.Elements[z] {
		refs = append(refs, reference{cn: s.CN, gaussians: s.Gaussians})
	}
	return refs
}

// coefficients integrates products of polarizabilities over the imaginary
// frequency (Casimir and Polder).
func (t *d4Reference) coefficients(za, zb int, m chargeModel) []float64 {
	var c6 []float64
	for i := range t.Elements[za] {
		alphaA := t.polarizability(&t.Elements[za][i], m)
		for j := range t.Elements[zb] {
			alphaB := t.polarizability(&t.Elements[zb][j], m)
			sum := 0.0
			for k, w := range t.Weight {
				sum += w * alphaA[k] * alphaB[k]
			}
			c6 = append(c6, 3/math.Pi*sum)
		}
	}
	return c6
}

// polarizability returns the polarizability of the atom in a reference system
// at each frequency.
func (t *d4Reference) polarizability(s *d4System, m chargeModel) []float64 {
	alpha := make([]float64, len(t.Frequency))
	if s.Substituent == 0 {
		return alpha
	}
	sub, table := t.Substituents[s.Substituent], atomicTable()
	zeff := table.zeff[s.Substituent]
	zeta, _ := t.chargeScale(table.hardness[s.Substituent], zeff, m.substituent(s)+zeff)
	for k := range alpha {
		alpha[k] = max(0, s.Share*(s.Alpha[k]-s.Count*sub.Scale*sub.Alpha[k]*zeta))
	}
	return alpha
}

// chargeScale is the factor by which an atom of the given hardness gains
// polarizability when its charge (plus the effective nuclear charge) is q
// instead of ref, and its derivative with respect to q.
//
// Source: J. Chem. Phys. 2019, 150, 154122.
func (t *d4Reference) chargeScale(hardness, ref, q float64) (zeta, slope float64) {
	if q <= 0 {
		return math.Exp(t.Constants.Height), 0
	}
	c := t.Constants.Steepness * hardness
	e := math.Exp(c * (1 - ref/q))
	zeta = math.Exp(t.Constants.Height * (1 - e))
	return zeta, -t.Constants.Height * c * e * zeta * ref / (q * q)
}
