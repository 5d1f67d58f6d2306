package gauss

// The classes with a pair of p shells in the bra. Derivatives of the potential
// are numbered as Hermite Gaussians are: 0, then x y z, then six second, ten
// third, fifteen fourth ones.

// addBra adds the ket-contracted derivatives v, ten stretches of n up to second
// degree, to the sums of a pp bra (see braSums).
func addBra(acc, v []float64, p *primitive, n int) {
	h2, hs, ss := p.h*p.h, p.h*p.s, p.s*(1-p.s)
	second, rest, firstS, zeroS := acc[:6*n], acc[6*n:10*n], acc[10*n:13*n], acc[13*n:14*n]
	for i, w := range v[4*n : 10*n] {
		second[i] += h2 * w
	}
	for i, w := range v[:4*n] {
		rest[i] += p.h * w
	}
	for i, w := range v[n : 4*n] {
		firstS[i] += hs * w
	}
	for i, w := range v[:n] {
		zeroS[i] += ss * w
	}
}

func (b *batch) addPPSS(p *primitive) {
	n := b.lanes
	g0, g1, g2 := b.g[0][:n], b.g[1][:n], b.g[2][:n]
	dx, dy, dz := b.dx[:n], b.dy[:n], b.dz[:n]
	h, hs, h2, ss := p.h, p.h*p.s, p.h*p.h, p.s*(1-p.s)
	for k := range b.kets {
		var r0, rx, ry, rz, rxx, rxy, rxz, ryy, ryz, rzz float64
		for i := b.begin[k]; i < b.begin[k+1]; i++ {
			x, y, z, v, w := dx[i], dy[i], dz[i], g1[i], g2[i]
			r0 += g0[i]
			rx += x * v
			ry += y * v
			rz += z * v
			wx, wy := w*x, w*y
			rxx += v + wx*x
			rxy += wx * y
			rxz += wx * z
			ryy += v + wy*y
			ryz += wy * z
			rzz += v + w*z*z
		}
		acc := b.acc[14*k:][:14]
		acc[0] += h2 * rxx
		acc[1] += h2 * rxy
		acc[2] += h2 * rxz
		acc[3] += h2 * ryy
		acc[4] += h2 * ryz
		acc[5] += h2 * rzz
		acc[6] += h * r0
		acc[7] += h * rx
		acc[8] += h * ry
		acc[9] += h * rz
		acc[10] += hs * rx
		acc[11] += hs * ry
		acc[12] += hs * rz
		acc[13] += ss * r0
	}
}

// derivatives fills r with the derivatives of the potential at lane i, up to
// the third degree, and to the fourth where top is 4.
func (b *batch) derivatives(r *[35]float64, i, top int) {
	x, y, z := b.dx[i], b.dy[i], b.dz[i]
	g1, g2, g3 := b.g[1][i], b.g[2][i], b.g[3][i]
	xx, yy, zz := x*x, y*y, z*z
	xy, xz, yz := x*y, x*z, y*z
	r[0] = b.g[0][i]
	r[1] = x * g1
	r[2] = y * g1
	r[3] = z * g1
	r[4] = g1 + xx*g2
	r[5] = xy * g2
	r[6] = xz * g2
	r[7] = g1 + yy*g2
	r[8] = yz * g2
	r[9] = g1 + zz*g2
	ax, ay, az := g2+xx*g3, g2+yy*g3, g2+zz*g3
	r[10] = x * (2*g2 + ax)
	r[11] = y * ax
	r[12] = z * ax
	r[13] = x * ay
	r[14] = x * yz * g3
	r[15] = x * az
	r[16] = y * (2*g2 + ay)
	r[17] = z * ay
	r[18] = y * az
	r[19] = z * (2*g2 + az)
	if top < 4 {
		return
	}
	g4 := b.g[4][i]
	bx, by, bz := g3+xx*g4, g3+yy*g4, g3+zz*g4 // what a further pair of derivatives asks for
	cx, cy, cz := 2*g3+bx, 2*g3+by, 2*g3+bz
	r[20] = 3*ax + xx*cx
	r[21] = xy * cx
	r[22] = xz * cx
	r[23] = ax + yy*bx
	r[24] = yz * bx
	r[25] = ax + zz*bx
	r[26] = xy * cy
	r[27] = xz * by
	r[28] = xy * bz
	r[29] = xz * cz
	r[30] = 3*ay + yy*cy
	r[31] = yz * cy
	r[32] = ay + zz*by
	r[33] = yz * cz
	r[34] = 3*az + zz*cz
}

