#include "textflag.h"

// Products and differences are separate instructions, in the order of the
// portable twins in bandkernel.go: the same bits.

// TAKE multiplies Y4 to Y7 by the sixteen elements at byte offset AX from DX,
// takes them from Y0 to Y3, goes on at label with the next tap, and stores the
// rows after the last.
#define TAKE(label) \
	VMULPD  (DX)(AX*1), Y4, Y4 \
	VMULPD  32(DX)(AX*1), Y5, Y5 \
	VMULPD  64(DX)(AX*1), Y6, Y6 \
	VMULPD  96(DX)(AX*1), Y7, Y7 \
	VSUBPD  Y4, Y0, Y0         \
	VSUBPD  Y5, Y1, Y1         \
	VSUBPD  Y6, Y2, Y2         \
	VSUBPD  Y7, Y3, Y3         \
	DECQ    R11                \
	JNZ     label              \
	VMOVUPD Y0, (DI)(AX*1)     \
	VMOVUPD Y1, 32(DI)(AX*1)   \
	VMOVUPD Y2, 64(DI)(AX*1)   \
	VMOVUPD Y3, 96(DI)(AX*1)

// NEXT goes to the tap at R10: its values to SI, its factors to DX.
#define NEXT \
	MOVQ    (R10), SI          \
	MOVQ    24(R10), DX        \
	ADDQ    $48, R10

// SUBTRACT takes the k taps of 48 bytes at R8, in turn, from the sixteen rows
// at byte offset AX, which are in Y0 to Y3, and stores them.
#define SUBTRACT(label) \
	MOVQ    R8, R10            \
	MOVQ    R9, R11            \
label:                         \
	NEXT                       \
	VMOVUPD (SI)(AX*1), Y4     \
	VMOVUPD 32(SI)(AX*1), Y5   \
	VMOVUPD 64(SI)(AX*1), Y6   \
	VMOVUPD 96(SI)(AX*1), Y7   \
	TAKE(label)

// SUBTRACT_SINGLE is SUBTRACT for values of four bytes, which stand at half of
// the offset.
#define SUBTRACT_SINGLE(label) \
	MOVQ    R8, R10            \
	MOVQ    R9, R11            \
	MOVQ    AX, R13            \
	SHRQ    $1, R13            \
label:                         \
	NEXT                       \
	VCVTPS2PD (SI)(R13*1), Y4  \
	VCVTPS2PD 16(SI)(R13*1), Y5 \
	VCVTPS2PD 32(SI)(R13*1), Y6 \
	VCVTPS2PD 48(SI)(R13*1), Y7 \
	TAKE(label)

// func tapsOffAVX2(dst, x *float64, n int, taps *tap, k int)
TEXT ·tapsOffAVX2(SB), NOSPLIT, $0-40
	MOVQ dst+0(FP), DI
	MOVQ x+8(FP), BX
	MOVQ n+16(FP), CX
	MOVQ taps+24(FP), R8
	MOVQ k+32(FP), R9
	XORQ AX, AX
	SHRQ $4, CX
	JZ   done

rows:
	VMOVUPD (BX)(AX*1), Y0
	VMOVUPD 32(BX)(AX*1), Y1
	VMOVUPD 64(BX)(AX*1), Y2
	VMOVUPD 96(BX)(AX*1), Y3
	SUBTRACT(tap)
	ADDQ    $128, AX
	DECQ    CX
	JNZ     rows

done:
	VZEROUPPER
	RET

// func tapsOffUpAVX2(dst, s, x *float64, n int, taps *tap, k int)
TEXT ·tapsOffUpAVX2(SB), NOSPLIT, $0-48
	MOVQ dst+0(FP), DI
	MOVQ s+8(FP), R12
	MOVQ x+16(FP), BX
	MOVQ n+24(FP), CX
	MOVQ taps+32(FP), R8
	MOVQ k+40(FP), R9
	MOVQ CX, AX
	SHLQ $3, AX
	SHRQ $4, CX
	JZ   done

rows:
	SUBQ    $128, AX           // from the last rows to the first, as memory is read
	VMOVUPD (BX)(AX*1), Y0
	VMOVUPD 32(BX)(AX*1), Y1
	VMOVUPD 64(BX)(AX*1), Y2
	VMOVUPD 96(BX)(AX*1), Y3
	VMULPD  (R12)(AX*1), Y0, Y0
	VMULPD  32(R12)(AX*1), Y1, Y1
	VMULPD  64(R12)(AX*1), Y2, Y2
	VMULPD  96(R12)(AX*1), Y3, Y3
	SUBTRACT(tap)
	DECQ    CX
	JNZ     rows

done:
	VZEROUPPER
	RET

// func tapsOffSingleAVX2(dst, x *float64, n int, taps *tapOf[float32], k int)
TEXT ·tapsOffSingleAVX2(SB), NOSPLIT, $0-40
	MOVQ dst+0(FP), DI
	MOVQ x+8(FP), BX
	MOVQ n+16(FP), CX
	MOVQ taps+24(FP), R8
	MOVQ k+32(FP), R9
	XORQ AX, AX
	SHRQ $4, CX
	JZ   done

rows:
	VMOVUPD (BX)(AX*1), Y0
	VMOVUPD 32(BX)(AX*1), Y1
	VMOVUPD 64(BX)(AX*1), Y2
	VMOVUPD 96(BX)(AX*1), Y3
	SUBTRACT_SINGLE(tap)
	ADDQ    $128, AX
	DECQ    CX
	JNZ     rows

done:
	VZEROUPPER
	RET

// func tapsOffUpSingleAVX2(dst, s, x *float64, n int, taps *tapOf[float32], k int)
TEXT ·tapsOffUpSingleAVX2(SB), NOSPLIT, $0-48
	MOVQ dst+0(FP), DI
	MOVQ s+8(FP), R12
	MOVQ x+16(FP), BX
	MOVQ n+24(FP), CX
	MOVQ taps+32(FP), R8
	MOVQ k+40(FP), R9
	MOVQ CX, AX
	SHLQ $3, AX
	SHRQ $4, CX
	JZ   done

rows:
	SUBQ    $128, AX           // from the last rows to the first, as memory is read
	VMOVUPD (BX)(AX*1), Y0
	VMOVUPD 32(BX)(AX*1), Y1
	VMOVUPD 64(BX)(AX*1), Y2
	VMOVUPD 96(BX)(AX*1), Y3
	VMULPD  (R12)(AX*1), Y0, Y0
	VMULPD  32(R12)(AX*1), Y1, Y1
	VMULPD  64(R12)(AX*1), Y2, Y2
	VMULPD  96(R12)(AX*1), Y3, Y3
	SUBTRACT_SINGLE(tap)
	DECQ    CX
	JNZ     rows

done:
	VZEROUPPER
	RET
