package dispersion

import (
	"math"
	"slices"
)

// interpolation gives atoms a share in each of the reference systems of their
// element, by coordination number, and C6 coefficients between atoms from
// those between references.
//
// Vectors over references hold those of atom 0, then those of atom 1, and so
// on; atom a's begin at offset[a].
type interpolation struct {
	steepness float64
	underflow float64 // sums of Gaussians up to here count as zero
	kind      []int   // of each atom: a place in the slices below
	refs      [][]reference
	c6        [][]float64 // kind a, kind b: matrix [reference of a][reference of b], hartree bohr^6
	offset    []int       // len(atoms)+1
}

// A reference is one system of an element.
type reference struct {
	cn        float64
	gaussians int // how many Gaussians, of rising steepness, make its weight
}

// newInterpolation gets the references of each element, and the matrix of
// coefficients of each pair of elements, from the functions.
func newInterpolation(numbers []int, steepness, underflow float64, refs func(z int) []reference, c6 func(za, zb int) []float64) *interpolation {
	in := &interpolation{steepness: steepness, underflow: underflow, offset: make([]int, 1, len(numbers)+1)}
	var kinds []int
	for _, z := range numbers {
		kind := slices.Index(kinds, z)
		if kind < 0 {
			kind = len(kinds)
			kinds = append(kinds, z)
			in.refs = append(in.refs, refs(z))
		}
		in.kind = append(in.kind, kind)
		in.offset = append(in.offset, in.offset[len(in.offset)-1]+len(in.refs[kind]))
	}
	for _, za := range kinds {
		for _, zb := range kinds {
			in.c6 = append(in.c6, c6(za, zb))
		}
	}
	return in
}

// size is the number of references of all atoms.
func (in *interpolation) size() int { return in.offset[len(in.offset)-1] }

// between returns the matrix of reference coefficients of two atoms.
func (in *interpolation) between(a, b int) []float64 {
	return in.c6[in.kind[a]*len(in.refs)+in.kind[b]]
}

// weights writes the share of each reference, and its derivative with respect
// to the coordination number. The shares of an atom sum to one.
func (in *interpolation) weights(cn, w, dw []float64) {
	for a, kind := range in.kind {
		from, to := in.offset[a], in.offset[a+1]
		in.atomWeights(in.refs[kind], cn[a], w[from:to], dw[from:to])
	}
}

func (in *interpolation) atomWeights(refs []reference, cn float64, w, dw []float64) {
	var sum, dsum float64
	for i, ref := range refs {
		w[i], dw[i] = in.gaussians(ref, cn)
		sum += w[i]
		dsum += dw[i]
	}
	if sum <= in.underflow {
		highestOnly(refs, w, dw)
		return
	}
	for i := range refs {
		w[i] /= sum
		dw[i] = dw[i]/sum - w[i]*(dsum/sum)
	}
}

func (in *interpolation) gaussians(ref reference, cn float64) (g, dg float64) {
	d := cn - ref.cn
	for m := 1; m <= ref.gaussians; m++ {
		wf := in.steepness * float64(m)
		e := math.Exp(-wf * d * d)
		g += e
		dg -= 2 * wf * d * e
	}
	return g, dg
}

// highestOnly is for an atom with far more neighbours than any reference.
func highestOnly(refs []reference, w, dw []float64) {
	top := math.Inf(-1)
	for _, ref := range refs {
		top = max(top, ref.cn)
	}
	for i, ref := range refs {
		w[i], dw[i] = 0, 0
		if ref.cn == top {
			w[i] = 1
		}
	}
}

// coefficient returns C6 of atoms a and b for the weights v, and its
// derivatives with respect to a number that the weights of a, or those of b,
// depend on by dv.
func (in *interpolation) coefficient(a, b int, v, dv []float64) (c6, da, db float64) {
	va, dva := v[in.offset[a]:in.offset[a+1]], dv[in.offset[a]:in.offset[a+1]]
	vb, dvb := v[in.offset[b]:in.offset[b+1]], dv[in.offset[b]:in.offset[b+1]]
	ref := in.between(a, b)
	for i := range va {
		var row, drow float64
		for j, c := range ref[i*len(vb) : (i+1)*len(vb)] {
			row += c * vb[j]
			drow += c * dvb[j]
		}
		c6 += va[i] * row
		da += dva[i] * row
		db += va[i] * drow
	}
	return c6, da, db
}
