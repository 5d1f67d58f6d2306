package gauss

// anySums is scratch memory of addAny: derivatives of the potential, summed
// over the primitives of a ket with the weights that s and p shells ask for
// (see batch).
type anySums struct {
	r, steps       []float64
	h2, h, hs, ss  []float64
	half           []float64
	boys           [topPotential + 1]float64
	raised         [][3]int32
	raisedToDegree int
}

// addAny adds bra primitive i, of a pair with a d or higher shell, with all
// kets: those are contracted first, then meet the bra's Hermite matrix.
func (b *batch) addAny(bra *shellPair, i int) {
	p := bra.prims[i]
	p.c = 1 // it is in the Hermite matrix
	w, class := &b.any, b.ket[0].class
	lb := degree(bra.nh)
	top := lb + int(class)
	w.prepare(top)
	b.potentials(&p, top)
	e := bra.e[i*bra.nf*bra.nh:][:bra.nf*bra.nh]
	for k := range b.kets {
		b.sumKet(k, top)
		ket := b.ket[k]
		switch class {
		case classSS:
			copy(w.half, w.h)
		case classPS:
			w.ketPS(bra.nh, &ket.ab)
		default:
			w.ketPP(bra.nh, &ket.ab)
		}
		acc := b.acc[k*bra.nf*ket.nf:]
		for f := range bra.nf {
			out := acc[f*ket.nf:][:ket.nf]
			for t, c := range e[f*bra.nh:][:bra.nh] {
				if c != 0 {
					addScaled(out, c, w.half[t*ket.nf:])
				}
			}
		}
	}
}

// prepare makes room for derivatives up to degree top.
func (w *anySums) prepare(top int) {
	n := hermiteCount(top)
	for _, s := range []*[]float64{&w.r, &w.steps, &w.h2, &w.h, &w.hs, &w.ss} {
		*s = grow(*s, n)
	}
	w.half = grow(w.half, 9*n)
	if w.raised != nil && w.raisedToDegree >= top {
		return
	}
	w.raised, w.raisedToDegree = nil, top
	for l := range top + 1 {
		for _, p := range Powers(l) {
			w.raised = append(w.raised, [3]int32{int32(hermiteIndex(p.X+1, p.Y, p.Z)),
				int32(hermiteIndex(p.X, p.Y+1, p.Z)), int32(hermiteIndex(p.X, p.Y, p.Z+1))})
		}
	}
}

// sumKet sums the derivatives of ket k over its primitives: for s s plainly
// (into h), for p s with weights h and s, for p p with all four.
func (b *batch) sumKet(k, top int) {
	w, class := &b.any, b.ket[k].class
	n := hermiteCount(top)
	r, h2, h, hs, ss := w.r[:n], w.h2[:n], w.h[:n], w.hs[:n], w.ss[:n]
	clear(h2)
	clear(h)
	clear(hs)
	clear(ss)
	for i := b.begin[k]; i < b.begin[k+1]; i++ {
		for m := range top + 1 {
			w.boys[m] = b.g[m][i]
		}
		raiseHermite(r, w.steps, w.boys[:], top, [3]float64{b.dx[i], b.dy[i], b.dz[i]})
		switch class {
		case classSS:
			addScaled(h, 1, r)
		case classPS:
			addScaled(h, b.h[i], r)
			addScaled(ss, b.s[i], r)
		default:
			addScaled(h2, b.h[i]*b.h[i], r)
			addScaled(h, b.h[i], r)
			addScaled(hs, b.h[i]*b.s[i], r)
			addScaled(ss, b.s[i]*(1-b.s[i]), r)
		}
	}
}

// ketPS brings the distance cd of the ket's shells in: half[3t+k] is derivative
// t of the potential of p_k s.
func (w *anySums) ketPS(nh int, cd *[3]float64) {
	for t := range nh {
		o := w.half[3*t:][:3]
		for k, up := range w.raised[t] {
			o[k] = -w.h[up] - cd[k]*w.ss[t]
		}
	}
}

// ketPP is ketPS for p_k p_l, half[9t+3k+l].
func (w *anySums) ketPP(nh int, cd *[3]float64) {
	for t := range nh {
		o := w.half[9*t:][:9]
		up := &w.raised[t]
		for k := range 3 {
			for l := range 3 {
				uk, ul := up[k], up[l]
				o[3*k+l] = w.h2[w.raised[uk][l]] + cd[k]*w.hs[ul] - cd[l]*(w.h[uk]-w.hs[uk]) - cd[k]*cd[l]*w.ss[t]
			}
			o[4*k] += w.h[t]
		}
	}
}
