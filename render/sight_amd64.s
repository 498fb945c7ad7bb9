#include "textflag.h"

DATA f1<>+0(SB)/4, $0x3f800000
GLOBL f1<>(SB), RODATA|NOPTR, $4
DATA f2<>+0(SB)/4, $0x40000000
GLOBL f2<>(SB), RODATA|NOPTR, $4
DATA f2up<>+0(SB)/4, $0x40000004 // 2.000001
GLOBL f2up<>(SB), RODATA|NOPTR, $4
DATA tiny<>+0(SB)/4, $0x03aa2425 // 1e-36
GLOBL tiny<>(SB), RODATA|NOPTR, $4
DATA sign<>+0(SB)/4, $0x80000000
GLOBL sign<>(SB), RODATA|NOPTR, $4

// FOUR loads half a vertex (half is 0 or 16) of each of eight sights into Y0
// to Y3, the sights k and k + 4 in one vector; o is the place of the corners'
// numbers in the block.
#define FOUR(o, half) \
	PAIR(o, half, X0, Y0); \
	PAIR(o+4, half, X1, Y1); \
	PAIR(o+8, half, X2, Y2); \
	PAIR(o+12, half, X3, Y3)

#define PAIR(o, half, x, y) \
	MOVL o(BX), AX; \
	MOVL (16+o)(BX), DX; \
	SHLQ $5, AX; \
	SHLQ $5, DX; \
	VMOVUPS half(SI)(AX*1), x; \
	VINSERTF128 $1, half(SI)(DX*1), y, y

// TURN makes three vectors of the first three numbers of eight half vertices.
#define TURN(p, q, r) \
	VUNPCKLPS Y1, Y0, p; \
	VUNPCKHPS Y1, Y0, r; \
	VUNPCKLPS Y3, Y2, Y4; \
	VUNPCKHPS Y3, Y2, Y5; \
	VUNPCKHPD Y4, p, q; \
	VUNPCKLPD Y4, p, p; \
	VUNPCKLPD Y5, r, r

// func lookEight(s *sights)
TEXT ·lookEight(SB), NOSPLIT, $192-8
	MOVQ s+0(FP), DI
	MOVQ 0(DI), SI
	MOVQ 8(DI), BX
	MOVQ 16(DI), CX

