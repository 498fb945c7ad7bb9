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

DATA ones<>+0(SB)/8, $0x3f8000003f800000
DATA ones<>+8(SB)/8, $0x3f8000003f800000
DATA ones<>+16(SB)/8, $0x3f8000003f800000
DATA ones<>+24(SB)/8, $0x3f8000003f800000
GLOBL ones<>(SB), RODATA|NOPTR, $32
DATA twos<>+0(SB)/8, $0x4000000040000000
DATA twos<>+8(SB)/8, $0x4000000040000000
DATA twos<>+16(SB)/8, $0x4000000040000000
DATA twos<>+24(SB)/8, $0x4000000040000000
GLOBL twos<>(SB), RODATA|NOPTR, $32

// Registers of both functions: R12 points to the triangle's lane in the block:
// Y0 Y1 Y2   edge functions of the row's first pair
// Y3 Y4 Y5   edge functions of the pair
// Y6         n0 + gy·y of the row; Y7 x of the pair; Y8 y of the row
// Y11        growth of the nearness to the right
// Y12        slot
// Y9 Y10 Y13 Y14 Y15 scratch
// The growth of the edge functions over two pixels is in the frame.
#define PREPARE \
	VMOVDQU      sampleXY<>(SB), Y13; \
	EDGE(0, Y0, step-32(SP)); \
	EDGE(32, Y1, step-64(SP)); \
	EDGE(64, Y2, step-96(SP)); \
	VBROADCASTSS 320(R12), Y11; \
	MOVL         448(R12), R8; \
	MOVL         480(R12), R9; \
	MOVLQSX      512(R12), SI; \
	ADDQ         552(DI), SI; \
	MOVQ         560(DI), R10; \
	VBROADCASTSS 416(R12), Y8; \
	VADDPS       sampleYF<>(SB), Y8, Y8

// EDGE readies one edge: value at the samples, growth over two pixels.
#define EDGE(o, val, step) \
	VPBROADCASTD (96+o)(R12), Y14; \
	VPMADDWD     Y13, Y14, val; \
	VPBROADCASTD (192+o)(R12), Y15; \
	VPADDD       Y15, val, val; \
	VPSLLD       $16, Y14, Y14; \
	VPSRAD       $7, Y14, Y14; \
	VMOVDQU      Y14, step

// ROW readies a row: copies the edge functions, finds n0 + gy·y and x.
#define ROW \
	VMOVDQA      Y0, Y3; \
	VMOVDQA      Y1, Y4; \
	VMOVDQA      Y2, Y5; \
	VBROADCASTSS 352(R12), Y6; \
	VMULPS       Y8, Y6, Y6; \
	VBROADCASTSS 288(R12), Y15; \
	VADDPS       Y6, Y15, Y6; \
	VBROADCASTSS 384(R12), Y7; \
	VADDPS       sampleXF<>(SB), Y7, Y7

// DOWN goes to the next row: the edge functions grow by 256·b, y by 1.
#define DOWN \
	FALL(0, Y0); \
	FALL(32, Y1); \
	FALL(64, Y2); \
	VADDPS       ones<>(SB), Y8, Y8

#define FALL(o, val) \
	VPBROADCASTD (96+o)(R12), Y15; \
	VPSRAD       $16, Y15, Y15; \
	VPSLLD       $8, Y15, Y15; \
	VPADDD       Y15, val, val

// RIGHT goes to the next pair.
#define RIGHT \
	VPADDD       step-32(SP), Y3, Y3; \
	VPADDD       step-64(SP), Y4, Y4; \
	VPADDD       step-96(SP), Y5, Y5; \
	VADDPS       twos<>(SB), Y7, Y7

