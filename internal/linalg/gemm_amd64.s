#include "textflag.h"

// Micro-kernels of the matrix product: C += A B for a tile of C whose sums stay
// in registers. A is packed by columns of the tile's height, B by rows of its
// width.

// One row of an 8 by 24 tile: A's element times three registers of B.
#define ROW512(offset, a, c0, c1, c2) \
	VBROADCASTSD offset(SI), a      \
	VFMADD231PD  Z24, a, c0         \
	VFMADD231PD  Z25, a, c1         \
	VFMADD231PD  Z26, a, c2

// Adds a row of sums to C and goes on to the next.
#define STORE512(c0, c1, c2) \
	VADDPD  (DX), c0, c0       \
	VADDPD  64(DX), c1, c1     \
	VADDPD  128(DX), c2, c2    \
	VMOVUPD c0, (DX)           \
	VMOVUPD c1, 64(DX)         \
	VMOVUPD c2, 128(DX)        \
	ADDQ    R8, DX

#define CLEAR512(c0, c1, c2) \
	VPXORQ c0, c0, c0 \
	VPXORQ c1, c1, c1 \
	VPXORQ c2, c2, c2

// func microAVX512(k int, a, b, c *float64, ldc int)
TEXT ·microAVX512(SB), NOSPLIT, $0-40
	MOVQ k+0(FP), CX
	MOVQ a+8(FP), SI
	MOVQ b+16(FP), DI
	MOVQ c+24(FP), DX
	MOVQ ldc+32(FP), R8
	SHLQ $3, R8
	CLEAR512(Z0, Z1, Z2)
	CLEAR512(Z3, Z4, Z5)
	CLEAR512(Z6, Z7, Z8)
	CLEAR512(Z9, Z10, Z11)
	CLEAR512(Z12, Z13, Z14)
	CLEAR512(Z15, Z16, Z17)
	CLEAR512(Z18, Z19, Z20)
	CLEAR512(Z21, Z22, Z23)

loop512:
	VMOVUPD (DI), Z24
	VMOVUPD 64(DI), Z25
	VMOVUPD 128(DI), Z26
	ROW512(0, Z30, Z0, Z1, Z2)
	ROW512(8, Z31, Z3, Z4, Z5)
	ROW512(16, Z30, Z6, Z7, Z8)
	ROW512(24, Z31, Z9, Z10, Z11)
	ROW512(32, Z30, Z12, Z13, Z14)
	ROW512(40, Z31, Z15, Z16, Z17)
	ROW512(48, Z30, Z18, Z19, Z20)
	ROW512(56, Z31, Z21, Z22, Z23)
	ADDQ    $64, SI
	ADDQ    $192, DI
	DECQ    CX
	JNZ     loop512

	STORE512(Z0, Z1, Z2)
	STORE512(Z3, Z4, Z5)
	STORE512(Z6, Z7, Z8)
	STORE512(Z9, Z10, Z11)
	STORE512(Z12, Z13, Z14)
	STORE512(Z15, Z16, Z17)
	STORE512(Z18, Z19, Z20)
	STORE512(Z21, Z22, Z23)
	VZEROUPPER
	RET

// One row of a 4 by 12 tile.
#define ROW256(offset, c0, c1, c2) \
	VBROADCASTSD offset(SI), Y15 \
	VFMADD231PD  Y12, Y15, c0    \
	VFMADD231PD  Y13, Y15, c1    \
	VFMADD231PD  Y14, Y15, c2

#define STORE256(c0, c1, c2) \
	VADDPD  (DX), c0, c0   \
	VADDPD  32(DX), c1, c1 \
	VADDPD  64(DX), c2, c2 \
	VMOVUPD c0, (DX)       \
	VMOVUPD c1, 32(DX)     \
	VMOVUPD c2, 64(DX)     \
	ADDQ    R8, DX

#define CLEAR256(c0, c1, c2) \
	VXORPD c0, c0, c0 \
	VXORPD c1, c1, c1 \
	VXORPD c2, c2, c2

// func microAVX2(k int, a, b, c *float64, ldc int)
TEXT ·microAVX2(SB), NOSPLIT, $0-40
	MOVQ k+0(FP), CX
	MOVQ a+8(FP), SI
	MOVQ b+16(FP), DI
	MOVQ c+24(FP), DX
	MOVQ ldc+32(FP), R8
	SHLQ $3, R8
	CLEAR256(Y0, Y1, Y2)
	CLEAR256(Y3, Y4, Y5)
	CLEAR256(Y6, Y7, Y8)
	CLEAR256(Y9, Y10, Y11)

