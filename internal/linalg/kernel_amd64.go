package linalg

import "golang.org/x/sys/cpu"

var (
	avx512 = kernel{
		name:   "avx512",
		gemm:   tile{rows: 8, columns: 24, micro: microAVX512, gather: gatherAVX512},
		rotate: rotate512,
		update: update512,
	}
	avx2 = kernel{
		name:   "avx2",
		gemm:   tile{rows: 4, columns: 12, micro: microAVX2, gather: gatherAVX2},
		rotate: rotate256,
		update: update256,
	}
)

// available lists what the processor has, the fastest first.
func available() []*kernel {
	var list []*kernel
	if cpu.X86.HasAVX512F && cpu.X86.HasAVX512DQ && cpu.X86.HasAVX512VL && cpu.X86.HasFMA {
		list = append(list, &avx512)
	}
	if cpu.X86.HasAVX2 && cpu.X86.HasFMA {
		list = append(list, &avx2)
	}
	return append(list, &portable)
}

// microAVX512 adds the product of a panel of A, k columns of 8 numbers, and one
// of B, k rows of 24 numbers, to 8 rows of 24 numbers of C, ldc apart; k > 0.
//
//go:noescape
func microAVX512(k int, a, b, c *float64, ldc int)

// microAVX2 is microAVX512 for 4 rows of 12 numbers.
//
//go:noescape
func microAVX2(k int, a, b, c *float64, ldc int)

// gatherAVX512 is microAVX512 for rows of B that stand at rows[0], rows[1], ...
// times ldb.
//
//go:noescape
func gatherAVX512(k int, a, b *float64, rows *int32, ldb int, c *float64, ldc int)

// gatherAVX2 is gatherAVX512 for 4 rows of 12 numbers.
//
//go:noescape
func gatherAVX2(k int, a, b *float64, rows *int32, ldb int, c *float64, ldc int)

// rotateAVX512 applies count > 0 rotations to 32 columns; see rotateGo.
//
//go:noescape
func rotateAVX512(x *float64, stride, count int, cs *float64)

// rotateAVX2 is rotateAVX512 for 16 columns.
//
//go:noescape
func rotateAVX2(x *float64, stride, count int, cs *float64)

func rotate512(x []float64, start, stride int, cs []float64) {
	if count := checkSweep(x, start, stride, cs); count > 0 {
		rotateAVX512(&x[start], stride, count, &cs[0])
	}
}

func rotate256(x []float64, start, stride int, cs []float64) {
	if count := checkSweep(x, start, stride, cs); count > 0 {
		rotateAVX2(&x[start], stride, count, &cs[0])
		rotateAVX2(&x[start+stripWidth/2], stride, count, &cs[0])
	}
}

// checkSweep panics if a sweep leaves x, where assembly would not notice, and
// returns the number of rotations.
func checkSweep(x []float64, start, stride int, cs []float64) int {
	count := len(cs) / 2
	end := start + count*stride
	_, _ = x[start:start+stripWidth], x[end:end+stripWidth]
	return count
}

// updateAVX512 updates rows i to i+3, of which m is the first, as updateGo does;
// diagonal is where their block on the diagonal begins.
//
//go:noescape
func updateAVX512(m *float64, ld, diagonal, i int, v, w, u, p *float64)

// updateAVX2 is updateAVX512 for rows i and i+1.
//
//go:noescape
func updateAVX2(m *float64, ld, diagonal, i int, v, w, u, p *float64)

func update512(r *reduction, i int) {
	diagonal := i &^ (blockWidth - 1)
	updateAVX512(&r.m[i*r.ld], r.ld, diagonal, i, &r.v[0], &r.w[0], &r.u[0], &r.product[0])
}

func update256(r *reduction, i int) {
	diagonal := i &^ (blockWidth - 1)
	updateAVX2(&r.m[i*r.ld], r.ld, diagonal, i, &r.v[0], &r.w[0], &r.u[0], &r.product[0])
	updateAVX2(&r.m[(i+2)*r.ld], r.ld, diagonal, i+2, &r.v[0], &r.w[0], &r.u[0], &r.product[0])
}
