package linalg

// Blocks of the product: B is packed in blocks of blockK rows and blockColumns
// columns, A in blocks of blockRows rows and blockK columns, sized for the
// second and first cache. The counts of rows and columns are whole multiples of
// every kernel's tile.
//
// Source of the scheme: K. Goto, R. A. van de Geijn, ACM Trans. Math. Softw.
// 2008, 34, 12.
const (
	blockK       = 256
	blockRows    = 96
	blockColumns = 1536
)

// An operand is A or B: rows ld apart, used as its transpose if so wanted.
type operand struct {
	x          []float64
	ld         int
	transposed bool
	rows       []int32 // which rows, where not all in turn; then alpha is 1
}

// A product is C += alpha op(A) op(B).
type product struct {
	m, n, k int
	alpha   float64
	a, b    operand
	c       []float64
	ldc     int
}

// blocked computes the product with a micro-kernel.
func (w *Workspace) blocked(t tile, p product) {
	w.edge = grow(w.edge, t.rows*t.columns)
	for k0 := 0; k0 < p.k; k0 += blockK {
		k := min(blockK, p.k-k0)
		for j0 := 0; j0 < p.n; j0 += blockColumns {
			n := min(blockColumns, p.n-j0)
			w.b = grow(w.b, roundUp(n, t.columns)*k)
			packPanels(w.b, p.b, k0, k, j0, n, t.columns, 1)
			for i0 := 0; i0 < p.m; i0 += blockRows {
				m := min(blockRows, p.m-i0)
				w.a = grow(w.a, roundUp(m, t.rows)*k)
				packPanels(w.a, operand{p.a.x, p.a.ld, !p.a.transposed, p.a.rows}, k0, k, i0, m, t.rows, p.alpha)
				w.tiles(t, m, n, k, p.c[i0*p.ldc+j0:], p.ldc)
			}
		}
	}
}

// square is blocked for the lower triangle of X X^T: each number of X is packed
// once a side, and blocks of C above the diagonal are left out.
func (w *Workspace) square(t tile, c, x []float64, n, k int) {
	w.edge = grow(w.edge, t.rows*t.columns)
	o := operand{x: x, ld: k, transposed: true}
	for k0 := 0; k0 < k; k0 += blockK {
		depth := min(blockK, k-k0)
		for j0 := 0; j0 < n; j0 += blockColumns {
			columns := min(blockColumns, n-j0)
			w.b = grow(w.b, roundUp(columns, t.columns)*depth)
			packPanels(w.b, o, k0, depth, j0, columns, t.columns, 1)
			for i0 := j0 / blockRows * blockRows; i0 < n; i0 += blockRows {
				rows := min(blockRows, n-i0)
				w.a = grow(w.a, roundUp(rows, t.rows)*depth)
				packPanels(w.a, o, k0, depth, i0, rows, t.rows, 1)
				w.tiles(t, rows, min(columns, i0+rows-j0), depth, c[i0*n+j0:], n)
			}
		}
	}
}

func roundUp(n, multiple int) int { return (n + multiple - 1) / multiple * multiple }

// tiles multiplies the packed blocks into m rows and n columns of C.
func (w *Workspace) tiles(t tile, m, n, k int, c []float64, ldc int) {
	for j := 0; j < n; j += t.columns {
		b := &w.b[j*k]
		for i := 0; i < m; i += t.rows {
			a := &w.a[i*k]
			rows, columns := min(t.rows, m-i), min(t.columns, n-j)
			if rows == t.rows && columns == t.columns {
				t.micro(k, a, b, &c[i*ldc+j], ldc)
				continue
			}
			clear(w.edge)
			t.micro(k, a, b, &w.edge[0], t.columns)
			for r := range rows {
				add(c[(i+r)*ldc+j:(i+r)*ldc+j+columns], w.edge[r*t.columns:])
			}
		}
	}
}

func add(dst, x []float64) {
	x = x[:len(dst)]
	for i := range dst {
		dst[i] += x[i]
	}
}

// packPanels copies columns j0..j0+n of rows k0..k0+k of an operand, times
// alpha, into panels of width columns, each k rows one after the other; the
// last panel is filled up with zeros.
func packPanels(dst []float64, o operand, k0, k, j0, n, width int, alpha float64) {
	for j := 0; j < n; j += width {
		panel := dst[j*k : j*k+k*width]
		columns := min(width, n-j)
		if columns < width {
			clear(panel)
		}
		if o.rows != nil {
			packGathered(panel, o.x[j0+j:], o.rows[k0:k0+k], o.ld, columns, width)
			continue
		}
		if o.transposed {
			packColumns(panel, o.x[(j0+j)*o.ld+k0:], o.ld, k, columns, width, alpha)
		} else {
			packRows(panel, o.x[k0*o.ld+j0+j:], o.ld, k, columns, width, alpha)
		}
	}
}

// packRows packs k rows of x.
func packRows(panel, x []float64, ld, k, columns, width int, alpha float64) {
	for l := range k {
		from, to := x[l*ld:l*ld+columns], panel[l*width:l*width+columns]
		if alpha == 1 {
			copy(to, from)
			continue
		}
		for j, v := range from {
			to[j] = alpha * v
		}
	}
}

// packColumns packs x, whose rows become the columns of the panel, four at a
// time.
func packColumns(panel, x []float64, ld, k, columns, width int, alpha float64) {
	j := 0
	for ; j+4 <= columns; j += 4 {
		x0, x1, x2, x3 := x[j*ld:j*ld+k], x[(j+1)*ld:(j+1)*ld+k], x[(j+2)*ld:(j+2)*ld+k], x[(j+3)*ld:(j+3)*ld+k]
		to := panel[j:]
		for l, v := range x0 {
			t := to[l*width : l*width+4 : l*width+4]
			t[0], t[1], t[2], t[3] = alpha*v, alpha*x1[l], alpha*x2[l], alpha*x3[l]
		}
	}
	for ; j < columns; j++ {
		for l, v := range x[j*ld : j*ld+k] {
			panel[l*width+j] = alpha * v
		}
	}
}
