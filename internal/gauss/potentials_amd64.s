#include "textflag.h"
#include "go_asm.h"

// Numbers that the kernels spread over vectors.
DATA potentialNumbers<>+0(SB)/8, $32.0
DATA potentialNumbers<>+8(SB)/8, $1.5
DATA potentialNumbers<>+16(SB)/8, $0.5
DATA potentialNumbers<>+24(SB)/8, $-2.0
DATA potentialNumbers<>+32(SB)/8, $-1.0
DATA potentialNumbers<>+40(SB)/8, $0.88622692545275801365 // sqrt(pi)/2
DATA potentialNumbers<>+48(SB)/8, $0.03125
DATA potentialNumbers<>+56(SB)/8, $0.0013888888888888889 // 1/720
DATA potentialNumbers<>+64(SB)/8, $0.0083333333333333333 // 1/120
DATA potentialNumbers<>+72(SB)/8, $0.041666666666666667 // 1/24
DATA potentialNumbers<>+80(SB)/8, $0.16666666666666667 // 1/6
DATA potentialNumbers<>+88(SB)/8, $1.0
DATA potentialNumbers<>+96(SB)/8, $0.33333333333333333 // 1/3
DATA potentialNumbers<>+104(SB)/8, $0.2
DATA potentialNumbers<>+112(SB)/8, $0.14285714285714286 // 1/7
DATA potentialNumbers<>+120(SB)/8, $3.0
DATA potentialNumbers<>+128(SB)/8, $15.0
DATA potentialNumbers<>+136(SB)/8, $105.0
GLOBL potentialNumbers<>(SB), RODATA|NOPTR, $144

// One more step of 1/sqrt(D): y (3/2 - D/2 y^2). Z9 = y, Z10 = D/2, Z22 = 3/2.
#define NEWTON \
	VMULPD       Z9, Z9, Z11   \
	VMOVAPD      Z22, Z12      \
	VFNMADD231PD Z10, Z11, Z12 \
	VMULPD       Z12, Z9, Z9

// Column number of the rows of the table that Z30 points to, into a register.
#define GATHER(offset, to) \
	KXNORW     K2, K2, K2                 \
	VGATHERQPD offset(SI)(Z30*1), K2, to

// One step down the orders: F = (2T F' + e) f, with F' = from, 2T = Z31, e = Z8.
#define DOWN(from, to, f) \
	VMOVAPD     from, to    \
	VFMADD213PD Z8, Z31, to \
	VMULPD      f, to, to

// func potentials512(b *batch, p *primitive, table *fastRow, top, groups int)
//
// Eight lanes at a time. With u = p q R^2 and v = p + q, t is u/v; a lane with
// t >= 32 needs 1/u in the place of 1/v, so that one reciprocal square root
// serves both kinds.
TEXT ·potentials512(SB), NOSPLIT, $0-40
	MOVQ b+0(FP), AX
	MOVQ p+8(FP), BX
	MOVQ table+16(FP), SI
	MOVQ top+24(FP), R8
	MOVQ groups+32(FP), DX
	LEAQ potentialNumbers<>(SB), DI
	XORQ CX, CX

	VBROADCASTSD primitive_p(BX), Z16
	VBROADCASTSD primitive_x(BX), Z17
	VBROADCASTSD primitive_y(BX), Z18
	VBROADCASTSD primitive_z(BX), Z19
	VBROADCASTSD primitive_c(BX), Z20
	VBROADCASTSD 0(DI), Z21
	VBROADCASTSD 8(DI), Z22
	VBROADCASTSD 16(DI), Z23
	VBROADCASTSD 56(DI), Z24
	VBROADCASTSD 64(DI), Z25
	VBROADCASTSD 72(DI), Z26
	VBROADCASTSD 80(DI), Z27
	VBROADCASTSD 88(DI), Z28
	VBROADCASTSD 48(DI), Z29

