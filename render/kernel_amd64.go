package render

import "golang.org/x/sys/cpu"

// useVectors tells whether the processor has the vector instructions of the
// assembly; without them the plain Go code does the same.
var useVectors = cpu.X86.HasAVX2

// drawFour is drawPlain for four samples a pixel, two pixels at a time.
//
//go:noescape
func drawFour(k *kernel) bool

// maskFour is maskPlain for four samples a pixel, two pixels at a time.
//
//go:noescape
func maskFour(k *kernel) bool

// skyEight is skyPlain, eight balls at a time.
//
//go:noescape
func skyEight(k *skyKernel)

// lookEight is lookPlain, eight sights at a time.
//
//go:noescape
func lookEight(s *sights)
