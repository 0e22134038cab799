#include "textflag.h"

// Products and sums are separate instructions, in the order of the portable
// twins in kernel.go: the same bits.

// func dotAVX2(x, y *float64, n int, s *[8]float64)
TEXT ·dotAVX2(SB), NOSPLIT, $0-32
	MOVQ   x+0(FP), SI
	MOVQ   y+8(FP), DI
	MOVQ   n+16(FP), CX
	MOVQ   s+24(FP), DX
	VXORPD Y0, Y0, Y0          // strands 0 to 3
	VXORPD Y1, Y1, Y1          // strands 4 to 7
	SHRQ   $3, CX
	JZ     sums

eight:
	VMOVUPD (SI), Y2
	VMOVUPD 32(SI), Y3
	VMULPD  (DI), Y2, Y2
	VMULPD  32(DI), Y3, Y3
	VADDPD  Y2, Y0, Y0
	VADDPD  Y3, Y1, Y1
	ADDQ    $64, SI
	ADDQ    $64, DI
	DECQ    CX
	JNZ     eight

sums:
	VMOVUPD    Y0, (DX)
	VMOVUPD    Y1, 32(DX)
	VZEROUPPER
	RET

// func tapsAVX2(dst *float64, n int, taps *tap, k int)
// A tap is two slices: v at byte 0, x at byte 24, the next tap at byte 48.
TEXT ·tapsAVX2(SB), NOSPLIT, $0-32
	MOVQ dst+0(FP), DI
	MOVQ n+8(FP), CX
	MOVQ taps+16(FP), R8
	MOVQ k+24(FP), R9
	XORQ AX, AX                // byte offset of the rows
	SHRQ $4, CX
	JZ   done

rows:
	MOVQ    (R8), SI
	MOVQ    24(R8), DX
	VMOVUPD (SI)(AX*1), Y0
	VMOVUPD 32(SI)(AX*1), Y1
	VMOVUPD 64(SI)(AX*1), Y2
	VMOVUPD 96(SI)(AX*1), Y3
	VMULPD  (DX)(AX*1), Y0, Y0
	VMULPD  32(DX)(AX*1), Y1, Y1
	VMULPD  64(DX)(AX*1), Y2, Y2
	VMULPD  96(DX)(AX*1), Y3, Y3
	MOVQ    R8, R10
	MOVQ    R9, R11
	DECQ    R11
	JZ      store

add:
	ADDQ    $48, R10
	MOVQ    (R10), SI
	MOVQ    24(R10), DX
	VMOVUPD (SI)(AX*1), Y4
	VMOVUPD 32(SI)(AX*1), Y5
	VMOVUPD 64(SI)(AX*1), Y6
	VMOVUPD 96(SI)(AX*1), Y7
	VMULPD  (DX)(AX*1), Y4, Y4
	VMULPD  32(DX)(AX*1), Y5, Y5
	VMULPD  64(DX)(AX*1), Y6, Y6
	VMULPD  96(DX)(AX*1), Y7, Y7
	VADDPD  Y4, Y0, Y0
	VADDPD  Y5, Y1, Y1
	VADDPD  Y6, Y2, Y2
	VADDPD  Y7, Y3, Y3
	DECQ    R11
	JNZ     add

store:
	VMOVUPD Y0, (DI)(AX*1)
	VMOVUPD Y1, 32(DI)(AX*1)
	VMOVUPD Y2, 64(DI)(AX*1)
	VMOVUPD Y3, 96(DI)(AX*1)
	ADDQ    $128, AX
	DECQ    CX
	JNZ     rows

done:
	VZEROUPPER
	RET

// func axpyAVX2(y, x *float64, n int, a float64)
TEXT ·axpyAVX2(SB), NOSPLIT, $0-32
	MOVQ         y+0(FP), DI
	MOVQ         x+8(FP), SI
	MOVQ         n+16(FP), CX
	VBROADCASTSD a+24(FP), Y0
	SHRQ         $3, CX
	JZ           done

eight:
	VMULPD  (SI), Y0, Y1
	VMULPD  32(SI), Y0, Y2
	VADDPD  (DI), Y1, Y1
	VADDPD  32(DI), Y2, Y2
	VMOVUPD Y1, (DI)
	VMOVUPD Y2, 32(DI)
	ADDQ    $64, SI
	ADDQ    $64, DI
	DECQ    CX
	JNZ     eight

done:
	VZEROUPPER
	RET

// func stepAVX2(x, p, z *float64, n int, a, b float64)
TEXT ·stepAVX2(SB), NOSPLIT, $0-48
	MOVQ         x+0(FP), DI
	MOVQ         p+8(FP), SI
	MOVQ         z+16(FP), DX
	MOVQ         n+24(FP), CX
	VBROADCASTSD a+32(FP), Y0
	VBROADCASTSD b+40(FP), Y1
	SHRQ         $3, CX
	JZ           done

eight:
	VMOVUPD (SI), Y2
	VMOVUPD 32(SI), Y3
	VMULPD  Y2, Y0, Y4         // a p
	VMULPD  Y3, Y0, Y5
	VMULPD  Y2, Y1, Y2         // b p
	VMULPD  Y3, Y1, Y3
	VADDPD  (DI), Y4, Y4
	VADDPD  32(DI), Y5, Y5
	VADDPD  (DX), Y2, Y2
	VADDPD  32(DX), Y3, Y3
	VMOVUPD Y4, (DI)
	VMOVUPD Y5, 32(DI)
	VMOVUPD Y2, (SI)
	VMOVUPD Y3, 32(SI)
	ADDQ    $64, DI
	ADDQ    $64, SI
	ADDQ    $64, DX
	DECQ    CX
	JNZ     eight

done:
	VZEROUPPER
	RET
