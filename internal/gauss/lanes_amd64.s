#include "textflag.h"

// func raise512(next, cur, x *float64, steps *hermiteStep, count, stride, groups int)
TEXT ·raise512(SB), NOSPLIT, $0-56
	MOVQ next+0(FP), DI
	MOVQ cur+8(FP), SI
	MOVQ x+16(FP), BX
	MOVQ steps+24(FP), R8
	MOVQ count+32(FP), CX
	MOVQ stride+40(FP), DX
	MOVQ groups+48(FP), R9

step:
	MOVQ         0(R8), R10
	IMULQ        DX, R10
	ADDQ         BX, R10
	MOVQ         8(R8), R11
	IMULQ        DX, R11
	ADDQ         SI, R11
	MOVQ         16(R8), R12
	IMULQ        DX, R12
	ADDQ         SI, R12
	VBROADCASTSD 24(R8), Z3
	XORQ         R13, R13
	MOVQ         R9, AX

lanes:
	VMOVUPD     (R10)(R13*1), Z0
	VMULPD      (R11)(R13*1), Z0, Z1
	VFMADD231PD (R12)(R13*1), Z3, Z1
	VMOVUPD     Z1, (DI)(R13*1)
	ADDQ        $64, R13
	DECQ        AX
	JNE         lanes

	ADDQ DX, DI
	ADDQ $32, R8
	DECQ CX
	JNE  step
	VZEROUPPER
	RET

// func raise256(next, cur, x *float64, steps *hermiteStep, count, stride, groups int)
TEXT ·raise256(SB), NOSPLIT, $0-56
	MOVQ next+0(FP), DI
	MOVQ cur+8(FP), SI
	MOVQ x+16(FP), BX
	MOVQ steps+24(FP), R8
	MOVQ count+32(FP), CX
	MOVQ stride+40(FP), DX
	MOVQ groups+48(FP), R9

step:
	MOVQ         0(R8), R10
	IMULQ        DX, R10
	ADDQ         BX, R10
	MOVQ         8(R8), R11
	IMULQ        DX, R11
	ADDQ         SI, R11
	MOVQ         16(R8), R12
	IMULQ        DX, R12
	ADDQ         SI, R12
	VBROADCASTSD 24(R8), Y3
	XORQ         R13, R13
	MOVQ         R9, AX

lanes:
	VMOVUPD     (R10)(R13*1), Y0
	VMULPD      (R11)(R13*1), Y0, Y1
	VFMADD231PD (R12)(R13*1), Y3, Y1
	VMOVUPD     Y1, (DI)(R13*1)
	ADDQ        $32, R13
	DECQ        AX
	JNE         lanes

	ADDQ DX, DI
	ADDQ $32, R8
	DECQ CX
	JNE  step
	VZEROUPPER
	RET

// func combine512(dst, src *float64, terms *rowTerm, counts *int, rows, stride, groups int)
//
// Four vectors of a row at a time while there are four.
TEXT ·combine512(SB), NOSPLIT, $0-56
	MOVQ dst+0(FP), DI
	MOVQ src+8(FP), SI
	MOVQ terms+16(FP), R8
	MOVQ counts+24(FP), R9
	MOVQ stride+40(FP), DX

row:
	MOVQ groups+48(FP), AX
	XORQ R13, R13

four:
	CMPQ AX, $4
	JLT  rest
	MOVQ R8, R11
	MOVQ (R9), CX
	VPXORQ Z0, Z0, Z0
	VPXORQ Z1, Z1, Z1
	VPXORQ Z2, Z2, Z2
	VPXORQ Z3, Z3, Z3

