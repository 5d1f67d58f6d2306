package hf

// A block of integrals (ab|cd), one bra ab and many kets cd, is used twice: in
// the Coulomb sums it is a matrix between pairs of functions; in the exchange
// sums each integral meets four elements of the density.

// local holds, for every function c, the elements of a symmetric matrix between
// c and the functions of one bra, close together: eight numbers a function,
// those of the first shell in front, those of the second from the fifth on.
type local struct {
	p, k []float64
}

// digest adds the integrals v of one block to f.coulomb and to the exchange
// matrices, of which a later transposition adds the other half.
func (f *fockBuilder) digest(bra int, v []float64, spins, ks [][]float64) {
	first, second := f.rep.Functions()
	f.spans, _ = f.rep.Rows(f.spans[:0], bra)
	lo, hi := f.rep.Columns(bra)
	f.coulombSums(v, lo, hi)
	kind := f.shape(bra)
	for s, p := range spins {
		if kind != shapeOther {
			f.gather(p, int(first[lo]), int(second[lo]), kind)
		}
		rest := v
		for _, span := range f.spans {
			c, d := first[span.Begin:span.End], second[span.Begin:span.End]
			w := rest[:len(c)*(hi-lo)]
			rest = rest[len(w):]
			switch kind {
			case shapePP:
				exchangePP(w, c, d, f.near.p, f.near.k)
			case shapePS:
				exchangePS(w, c, d, f.near.p, f.near.k)
			default:
				exchangeAny(w, c, d, first[lo:hi], second[lo:hi], p, ks[s], f.n)
			}
		}
		if kind != shapeOther {
			f.spread(ks[s], int(first[lo]), int(second[lo]), kind)
		}
	}
}

// A shape says which code digests a bra: two different p shells, p and s, or
// anything else.
type shape int

const (
	shapeOther shape = iota
	shapePS
	shapePP
)

func (f *fockBuilder) shape(bra int) shape {
	_, i, j := f.rep.Bound(bra)
	li, lj := f.rep.Shell(i).L, f.rep.Shell(j).L
	switch {
	case i == j || li != 1:
		return shapeOther
	case lj == 1:
		return shapePP
	case lj == 0:
		return shapePS
	}
	return shapeOther
}

// coulombSums adds J_cd += sum (ab|cd) P_ab and J_ab += sum (ab|cd) P_cd.
func (f *fockBuilder) coulombSums(v []float64, lo, hi int) {
	m := hi - lo
	sums, density := f.coulomb[lo:hi], f.packed[lo:hi]
	f.columns = resize(f.columns, m)
	clear(f.columns)
	for _, span := range f.spans {
		j, p := f.coulomb[span.Begin:span.End], f.packed[span.Begin:span.End]
		w := v[:len(j)*m]
		v = v[len(w):]
		coulombRows(w, j, p, f.columns, density)
	}
	for i, s := range f.columns {
		sums[i] += s
	}
}

// coulombRows is one range of kets: j and p belong to rows, sums and density to
// columns. The common widths have loops of their own.
func coulombRows(v, j, p, sums, density []float64) {
	switch len(sums) {
	case 1:
		coulombRows1(v, j, p, sums, density[0])
		return
	case 3:
		coulombRows3(v, j, p, (*[3]float64)(sums), (*[3]float64)(density))
		return
	case 9:
		coulombRows9(v, j, p, (*[9]float64)(sums), (*[9]float64)(density))
		return
	}
	m := len(sums)
	density = density[:m]
	for k, q := range p {
		w := v[k*m:][:m]
		sum := 0.0
		for i, x := range w {
			sum += x * density[i]
			sums[i] += x * q
		}
		j[k] += sum
	}
}

func coulombRows1(v, j, p, sums []float64, density float64) {
	j, p = j[:len(v)], p[:len(v)]
	sum := 0.0
	for k, x := range v {
		j[k] += x * density
		sum += x * p[k]
	}
	sums[0] += sum
}

func coulombRows3(v, j, p []float64, sums, density *[3]float64) {
	j = j[:len(p)]
	d0, d1, d2 := density[0], density[1], density[2]
	s0, s1, s2 := sums[0], sums[1], sums[2]
	for k, q := range p {
		w := (*[3]float64)(v[3*k:])
		x, y, z := w[0], w[1], w[2]
		j[k] += x*d0 + y*d1 + z*d2
		s0 += x * q
		s1 += y * q
		s2 += z * q
	}
	sums[0], sums[1], sums[2] = s0, s1, s2
}

