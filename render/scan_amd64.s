#include "textflag.h"

// PIXEL scans the four samples of pixel k: Y3 gathers the slots' differences
// from the first, Y4 all of them.
#define PIXEL(k) \
	VMOVDQU (32*k)(SI), Y0; \
	MOVL (32*k+16)(SI), AX; \
	MOVL AX, (4*k)(DI); \
	MOVL (32*k+20)(SI), AX; \
	MOVL AX, (32+4*k)(DI); \
	VPBROADCASTQ X0, Y1; \
	VPXOR Y0, Y1, Y1; \
	VPAND Y15, Y1, Y1; \
	VPAND Y15, Y0, Y0; \
	XORL DX, DX; \
	VPTEST Y0, Y0; \
	SETNE DX; \
	SHLL $k, DX; \
	ORL DX, R8; \
	XORL DX, DX; \
	VPTEST Y1, Y1; \
	SETEQ DX; \
	SHLL $k, DX; \
	ORL DX, R9

// func scanFour(s *scan, keys *uint64)
TEXT ·scanFour(SB), NOSPLIT, $0-16
	MOVQ s+0(FP), DI
	MOVQ keys+8(FP), SI
	VPCMPEQD Y15, Y15, Y15
	VPSRLQ $32, Y15, Y15          // lower halves
	XORL R8, R8
	XORL R9, R9
	PIXEL(0)
	PIXEL(1)
	PIXEL(2)
	PIXEL(3)
	PIXEL(4)
	PIXEL(5)
	PIXEL(6)
	PIXEL(7)
	MOVL R8, 64(DI)
	MOVL R9, 68(DI)
	VZEROUPPER
	RET