block:
	VMOVUPS 96(BX), Y0
	VMOVMSKPS Y0, AX
	TESTL AX, AX
	JZ light

	// Places of the corners, relative to a.
	FOUR(0, 0)
	TURN(Y8, Y9, Y10)
	VMOVUPS Y10, an-32(SP)
	FOUR(32, 0)
	TURN(Y11, Y12, Y10)
	VMOVUPS Y10, bn-64(SP)
	FOUR(64, 0)
	TURN(Y13, Y14, Y10)
	VMOVUPS Y10, cn-96(SP)
	VSUBPS Y8, Y11, Y11           // ux
	VSUBPS Y9, Y12, Y12           // uy
	VSUBPS Y8, Y13, Y13           // vx
	VSUBPS Y9, Y14, Y14           // vy
	VMOVUPS 160(BX), Y0
	VMOVUPS 192(BX), Y1
	VSUBPS Y8, Y0, Y0             // x
	VSUBPS Y9, Y1, Y1             // y
	VMULPS Y11, Y14, Y2
	VMULPS Y13, Y12, Y3
	VSUBPS Y3, Y2, Y2             // det
	VMULPS Y0, Y14, Y3
	VMULPS Y13, Y1, Y4
	VSUBPS Y4, Y3, Y3             // wb
	VMULPS Y11, Y1, Y4
	VMULPS Y0, Y12, Y5
	VSUBPS Y5, Y4, Y4             // wc
	VXORPS Y15, Y15, Y15          // 0
	VCMPPS $1, Y15, Y2, Y5        // det < 0
	VBROADCASTSS sign<>(SB), Y6
	VANDNPS Y6, Y5, Y7
	VXORPS 128(BX), Y7, Y7        // side
	VANDPS Y6, Y5, Y5
	VXORPS Y5, Y2, Y2
	VXORPS Y5, Y3, Y3
	VXORPS Y5, Y4, Y4
	VSUBPS Y3, Y2, Y2
	VSUBPS Y4, Y2, Y2             // wa
	VMAXPS Y15, Y2, Y2
	VMAXPS Y15, Y3, Y3
	VMAXPS Y15, Y4, Y4
	VMOVUPS 96(BX), Y6            // meshes
	VMOVUPS 320(BX), Y5
	VBLENDVPS Y6, Y7, Y5, Y7
	VMOVUPS Y7, 320(BX)
	// Nearness.
	VADDPS Y3, Y2, Y0
	VADDPS Y4, Y0, Y0             // sum
	VMULPS an-32(SP), Y2, Y1
	VMULPS bn-64(SP), Y3, Y5
	VADDPS Y5, Y1, Y1
	VMULPS cn-96(SP), Y4, Y5
	VADDPS Y5, Y1, Y1
	VDIVPS Y0, Y1, Y1
	VCMPPS $1, Y0, Y15, Y0        // 0 < sum
	VMOVUPS an-32(SP), Y5
	VBLENDVPS Y0, Y1, Y5, Y1
	VMOVUPS 352(BX), Y5
	VBLENDVPS Y6, Y1, Y5, Y1
	VMOVUPS Y1, 352(BX)
	// Normals.
	VMOVAPS Y2, Y13
	VMOVAPS Y3, Y14
	VMOVAPS Y4, Y15
	FOUR(0, 16)
	TURN(Y7, Y8, Y9)
	VMULPS Y13, Y7, Y7
	VMULPS Y13, Y8, Y8
	VMULPS Y13, Y9, Y9
	FOUR(32, 16)
	TURN(Y10, Y11, Y12)
	VMULPS Y14, Y10, Y10
	VMULPS Y14, Y11, Y11
	VMULPS Y14, Y12, Y12
	VADDPS Y10, Y7, Y7
	VADDPS Y11, Y8, Y8
	VADDPS Y12, Y9, Y9
	FOUR(64, 16)
	TURN(Y10, Y11, Y12)
	VMULPS Y15, Y10, Y10
	VMULPS Y15, Y11, Y11
	VMULPS Y15, Y12, Y12
	VADDPS Y10, Y7, Y7
	VADDPS Y11, Y8, Y8
	VADDPS Y12, Y9, Y9
	VMOVUPS 224(BX), Y0
	VMOVUPS 256(BX), Y1
	VMOVUPS 288(BX), Y2
	VBLENDVPS Y6, Y7, Y0, Y0
	VBLENDVPS Y6, Y8, Y1, Y1
	VBLENDVPS Y6, Y9, Y2, Y2
	JMP lit

light:
	VMOVUPS 224(BX), Y0
	VMOVUPS 256(BX), Y1
	VMOVUPS 288(BX), Y2

