#include "textflag.h"

DATA crease<>+0(SB)/4, $0x3f350481 // creaseCos
GLOBL crease<>(SB), RODATA|NOPTR, $4
DATA noSign<>+0(SB)/4, $0x7fffffff
GLOBL noSign<>(SB), RODATA|NOPTR, $4

// DOT multiplies one coordinate of the normals at i and j.
#define DOT(o, v) \
	MOVQ o(DI), AX; \
	VMOVUPS (AX)(SI*4), v; \
	VMULPS (AX)(BX*4), v, v

// func goOnEight(c *cells, i, j int) uint32
TEXT ·goOnEight(SB), NOSPLIT, $0-28
	MOVQ c+0(FP), DI
	MOVQ i+8(FP), SI
	MOVQ j+16(FP), BX
	DOT(32, Y0)
	DOT(40, Y1)
	VADDPS Y1, Y0, Y0
	DOT(48, Y1)
	VADDPS Y1, Y0, Y0
	VBROADCASTSS crease<>(SB), Y1
	VCMPPS $1, Y0, Y1, Y0         // crease is less
	MOVQ 16(DI), AX
	VMOVUPS (AX)(SI*4), Y1
	VSUBPS (AX)(BX*4), Y1, Y1
	VBROADCASTSS noSign<>(SB), Y2
	VANDPS Y2, Y1, Y1
	MOVQ 24(DI), AX
	VCMPPS $1, (AX)(SI*4), Y1, Y1 // less than a step
	VANDPS Y1, Y0, Y0
	MOVQ 8(DI), AX
	VMOVDQU (AX)(SI*4), Y1
	VPCMPEQD (AX)(BX*4), Y1, Y1
	VPAND Y1, Y0, Y0
	MOVQ 0(DI), AX
	VMOVDQU (AX)(SI*4), Y1
	VPCMPEQD (AX)(BX*4), Y1, Y1
	VPOR Y1, Y0, Y0
	VMOVMSKPS Y0, AX
	VZEROUPPER
	MOVL AX, ret+24(FP)
	RET
