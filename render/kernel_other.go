//go:build !amd64

package render

const useVectors = false

func drawFour(*kernel) bool { panic("unreachable") }
func maskFour(*kernel) bool { panic("unreachable") }
