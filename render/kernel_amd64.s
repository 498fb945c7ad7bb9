#include "textflag.h"

// The eight samples of two pixels lie in the lanes of a vector in the order
// 0 1 | 4 5 || 2 3 | 6 7 (sample of the first pixel, or 4 + sample of the
// second), so that interleaving with the slot gives the order in memory.

// Sample places in the grid of 1/256, x in the lower and y in the upper half, by
// lane:
// lanes 0 1 2 3: first pixel 0 1, second pixel 0 1
// lanes 4 5 6 7: first pixel 2 3, second pixel 2 3
DATA sampleXY<>+0(SB)/4, $0x00200060
DATA sampleXY<>+4(SB)/4, $0x006000e0
DATA sampleXY<>+8(SB)/4, $0x00200160
DATA sampleXY<>+12(SB)/4, $0x006001e0
DATA sampleXY<>+16(SB)/4, $0x00a00020
DATA sampleXY<>+20(SB)/4, $0x00e000a0
DATA sampleXY<>+24(SB)/4, $0x00a00120
DATA sampleXY<>+28(SB)/4, $0x00e001a0
GLOBL sampleXY<>(SB), RODATA|NOPTR, $32

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

// Registers of both functions; R12 points to the triangle's lane in the block:
// Y0 Y1 Y2   edge functions of the row's first pair
// Y3 Y4 Y5   edge functions of the pair
// Y6         n0 + gy·y of the row; Y7 x of the pair
// Y8 Y9 Y10  growth of the edge functions over two pixels
// Y12        slot
// Y11 Y13 Y14 Y15 scratch
#define PREPARE \
	VMOVDQU      sampleXY<>(SB), Y13; \
	EDGE(0, Y0, Y8); \
	EDGE(32, Y1, Y9); \
	EDGE(64, Y2, Y10); \
	VBROADCASTSS 320(R12), Y11; \
	VMOVUPS      Y11, gx-64(SP); \
	MOVL         448(R12), R8; \
	MOVL         480(R12), R9; \
	MOVLQSX      512(R12), SI; \
	ADDQ         552(DI), SI; \
	MOVQ         560(DI), R10; \
	VBROADCASTSS 416(R12), Y15; \
	VADDPS       sampleYF<>(SB), Y15, Y15; \
	VMOVUPS      Y15, rowY-32(SP)

// EDGE readies one edge: value at the samples, growth over two pixels.
#define EDGE(o, val, step) \
	VPBROADCASTD (96+o)(R12), step; \
	VPMADDWD     Y13, step, val; \
	VPBROADCASTD (192+o)(R12), Y15; \
	VPADDD       Y15, val, val; \
	VPSLLD       $16, step, step; \
	VPSRAD       $7, step, step

// ROW readies a row: copies the edge functions, finds n0 + gy·y and x.
#define ROW \
	VMOVDQA      Y0, Y3; \
	VMOVDQA      Y1, Y4; \
	VMOVDQA      Y2, Y5; \
	VBROADCASTSS 352(R12), Y6; \
	VMULPS       rowY-32(SP), Y6, Y6; \
	VBROADCASTSS 288(R12), Y15; \
	VADDPS       Y6, Y15, Y6; \
	VBROADCASTSS 384(R12), Y7; \
	VADDPS       sampleXF<>(SB), Y7, Y7; \
	VMOVUPS      Y7, pairX-128(SP)

// DOWN goes to the next row: the edge functions grow by 256·b, y by 1.
#define DOWN \
	FALL(0, Y0); \
	FALL(32, Y1); \
	FALL(64, Y2); \
	VBROADCASTSS one<>(SB), Y15; \
	VADDPS       rowY-32(SP), Y15, Y15; \
	VMOVUPS      Y15, rowY-32(SP)

#define FALL(o, val) \
	VPBROADCASTD (96+o)(R12), Y15; \
	VPSRAD       $16, Y15, Y15; \
	VPSLLD       $8, Y15, Y15; \
	VPADDD       Y15, val, val

// RIGHT goes to the next pair.
#define RIGHT \
	VPADDD       Y8, Y3, Y3; \
	VPADDD       Y9, Y4, Y4; \
	VPADDD       Y10, Y5, Y5; \
	VBROADCASTSS two<>(SB), Y15; \
	VADDPS       Y15, Y7, Y7; \
	VMOVUPS      Y7, pairX-128(SP)

// func drawEight(s *triEight, todo uint32) uint32
TEXT ·drawEight(SB), NOSPLIT, $136-20
	MOVQ s+0(FP), DI
	MOVQ DI, R12
	XORL R13, R13
	MOVL R13, hits-136(SP)

drawLane:
	MOVL  todo+8(FP), AX
	BTL   R13, AX
	JCC   drawOther
	MOVL  448(R12), AX
	TESTL AX, AX
	JLE   drawOther
	PREPARE
	VPBROADCASTD 576(DI), Y12
	XORL  AX, AX

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
	DECL R8
	JZ   drawn
	DOWN
	ADDQ R10, SI
	JMP  drawRow

drawn:
	TESTL AX, AX
	JZ    drawOther
	INCL  576(DI)                 // the next slot
	MOVL  hits-136(SP), AX
	BTSL  R13, AX
	MOVL  AX, hits-136(SP)

drawOther:
	ADDQ $4, R12
	INCL R13
	CMPL R13, $8
	JNE  drawLane
	VZEROUPPER
	MOVL hits-136(SP), AX
	MOVL AX, ret+16(FP)
	RET

// func maskFour(s *triEight, lane int) bool
TEXT ·maskFour(SB), NOSPLIT, $136-17
	MOVQ s+0(FP), DI
	MOVQ lane+8(FP), AX
	LEAQ (DI)(AX*4), R12
	PREPARE
	MOVQ 568(DI), DI              // masks
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
	MOVB R11, (DI)
	INCQ DI
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
	MOVB AX, ret+16(FP)
	RET
