#include "textflag.h"

DATA whole<>+0(SB)/4, $0x3f800000
GLOBL whole<>(SB), RODATA|NOPTR, $4
DATA half<>+0(SB)/4, $0x3f000000
GLOBL half<>(SB), RODATA|NOPTR, $4
DATA plus<>+0(SB)/4, $0x7fffffff
GLOBL plus<>(SB), RODATA|NOPTR, $4

// func stackEight(k *stack)
TEXT ·stackEight(SB), NOSPLIT, $0-8
	MOVQ k+0(FP), DI
	MOVQ 0(DI), SI
	MOVQ 8(DI), R14
	MOVQ 24(DI), CX
	VBROADCASTSS whole<>(SB), Y15
	VBROADCASTSS half<>(SB), Y14
	VBROADCASTSS plus<>(SB), Y13
	VXORPS Y12, Y12, Y12          // crosses
	VXORPS Y11, Y11, Y11          // 0
	MOVQ 16(DI), R8              // through of strip j
	XORL R9, R9                   // j

strip:
	CMPQ R9, CX
	JGE blend
	MOVLQSX (R14)(R9*4), BX
	IMULQ $288, BX
	ADDQ SI, BX
	VMOVUPS 0(BX), Y0             // n
	VMOVUPS 192(BX), Y1           // a
	VSUBPS Y1, Y15, Y2            // 1 - a
	VMOVAPS Y15, Y3               // through
	MOVL 224(BX), R12             // part
	XORL R10, R10                 // i
	MOVQ 16(DI), R11             // through of strip i
	JMP more

pair:
	MOVLQSX (R14)(R10*4), DX
	IMULQ $288, DX
	ADDQ SI, DX
	VMOVUPS 0(DX), Y4
	VSUBPS Y0, Y4, Y4             // d
	VCMPPS $1, Y4, Y11, Y5        // 0 < d
	VMOVUPS 192(DX), Y6           // a of i
	VSUBPS Y6, Y15, Y7
	VBLENDVPS Y5, Y7, Y15, Y7
	VMULPS Y7, Y3, Y3
	VBLENDVPS Y5, Y15, Y2, Y7
	VMULPS (R11), Y7, Y7
	VMOVUPS Y7, (R11)
	MOVL 224(DX), R13
	CMPL R13, R12
	JEQ next
	MOVL R13, AX
	ORL R12, AX
	JLT next
	VANDPS Y13, Y4, Y4            // |d|
	VMOVUPS 32(DX), Y5
	VSUBPS 32(BX), Y5, Y5
	VANDPS Y13, Y5, Y5
	VMOVUPS 64(DX), Y7
	VSUBPS 64(BX), Y7, Y7
	VANDPS Y13, Y7, Y7
	VADDPS Y7, Y5, Y5
	VMULPS Y14, Y5, Y5
	VCMPPS $1, Y5, Y4, Y4         // |d| is less
	VMULPS Y1, Y6, Y6
	VCMPPS $1, Y6, Y11, Y6
	VANDPS Y6, Y4, Y4
	VORPS Y4, Y12, Y12

next:
	INCQ R10
	ADDQ $32, R11

more:
	CMPQ R10, R9
	JLT pair
	VMOVUPS Y3, (R8)
	ADDQ $32, R8
	INCQ R9
	JMP strip

blend:
	VMOVMSKPS Y12, AX
	MOVQ AX, 32(DI)
	VXORPS Y0, Y0, Y0             // r
	VXORPS Y1, Y1, Y1
	VXORPS Y2, Y2, Y2
	VMOVAPS Y15, Y3               // left
	XORL R9, R9
	MOVQ 16(DI), R8
	JMP last

weigh:
	MOVLQSX (R14)(R9*4), BX
	IMULQ $288, BX
	ADDQ SI, BX
	VMOVUPS 192(BX), Y4
	VSUBPS Y4, Y15, Y5
	VMULPS Y5, Y3, Y3
	VCMPPS $1, Y4, Y11, Y6        // 0 < a
	VMULPS (R8), Y4, Y4           // weight
	VMULPS 96(BX), Y4, Y5
	VANDPS Y6, Y5, Y5
	VADDPS Y5, Y0, Y0
	VMULPS 128(BX), Y4, Y5
	VANDPS Y6, Y5, Y5
	VADDPS Y5, Y1, Y1
	VMULPS 160(BX), Y4, Y5
	VANDPS Y6, Y5, Y5
	VADDPS Y5, Y2, Y2
	ADDQ $32, R8
	INCQ R9

last:
	CMPQ R9, CX
	JLT weigh
	VMULPS 64(DI), Y3, Y4
	VADDPS Y4, Y0, Y0
	VMINPS Y0, Y15, Y0
	VMOVUPS Y0, 64(DI)
	VMULPS 96(DI), Y3, Y4
	VADDPS Y4, Y1, Y1
	VMINPS Y1, Y15, Y1
	VMOVUPS Y1, 96(DI)
	VMULPS 128(DI), Y3, Y4
	VADDPS Y4, Y2, Y2
	VMINPS Y2, Y15, Y2
	VMOVUPS Y2, 128(DI)
	VSUBPS Y3, Y15, Y4
	VMULPS 160(DI), Y3, Y5
	VADDPS Y5, Y4, Y4
	VMOVUPS Y4, 160(DI)
	VZEROUPPER
	RET