func (b *batch) addPPPS(p *primitive) {
	var r [35]float64
	for k := range b.kets {
		var sh [20]float64 // weight h of the ket, first to third degree
		var ss [10]float64 // weight s of the ket, up to second degree
		for i := b.begin[k]; i < b.begin[k+1]; i++ {
			b.derivatives(&r, i, 3)
			h, s := b.h[i], b.s[i]
			for t := 1; t < 20; t++ {
				sh[t] += h * r[t]
			}
			for t := range ss {
				ss[t] += s * r[t]
			}
		}
		var v [30]float64
		cd := &b.ket[k].ab
		for t := range ss {
			up := &raised[t]
			v[3*t] = -sh[up[0]&31] - cd[0]*ss[t]
			v[3*t+1] = -sh[up[1]&31] - cd[1]*ss[t]
			v[3*t+2] = -sh[up[2]&31] - cd[2]*ss[t]
		}
		addBra(b.acc[14*3*k:][:14*3], v[:], p, 3)
	}
}

func (b *batch) addPPPP(p *primitive) {
	var r [35]float64
	for k := range b.kets {
		var s2 [35]float64 // weight h^2 of the ket, second to fourth degree
		var s1 [20]float64 // weight h, up to third degree
		var sm [20]float64 // weight h s, first to third degree
		var s0 [10]float64 // weight s (1-s), up to second degree
		for i := b.begin[k]; i < b.begin[k+1]; i++ {
			b.derivatives(&r, i, 4)
			h, s := b.h[i], b.s[i]
			h2, hs, ss := h*h, h*s, s*(1-s)
			for t := range s0 {
				s0[t] += ss * r[t]
			}
			for t := range s1 {
				s1[t] += h * r[t]
				sm[t] += hs * r[t]
			}
			for t := 4; t < 35; t++ {
				s2[t] += h2 * r[t]
			}
		}
		var v [90]float64
		ketPP(&v, &s2, &s1, &sm, &s0, &b.ket[k].ab)
		addBra(b.acc[14*9*k:][:14*9], v[:], p, 9)
	}
}

// ketPP brings the distance cd of the ket's shells in: v[9t+3k+l] is derivative
// t of the potential of p_k p_l. Odd derivatives change sign on the ket.
func ketPP(v *[90]float64, s2 *[35]float64, s1, sm *[20]float64, s0 *[10]float64, cd *[3]float64) {
	for t := range s0 {
		up := &raised[t]
		o := v[9*t : 9*t+9 : 9*t+9]
		for k := range 3 {
			for l := range 3 {
				uk, ul := up[k], up[l]
				o[3*k+l] = s2[raised[uk][l]] + cd[k]*sm[ul] - cd[l]*(s1[uk]-sm[uk]) - cd[k]*cd[l]*s0[t]
			}
			o[4*k] += s1[t]
		}
	}
}

// raised[t][k] is the number of derivative t taken once more along k.
var raised = func() (up [20][3]uint8) {
	for l := range 4 {
		for _, p := range Powers(l) {
			t := hermiteIndex(p.X, p.Y, p.Z)
			up[t] = [3]uint8{
				uint8(hermiteIndex(p.X+1, p.Y, p.Z)),
				uint8(hermiteIndex(p.X, p.Y+1, p.Z)),
				uint8(hermiteIndex(p.X, p.Y, p.Z+1)),
			}
		}
	}
	return up
}()