loop256:
	VMOVUPD (DI), Y12
	VMOVUPD 32(DI), Y13
	VMOVUPD 64(DI), Y14
	ROW256(0, Y0, Y1, Y2)
	ROW256(8, Y3, Y4, Y5)
	ROW256(16, Y6, Y7, Y8)
	ROW256(24, Y9, Y10, Y11)
	ADDQ    $32, SI
	ADDQ    $96, DI
	DECQ    CX
	JNZ     loop256

	STORE256(Y0, Y1, Y2)
	STORE256(Y3, Y4, Y5)
	STORE256(Y6, Y7, Y8)
	STORE256(Y9, Y10, Y11)
	VZEROUPPER
	RET

// func gatherAVX512(k int, a, b *float64, rows *int32, ldb int, c *float64, ldc int)
//
// The rows of B are where they are; what stands beside them, which comes next, is
// fetched ahead.
TEXT ·gatherAVX512(SB), NOSPLIT, $0-56
	MOVQ k+0(FP), CX
	MOVQ a+8(FP), SI
	MOVQ b+16(FP), DI
	MOVQ rows+24(FP), R10
	MOVQ ldb+32(FP), R9
	MOVQ c+40(FP), DX
	MOVQ ldc+48(FP), R8
	SHLQ $3, R9
	SHLQ $3, R8
	CLEAR512(Z0, Z1, Z2)
	CLEAR512(Z3, Z4, Z5)
	CLEAR512(Z6, Z7, Z8)
	CLEAR512(Z9, Z10, Z11)
	CLEAR512(Z12, Z13, Z14)
	CLEAR512(Z15, Z16, Z17)
	CLEAR512(Z18, Z19, Z20)
	CLEAR512(Z21, Z22, Z23)

gatherLoop512:
	MOVLQSX (R10), R11
	IMULQ R9, R11
	ADDQ DI, R11
	VMOVUPD (R11), Z24
	VMOVUPD 64(R11), Z25
	VMOVUPD 128(R11), Z26
	PREFETCHT0 192(R11)
	PREFETCHT0 256(R11)
	PREFETCHT0 320(R11)
	ROW512(0, Z30, Z0, Z1, Z2)
	ROW512(8, Z31, Z3, Z4, Z5)
	ROW512(16, Z30, Z6, Z7, Z8)
	ROW512(24, Z31, Z9, Z10, Z11)
	ROW512(32, Z30, Z12, Z13, Z14)
	ROW512(40, Z31, Z15, Z16, Z17)
	ROW512(48, Z30, Z18, Z19, Z20)
	ROW512(56, Z31, Z21, Z22, Z23)
	ADDQ    $64, SI
	ADDQ    $4, R10
	DECQ    CX
	JNZ     gatherLoop512

	STORE512(Z0, Z1, Z2)
	STORE512(Z3, Z4, Z5)
	STORE512(Z6, Z7, Z8)
	STORE512(Z9, Z10, Z11)
	STORE512(Z12, Z13, Z14)
	STORE512(Z15, Z16, Z17)
	STORE512(Z18, Z19, Z20)
	STORE512(Z21, Z22, Z23)
	VZEROUPPER
	RET

// func gatherAVX2(k int, a, b *float64, rows *int32, ldb int, c *float64, ldc int)
//
// The rows of B are where they are; what stands beside them, which comes next, is
// fetched ahead.
TEXT ·gatherAVX2(SB), NOSPLIT, $0-56
	MOVQ k+0(FP), CX
	MOVQ a+8(FP), SI
	MOVQ b+16(FP), DI
	MOVQ rows+24(FP), R10
	MOVQ ldb+32(FP), R9
	MOVQ c+40(FP), DX
	MOVQ ldc+48(FP), R8
	SHLQ $3, R9
	SHLQ $3, R8
	CLEAR256(Y0, Y1, Y2)
	CLEAR256(Y3, Y4, Y5)
	CLEAR256(Y6, Y7, Y8)
	CLEAR256(Y9, Y10, Y11)

gatherLoop256:
	MOVLQSX (R10), R11
	IMULQ R9, R11
	ADDQ DI, R11
	VMOVUPD (R11), Y12
	VMOVUPD 32(R11), Y13
	VMOVUPD 64(R11), Y14
	PREFETCHT0 96(R11)
	PREFETCHT0 160(R11)
	ROW256(0, Y0, Y1, Y2)
	ROW256(8, Y3, Y4, Y5)
	ROW256(16, Y6, Y7, Y8)
	ROW256(24, Y9, Y10, Y11)
	ADDQ    $32, SI
	ADDQ    $4, R10
	DECQ    CX
	JNZ     gatherLoop256

	STORE256(Y0, Y1, Y2)
	STORE256(Y3, Y4, Y5)
	STORE256(Y6, Y7, Y8)
	STORE256(Y9, Y10, Y11)
	VZEROUPPER
	RET
