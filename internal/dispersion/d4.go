package dispersion

import (
	"gonum.org/v1/gonum/blas"
	blasgo "gonum.org/v1/gonum/blas/gonum"
)

// D4 is the D4 correction of one molecule for charges that come from outside,
// as in the self-consistency of GFN2-xTB. Call Update for each geometry, then
// EnergyPotential as often as the charges change; ThreeBody does not depend on
// the charges.
type D4 struct {
	flavour  d4Flavour
	pairs    pairs
	cn       *coordination
	in       *interpolation
	damping  *damping
	three    *threeBody
	hardness []float64 // of each atom, hartree
	zeff     []float64
	refq     []float64 // over references: charge plus zeff
	zeta0    []float64 // over references: charge scale at charge 0

	// Of the geometry:
	count  []float64
	w, dw  []float64 // over references: weight, and its derivative by count
	matrix []float64 // references by references: minus energy per product of weights

	// Of the charges, over references:
	v, dvdq, dvdcn []float64 // scaled weight and its derivatives
	mv             []float64 // matrix times v

	// For the gradient:
	slope, dEdCN []float64
	v0, dv0      []float64
}

// A d4Flavour is what differs between the uses of D4.
type d4Flavour struct {
	params      D3Params
	s9          float64 // scale of the three-body term
	charges     chargeModel
	pairCutoff  float64 // bohr
	threeCutoff float64 // bohr
}

// switchWidth is the length in bohr over which a term is switched off before
// its cut-off.
const switchWidth = 0.05

// gfn2Flavour belongs to GFN2-xTB (C. Bannwarth, S. Ehlert, S. Grimme, J. Chem.
// Theory Comput. 2019, 15, 1652).
var gfn2Flavour = d4Flavour{
	params:  D3Params{S6: 1, S8: 2.7, A1: 0.52, A2: 5.0},
	s9:      5,
	charges: mullikenModel, pairCutoff: 50, threeCutoff: 25,
}

// NewD4 prepares for a molecule, with the parameters of GFN2-xTB and for its
// Mulliken charges. Panics for Z outside 1..MaxZ.
func NewD4(numbers []int) *D4 { return newD4(numbers, gfn2Flavour) }

func newD4(numbers []int, f d4Flavour) *D4 {
	checkNumbers(numbers)
	t, n := d4Table(), len(numbers)
	c6 := func(za, zb int) []float64 { return t.coefficients(za, zb, f.charges) }
	const underflow = 1.5e-154 // the square root of the smallest normal number
	d := &D4{
		flavour: f,
		pairs:   newPairs(n),
		cn:      newD4Coordination(numbers),
		in:      newInterpolation(numbers, t.Constants.CN, underflow, t.references, c6),
		damping: newDamping(numbers, f.params, f.pairCutoff, switchWidth),
		count:   make([]float64, n),
		slope:   make([]float64, n*(n-1)/2),
		dEdCN:   make([]float64, n),
	}
	d.three = newThreeBody(f.s9, d.damping.r0, f.threeCutoff, switchWidth)
	size := d.in.size()
	for _, s := range []*[]float64{&d.w, &d.dw, &d.v, &d.dvdq, &d.dvdcn, &d.mv, &d.v0, &d.dv0} {
		*s = make([]float64, size)
	}
	d.matrix = make([]float64, size*size)
	d.setCharges(numbers)
	return d
}

// setCharges fills in what the charge scaling needs to know of each atom.
func (d *D4) setCharges(numbers []int) {
	t, table := d4Table(), atomicTable()
	for _, z := range numbers {
		d.hardness = append(d.hardness, table.hardness[z])
		d.zeff = append(d.zeff, table.zeff[z])
		for i := range t.Elements[z] {
			ref := d.flavour.charges.atom(&t.Elements[z][i]) + table.zeff[z]
			zeta, _ := t.chargeScale(table.hardness[z], ref, table.zeff[z])
			d.refq = append(d.refq, ref)
			d.zeta0 = append(d.zeta0, zeta)
		}
	}
}