// Pairs without any sample inside go through like the others: a branch would
// be foretold wrongly more often than it saved work.

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
	VPSRAD    $31, Y13, Y13       // all ones outside
	VMULPS    Y11, Y7, Y14
	VADDPS    Y14, Y6, Y14        // nearness
	VPUNPCKHDQ Y13, Y13, Y10
	VPUNPCKLDQ Y13, Y13, Y13      // outside, first pixel
	VPUNPCKLDQ Y14, Y12, Y15      // its keys
	VPUNPCKHDQ Y14, Y12, Y14      // keys of the second pixel
	VMOVDQU   (BX), Y9
	VPCMPGTQ  Y9, Y15, Y9
	VPANDN    Y9, Y13, Y13        // seen
	VMOVDQU   32(BX), Y9
	VPCMPGTQ  Y9, Y14, Y9
	VPANDN    Y9, Y10, Y10
	VMOVDQU (BX), Y9
	VBLENDVPD Y13, Y15, Y9, Y15
	VMOVDQU Y15, (BX)
	VMOVDQU 32(BX), Y9
	VBLENDVPD Y10, Y14, Y9, Y14
	VMOVDQU Y14, 32(BX)
	VPOR      Y13, Y10, Y10
	VMOVMSKPD Y10, DX
	ORL       DX, AX

drawNext:
	DECL CX
	JZ   drawEnd
	RIGHT
	ADDQ $64, BX
	JMP  drawPair

drawEnd:
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

// func maskEight(s *triEight, todo uint32) int
TEXT ·maskEight(SB), NOSPLIT, $152-24
	MOVQ s+0(FP), DI
	MOVQ DI, R12
	XORL R13, R13
	MOVQ 568(DI), DX
	MOVQ DX, out-136(SP)

maskLane:
	MOVL  todo+8(FP), AX
	BTL   R13, AX
	JCC   maskOther
	MOVL  448(R12), AX
	TESTL AX, AX
	JLE   maskOther
	PREPARE
	VPCMPEQD Y12, Y12, Y12
	VCVTTSS2SIQ 384(R12), AX      // x
	VCVTTSS2SIQ 416(R12), DX      // y
	SHLQ  $3, AX
	SHLQ  $16, DX
	ORQ   R13, AX
	ORQ   DX, AX
	SHLQ  $32, AX
	MOVQ  AX, rowRecord-144(SP)

maskRow:
	ROW
	MOVQ SI, BX
	MOVL R9, CX
	MOVQ rowRecord-144(SP), R14

maskPair:
	VPOR      Y3, Y4, Y13
	VPOR      Y5, Y13, Y13
	VMULPS    Y11, Y7, Y14
	VADDPS    Y14, Y6, Y14
	VPSRAD    $31, Y13, Y13       // all ones outside
	VPUNPCKLDQ Y14, Y12, Y15
	VPCMPGTQ  (BX), Y15, Y15
	VPUNPCKHDQ Y14, Y12, Y14
	VPCMPGTQ  32(BX), Y14, Y14
	VPUNPCKLDQ Y13, Y13, Y9
	VPANDN    Y15, Y9, Y15
	VPUNPCKHDQ Y13, Y13, Y9
	VPANDN    Y14, Y9, Y14
	VMOVMSKPD Y15, R11
	VMOVMSKPD Y14, DX
	SHLL      $16, DX
	ORL       DX, R11
	JZ        maskNext
	ORQ       R14, R11
	MOVQ      out-136(SP), DX
	MOVQ      R11, (DX)
	ADDQ      $8, DX
	MOVQ      DX, out-136(SP)

maskNext:
	DECL CX
	JZ   maskEnd
	RIGHT
	ADDQ $64, BX
	MOVQ $(2<<35), DX
	ADDQ DX, R14
	JMP  maskPair

maskEnd:
	DECL R8
	JZ   maskOther
	DOWN
	ADDQ R10, SI
	MOVQ $(1<<48), DX
	ADDQ DX, rowRecord-144(SP)
	JMP  maskRow

maskOther:
	ADDQ $4, R12
	INCL R13
	CMPL R13, $8
	JNE  maskLane
	VZEROUPPER
	MOVQ out-136(SP), AX
	SUBQ 568(DI), AX
	SHRQ $3, AX
	MOVQ AX, ret+16(FP)
	RET
