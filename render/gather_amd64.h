// BX points to a block with the numbers of corners, SI to the vertices.

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
