#include "textflag.h"

// The eight samples of two pixels lie in the lanes of a vector in the order
// 0 1 | 4 5 || 2 3 | 6 7 (sample of the first pixel, or 4 + sample of the
// second), so that interleaving with the slot gives the order in memory.

// Sample places in the grid of 1/256, x and y, by lane:
// lanes 0 1 2 3: first pixel 0 1, second pixel 0 1
// lanes 4 5 6 7: first pixel 2 3, second pixel 2 3
DATA sampleX<>+0(SB)/4, $96
DATA sampleX<>+4(SB)/4, $224
DATA sampleX<>+8(SB)/4, $352
DATA sampleX<>+12(SB)/4, $480
DATA sampleX<>+16(SB)/4, $32
DATA sampleX<>+20(SB)/4, $160
DATA sampleX<>+24(SB)/4, $288
DATA sampleX<>+28(SB)/4, $416
GLOBL sampleX<>(SB), RODATA|NOPTR, $32

DATA sampleY<>+0(SB)/4, $32
DATA sampleY<>+4(SB)/4, $96
DATA sampleY<>+8(SB)/4, $32
DATA sampleY<>+12(SB)/4, $96
DATA sampleY<>+16(SB)/4, $160
DATA sampleY<>+20(SB)/4, $224
DATA sampleY<>+24(SB)/4, $160
DATA sampleY<>+28(SB)/4, $224
GLOBL sampleY<>(SB), RODATA|NOPTR, $32

// The same as float32 in pixels.
DATA sampleXF<>+0(SB)/4, $0x3ec00000 // 0.375
DATA sampleXF<>+4(SB)/4, $0x3f600000 // 0.875
DATA sampleXF<>+8(SB)/4, $0x3fb00000 // 1.375
DATA sampleXF<>+12(SB)/4, $0x3ff00000 // 1.875
DATA sampleXF<>+16(SB)/4, $0x3e000000 // 0.125
DATA sampleXF<>+20(SB)/4, $0x3f200000 // 0.625
DATA sampleXF<>+24(SB)/4, $0x3f900000 // 1.125
DATA sampleXF<>+28(SB)/4, $0x3fd00000 // 1.625
GLOBL sampleXF<>(SB), RODATA|NOPTR, $32

DATA sampleYF<>+0(SB)/4, $0x3e000000 // 0.125
DATA sampleYF<>+4(SB)/4, $0x3ec00000 // 0.375
DATA sampleYF<>+8(SB)/4, $0x3e000000
DATA sampleYF<>+12(SB)/4, $0x3ec00000
DATA sampleYF<>+16(SB)/4, $0x3f200000 // 0.625
DATA sampleYF<>+20(SB)/4, $0x3f600000 // 0.875
DATA sampleYF<>+24(SB)/4, $0x3f200000
DATA sampleYF<>+28(SB)/4, $0x3f600000
GLOBL sampleYF<>(SB), RODATA|NOPTR, $32

DATA one<>+0(SB)/4, $0x3f800000
GLOBL one<>(SB), RODATA|NOPTR, $4
DATA two<>+0(SB)/4, $0x40000000
GLOBL two<>(SB), RODATA|NOPTR, $4

// Registers of both functions:
// Y0 Y1 Y2   edge functions of the row's first pair
// Y3 Y4 Y5   edge functions of the pair
// Y6         n0 + gy·y of the row; Y7 x of the pair
// Y8 Y9 Y10  growth of the edge functions over two pixels
// Y12        slot
// Y11 Y13 Y14 Y15 scratch
#define PREPARE \
	VMOVDQU      sampleX<>(SB), Y13; \
	VMOVDQU      sampleY<>(SB), Y14; \
	EDGE(0, Y0, Y8); \
	EDGE(4, Y1, Y9); \
	EDGE(8, Y2, Y10); \
	VBROADCASTSS 40(DI), Y11; \
	VMOVUPS      Y11, gx-64(SP); \
	VPBROADCASTD 56(DI), Y12; \
	MOVL         60(DI), R8; \
	MOVL         64(DI), R9; \
	MOVQ         72(DI), SI; \
	MOVQ         80(DI), R10; \
	VBROADCASTSS 52(DI), Y15; \
	VADDPS       sampleYF<>(SB), Y15, Y15; \
	VMOVUPS      Y15, rowY-32(SP)

