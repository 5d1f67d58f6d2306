package dispersion

import (
	_ "embed"
	"fmt"
	"slices"
	"sync"
)

//go:embed data/d3-reference.json.gz
var d3Gzip []byte

// d3Reference is data/d3-reference.json.gz.
type d3Reference struct {
	About, Units, Source string
	Steepness            float64                `json:"wf"`
	CN                   map[int][]float64      `json:"cn"`
	C6                   map[string][][]float64 `json:"c6"` // "ZA-ZB", ZA >= ZB
}

var d3Table = sync.OnceValue(func() *d3Reference {
	t := new(d3Reference)
	decodeGzip("d3-reference.json.gz", d3Gzip, t)
	return t
})

func (t *d3Reference) references(z int) []reference {
	var refs []reference
	for _, cn := range t.CN[z] {
		refs = append(refs, reference{cn: cn, gaussians: 1})
	}
	return refs
}

func (t *d3Reference) coefficients(za, zb int) []float64 {
	if za >= zb {
		return slices.Concat(t.C6[fmt.Sprintf("%d-%d", za, zb)]...)
	}
	return transpose(t.coefficients(zb, za), len(t.CN[zb]))
}

// transpose turns a matrix of so many rows.
func transpose(m []float64, rows int) []float64 {
	columns := len(m) / rows
	out := make([]float64, len(m))
	for i := range rows {
		for j := range columns {
			out[j*rows+i] = m[i*columns+j]
		}
	}
	return out
}

// D3 is the pairwise D3(BJ) correction of one molecule.
type D3 struct {
	pairs   pairs
	cn      *coordination
	in      *interpolation
	damping *damping
	count   []float64
	w, dw   []float64 // over references
	slope   []float64 // dE/dR, one a pair
	dEdCN   []float64
}

// d3Cutoff in bohr ends the sum over pairs; it is beyond any ligand.
const d3Cutoff = 60

// NewD3 prepares for a molecule. Panics for Z outside 1..MaxZ.
func NewD3(numbers []int, p D3Params) *D3 {
	checkNumbers(numbers)
	t, n := d3Table(), len(numbers)
	d := &D3{
		pairs:   newPairs(n),
		cn:      newD3Coordination(numbers),
		in:      newInterpolation(numbers, t.Steepness, 0, t.references, t.coefficients),
		damping: newDamping(numbers, p, d3Cutoff, 0),
		count:   make([]float64, n),
		slope:   make([]float64, n*(n-1)/2),
		dEdCN:   make([]float64, n),
	}
	d.w, d.dw = make([]float64, d.in.size()), make([]float64, d.in.size())
	return d
}

// Energy returns the dispersion energy at x in hartree and, where grad is not
// nil, adds its gradient in hartree/bohr.
func (d *D3) Energy(x, grad []float64) float64 {
	d.pairs.update(x)
	d.cn.update(&d.pairs, d.count)
	d.in.weights(d.count, d.w, d.dw)
	clear(d.dEdCN)
	energy, k := 0.0, 0
	for a := range d.pairs.n {
		for b := range a {
			c6, da, db := d.in.coefficient(a, b, d.w, d.dw)
			f, slope := d.damping.at(k, d.pairs.r[k])
			energy -= c6 * f
			d.slope[k] = -c6 * slope
			d.dEdCN[a] -= da * f
			d.dEdCN[b] -= db * f
			k++
		}
	}
	if grad != nil {
		d.cn.addSlopes(d.dEdCN, d.slope)
		d.pairs.addGradient(d.slope, grad)
	}
	return energy
}
