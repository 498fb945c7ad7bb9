package command

import (
	"fmt"
	"strings"
	"testing"
)

type contractProduct struct {
	Group         string             `json:"group"`
	Factors       []string           `json:"factors"`
	Content       []contractContent  `json:"content"`
	Symmetric     *[]contractContent `json:"symmetric"`
	Antisymmetric *[]contractContent `json:"antisymmetric"`
}

func contentOf(list []contractContent) string {
	var parts []string
	for _, c := range list {
		n := ""
		if c.Copies != 1 {
			n = fmt.Sprint(c.Copies)
		}
		parts = append(parts, n+c.Irrep)
	}
	return strings.Join(parts, " + ")
}

// Products that any textbook prints (from memory), those of infinite groups by
// adding angular momenta.
func TestProductsOfIrreps(t *testing.T) {
	for _, c := range []struct{ group, factors, content, symmetric, antisymmetric string }{
		{"Oh", "Eg T1u", "T1u + T2u", "-", "-"},
		{"Oh", "t2g T2g", "A1g + Eg + T1g + T2g", "A1g + Eg + T2g", "T1g"},
		{"Oh", "Eg Eg Eg", "A1g + A2g + 3Eg", "-", "-"},
		{"D4h", "Eu Eu", "A1g + A2g + B1g + B2g", "A1g + B1g + B2g", "A2g"},
		{"C2v", "b1 b2", "A2", "-", "-"},
		{"C2v", "B1 B1", "A1", "A1", ""},
		{"D3h", "E' E''", "A1'' + A2'' + E''", "-", "-"},
		{"Cinfv", "Π Π", "Σ+ + Σ- + Δ", "Σ+ + Δ", "Σ-"},
		{"D∞h", "Pu Pg Pu", "3Πg + Φg", "-", "-"},
		{"D∞h", "Σg- Σg-", "Σg+", "Σg+", ""},
		{"Kh", "Pu Dg", "Pu + Du + Fu", "-", "-"},
		{"Kh", "Pu Pu", "Sg + Pg + Dg", "Sg + Dg", "Pg"},
		// A pair of complex conjugates squared over the reals: 2A + E.
		{"C3", "E E", "2A + E", "A + E", "A"},
	} {
		var p contractProduct
		runJSON(t, &p, append([]string{"multiply", "--in", c.group}, strings.Fields(c.factors)...)...)
		if got := contentOf(p.Content); got != c.content {
			t.Errorf("%s in %s: %s, want %s", c.factors, c.group, got, c.content)
		}
		for want, got := range map[string]*[]contractContent{c.symmetric: p.Symmetric, c.antisymmetric: p.Antisymmetric} {
			if (got == nil) != (want == "-") || got != nil && contentOf(*got) != want {
				t.Errorf("%s in %s: a square of %v, want %s", c.factors, c.group, got, want)
			}
		}
	}
}
