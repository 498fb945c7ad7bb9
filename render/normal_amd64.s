#include "textflag.h"

DATA laneNo<>+0(SB)/8, $0.0
DATA laneNo<>+8(SB)/8, $1.0
DATA laneNo<>+16(SB)/8, $2.0
DATA laneNo<>+24(SB)/8, $3.0
DATA laneNo<>+32(SB)/8, $4.0
DATA laneNo<>+40(SB)/8, $5.0
DATA laneNo<>+48(SB)/8, $6.0
DATA laneNo<>+56(SB)/8, $7.0
GLOBL laneNo<>(SB), RODATA|NOPTR, $64
DATA one64<>+0(SB)/8, $1.0
GLOBL one64<>(SB), RODATA|NOPTR, $8

// LINE finds k0 + k1·x, whose numbers lie at a and b.
#define LINE(a, b, v) \
	VBROADCASTSD b(DI), v; \
	VMULPD Y0, v, v; \
	VBROADCASTSD a(DI), Y3; \
	VADDPD Y3, v, v

// COORD finds one coordinate in the body's own space.
#define COORD(o, v) \
	LINE(80+o, 104+o, Y4); \
	LINE(128+o, 152+o, v); \
	VMULPD Y1, v, v; \
	VADDPD v, Y4, v

// ROWOF finds one coordinate of the normal.
#define ROWOF(o, to) \
	VBROADCASTSS (184+o)(DI), X3; \
	VMULPS X6, X3, X3; \
	VBROADCASTSS (188+o)(DI), X4; \
	VMULPS X7, X4, X4; \
	VADDPS X4, X3, X3; \
	VBROADCASTSS (192+o)(DI), X4; \
	VMULPS X8, X4, X4; \
	VADDPS X4, X3, X3; \
	VMOVUPS X3, to(SI)

// func normalEight(k *roundKernel)
TEXT ·normalEight(SB), NOSPLIT, $0-8
	MOVQ k+0(FP), DI
	LEAQ 224(DI), SI
	LEAQ laneNo<>(SB), BX
	MOVL $2, CX
	VXORPD Y15, Y15, Y15

four:
	VBROADCASTSD 0(DI), Y0
	VADDPD (BX), Y0, Y0           // x
	VBROADCASTSD 24(DI), Y1
	VMULPD Y0, Y1, Y1
	VBROADCASTSD 16(DI), Y2
	VADDPD Y2, Y1, Y1
	VMULPD Y0, Y1, Y1
	VBROADCASTSD 8(DI), Y2
	VADDPD Y2, Y1, Y1
	VMAXPD Y15, Y1, Y1            // under the root
	VSQRTPD Y1, Y1
	VBROADCASTSD 48(DI), Y2
	VMULPD Y2, Y1, Y1
	LINE(32, 40, Y2)
	VADDPD Y1, Y2, Y1             // n
	VCVTPD2PSY Y1, X2
	VMOVUPS X2, (SI)
	CMPQ 72(DI), $0
	JEQ level
	VBROADCASTSD one64<>(SB), Y2
	VDIVPD Y1, Y2, Y1             // t
	JMP coords

level:
	VBROADCASTSD 56(DI), Y2
	VSUBPD Y1, Y2, Y1
	VBROADCASTSD 64(DI), Y2
	VDIVPD Y2, Y1, Y1

coords:
	COORD(0, Y6)
	COORD(8, Y7)
	COORD(16, Y8)
	VBROADCASTSD 176(DI), Y2
	VMULPD Y2, Y8, Y8
	VCVTPD2PSY Y6, X6
	VCVTPD2PSY Y7, X7
	VCVTPD2PSY Y8, X8
	ROWOF(0, 32)
	ROWOF(12, 64)
	ROWOF(24, 96)
	ADDQ $16, SI
	ADDQ $32, BX
	DECL CX
	JNZ four
	VZEROUPPER
	RET
