#include "textflag.h"

// One step of the reduction to tridiagonal form through a group of rows: the
// rows get their update, their product with u, and their share of the product
// of the rows above, which hold the other half of the matrix.

// Numbers of one row: x -= vk w + wk v, sum += x u. The vectors v, w, u, p are
// in a0, a1, a2, a3.
#define UPDATE(row, a0, a1, a2, vk, wk, x, sum) \
	VMOVUPD      row, x    \
	VFNMADD231PD a1, vk, x \
	VFNMADD231PD a0, wk, x \
	VMOVUPD      x, row    \
	VFMADD231PD  a2, x, sum

// func updateAVX512(m *float64, ld, diagonal, i int, v, w, u, p *float64)
TEXT ·updateAVX512(SB), NOSPLIT, $0-64
	MOVQ m+0(FP), DI
	MOVQ ld+8(FP), R8
	MOVQ diagonal+16(FP), CX
	MOVQ i+24(FP), BX
	MOVQ v+32(FP), R9
	MOVQ w+40(FP), R10
	MOVQ u+48(FP), R11
	MOVQ p+56(FP), R12
	SHLQ $3, R8
	LEAQ (R8)(R8*2), R13
	SHRQ $3, CX
	XORQ AX, AX

	VBROADCASTSD (R9)(BX*8), Z16
	VBROADCASTSD 8(R9)(BX*8), Z17
	VBROADCASTSD 16(R9)(BX*8), Z18
	VBROADCASTSD 24(R9)(BX*8), Z19
	VBROADCASTSD (R10)(BX*8), Z20
	VBROADCASTSD 8(R10)(BX*8), Z21
	VBROADCASTSD 16(R10)(BX*8), Z22
	VBROADCASTSD 24(R10)(BX*8), Z23
	VBROADCASTSD (R11)(BX*8), Z24
	VBROADCASTSD 8(R11)(BX*8), Z25
	VBROADCASTSD 16(R11)(BX*8), Z26
	VBROADCASTSD 24(R11)(BX*8), Z27
	VPXORQ       Z12, Z12, Z12
	VPXORQ       Z13, Z13, Z13
	VPXORQ       Z14, Z14, Z14
	VPXORQ       Z15, Z15, Z15
	TESTQ        CX, CX
	JZ           diagonal512

loop512:
	VMOVUPD     (R9)(AX*1), Z0
	VMOVUPD     (R10)(AX*1), Z1
	VMOVUPD     (R11)(AX*1), Z2
	VMOVUPD     (R12)(AX*1), Z3
	UPDATE((DI), Z0, Z1, Z2, Z16, Z20, Z4, Z12)
	UPDATE((DI)(R8*1), Z0, Z1, Z2, Z17, Z21, Z5, Z13)
	UPDATE((DI)(R8*2), Z0, Z1, Z2, Z18, Z22, Z6, Z14)
	UPDATE((DI)(R13*1), Z0, Z1, Z2, Z19, Z23, Z7, Z15)
	VFMADD231PD Z4, Z24, Z3
	VFMADD231PD Z5, Z25, Z3
	VFMADD231PD Z6, Z26, Z3
	VFMADD231PD Z7, Z27, Z3
	VMOVUPD     Z3, (R12)(AX*1)
	ADDQ        $64, DI
	ADDQ        $64, AX
	DECQ        CX
	JNZ         loop512

