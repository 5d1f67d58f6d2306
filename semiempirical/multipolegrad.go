package semiempirical

// A pairMoments is what the terms of a pair of atoms are made of.
type pairMoments struct {
	qa, qb         float64
	ma, mb         [3]float64 // dipoles
	mav, mbv, mamb float64    // products with the bond's vector, and with one another
	tav, tbv       [3]float64 // quadrupoles times the vector
	vtav, vtbv     float64
	s1, s2         float64 // charge-dipole; dipole-dipole and charge-quadrupole
}

func (p *pairMoments) set(m *moments, a, b int, v *[3]float64, r2 float64) {
	p.qa, p.qb = m.atom[a], m.atom[b]
	p.ma, p.mb = [3]float64(m.dipole[3*a:]), [3]float64(m.dipole[3*b:])
	p.mav, p.mbv, p.mamb = dot3(&p.ma, v), dot3(&p.mb, v), dot3(&p.ma, &p.mb)
	timesPacked(&p.tav, m.quadrupole[6*a:6*a+6], v)
	timesPacked(&p.tbv, m.quadrupole[6*b:6*b+6], v)
	p.vtav, p.vtbv = dot3(v, &p.tav), dot3(v, &p.tbv)
	p.s1 = p.qa*p.mbv - p.qb*p.mav
	p.s2 = r2*p.mamb - 3*p.mav*p.mbv + p.qa*p.vtbv + p.qb*p.vtav
}

// addGradient adds the gradient at fixed moments to grad, but for the part
// through the coordination numbers, which goes to dEdCN.
func (p *anisotropic) addGradient(m *moments, grad, dEdCN []float64) {
	var pm pairMoments
	k := 0
	for a := range p.radius {
		for b := range a {
			d := &p.g.v[k]
			r := p.g.r[k]
			f3, f5 := p.f3[k], p.f5[k]
			d3, d5 := p.damping(a, b, r)
			pm.set(m, a, b, d, r*r)
			radial := (pm.s1*f3*(3*(1-d3)-3) + pm.s2*f5*(4*(1-d5)-5)) / (r * r)
			var f [3]float64
			for i := range d {
				f[i] = radial*d[i] + f3*(pm.qa*pm.mb[i]-pm.qb*pm.ma[i]) +
					f5*(2*pm.mamb*d[i]-3*(pm.mav*pm.mb[i]+pm.mbv*pm.ma[i])+2*(pm.qa*pm.tbv[i]+pm.qb*pm.tav[i]))
			}
			addPair(grad, a, b, 1, f)
			byRadius := -(3*(1-d3)*pm.s1*f3 + 4*(1-d5)*pm.s2*f5) / (p.radius[a] + p.radius[b])
			dEdCN[a] += byRadius * p.slope[a]
			dEdCN[b] += byRadius * p.slope[b]
			k++
		}
	}
}

// timesPacked is a packed symmetric tensor times a vector.
func timesPacked(dst *[3]float64, t []float64, v *[3]float64) {
	dst[0] = t[0]*v[0] + t[1]*v[1] + t[3]*v[2]
	dst[1] = t[1]*v[0] + t[2]*v[1] + t[4]*v[2]
	dst[2] = t[3]*v[0] + t[4]*v[1] + t[5]*v[2]
}

func dot3(a, b *[3]float64) float64 { return a[0]*b[0] + a[1]*b[1] + a[2]*b[2] }
