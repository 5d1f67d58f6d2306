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
	if active.gemm.micro != nil {
		w.blocked(active.gemm, product{m, n, len(rowsA), 1,
			operand{a, lda, true, rowsA}, operand{b, ldb, false, rowsB}, c, ldc})
		return
	}
	w.gatherPortable(m, n, a, rowsA, lda, b, rowsB, ldb, c, ldc)
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