group:
	// distance P - Q
	VSUBPD  batch_x(AX)(CX*1), Z17, Z0
	VSUBPD  batch_y(AX)(CX*1), Z18, Z1
	VSUBPD  batch_z(AX)(CX*1), Z19, Z2
	VMOVUPD Z0, batch_dx(AX)(CX*1)
	VMOVUPD Z1, batch_dy(AX)(CX*1)
	VMOVUPD Z2, batch_dz(AX)(CX*1)
	VMULPD  Z0, Z0, Z3
	VFMADD231PD Z1, Z1, Z3
	VFMADD231PD Z2, Z2, Z3

	// Z5 = p q, Z6 = v, Z7 = u, K1: t >= 32, Z6 = u there
	VMOVUPD batch_q(AX)(CX*1), Z4
	VMULPD  Z16, Z4, Z5
	VADDPD  Z16, Z4, Z6
	VMULPD  Z5, Z3, Z7
	VMULPD  Z21, Z6, Z8
	VCMPPD  $0x1D, Z8, Z7, K1
	VMOVAPD Z7, K1, Z6

	// Z9 = 1/sqrt, Z11 = its square
	VRSQRT14PD Z6, Z9
	VMULPD     Z23, Z6, Z10
	NEWTON
	NEWTON
	VMULPD     Z9, Z9, Z11

	// Z12 = t (1 where K1), Z13 = -2 rho, or -rho/t; Z15 = factor of all
	VMULPD       Z7, Z11, Z12
	VMULPD       Z5, Z11, Z13
	VBROADCASTSD 24(DI), Z14
	VBROADCASTSD 32(DI), K1, Z14
	VMULPD       Z14, Z13, Z13
	VMULPD       batch_c(AX)(CX*1), Z20, Z15
	VMULPD       Z9, Z15, Z15
	VMULPD.BCST  40(DI), Z15, K1, Z15

	// Z30 = place of the row in the table, Z10 = distance to its t
	VMULPD       Z21, Z12, Z10
	VCVTPD2QQ    Z10, Z30
	VCVTQQ2PD    Z30, Z10
	VPSLLQ       $6, Z30, Z30
	VFMSUB213PD  Z12, Z29, Z10

	// Z0 = F_top
	GATHER(40, Z0)
	GATHER(32, Z1)
	GATHER(24, Z2)
	GATHER(16, Z3)
	GATHER(8, Z4)
	GATHER(0, Z5)
	VFMADD213PD Z1, Z10, Z0
	VFMADD213PD Z2, Z10, Z0
	VFMADD213PD Z3, Z10, Z0
	VFMADD213PD Z4, Z10, Z0
	VFMADD213PD Z5, Z10, Z0

	TESTQ R8, R8
	JZ    zero

	// Z8 = exp(-t), Z31 = 2t
	GATHER(48, Z9)
	VMOVAPD     Z24, Z8
	VFMADD213PD Z25, Z10, Z8
	VFMADD213PD Z26, Z10, Z8
	VFMADD213PD Z27, Z10, Z8
	VFMADD213PD Z23, Z10, Z8
	VFMADD213PD Z28, Z10, Z8
	VFMADD213PD Z28, Z10, Z8
	VMULPD      Z9, Z8, Z8
	VADDPD      Z12, Z12, Z31

	CMPQ R8, $2
	JLT  one
	JEQ  two
	CMPQ R8, $3
	JEQ  three

	VMOVAPD      Z0, Z4
	VBROADCASTSD 112(DI), Z14
	DOWN(Z4, Z0, Z14)

three:
	VMOVAPD      Z0, Z3
	VBROADCASTSD 104(DI), Z14
	DOWN(Z3, Z0, Z14)

two:
	VMOVAPD      Z0, Z2
	VBROADCASTSD 96(DI), Z14
	DOWN(Z2, Z0, Z14)

one:
	VMOVAPD     Z0, Z1
	VFMADD213PD Z8, Z31, Z0