func coulombRows9(v, j, p []float64, sums, density *[9]float64) {
	j = j[:len(p)]
	var s [9]float64
	for k, q := range p {
		w := (*[9]float64)(v[9*k:])
		j[k] += w[0]*density[0] + w[1]*density[1] + w[2]*density[2] + w[3]*density[3] + w[4]*density[4] +
			w[5]*density[5] + w[6]*density[6] + w[7]*density[7] + w[8]*density[8]
		s[0] += w[0] * q
		s[1] += w[1] * q
		s[2] += w[2] * q
		s[3] += w[3] * q
		s[4] += w[4] * q
		s[5] += w[5] * q
		s[6] += w[6] * q
		s[7] += w[7] * q
		s[8] += w[8] * q
	}
	for i, x := range s {
		sums[i] += x
	}
}

// exchangeAny adds the exchange of any block, the straight way.
func exchangeAny(v []float64, c, d, as, bs []int32, p, k []float64, n int) {
	m := len(as)
	bs, d = bs[:m], d[:len(c)]
	for row := range c {
		ic, id := int(c[row])*n, int(d[row])*n
		pc, pd, kc, kd := p[ic:ic+n], p[id:id+n], k[ic:ic+n], k[id:id+n]
		for i, x := range v[row*m:][:m] {
			a, b := as[i], bs[i]
			kc[a] += pd[b] * x
			kc[b] += pd[a] * x
			kd[a] += pc[b] * x
			kd[b] += pc[a] * x
		}
	}
}

// gather fills f.near.p for the bra with functions from a and from b on, and
// clears f.near.k.
func (f *fockBuilder) gather(p []float64, a, b int, kind shape) {
	n := f.n
	f.near.p, f.near.k = resize(f.near.p, 8*n), resize(f.near.k, 8*n)
	clear(f.near.k)
	for c := range n {
		o, row := f.near.p[8*c:][:8], p[c*n:(c+1)*n]
		o[0], o[1], o[2] = row[a], row[a+1], row[a+2]
		if o[4] = row[b]; kind == shapePP {
			o[5], o[6] = row[b+1], row[b+2]
		}
	}
}

// spread adds f.near.k to the exchange matrix.
func (f *fockBuilder) spread(k []float64, a, b int, kind shape) {
	n := f.n
	for c := range n {
		o, row := f.near.k[8*c:][:8], k[c*n:(c+1)*n]
		row[a] += o[0]
		row[a+1] += o[1]
		row[a+2] += o[2]
		if row[b] += o[4]; kind == shapePP {
			row[b+1] += o[5]
			row[b+2] += o[6]
		}
	}
}

// exchangePP is exchangeAny for a bra of two p shells: rows of nine integrals.
func exchangePP(v []float64, cs, ds []int32, p, k []float64) {
	ds = ds[:len(cs)]
	for row, c := range cs {
		d := ds[row]
		w := (*[9]float64)(v[9*row:])
		pc, pd := (*[8]float64)(p[8*c:]), (*[8]float64)(p[8*d:])
		kc, kd := (*[8]float64)(k[8*c:]), (*[8]float64)(k[8*d:])
		addPP(kc, w, pd)
		addPP(kd, w, pc)
	}
}

// addPP adds v_ij p_bj to k_ai and v_ij p_ai to k_bj.
func addPP(k *[8]float64, v *[9]float64, p *[8]float64) {
	a0, a1, a2, b0, b1, b2 := p[0], p[1], p[2], p[4], p[5], p[6]
	k[0] += v[0]*b0 + v[1]*b1 + v[2]*b2
	k[1] += v[3]*b0 + v[4]*b1 + v[5]*b2
	k[2] += v[6]*b0 + v[7]*b1 + v[8]*b2
	k[4] += v[0]*a0 + v[3]*a1 + v[6]*a2
	k[5] += v[1]*a0 + v[4]*a1 + v[7]*a2
	k[6] += v[2]*a0 + v[5]*a1 + v[8]*a2
}

// exchangePS is exchangeAny for a bra of a p and an s shell: rows of three.
func exchangePS(v []float64, cs, ds []int32, p, k []float64) {
	ds = ds[:len(cs)]
	for row, c := range cs {
		d := ds[row]
		w := (*[3]float64)(v[3*row:])
		pc, pd := (*[8]float64)(p[8*c:]), (*[8]float64)(p[8*d:])
		kc, kd := (*[8]float64)(k[8*c:]), (*[8]float64)(k[8*d:])
		kc[0] += w[0] * pd[4]
		kc[1] += w[1] * pd[4]
		kc[2] += w[2] * pd[4]
		kc[4] += w[0]*pd[0] + w[1]*pd[1] + w[2]*pd[2]
		kd[0] += w[0] * pc[4]
		kd[1] += w[1] * pc[4]
		kd[2] += w[2] * pc[4]
		kd[4] += w[0]*pc[0] + w[1]*pc[1] + w[2]*pc[2]
	}
}
