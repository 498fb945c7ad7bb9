package render

import "golang.org/x/sys/cpu"

// useVectors tells whether the processor has the vector instructions of the
// assembly; without them the plain Go code does the same.
var useVectors = cpu.X86.HasAVX2

// setupEight is setup for eight triangles of the frame's list. The bits of the
// result are the triangles that are too large for it.
//
//go:noescape
func setupEight(s *triEight) uint32

// drawEight is drawPlain for four samples a pixel, two pixels at a time, for
// those of eight triangles that have a bit in todo; what it returns has a bit
// for those that were seen.
//
//go:noescape
func drawEight(s *triEight, todo uint32) uint32

// maskEight is maskPlain for four samples a pixel, two pixels at a time.
//
//go:noescape
func maskEight(s *triEight, todo uint32) int

// skyEight is skyPlain, eight balls at a time.
//
//go:noescape
func skyEight(k *skyKernel)

// lookEight is lookPlain, eight sights at a time.
//
//go:noescape
func lookEight(s *sights)

// rodFour is rodKernel.plain for the four samples of a pixel at once.
//
//go:noescape
func rodFour(k *rodKernel)

// stackEight is stack.plain for the eight pixels of a group at once.
//
//go:noescape
func stackEight(k *stack)

// scanFour is scan.plain for four samples a pixel.
//
//go:noescape
func scanFour(s *scan, keys *uint64)

// packNumbers writes eight opaque pixels of plain numbers: reds, greens and
// blues follow each other.
//
//go:noescape
func packNumbers(dst *uint8, r *[lanes]float32)

// packLinear does the same for linear light, with the table toSRGB.
//
//go:noescape
func packLinear(dst *uint8, r *[lanes]float32, table *uint8)

// normalEight is quadric.normals for eight pixels at once.
//
//go:noescape
func normalEight(k *roundKernel)

// goOnEight is cells.goesOn for eight pixels at once.
//
//go:noescape
func goOnEight(c *cells, i, j int) uint32