zero:
	VMOVAPD Z28, K1, Z0
	VMULPD  Z15, Z0, Z0
	VMOVUPD Z0, batch_g(AX)(CX*1)
	TESTQ   R8, R8
	JZ      next
	VMOVAPD Z28, K1, Z1
	VMULPD  Z13, Z15, Z15
	VMULPD  Z15, Z1, Z1
	VMOVUPD Z1, (batch_g+8*const_maxLanes)(AX)(CX*1)
	CMPQ    R8, $2
	JLT     next
	VBROADCASTSD 120(DI), K1, Z2
	VMULPD  Z13, Z15, Z15
	VMULPD  Z15, Z2, Z2
	VMOVUPD Z2, (batch_g+16*const_maxLanes)(AX)(CX*1)
	CMPQ    R8, $3
	JLT     next
	VBROADCASTSD 128(DI), K1, Z3
	VMULPD  Z13, Z15, Z15
	VMULPD  Z15, Z3, Z3
	VMOVUPD Z3, (batch_g+24*const_maxLanes)(AX)(CX*1)
	CMPQ    R8, $4
	JLT     next
	VBROADCASTSD 136(DI), K1, Z4
	VMULPD  Z13, Z15, Z15
	VMULPD  Z15, Z4, Z4
	VMOVUPD Z4, (batch_g+32*const_maxLanes)(AX)(CX*1)

next:
	ADDQ $64, CX
	DECQ DX
	JNZ  group
	VZEROUPPER
	RET

// Column number of the rows of the table that X10 points to, into a register.
#define GATHER4(offset, to) \
	VPCMPEQD   Y8, Y8, Y8              \
	VGATHERDPD Y8, offset(SI)(X10*1), to

// One step of Horner's rule in Y11 with column number offset/8 of the rows.
#define HORNER4(offset) \
	GATHER4(offset, Y1)        \
	VFMADD213PD Y1, Y11, Y0

// One step of Horner's rule in Y11 with a number, in Y9.
#define SERIES4(offset) \
	VBROADCASTSD offset(DI), Y1 \
	VFMADD213PD  Y1, Y11, Y9

// One step down the orders: F = (2T F' + e) f, with F' = from, 2T = Y12, e = Y9.
#define DOWN4(from, to, offset) \
	VBROADCASTSD offset(DI), Y8  \
	VMOVAPD      from, to        \
	VFMADD213PD  Y9, Y12, to     \
	VMULPD       Y8, to, to

// Order m where t >= 32, with the factor of its order.
#define STORE4(offset, f, place) \
	VBROADCASTSD offset(DI), Y8   \
	VBLENDVPD    Y15, Y8, f, f    \
	VMULPD       Y14, f, f        \
	VMOVUPD      f, place(AX)(CX*1)

// func potentials256(b *batch, p *primitive, table *fastRow, top, groups int)
//
// potentials512 with four lanes at a time.
TEXT ·potentials256(SB), NOSPLIT, $0-40
	MOVQ b+0(FP), AX
	MOVQ p+8(FP), BX
	MOVQ table+16(FP), SI
	MOVQ top+24(FP), R8
	MOVQ groups+32(FP), DX
	LEAQ potentialNumbers<>(SB), DI
	XORQ CX, CX

