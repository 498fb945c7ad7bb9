package symmetry

import (
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// No function begins with a minus where another order of its terms does not, of
// partners in standard axes nor of turned ones, and what is written is read again.
func TestFunctionsBeginWithAPositiveTerm(t *testing.T) {
	for _, symbol := range []string{"C2v", "D3d", "C4v", "D4h", "D6h", "Td", "O", "Oh"} {
		s, err := New(symbol)
		if err != nil {
			t.Fatal(err)
		}
		for _, ir := range s.Irreps {
			lists := [][][]string{ir.Functions}
			if ir.Dimension > 1 {
				for _, angle := range []float64{30, 45, 60, 120, 135} {
					rows := mat.NewDense(ir.Dimension, ir.Dimension, nil)
					for k := range ir.Dimension {
						rows.Set(k, k, 1)
					}
					sin, cos := math.Sincos(angle * math.Pi / 180)
					rows.Set(0, 0, cos)
					rows.Set(0, 1, sin)
					rows.Set(1, 0, -sin)
					rows.Set(1, 1, cos)
					lists = append(lists, turnedFunctions(ir.Functions, rows))
				}
			}
			for _, functions := range lists {
				for _, partner := range functions {
					for _, text := range partner {
						_, v := readFunction(text)
						if v == nil {
							t.Errorf("%s %s: %q is not read", symbol, ir.Label, text)
							continue
						}
						if minus := text[0] == '-' || strings.Contains(text, "(-"); minus && mat.Max(v) > negligible {
							t.Errorf("%s %s: %s", symbol, ir.Label, text)
						}
					}
				}
			}
		}
	}
}
