package gauss

import (
	"math"
	"sync"
)

// The Boys functions of s and p quartets need orders up to 4 only and decide
// the run time, so they have tables of their own: for each highest order one,
// with a row of eight numbers (one line of cache) a grid point:
// F_m, F_m+1/1!, ..., F_m+5/5! and exp(-t).
const (
	fastStep = 1.0 / 32 // the sixth term that is left out is below 2e-15
	fastEnd  = 32.0     // from here on exp(-t)/t is below 1e-15
	fastRows = int(fastEnd/fastStep) + 1
	fastTop  = 4
)

// topPotential is the highest order that any class asks for: (ff|pp).
const topPotential = 8

type fastRow [8]float64

var fastTables = sync.OnceValue(func() *[fastTop + 1][fastRows]fastRow {
	tables := new([fastTop + 1][fastRows]fastRow)
	for k := range fastRows {
		t := float64(k) * fastStep
		var f [fastTop + 6]float64
		boysSeries(f[:], t)
		for m := range fastTop + 1 {
			row := &tables[m][k]
			for j := range 6 {
				row[j] = f[m+j] / factorial(j)
			}
			row[6] = math.Exp(-t)
		}
	}
	return tables
})

// potentials computes, for one bra primitive and all lanes, the distance P-Q
// and the Boys functions up to order top with the factors that b.g asks for.
func (b *batch) potentials(p *primitive, top int) {
	if top > fastTop {
		b.highPotentials(p, top)
		return
	}
	b.kernel(b, p, top)
}

// potentialsGo is the potentialKernel for every processor.
func potentialsGo(b *batch, p *primitive, top int) {
	n := b.lanes
	q, x, y, z, c := b.q[:n], b.x[:n], b.y[:n], b.z[:n], b.c[:n]
	dx, dy, dz := b.dx[:n], b.dy[:n], b.dz[:n]
	g0, g1, g2, g3, g4 := b.g[0][:n], b.g[1][:n], b.g[2][:n], b.g[3][:n], b.g[4][:n]
	table := &fastTables()[top]
	for k := range q {
		ux, uy, uz := p.x-x[k], p.y-y[k], p.z-z[k]
		dx[k], dy[k], dz[k] = ux, uy, uz
		inv := 1 / (p.p + q[k])
		rho := p.p * q[k] * inv
		t := rho * (ux*ux + uy*uy + uz*uz)
		pre := p.c * c[k] * math.Sqrt(inv)
		if t >= fastEnd {
			f := 0.5 * math.Sqrt(math.Pi/t) * pre
			g0[k] = f
			if top == 0 {
				continue
			}
			// F_m+1 = (2m+1)/(2t) F_m, times -2 rho
			r := -rho / t
			f *= r
			g1[k] = f
			f *= 3 * r
			g2[k] = f
			f *= 5 * r
			g3[k] = f
			g4[k] = 7 * r * f
			continue
		}
		i := int(t*(1/fastStep) + 0.5)
		d := float64(i)*fastStep - t
		row := &table[i]
		f := row[0] + d*(row[1]+d*(row[2]+d*(row[3]+d*(row[4]+d*row[5]))))
		if top == 0 {
			g0[k] = pre * f
			continue
		}
		e := row[6] * (1 + d*(1+d*(1.0/2+d*(1.0/6+d*(1.0/24+d*(1.0/120+d*(1.0/720)))))))
		t2 := t + t
		r := -2 * rho
		switch top {
		case 1:
			g0[k] = pre * (t2*f + e)
			g1[k] = pre * r * f
		case 2:
			f1 := (t2*f + e) * (1.0 / 3)
			g0[k] = pre * (t2*f1 + e)
			pre *= r
			g1[k] = pre * f1
			g2[k] = pre * r * f
		case 3:
			f2 := (t2*f + e) * (1.0 / 5)
			f1 := (t2*f2 + e) * (1.0 / 3)
			g0[k] = pre * (t2*f1 + e)
			pre *= r
			g1[k] = pre * f1
			pre *= r
			g2[k] = pre * f2
			g3[k] = pre * r * f
		default:
			f3 := (t2*f + e) * (1.0 / 7)
			f2 := (t2*f3 + e) * (1.0 / 5)
			f1 := (t2*f2 + e) * (1.0 / 3)
			g0[k] = pre * (t2*f1 + e)
			pre *= r
			g1[k] = pre * f1
			pre *= r
			g2[k] = pre * f2
			pre *= r
			g3[k] = pre * f3
			g4[k] = pre * r * f
		}
	}
}

// highPotentials is potentials for orders above those of s and p.
func (b *batch) highPotentials(p *primitive, top int) {
	var f [topPotential + 1]float64
	for k := range b.lanes {
		x, y, z := p.x-b.x[k], p.y-b.y[k], p.z-b.z[k]
		b.dx[k], b.dy[k], b.dz[k] = x, y, z
		inv := 1 / (p.p + b.q[k])
		rho := p.p * b.q[k] * inv
		pre := p.c * b.c[k] * math.Sqrt(inv)
		Boys(f[:top+1], rho*(x*x+y*y+z*z))
		for m := range top + 1 {
			b.g[m][k] = pre * f[m]
			pre *= -2 * rho
		}
	}
}
