//go:build !amd64

package render

var useVectors = false

func drawFour(*kernel) bool { panic("unreachable") }
func maskFour(*kernel) bool { panic("unreachable") }
func skyEight(*skyKernel)   { panic("unreachable") }
func lookEight(*sights)     { panic("unreachable") }