// EDGE readies one edge: value at the samples, growth over two pixels.
#define EDGE(o, val, step) \
	VPBROADCASTD (12+o)(DI), step; \
	VPMULLD      Y13, step, val; \
	VPBROADCASTD (24+o)(DI), Y15; \
	VPMULLD      Y14, Y15, Y15; \
	VPADDD       Y15, val, val; \
	VPBROADCASTD o(DI), Y15; \
	VPADDD       Y15, val, val; \
	VPSLLD       $9, step, step

// ROW readies a row: copies the edge functions, finds n0 + gy·y and x.
#define ROW \
	VMOVDQA      Y0, Y3; \
	VMOVDQA      Y1, Y4; \
	VMOVDQA      Y2, Y5; \
	VBROADCASTSS 44(DI), Y6; \
	VMULPS       rowY-32(SP), Y6, Y6; \
	VBROADCASTSS 36(DI), Y15; \
	VADDPS       Y6, Y15, Y6; \
	VBROADCASTSS 48(DI), Y7; \
	VADDPS       sampleXF<>(SB), Y7, Y7; \
	VMOVUPS      Y7, pairX-128(SP)

// DOWN goes to the next row: the edge functions grow by 256·b, y by 1.
#define DOWN \
	VPBROADCASTD 24(DI), Y15; \
	VPSLLD       $8, Y15, Y15; \
	VPADDD       Y15, Y0, Y0; \
	VPBROADCASTD 28(DI), Y15; \
	VPSLLD       $8, Y15, Y15; \
	VPADDD       Y15, Y1, Y1; \
	VPBROADCASTD 32(DI), Y15; \
	VPSLLD       $8, Y15, Y15; \
	VPADDD       Y15, Y2, Y2; \
	VBROADCASTSS one<>(SB), Y15; \
	VADDPS       rowY-32(SP), Y15, Y15; \
	VMOVUPS      Y15, rowY-32(SP)

// RIGHT goes to the next pair.
#define RIGHT \
	VPADDD       Y8, Y3, Y3; \
	VPADDD       Y9, Y4, Y4; \
	VPADDD       Y10, Y5, Y5; \
	VBROADCASTSS two<>(SB), Y15; \
	VADDPS       Y15, Y7, Y7; \
	VMOVUPS      Y7, pairX-128(SP)

// func drawFour(k *kernel) bool
TEXT ·drawFour(SB), NOSPLIT, $128-9
	MOVQ k+0(FP), DI
	PREPARE
	XORL AX, AX

drawRow:
	ROW
	MOVQ SI, BX
	MOVL R9, CX

drawPair:
	VPOR      Y3, Y4, Y13
	VPOR      Y5, Y13, Y13
	VMOVMSKPS Y13, DX
	CMPL      DX, $255
	JEQ       drawNext
	VPSRAD    $31, Y13, Y13       // all ones outside
	VMULPS    gx-64(SP), Y7, Y14
	VADDPS    Y14, Y6, Y14        // nearness
	VPUNPCKHDQ Y13, Y13, Y11
	VMOVDQU   Y11, out-96(SP)
	VPUNPCKLDQ Y13, Y13, Y13      // outside, first pixel
	VPUNPCKLDQ Y14, Y12, Y15      // its keys
	VMOVDQU   (BX), Y11
	VPCMPGTQ  Y11, Y15, Y7
	VPANDN    Y7, Y13, Y7         // seen
	VMOVMSKPD Y7, R11
	ORL       R11, AX
	VBLENDVPD Y7, Y15, Y11, Y15
	VMOVDQU   Y15, (BX)
	VPUNPCKHDQ Y14, Y12, Y15      // keys of the second pixel
	VMOVDQU   32(BX), Y11
	VPCMPGTQ  Y11, Y15, Y7
	VMOVDQU   out-96(SP), Y13
	VPANDN    Y7, Y13, Y7
	VMOVMSKPD Y7, R11
	ORL       R11, AX
	VBLENDVPD Y7, Y15, Y11, Y15
	VMOVDQU   Y15, 32(BX)
	VMOVUPS   pairX-128(SP), Y7

drawNext:
	RIGHT
	ADDQ $64, BX
	DECL CX
	JNZ  drawPair
	DOWN
	ADDQ R10, SI
	DECL R8
	JNZ  drawRow
	VZEROUPPER
	TESTL AX, AX
	SETNE AX
	MOVB AX, ret+8(FP)
	RET