// Update moves the atoms to x (3N, bohr).
func (d *D4) Update(x []float64) {
	d.pairs.update(x)
	d.cn.update(&d.pairs, d.count)
	d.in.weights(d.count, d.w, d.dw)
	for i, zeta := range d.zeta0 {
		d.v0[i], d.dv0[i] = d.w[i]*zeta, d.dw[i]*zeta
	}
	size, k := d.in.size(), 0
	for a := range d.pairs.n {
		for b := range a {
			f, _ := d.damping.at(k, d.pairs.r[k])
			d.fillBlock(a, b, f, size)
			c6, _, _ := d.in.coefficient(a, b, d.v0, d.dv0)
			d.three.setPair(k, d.pairs.r[k], c6)
			k++
		}
	}
}

// fillBlock writes the part of the matrix that belongs to two atoms.
func (d *D4) fillBlock(a, b int, f float64, size int) {
	ref := d.in.between(a, b)
	fromB, toB := d.in.offset[b], d.in.offset[b+1]
	for i := d.in.offset[a]; i < d.in.offset[a+1]; i++ {
		for j := fromB; j < toB; j++ {
			e := -f * ref[(i-d.in.offset[a])*(toB-fromB)+j-fromB]
			d.matrix[i*size+j] = e
			d.matrix[j*size+i] = e
		}
	}
}

// EnergyPotential returns the pair energy in hartree at the charges q (one an
// atom, elementary charges) and adds its derivative with respect to them to v.
func (d *D4) EnergyPotential(q, v []float64) float64 {
	if len(q) != d.pairs.n || len(v) != d.pairs.n {
		panic("dispersion: charges of the wrong length")
	}
	d.scale(q)
	energy := 0.0
	for a := range q {
		for i := d.in.offset[a]; i < d.in.offset[a+1]; i++ {
			energy += 0.5 * d.v[i] * d.mv[i]
			v[a] += d.dvdq[i] * d.mv[i]
		}
	}
	return energy
}

// scale computes the weights at the charges q and their product with the
// matrix.
func (d *D4) scale(q []float64) {
	t := d4Table()
	for a := range q {
		for i := d.in.offset[a]; i < d.in.offset[a+1]; i++ {
			zeta, slope := t.chargeScale(d.hardness[a], d.refq[i], q[a]+d.zeff[a])
			d.v[i], d.dvdq[i], d.dvdcn[i] = d.w[i]*zeta, d.w[i]*slope, d.dw[i]*zeta
		}
	}
	if size := d.in.size(); size > 0 {
		blasgo.Implementation{}.Dgemv(blas.NoTrans, size, size, 1, d.matrix, size, d.v, 1, 0, d.mv, 1)
	}
}

// ThreeBody returns the three-body energy in hartree, which D4 defines at
// charge zero.
func (d *D4) ThreeBody() float64 { return d.three.energy(d.pairs.n) }

// AddGradient adds the gradient of pair and three-body energy at fixed charges
// q to grad, in hartree/bohr, at the place of the last Update.
func (d *D4) AddGradient(q, grad []float64) {
	d.pairGradient(q)
	d.threeBodyGradient()
	d.finishGradient(grad)
}

// pairGradient starts slope and dEdCN with the pair energy's.
func (d *D4) pairGradient(q []float64) {
	d.scale(q)
	for a := range q {
		d.dEdCN[a] = 0
		for i := d.in.offset[a]; i < d.in.offset[a+1]; i++ {
			d.dEdCN[a] += d.dvdcn[i] * d.mv[i]
		}
	}
	k := 0
	for a := range q {
		for b := range a {
			c6, _, _ := d.in.coefficient(a, b, d.v, d.dvdcn)
			_, slope := d.damping.at(k, d.pairs.r[k])
			d.slope[k] = -c6 * slope
			k++
		}
	}
}

// threeBodyGradient adds to slope and dEdCN the three-body energy's.
func (d *D4) threeBodyGradient() {
	d.three.slopes(d.pairs.n)
	k := 0
	for a := range d.pairs.n {
		for b := range a {
			d.slope[k] += d.three.slope[k] / d.pairs.r[k]
			if c6, da, db := d.in.coefficient(a, b, d.v0, d.dv0); c6 != 0 {
				half := 0.5 * d.three.share[k] / c6
				d.dEdCN[a] += half * da
				d.dEdCN[b] += half * db
			}
			k++
		}
	}
}

// finishGradient turns slope and dEdCN into a gradient.
func (d *D4) finishGradient(grad []float64) {
	d.cn.addSlopes(d.dEdCN, d.slope)
	d.pairs.addGradient(d.slope, grad)
}
