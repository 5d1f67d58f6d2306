package gauss

// The classes without a pair of p shells. Each function adds one bra primitive
// with all kets of the batch to b.acc; r stands for derivatives of the
// potential with respect to P, their sign for the ket is the opposite.

func (b *batch) addSSSS() {
	g0 := b.g[0][:b.lanes]
	for k := range b.kets {
		v := 0.0
		for _, g := range g0[b.begin[k]:b.begin[k+1]] {
			v += g
		}
		b.acc[k] += v
	}
}

func (b *batch) addPSSS(p *primitive) {
	n := b.lanes
	g0, g1 := b.g[0][:n], b.g[1][:n]
	dx, dy, dz := b.dx[:n], b.dy[:n], b.dz[:n]
	for k := range b.kets {
		var r0, rx, ry, rz float64
		for i := b.begin[k]; i < b.begin[k+1]; i++ {
			g := g1[i]
			r0 += g0[i]
			rx += dx[i] * g
			ry += dy[i] * g
			rz += dz[i] * g
		}
		acc := b.acc[4*k:][:4]
		acc[0] += p.h * rx
		acc[1] += p.h * ry
		acc[2] += p.h * rz
		acc[3] += p.s * r0
	}
}

func (b *batch) addPSPS(p *primitive) {
	n := b.lanes
	g0, g1, g2 := b.g[0][:n], b.g[1][:n], b.g[2][:n]
	dx, dy, dz := b.dx[:n], b.dy[:n], b.dz[:n]
	hq, sq := b.h[:n], b.s[:n]
	for k := range b.kets {
		var hx, hy, hz, hxx, hxy, hxz, hyy, hyz, hzz float64 // with weight h
		var s0, sx, sy, sz float64                           // with weight s
		for i := b.begin[k]; i < b.begin[k+1]; i++ {
			x, y, z, h, s := dx[i], dy[i], dz[i], hq[i], sq[i]
			s0 += s * g0[i]
			v := s * g1[i]
			sx += x * v
			sy += y * v
			sz += z * v
			v = h * g1[i]
			hx += x * v
			hy += y * v
			hz += z * v
			w := h * g2[i]
			wx, wy := w*x, w*y
			hxx += v + wx*x
			hxy += wx * y
			hxz += wx * z
			hyy += v + wy*y
			hyz += wy * z
			hzz += v + w*z*z
		}
		acc := b.acc[12*k:][:12]
		cx, cy, cz := b.ket[k].ab[0], b.ket[k].ab[1], b.ket[k].ab[2]
		acc[0] -= p.h * (hxx + cx*sx)
		acc[1] -= p.h * (hxy + cy*sx)
		acc[2] -= p.h * (hxz + cz*sx)
		acc[3] -= p.h * (hxy + cx*sy)
		acc[4] -= p.h * (hyy + cy*sy)
		acc[5] -= p.h * (hyz + cz*sy)
		acc[6] -= p.h * (hxz + cx*sz)
		acc[7] -= p.h * (hyz + cy*sz)
		acc[8] -= p.h * (hzz + cz*sz)
		acc[9] -= p.s * (hx + cx*s0)
		acc[10] -= p.s * (hy + cy*s0)
		acc[11] -= p.s * (hz + cz*s0)
	}
}
