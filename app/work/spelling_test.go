package work

import "testing"

func TestIrrepsAreFoundInAnySensibleSpelling(t *testing.T) {
	labels := []string{"A1'", "A1''", "E'", "E''", "E1g", "Eu", "Σg+", "Σg-", "Πu", "B2"}
	for spelling, want := range map[string]string{
		"a1'": "A1'", "A1′": "A1'", "A1’": "A1'", "a_1'": "A1'", "A₁''": "A1''", `a1"`: "A1''", "e″": "E''",
		"e1g": "E1g", "E_{1g}": "E1g", "E₁g": "E1g", "eu": "Eu", "EU": "Eu", "σg+": "Σg+", "sigma_g+": "Σg+",
		"Σg⁺": "Σg+", "sigma g-": "Σg-", "σg−": "Σg-", "pi u": "Πu", "πᵤ": "Πu", " b2 ": "B2",
	} {
		if i, ok := matchLabel(spelling, labels); !ok || labels[i] != want {
			t.Errorf("%q is not understood as %s", spelling, want)
		}
	}
	for _, spelling := range []string{"", "A", "E", "A1", "T2g", "Eu'", "1Eu"} {
		if i, ok := matchLabel(spelling, labels); ok {
			t.Errorf("%q is taken for %s", spelling, labels[i])
		}
	}
}
