#include "textflag.h"

// A chain of plane rotations on a strip of columns: the row that moves along
// the chain stays in registers, four of them.

// One register: x is the moving row, y the next one. Cosine and sine are in c
// and s; what x leaves behind goes to offset of the row at DI, v is spare.
#define TURN(offset, x, y, v, c, s) \
	VMOVUPD      offset(DI)(R8*1), y \
	VMULPD       y, c, v             \
	VMULPD       y, s, y             \
	VFMADD231PD  x, c, y             \
	VMOVUPD      y, offset(DI)       \
	VFNMADD213PD v, s, x

// func rotateAVX512(x *float64, stride, count int, cs *float64)
TEXT ·rotateAVX512(SB), NOSPLIT, $0-32
	MOVQ    x+0(FP), DI
	MOVQ    stride+8(FP), R8
	MOVQ    count+16(FP), CX
	MOVQ    cs+24(FP), SI
	SHLQ    $3, R8
	VMOVUPD (DI), Z0
	VMOVUPD 64(DI), Z1
	VMOVUPD 128(DI), Z2
	VMOVUPD 192(DI), Z3

loop512:
	VBROADCASTSD (SI), Z30
	VBROADCASTSD 8(SI), Z31
	TURN(0, Z0, Z4, Z8, Z30, Z31)
	TURN(64, Z1, Z5, Z9, Z30, Z31)
	TURN(128, Z2, Z6, Z10, Z30, Z31)
	TURN(192, Z3, Z7, Z11, Z30, Z31)
	ADDQ         $16, SI
	ADDQ         R8, DI
	DECQ         CX
	JNZ          loop512

	VMOVUPD Z0, (DI)
	VMOVUPD Z1, 64(DI)
	VMOVUPD Z2, 128(DI)
	VMOVUPD Z3, 192(DI)
	VZEROUPPER
	RET

// func rotateAVX2(x *float64, stride, count int, cs *float64)
TEXT ·rotateAVX2(SB), NOSPLIT, $0-32
	MOVQ    x+0(FP), DI
	MOVQ    stride+8(FP), R8
	MOVQ    count+16(FP), CX
	MOVQ    cs+24(FP), SI
	SHLQ    $3, R8
	VMOVUPD (DI), Y0
	VMOVUPD 32(DI), Y1
	VMOVUPD 64(DI), Y2
	VMOVUPD 96(DI), Y3

loop256:
	VBROADCASTSD (SI), Y14
	VBROADCASTSD 8(SI), Y15
	TURN(0, Y0, Y4, Y8, Y14, Y15)
	TURN(32, Y1, Y5, Y9, Y14, Y15)
	TURN(64, Y2, Y6, Y10, Y14, Y15)
	TURN(96, Y3, Y7, Y11, Y14, Y15)
	ADDQ         $16, SI
	ADDQ         R8, DI
	DECQ         CX
	JNZ          loop256

	VMOVUPD Y0, (DI)
	VMOVUPD Y1, 32(DI)
	VMOVUPD Y2, 64(DI)
	VMOVUPD Y3, 96(DI)
	VZEROUPPER
	RET
