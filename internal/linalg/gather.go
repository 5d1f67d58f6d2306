package linalg

// Gather computes C = beta C + sum over k of a_k b_k^T, where a_k is row rowsA[k] of a, m
// numbers, b_k row rowsB[k] of b, n numbers, and C has m rows; lda, ldb and ldc
// are the distances between rows in memory. It is the product of two matrices of
// chosen rows that need not stand together.
func (w *Workspace) Gather(m, n int, a []float64, rowsA []int32, lda int, b []float64, rowsB []int32, ldb int, beta float64, c []float64, ldc int) {
	checkMatrix(m, n, c, ldc)
	if len(rowsA) != len(rowsB) {
		panic("linalg: matrix of the wrong size")
	}
	scaleMatrix(m, n, beta, c, ldc)
	if m == 0 || n == 0 || len(rowsA) == 0 {
		return
	}
	checkRows(rowsA, len(a), lda, m)
	checkRows(rowsB, len(b), ldb, n)
	if active.gemm.gather != nil && n%active.gemm.columns == 0 {
		w.inPlace(active.gemm, m, n, operand{a, lda, true, rowsA}, operand{b, ldb, false, rowsB}, c, ldc)
		return
	}
	if active.gemm.micro != nil {
		w.blocked(active.gemm, product{m, n, len(rowsA), 1,
			operand{a, lda, true, rowsA}, operand{b, ldb, false, rowsB}, c, ldc})
		return
	}
	w.gatherPortable(m, n, a, rowsA, lda, b, rowsB, ldb, c, ldc)
}

// checkRows panics where a row of n numbers leaves its matrix.
func checkRows(rows []int32, length, ld, n int) {
	for _, r := range rows {
		if r < 0 || int(r)*ld+n > length {
			panic("linalg: a row outside of its matrix")
		}
	}
}

// inPlace packs A and takes the rows of B, which are whole panels, from where they
// are: each is used for few rows of C, and packing them would cost as much.
func (w *Workspace) inPlace(t tile, m, n int, a, b operand, c []float64, ldc int) {
	k := len(a.rows)
	w.edge = grow(w.edge, t.rows*t.columns)
	w.a = grow(w.a, roundUp(m, t.rows)*k)
	packPanels(w.a, operand{a.x, a.ld, false, a.rows}, 0, k, 0, m, t.rows, 1)
	for j := 0; j < n; j += t.columns {
		for i := 0; i < m; i += t.rows {
			if i+t.rows <= m {
				t.gather(k, &w.a[i*k], &b.x[j], &b.rows[0], b.ld, &c[i*ldc+j], ldc)
				continue
			}
			clear(w.edge)
			t.gather(k, &w.a[i*k], &b.x[j], &b.rows[0], b.ld, &w.edge[0], t.columns)
			for r := range m - i {
				add(c[(i+r)*ldc+j:(i+r)*ldc+j+t.columns], w.edge[r*t.columns:])
			}
		}
	}
}

// gatherPortable copies the rows, some at a time, and multiplies.
func (w *Workspace) gatherPortable(m, n int, a []float64, rowsA []int32, lda int, b []float64, rowsB []int32, ldb int, c []float64, ldc int) {
	for k := 0; k < len(rowsA); k += blockK {
		rows := min(blockK, len(rowsA)-k)
		w.a, w.b = grow(w.a, rows*m), grow(w.b, rows*n)
		for i := range rows {
			copy(w.a[i*m:(i+1)*m], a[int(rowsA[k+i])*lda:])
			copy(w.b[i*n:(i+1)*n], b[int(rowsB[k+i])*ldb:])
		}
		w.Gemm(true, false, m, n, rows, 1, w.a, m, w.b, n, 1, c, ldc)
	}
}

// packGathered is packRows for rows that are listed.
func packGathered(panel, x []float64, rows []int32, ld, columns, width int) {
	for l, r := range rows {
		at := int(r) * ld
		copy(panel[l*width:l*width+columns], x[at:at+columns])
	}
}