// func maskFour(k *kernel) bool
TEXT ·maskFour(SB), NOSPLIT, $128-9
	MOVQ k+0(FP), DI
	PREPARE
	MOVQ 88(DI), R12
	XORL AX, AX
	VPCMPEQD Y12, Y12, Y12

maskRow:
	ROW
	MOVQ SI, BX
	MOVL R9, CX

maskPair:
	VPOR      Y3, Y4, Y13
	VPOR      Y5, Y13, Y13
	XORL      R11, R11
	VMOVMSKPS Y13, DX
	CMPL      DX, $255
	JEQ       maskNext
	VMULPS    gx-64(SP), Y7, Y14
	VADDPS    Y14, Y6, Y14
	VPSRAD    $31, Y13, Y13
	VPUNPCKLDQ Y14, Y12, Y15
	VPCMPGTQ  (BX), Y15, Y15
	VMOVMSKPD Y15, R11
	VPUNPCKHDQ Y14, Y12, Y14
	VPCMPGTQ  32(BX), Y14, Y14
	VMOVMSKPD Y14, DX
	SHLL      $4, DX
	ORL       DX, R11
	VPUNPCKLDQ Y13, Y13, Y14
	VPUNPCKHDQ Y13, Y13, Y15
	VMOVMSKPD Y14, DX
	VMOVMSKPD Y15, R13
	SHLL      $4, R13
	ORL       R13, DX
	NOTL      DX
	ANDL      DX, R11
	ORL       R11, AX

maskNext:
	MOVB R11, (R12)
	INCQ R12
	RIGHT
	ADDQ $64, BX
	DECL CX
	JNZ  maskPair
	DOWN
	ADDQ R10, SI
	DECL R8
	JNZ  maskRow
	VZEROUPPER
	TESTL AX, AX
	SETNE AX
	MOVB AX, ret+8(FP)
	RET

// func skyEight(k *skyKernel)
TEXT ·skyEight(SB), NOSPLIT, $0-8
	MOVQ k+0(FP), DI
	VBROADCASTSS 0(DI), Y0
	VBROADCASTSS 4(DI), Y1
	VBROADCASTSS 8(DI), Y2
	VBROADCASTSS 12(DI), Y3
	VBROADCASTSS 16(DI), Y4
	VBROADCASTSS 20(DI), Y5
	MOVQ 24(DI), SI
	MOVQ 32(DI), CX
	VBROADCASTSS 40(DI), Y6
	VXORPS Y7, Y7, Y7             // sums
	VXORPS Y8, Y8, Y8             // 0

skyBlock:
	VMOVUPS (SI), Y9
	VSUBPS  Y0, Y9, Y9            // dx
	VMOVUPS 32(SI), Y10
	VSUBPS  Y1, Y10, Y10
	VMOVUPS 64(SI), Y11
	VSUBPS  Y2, Y11, Y11
	VMOVUPS 96(SI), Y12           // r
	VMULPS  Y9, Y9, Y13
	VMULPS  Y10, Y10, Y14
	VADDPS  Y14, Y13, Y13
	VMULPS  Y11, Y11, Y14
	VADDPS  Y14, Y13, Y13         // d2
	VMULPS  Y12, Y12, Y14
	VMAXPS  Y14, Y13, Y13
	VMULPS  Y3, Y9, Y9
	VMULPS  Y4, Y10, Y10
	VADDPS  Y10, Y9, Y9
	VMULPS  Y5, Y11, Y11
	VADDPS  Y11, Y9, Y9           // h
	VADDPS  Y12, Y9, Y9
	VMAXPS  Y8, Y9, Y9
	VSQRTPS Y13, Y14
	VADDPS  Y12, Y14, Y14
	VDIVPS  Y14, Y9, Y9           // up
	VMOVUPS 128(SI), Y14
	VDIVPS  Y13, Y14, Y14
	VSUBPS  Y6, Y14, Y14
	VMAXPS  Y8, Y14, Y14          // share
	VMULPS  Y9, Y14, Y14
	VMULPS  Y9, Y14, Y14
	VADDPS  Y14, Y7, Y7
	ADDQ    $160, SI
	DECQ    CX
	JNZ     skyBlock
	VMOVUPS Y7, 44(DI)
	VZEROUPPER
	RET
