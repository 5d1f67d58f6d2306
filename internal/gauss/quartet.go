package gauss

import "math"

// quartet integrates any class: the charge clouds of bra and ket as matrices E
// over Hermite Gaussians, and between them the Coulomb law R,
//
//	(ab|cd) = sum over primitives of E_ab R E_cd^T.
//
// The ket is contracted first. Source: McMurchie, Davidson 1978, eq. 3.23; as
// products of matrices: F. Neese, J. Comput. Chem. 2023, 44, 381,
// doi:10.1002/jcc.26942.
type quartet struct {
	cut                             float64 // products of primitives below it are left out
	out, half, line, r, steps, boys []float64
}

// integrals returns the nf_bra by nf_ket integrals. The slice is good until the
// next call. Both pairs must have their matrices e.
func (w *quartet) integrals(bra, ket *shellPair) []float64 {
	nb, nk := bra.nh, ket.nh
	l := degree(nb) + degree(nk)
	w.out, w.half = grow(w.out, bra.nf*ket.nf), grow(w.half, nb*ket.nf)
	w.line, w.boys = grow(w.line, nk), grow(w.boys, l+1)
	w.r, w.steps = grow(w.r, hermiteCount(l)), grow(w.steps, hermiteCount(l))
	clear(w.out)
	for i := range bra.prims {
		p := &bra.prims[i]
		if math.Abs(p.c*ket.prims[0].c) < w.cut {
			break
		}
		w.contract(bra, ket, p, l)
		e := bra.e[i*bra.nf*nb:]
		for f := range bra.nf {
			out := w.out[f*ket.nf:][:ket.nf]
			for t, c := range e[f*nb:][:nb] {
				if c != 0 {
					addScaled(out, c, w.half[t*ket.nf:])
				}
			}
		}
	}
	return w.out
}

// contract sums over the ket: half[t][cd] = sum of (-1)^t R_{t+u} E_cd,u. R is
// taken at Q-P, which turns the sign that belongs to u over to t.
func (w *quartet) contract(bra, ket *shellPair, p *primitive, l int) {
	nb, nk := bra.nh, ket.nh
	clear(w.half)
	lm := max(degree(nb), degree(nk))
	sums, stride := hermiteSums(lm), hermiteCount(lm)
	for j := range ket.prims {
		q := &ket.prims[j]
		if math.Abs(p.c*q.c) < w.cut {
			break
		}
		d := [3]float64{q.x - p.x, q.y - p.y, q.z - p.z}
		coulombHermite(w.r, w.steps, w.boys, l, p.p*q.p/(p.p+q.p), d, 1/math.Sqrt(p.p+q.p))
		e := ket.e[j*ket.nf*nk:][:ket.nf*nk]
		for t := range nb {
			sum := sums[t*stride:][:nk]
			line := w.line[:nk]
			for u, k := range sum {
				line[u] = w.r[k]
			}
			half := w.half[t*ket.nf:][:ket.nf]
			for f := range half {
				half[f] += dot(line, e[f*nk:][:nk])
			}
		}
	}
	for t := range nb {
		if degreeOf(t)%2 == 1 {
			half := w.half[t*ket.nf:][:ket.nf]
			for f := range half {
				half[f] = -half[f]
			}
		}
	}
}

// degree returns l where n = hermiteCount(l).
func degree(n int) int {
	l := 0
	for hermiteCount(l) < n {
		l++
	}
	return l
}

// degreeOf returns the degree of Hermite Gaussian number t.
func degreeOf(t int) int {
	l := 0
	for hermiteCount(l) <= t {
		l++
	}
	return l
}