group4:
	VBROADCASTSD primitive_x(BX), Y0
	VBROADCASTSD primitive_y(BX), Y1
	VBROADCASTSD primitive_z(BX), Y2
	VSUBPD       batch_x(AX)(CX*1), Y0, Y0
	VSUBPD       batch_y(AX)(CX*1), Y1, Y1
	VSUBPD       batch_z(AX)(CX*1), Y2, Y2
	VMOVUPD      Y0, batch_dx(AX)(CX*1)
	VMOVUPD      Y1, batch_dy(AX)(CX*1)
	VMOVUPD      Y2, batch_dz(AX)(CX*1)
	VMULPD       Y0, Y0, Y3
	VFMADD231PD  Y1, Y1, Y3
	VFMADD231PD  Y2, Y2, Y3

	// Y5 = p q, Y6 = v, Y7 = u, Y15: t >= 32, Y6 = u there
	VBROADCASTSD primitive_p(BX), Y0
	VMOVUPD      batch_q(AX)(CX*1), Y4
	VMULPD       Y0, Y4, Y5
	VADDPD       Y0, Y4, Y6
	VMULPD       Y5, Y3, Y7
	VBROADCASTSD 0(DI), Y1
	VMULPD       Y1, Y6, Y8
	VCMPPD       $0x1D, Y8, Y7, Y15
	VBLENDVPD    Y15, Y7, Y6, Y6

	// Y9 = 1/sqrt, Y2 = its square
	VSQRTPD      Y6, Y9
	VBROADCASTSD 88(DI), Y10
	VDIVPD       Y9, Y10, Y9
	VMULPD       Y9, Y9, Y2

	// Y12 = t (1 where Y15), Y13 = -2 rho, or -rho/t; Y14 = factor of all
	VMULPD       Y7, Y2, Y12
	VMULPD       Y5, Y2, Y13
	VBROADCASTSD 24(DI), Y3
	VBROADCASTSD 32(DI), Y4
	VBLENDVPD    Y15, Y4, Y3, Y3
	VMULPD       Y3, Y13, Y13
	VBROADCASTSD primitive_c(BX), Y14
	VMULPD       batch_c(AX)(CX*1), Y14, Y14
	VMULPD       Y9, Y14, Y14
	VBROADCASTSD 40(DI), Y3
	VBLENDVPD    Y15, Y3, Y10, Y3
	VMULPD       Y3, Y14, Y14

	// X10 = place of the row in the table, Y11 = distance to its t
	VMULPD       Y1, Y12, Y11
	VROUNDPD     $0, Y11, Y11
	VCVTPD2DQY   Y11, X10
	VPSLLD       $6, X10, X10
	VBROADCASTSD 48(DI), Y1
	VFMSUB213PD  Y12, Y1, Y11

	// Y0 = F_top
	GATHER4(40, Y0)
	HORNER4(32)
	HORNER4(24)
	HORNER4(16)
	HORNER4(8)
	HORNER4(0)
	TESTQ R8, R8
	JZ    zero4

	// Y9 = exp(-t), Y12 = 2t
	VBROADCASTSD 56(DI), Y9
	SERIES4(64)
	SERIES4(72)
	SERIES4(80)
	SERIES4(16)
	SERIES4(88)
	SERIES4(88)
	GATHER4(48, Y1)
	VMULPD Y1, Y9, Y9
	VADDPD Y12, Y12, Y12

	CMPQ R8, $2
	JLT  one4
	JEQ  two4
	CMPQ R8, $3
	JEQ  three4

	VMOVAPD Y0, Y4
	DOWN4(Y4, Y0, 112)

three4:
	VMOVAPD Y0, Y3
	DOWN4(Y3, Y0, 104)

two4:
	VMOVAPD Y0, Y2
	DOWN4(Y2, Y0, 96)

one4:
	VMOVAPD     Y0, Y1
	VFMADD213PD Y9, Y12, Y0

zero4:
	STORE4(88, Y0, batch_g)
	TESTQ  R8, R8
	JZ     next4
	VMULPD Y13, Y14, Y14
	STORE4(88, Y1, (batch_g+8*const_maxLanes))
	CMPQ   R8, $2
	JLT    next4
	VMULPD Y13, Y14, Y14
	STORE4(120, Y2, (batch_g+16*const_maxLanes))
	CMPQ   R8, $3
	JLT    next4
	VMULPD Y13, Y14, Y14
	STORE4(128, Y3, (batch_g+24*const_maxLanes))
	CMPQ   R8, $4
	JLT    next4
	VMULPD Y13, Y14, Y14
	STORE4(136, Y4, (batch_g+32*const_maxLanes))

next4:
	ADDQ $32, CX
	DECQ DX
	JNZ  group4
	VZEROUPPER
	RET