fourTerm:
	MOVQ         (R11), R10
	IMULQ        DX, R10
	ADDQ         SI, R10
	ADDQ         R13, R10
	VBROADCASTSD 8(R11), Z4
	VFMADD231PD  (R10), Z4, Z0
	VFMADD231PD  64(R10), Z4, Z1
	VFMADD231PD  128(R10), Z4, Z2
	VFMADD231PD  192(R10), Z4, Z3
	ADDQ         $16, R11
	DECQ         CX
	JNE          fourTerm
	VMOVUPD      Z0, (DI)(R13*1)
	VMOVUPD      Z1, 64(DI)(R13*1)
	VMOVUPD      Z2, 128(DI)(R13*1)
	VMOVUPD      Z3, 192(DI)(R13*1)
	ADDQ         $256, R13
	SUBQ         $4, AX
	JMP          four

rest:
	TESTQ AX, AX
	JEQ   done

one:
	MOVQ R8, R11
	MOVQ (R9), CX
	VPXORQ Z0, Z0, Z0

oneTerm:
	MOVQ         (R11), R10
	IMULQ        DX, R10
	ADDQ         SI, R10
	VBROADCASTSD 8(R11), Z4
	VFMADD231PD  (R10)(R13*1), Z4, Z0
	ADDQ         $16, R11
	DECQ         CX
	JNE          oneTerm
	VMOVUPD      Z0, (DI)(R13*1)
	ADDQ         $64, R13
	DECQ         AX
	JNE          one

done:
	MOVQ (R9), CX
	SHLQ $4, CX
	ADDQ CX, R8
	ADDQ $8, R9
	ADDQ DX, DI
	MOVQ rows+32(FP), CX
	DECQ CX
	MOVQ CX, rows+32(FP)
	JNE  row
	VZEROUPPER
	RET

// func combine256(dst, src *float64, terms *rowTerm, counts *int, rows, stride, groups int)
//
// Four vectors of a row at a time while there are four.
TEXT ·combine256(SB), NOSPLIT, $0-56
	MOVQ dst+0(FP), DI
	MOVQ src+8(FP), SI
	MOVQ terms+16(FP), R8
	MOVQ counts+24(FP), R9
	MOVQ stride+40(FP), DX

row:
	MOVQ groups+48(FP), AX
	XORQ R13, R13

four:
	CMPQ AX, $4
	JLT  rest
	MOVQ R8, R11
	MOVQ (R9), CX
	VXORPD Y0, Y0, Y0
	VXORPD Y1, Y1, Y1
	VXORPD Y2, Y2, Y2
	VXORPD Y3, Y3, Y3

fourTerm:
	MOVQ         (R11), R10
	IMULQ        DX, R10
	ADDQ         SI, R10
	ADDQ         R13, R10
	VBROADCASTSD 8(R11), Y4
	VFMADD231PD  (R10), Y4, Y0
	VFMADD231PD  32(R10), Y4, Y1
	VFMADD231PD  64(R10), Y4, Y2
	VFMADD231PD  96(R10), Y4, Y3
	ADDQ         $16, R11
	DECQ         CX
	JNE          fourTerm
	VMOVUPD      Y0, (DI)(R13*1)
	VMOVUPD      Y1, 32(DI)(R13*1)
	VMOVUPD      Y2, 64(DI)(R13*1)
	VMOVUPD      Y3, 96(DI)(R13*1)
	ADDQ         $128, R13
	SUBQ         $4, AX
	JMP          four

rest:
	TESTQ AX, AX
	JEQ   done

one:
	MOVQ R8, R11
	MOVQ (R9), CX
	VXORPD Y0, Y0, Y0

oneTerm:
	MOVQ         (R11), R10
	IMULQ        DX, R10
	ADDQ         SI, R10
	VBROADCASTSD 8(R11), Y4
	VFMADD231PD  (R10)(R13*1), Y4, Y0
	ADDQ         $16, R11
	DECQ         CX
	JNE          oneTerm
	VMOVUPD      Y0, (DI)(R13*1)
	ADDQ         $32, R13
	DECQ         AX
	JNE          one

done:
	MOVQ (R9), CX
	SHLQ $4, CX
	ADDQ CX, R8
	ADDQ $8, R9
	ADDQ DX, DI
	MOVQ rows+32(FP), CX
	DECQ CX
	MOVQ CX, rows+32(FP)
	JNE  row
	VZEROUPPER
	RET