lit:
	// Y0 Y1 Y2 normal, Y3 Y4 the direction to the eye.
	VBROADCASTSS 48(DI), Y3
	VSUBPS 160(BX), Y3, Y3
	VBROADCASTSS 44(DI), Y5
	VMULPS Y5, Y3, Y3             // va
	VMOVUPS 192(BX), Y4
	VBROADCASTSS 52(DI), Y6
	VSUBPS Y6, Y4, Y4
	VMULPS Y5, Y4, Y4             // vb
	VBROADCASTSS f1<>(SB), Y15
	VMULPS Y3, Y3, Y5
	VMULPS Y4, Y4, Y6
	VADDPS Y6, Y5, Y5
	VADDPS Y15, Y5, Y5            // v2
	VMULPS Y3, Y0, Y6
	VMULPS Y4, Y1, Y7
	VADDPS Y7, Y6, Y6
	VADDPS Y2, Y6, Y6             // nv
	VMULPS Y0, Y0, Y7
	VMULPS Y1, Y1, Y8
	VADDPS Y8, Y7, Y7
	VMULPS Y2, Y2, Y8
	VADDPS Y8, Y7, Y7             // q
	VMOVUPS 320(BX), Y8           // side
	VBROADCASTSS tiny<>(SB), Y9
	VCMPPS $1, Y7, Y9, Y9         // 1e-36 < q
	VBLENDVPS Y9, Y0, Y3, Y0
	VBLENDVPS Y9, Y1, Y4, Y1
	VBLENDVPS Y9, Y2, Y15, Y2
	VBLENDVPS Y9, Y6, Y5, Y6
	VBLENDVPS Y9, Y7, Y5, Y7
	VANDPS Y9, Y8, Y8
	VSQRTPS Y7, Y7
	VDIVPS Y7, Y15, Y7            // inv
	VXORPS Y14, Y14, Y14
	VCMPPS $1, Y14, Y6, Y10       // nv < 0
	CMPL 24(DI), $0
	JNE turned
	VCMPPS $4, Y14, Y8, Y11       // side is not 0
	VCMPPS $1, Y14, Y8, Y12
	VBLENDVPS Y11, Y12, Y10, Y10

turned:
	VBROADCASTSS sign<>(SB), Y11
	VANDPS Y11, Y10, Y10
	VXORPS Y10, Y7, Y7
	VMULPS Y7, Y0, Y0
	VMULPS Y7, Y1, Y1
	VMULPS Y7, Y2, Y2
	VMULPS Y7, Y6, Y6             // nv
	VMOVUPS Y0, 224(BX)
	VMOVUPS Y1, 256(BX)
	VMOVUPS Y2, 288(BX)
	VBROADCASTSS 32(DI), Y7
	VBROADCASTSS 36(DI), Y8
	VBROADCASTSS 40(DI), Y9
	VMULPS Y7, Y0, Y0
	VMULPS Y8, Y1, Y1
	VADDPS Y1, Y0, Y0
	VMULPS Y9, Y2, Y2
	VADDPS Y2, Y0, Y0             // nl
	VMOVUPS Y0, 384(BX)
	VADDPS Y6, Y0, Y1
	VBROADCASTSS 56(DI), Y2
	VCMPPS $5, Y2, Y1, Y1         // not less than the sum that gleams
	VMOVMSKPS Y1, AX
	TESTL AX, AX
	JNZ gleam
	VMOVUPS Y14, 416(BX)
	JMP next

gleam:
	VSQRTPS Y5, Y5
	VDIVPS Y5, Y15, Y5            // 1/v
	VMULPS Y3, Y7, Y7
	VMULPS Y4, Y8, Y8
	VADDPS Y8, Y7, Y7
	VADDPS Y9, Y7, Y7
	VMULPS Y5, Y7, Y7             // lv
	VBROADCASTSS f2<>(SB), Y8
	VMULPS Y7, Y8, Y7
	VBROADCASTSS f2up<>(SB), Y8
	VADDPS Y8, Y7, Y7
	VSQRTPS Y7, Y7
	VMULPS Y5, Y6, Y6
	VADDPS Y6, Y0, Y6
	VDIVPS Y7, Y6, Y6             // nh
	VBROADCASTSS 60(DI), Y7
	VCMPPS $5, Y7, Y6, Y7
	VANDPS Y7, Y1, Y1
	MOVL 28(DI), AX               // nh to a whole power
	VMOVAPS Y15, Y5

bit:
	TESTL $1, AX
	JZ square
	VMULPS Y6, Y5, Y5

square:
	SHRL $1, AX
	JZ powered
	VMULPS Y6, Y6, Y6
	JMP bit

powered:
	VBROADCASTSS 64(DI), Y6
	VMULPS Y6, Y5, Y5
	VANDPS Y5, Y1, Y1
	VMOVUPS Y1, 416(BX)

next:
	ADDQ $608, BX
	DECQ CX
	JNZ block
	VZEROUPPER
	RET