diagonal512:
	VMOVUPD (R9)(AX*1), Z0
	VMOVUPD (R10)(AX*1), Z1
	VMOVUPD (R11)(AX*1), Z2
	UPDATE((DI), Z0, Z1, Z2, Z16, Z20, Z4, Z12)
	UPDATE((DI)(R8*1), Z0, Z1, Z2, Z17, Z21, Z5, Z13)
	UPDATE((DI)(R8*2), Z0, Z1, Z2, Z18, Z22, Z6, Z14)
	UPDATE((DI)(R13*1), Z0, Z1, Z2, Z19, Z23, Z7, Z15)

	// The four sums, side by side.
	VEXTRACTF64X4 $1, Z12, Y4
	VEXTRACTF64X4 $1, Z13, Y5
	VEXTRACTF64X4 $1, Z14, Y6
	VEXTRACTF64X4 $1, Z15, Y7
	VADDPD        Y4, Y12, Y4
	VADDPD        Y5, Y13, Y5
	VADDPD        Y6, Y14, Y6
	VADDPD        Y7, Y15, Y7
	VHADDPD       Y5, Y4, Y4
	VHADDPD       Y7, Y6, Y6
	VPERM2F128    $0x21, Y6, Y4, Y5
	VBLENDPD      $0x0c, Y6, Y4, Y4
	VADDPD        Y5, Y4, Y4
	VADDPD        (R12)(BX*8), Y4, Y4
	VMOVUPD       Y4, (R12)(BX*8)
	VZEROUPPER
	RET

// func updateAVX2(m *float64, ld, diagonal, i int, v, w, u, p *float64)
TEXT ·updateAVX2(SB), NOSPLIT, $0-64
	MOVQ m+0(FP), DI
	MOVQ ld+8(FP), R8
	MOVQ diagonal+16(FP), CX
	MOVQ i+24(FP), BX
	MOVQ v+32(FP), R9
	MOVQ w+40(FP), R10
	MOVQ u+48(FP), R11
	MOVQ p+56(FP), R12
	SHLQ $3, R8
	SHRQ $2, CX
	XORQ AX, AX

	VBROADCASTSD (R9)(BX*8), Y4
	VBROADCASTSD 8(R9)(BX*8), Y5
	VBROADCASTSD (R10)(BX*8), Y6
	VBROADCASTSD 8(R10)(BX*8), Y7
	VBROADCASTSD (R11)(BX*8), Y8
	VBROADCASTSD 8(R11)(BX*8), Y9
	VXORPD       Y10, Y10, Y10
	VXORPD       Y11, Y11, Y11
	TESTQ        CX, CX
	JZ           diagonal256

loop256:
	VMOVUPD     (R9)(AX*1), Y0
	VMOVUPD     (R10)(AX*1), Y1
	VMOVUPD     (R11)(AX*1), Y2
	VMOVUPD     (R12)(AX*1), Y3
	UPDATE((DI), Y0, Y1, Y2, Y4, Y6, Y12, Y10)
	UPDATE((DI)(R8*1), Y0, Y1, Y2, Y5, Y7, Y13, Y11)
	VFMADD231PD Y12, Y8, Y3
	VFMADD231PD Y13, Y9, Y3
	VMOVUPD     Y3, (R12)(AX*1)
	ADDQ        $32, DI
	ADDQ        $32, AX
	DECQ        CX
	JNZ         loop256

diagonal256:
	VMOVUPD (R9)(AX*1), Y0
	VMOVUPD (R10)(AX*1), Y1
	VMOVUPD (R11)(AX*1), Y2
	UPDATE((DI), Y0, Y1, Y2, Y4, Y6, Y12, Y10)
	UPDATE((DI)(R8*1), Y0, Y1, Y2, Y5, Y7, Y13, Y11)
	VMOVUPD 32(R9)(AX*1), Y0
	VMOVUPD 32(R10)(AX*1), Y1
	VMOVUPD 32(R11)(AX*1), Y2
	UPDATE(32(DI), Y0, Y1, Y2, Y4, Y6, Y12, Y10)
	UPDATE(32(DI)(R8*1), Y0, Y1, Y2, Y5, Y7, Y13, Y11)

	// The two sums, side by side.
	VHADDPD      Y11, Y10, Y10
	VEXTRACTF128 $1, Y10, X11
	VADDPD       X11, X10, X10
	VADDPD       (R12)(BX*8), X10, X10
	VMOVUPD      X10, (R12)(BX*8)
	VZEROUPPER
	RET
