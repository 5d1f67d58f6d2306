package gauss

import "math"

// A batch integrates one bra with many kets of s and p shells of one class at
// once. The kets' primitives stand side by side (lanes), so that the part that
// is the same for all classes, the Boys function, runs over long arrays; see
// potentials. Then each class has straight code of its own, but for bras with d
// or higher shells, which share one (class_any.go).
//
// A charge cloud of p shells is a sum of Hermite Gaussians whose coefficients
// depend on the primitives only through h = 1/(2p) and s = b/p:
//
//	s s      1
//	p_i s    h L_i - s AB_i
//	p_i p_j  h^2 L_ij + h (1-s) AB_j L_i - h s AB_i L_j + h d_ij - s (1-s) AB_i AB_j
//
// (L: derivatives of an s Gaussian, AB: distance of the shells' centres.) So
// primitives are summed with the weights h^2, h, h s, s (1-s), first those of
// the ket, then those of the bra, and the distances come in once at the end.
//
// Source of the expansion: McMurchie, Davidson 1978; of summing with powers of
// the exponents before the geometry comes in: P. M. W. Gill, J. A. Pople, Int.
// J. Quantum Chem. 1991, 40, 753, doi:10.1002/qua.560400605.
type batch struct {
	cut    float64 // products of primitives below it are left out
	kernel potentialKernel

	// Ket primitives. Lane k: exponent sum q, centre, c, h, s as in primitive.
	lanes               int
	q, x, y, z, c, h, s [maxLanes]float64
	kets                int
	begin               [maxKets + 1]int // lanes of each ket
	ket                 [maxKets]*shellPair
	row                 [maxKets]int
	largest             float64 // largest |c|

	// Of one bra primitive and all lanes: P-Q and the scaled Boys functions
	// c c' (-2 rho)^m F_m / sqrt(p+q).
	dx, dy, dz [maxLanes]float64
	g          [topPotential + 1][maxLanes]float64

	acc []float64 // sums over primitives, one stretch a ket
	out [81]float64
	any anySums
}

const (
	maxLanes = 256
	maxKets  = 32
)

// Sums over primitives that a bra needs: with weight h^2 the six second
// derivatives, with h none and first ones, with h s the first ones, with s
// (1-s) none, in this order. Other bras are summed as what they are.
func braSums(bra *shellPair) int {
	return [...]int{classSS: 1, classPS: 4, classPP: 14, classAny: bra.nf}[bra.class]
}

// batches fills the rows of the kets lo..hi of one class, the first of which
// dst begins with.
func (r *Repulsion) batches(dst []float64, bra, lo, hi int, skip func(int) bool) {
	b, p := &r.batch, &r.pairs[bra]
	base := r.pairs[lo].first
	b.reset()
	for k := lo; k < hi; k++ {
		if skip != nil && skip(k) {
			continue
		}
		ket := &r.pairs[k]
		if b.full(ket) {
			r.flush(dst, p)
		}
		b.add(p, ket, ket.first-base)
	}
	r.flush(dst, p)
}

// flush integrates what the batch holds and empties it.
func (r *Repulsion) flush(dst []float64, bra *shellPair) {
	b := &r.batch
	b.integrate(bra)
	for k := range b.kets {
		r.scatter(dst[b.row[k]*bra.unique:], bra, b.ket[k], b.finish(bra, k))
	}
	b.reset()
}

// single integrates one quartet.
func (b *batch) single(bra, ket *shellPair) []float64 {
	b.reset()
	b.add(bra, ket, 0)
	b.integrate(bra)
	return b.finish(bra, 0)
}

func (b *batch) reset() {
	b.lanes, b.kets, b.largest = 0, 0, 0
}

func (b *batch) full(ket *shellPair) bool {
	return b.kets == maxKets || b.lanes+len(ket.prims) > maxLanes
}

// add appends the primitives of a ket that count beside the bra's largest.
func (b *batch) add(bra, ket *shellPair, row int) {
	least := b.cut / math.Abs(bra.prims[0].c)
	b.begin[b.kets] = b.lanes
	b.ket[b.kets] = ket
	b.row[b.kets] = row
	n := b.lanes
	for i := range ket.prims {
		q := &ket.prims[i]
		if math.Abs(q.c) < least {
			break
		}
		b.q[n], b.x[n], b.y[n], b.z[n] = q.p, q.x, q.y, q.z
		b.c[n], b.h[n], b.s[n] = q.c, q.h, q.s
		n++
	}
	if n > b.lanes {
		b.largest = max(b.largest, math.Abs(ket.prims[0].c))
	}
	b.lanes = n
	b.kets++
	b.begin[b.kets] = n
}

// integrate sums over the primitives of the bra and of all kets into acc.
func (b *batch) integrate(bra *shellPair) {
	if b.kets == 0 {
		return
	}
	class := b.ket[0].class
	size := braSums(bra) * b.ket[0].nf
	b.acc = grow(b.acc, b.kets*size)
	clear(b.acc)
	for i := range bra.prims {
		p := &bra.prims[i]
		if math.Abs(p.c)*b.largest < b.cut {
			break
		}
		if bra.class == classAny {
			b.addAny(bra, i)
			continue
		}
		b.potentials(p, int(bra.class+class))
		switch [2]pairClass{bra.class, class} {
		case [2]pairClass{classSS, classSS}:
			b.addSSSS()
		case [2]pairClass{classPS, classSS}:
			b.addPSSS(p)
		case [2]pairClass{classPS, classPS}:
			b.addPSPS(p)
		case [2]pairClass{classPP, classSS}:
			b.addPPSS(p)
		case [2]pairClass{classPP, classPS}:
			b.addPPPS(p)
		case [2]pairClass{classPP, classPP}:
			b.addPPPP(p)
		}
	}
}

// finish brings the distance of the bra's shells in and returns the integrals
// of ket k, nf_bra by nf_ket. The slice is good until the next call.
func (b *batch) finish(bra *shellPair, k int) []float64 {
	n := b.ket[k].nf
	size := braSums(bra) * n
	acc := b.acc[k*size:][:size]
	switch bra.class {
	case classSS, classAny:
		return acc
	case classPS:
		for i, ab := range bra.ab {
			for f := range n {
				b.out[i*n+f] = acc[i*n+f] - ab*acc[3*n+f]
			}
		}
	default:
		finishPP(b.out[:9*n], acc, bra.ab, n)
	}
	return b.out[:bra.nf*n]
}

// finishPP forms (p_i p_j| from the sums described at braSums.
func finishPP(out, acc []float64, ab [3]float64, n int) {
	second, zero, first, firstS, zeroS := acc[:6*n], acc[6*n:7*n], acc[7*n:10*n], acc[10*n:13*n], acc[13*n:14*n]
	for i := range 3 {
		for j := range 3 {
			o := out[(3*i+j)*n:][:n]
			l2 := second[pairIndex[i][j]*n:][:n]
			l1, l1s, m1s := first[i*n:][:n], firstS[i*n:][:n], firstS[j*n:][:n]
			both := ab[i] * ab[j]
			for f := range o {
				v := l2[f] + ab[j]*(l1[f]-l1s[f]) - ab[i]*m1s[f] - both*zeroS[f]
				if i == j {
					v += zero[f]
				}
				o[f] = v
			}
		}
	}
}

// pairIndex is the place of x_i x_j among xx, xy, xz, yy, yz, zz.
var pairIndex = [3][3]int{{0, 1, 2}, {1, 3, 4}, {2, 4, 5}}
