package work

import (
	"strings"
	"testing"

	"lobewright/app/study"
	"lobewright/orbitals/structure"
)

// Functions on the axis have the Λ of their |m| in the linear group, and s and pσ give
// Σ+ (common practice in naming the orbitals of linear molecules).
func TestNamesInTheLinearGroupComeFromFunctionsOnTheAxis(t *testing.T) {
	for _, c := range []struct{ structure, as, on, want string }{
		{"typed", "D2h", "O:s", "Ag=Σg+ B1u=Σu+"},
		{"typed", "D2h", "O:p", "Ag=Σg+ B2g=Πg B3g=Πg B1u=Σu+ B2u=Πu B3u=Πu"},
		{"demo:rod", "C3v", "N:px,py", "E=Πg/Πu"},
		{"demo:rod", "C2", "Ag:s,p", "A=Σg+/Σu+ B=Πu"},
		{"demo:rod", "D3d", "Ag:d", "A1g=Σg+ Eg=Πg/Δg"},
		{"demo:rod", "D3d", "Ag:f", "A1u=Φu A2u=Σu+/Φu Eu=Πu/Δu"},
		{"demo:rod", "D2h", "N:dx2-y2,dxy", "Ag=Δg B1g=Δg Au=Δu B1u=Δu"},
	} {
		s := study.Study{Structure: c.structure, As: c.as, Basis: []string{c.on}}
		w := demoWork()
		if c.structure == "typed" {
			s.Coordinates = "3\n\nS 0 0 0\nO 1.235 0.72 0\nO -1.235 0.72 0\n"
			w = New(structure.Inputs{})
		}
		o, err := w.Orbitals(t.Context(), s)
		if err != nil {
			t.Fatal(err)
		}
		var got []string
		for i, ir := range o.Irreps {
			if o.Content[i] > 0 {
				got = append(got, ir.Label+"="+strings.Join(o.LinearNames(i), "/"))
			}
		}
		if strings.Join(got, " ") != c.want {
			t.Errorf("%v: %v", c, got)
		}
	}
}
