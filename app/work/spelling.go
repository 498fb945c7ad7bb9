package work

import "strings"

// matchLabel returns the index of the label that a person means, among the
// labels of a group: letters in any case, primes as apostrophes, quotes or
// primes, indices as such characters or lowered, Greek letters by name ("eu",
// "E1′", "a₁g", "e”", "sigma g+").
func matchLabel(spelling string, labels []string) (int, bool) {
	wanted := foldLabel(spelling)
	for i, label := range labels {
		if foldLabel(label) == wanted {
			return i, true
		}
	}
	return 0, false
}

var foldings = strings.NewReplacer(
	" ", "", "_", "", "{", "", "}", "", "^", "",
	"′", "'", "’", "'", "`", "'", "″", "''", "”", "''", `"`, "''",
	"₀", "0", "₁", "1", "₂", "2", "₃", "3", "₄", "4", "₅", "5", "₆", "6", "₇", "7", "₈", "8", "₉", "9",
	"ᵤ", "u", "⁺", "+", "⁻", "-", "−", "-",
	"sigma", "σ", "pi", "π", "delta", "δ", "phi", "φ", "gamma", "γ")

func foldLabel(s string) string {
	// Σ at the end of a word would become ς in some foldings, never here.
	return foldings.Replace(strings.ToLower(s))
}
