//go:build !amd64

package render

var useVectors = false

func setupEight(*triEight) uint32                { panic("unreachable") }
func drawEight(*triEight, uint32) uint32         { panic("unreachable") }
func maskEight(*triEight, uint32) int            { panic("unreachable") }
func skyEight(*skyKernel)                        { panic("unreachable") }
func lookEight(*sights)                          { panic("unreachable") }
func rodFour(*rodKernel)                         { panic("unreachable") }
func stackEight(*stack)                          { panic("unreachable") }
func scanFour(*scan, *uint64)                    { panic("unreachable") }
func packNumbers(*uint8, *[lanes]float32)        { panic("unreachable") }
func packLinear(*uint8, *[lanes]float32, *uint8) { panic("unreachable") }
func normalEight(*roundKernel)                   { panic("unreachable") }
func goOnEight(*cells, int, int) uint32          { panic("unreachable") }
