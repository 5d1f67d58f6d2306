package gauss

import (
	"math"
	"sync"
)

// Tables of the Boys function for lanes, one for each highest order, made as
// those of fastTables and reaching further, because higher orders fall off later.
const (
	laneTop  = 3 * MaxL
	laneEnd  = 42.0 // exp(-t) is below 1e-18 from here on
	laneRows = int(laneEnd/fastStep) + 1
)

var laneTables = func() (tables [laneTop + 1]func() []fastRow) {
	for m := range tables {
		tables[m] = sync.OnceValue(func() []fastRow {
			rows := make([]fastRow, laneRows)
			f := make([]float64, m+6)
			for k := range rows {
				t := float64(k) * fastStep
				boysSeries(f, t)
				for j := range 6 {
					rows[k][j] = f[m+j] / factorial(j)
				}
				rows[k][6] = math.Exp(-t)
			}
			return rows
		})
	}
	return tables
}()

// laneBoys fills rows 0..top of g with (-2 rho)^m F_m(rho R^2) c / sqrt(p+q) for
// a primitive of exponent p.p at P and all lanes of a chunk, and d with P-C.
func laneBoys(g, d []float64, p *primitive, ch *auxiliaryChunk, top int) {
	n := ch.stride
	q, c := ch.q[:n], ch.c[:n]
	x, y, z := ch.centres[:n], ch.centres[n:2*n], ch.centres[2*n:3*n]
	dx, dy, dz := d[:n], d[n:2*n], d[2*n:3*n]
	g = g[:(top+1)*n]
	table := laneTables[top]()
	var f [laneTop + 1]float64
	for k := range q {
		ux, uy, uz := p.x-x[k], p.y-y[k], p.z-z[k]
		dx[k], dy[k], dz[k] = ux, uy, uz
		inv := 1 / (p.p + q[k])
		rho := p.p * q[k] * inv
		t := rho * (ux*ux + uy*uy + uz*uz)
		pre := c[k] * math.Sqrt(inv)
		if t >= laneEnd {
			v := 0.5 * math.Sqrt(math.Pi/t) * pre
			s := -rho / t
			g[k] = v
			for m := 1; m <= top; m++ { // F_m+1 = (2m+1)/(2t) F_m
				v *= float64(2*m-1) * s
				g[m*n+k] = v
			}
			continue
		}
		i := int(t*(1/fastStep) + 0.5)
		h := float64(i)*fastStep - t
		row := &table[i]
		f[top] = row[0] + h*(row[1]+h*(row[2]+h*(row[3]+h*(row[4]+h*row[5]))))
		e := row[6] * (1 + h*(1+h*(1.0/2+h*(1.0/6+h*(1.0/24+h*(1.0/120+h*(1.0/720)))))))
		for m := top; m > 0; m-- {
			f[m-1] = (2*t*f[m] + e) * oddInverse[m]
		}
		s := -2 * rho
		for m, v := range f[:top+1] {
			g[m*n+k] = pre * v
			pre *= s
		}
	}
}

// oddInverse[m] is 1/(2m-1).
var oddInverse = func() (v [laneTop + 1]float64) {
	for m := range v {
		v[m] = 1 / float64(2*m-1)
	}
	return v
}()
