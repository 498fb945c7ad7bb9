#include "textflag.h"

DATA top<>+0(SB)/4, $0x437f0000 // 255
GLOBL top<>(SB), RODATA|NOPTR, $4
DATA unity<>+0(SB)/4, $0x3f800000
GLOBL unity<>(SB), RODATA|NOPTR, $4
DATA middle<>+0(SB)/4, $0x3f000000
GLOBL middle<>(SB), RODATA|NOPTR, $4
DATA srgbLeast<>+0(SB)/4, $116736 // srgbBase
GLOBL srgbLeast<>(SB), RODATA|NOPTR, $4
DATA byteMask<>+0(SB)/4, $0xff
GLOBL byteMask<>(SB), RODATA|NOPTR, $4

// NUMBER makes whole numbers from 0 to 255 of eight numbers from 0 to 1.
#define NUMBER(o, v) \
	VMOVUPS o(SI), v; \
	VMAXPS Y15, v, v; \
	VMINPS v, Y14, v; \
	VMULPS Y13, v, v; \
	VADDPS Y12, v, v; \
	VCVTTPS2DQ v, v

// JOIN writes pixels of the bytes in Y0, Y1 and Y2.
#define JOIN \
	VPSLLD $8, Y1, Y1; \
	VPSLLD $16, Y2, Y2; \
	VPOR Y1, Y0, Y0; \
	VPOR Y2, Y0, Y0; \
	VPCMPEQD Y1, Y1, Y1; \
	VPSLLD $24, Y1, Y1; \
	VPOR Y1, Y0, Y0; \
	VMOVDQU Y0, (DI)

// func packNumbers(dst *uint8, r *[8]float32)
TEXT ·packNumbers(SB), NOSPLIT, $0-16
	MOVQ dst+0(FP), DI
	MOVQ r+8(FP), SI
	VXORPS Y15, Y15, Y15
	VBROADCASTSS unity<>(SB), Y14
	VBROADCASTSS top<>(SB), Y13
	VBROADCASTSS middle<>(SB), Y12
	NUMBER(0, Y0)
	NUMBER(32, Y1)
	NUMBER(64, Y2)
	JOIN
	VZEROUPPER
	RET

// LOOKUP finds the sRGB numbers of eight linear numbers.
#define LOOKUP(o, v) \
	VMOVUPS o(SI), v; \
	VMAXPS Y15, v, v; \
	VMINPS v, Y14, v; \
	VPSRLD $13, v, v; \
	VPSUBD Y13, v, v; \
	VPMAXSD Y15, v, v; \
	VPCMPEQD Y11, Y11, Y11; \
	VPGATHERDD Y11, (BX)(v*1), Y10; \
	VPAND Y12, Y10, v

// func packLinear(dst *uint8, r *[8]float32, table *uint8)
TEXT ·packLinear(SB), NOSPLIT, $0-24
	MOVQ dst+0(FP), DI
	MOVQ r+8(FP), SI
	MOVQ table+16(FP), BX
	VXORPS Y15, Y15, Y15
	VBROADCASTSS unity<>(SB), Y14
	VPBROADCASTD srgbLeast<>(SB), Y13
	VPBROADCASTD byteMask<>(SB), Y12
	LOOKUP(0, Y0)
	LOOKUP(32, Y1)
	LOOKUP(64, Y2)
	JOIN
	VZEROUPPER
	RET
