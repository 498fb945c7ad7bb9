package notation

import (
	"math"
	"strings"

	"lobewright/orbitals"
)

// coefficientPlaces is how many places a coefficient without closed form gets
// in text; the JSON has it to the last bit.
const coefficientPlaces = 4

// Combination writes a sum of functions: "φ3", "−φ2", "1/2 φ1 − √3/2 φ4". An
// empty sum is "0".
func Combination(terms []orbitals.Term) string {
	return strings.Join(CombinationTerms(terms), " ")
}

// CombinationTerms is Combination cut between its terms, each with its sign.
// Terms too small to be seen are left out.
func CombinationTerms(terms []orbitals.Term) []string {
	var parts []string
	for _, t := range terms {
		body := coefficient(math.Abs(t.Coefficient))
		if body == "0" {
			continue
		}
		if body == "1" {
			body = ""
		} else {
			body += " "
		}
		body += Phi(t.Function)
		switch {
		case t.Coefficient < 0 && len(parts) == 0:
			body = "−" + body
		case t.Coefficient < 0:
			body = "− " + body
		case len(parts) > 0:
			body = "+ " + body
		}
		parts = append(parts, body)
	}
	if len(parts) == 0 {
		return []string{"0"}
	}
	return parts
}

func coefficient(x float64) string {
	if exact, ok := Exact(x); ok {
		return exact
	}
	s := Decimal(x, coefficientPlaces)
	if strings.Trim(s, "0.") == "" {
		return "0"
	}
	return s
}

// Terms makes a sparse sum of a list of coefficients, one a function.
func Terms(coefficients []float64) []orbitals.Term {
	var terms []orbitals.Term
	for i, c := range coefficients {
		if c != 0 {
			terms = append(terms, orbitals.Term{Function: i, Coefficient: c})
		}
	}
	return terms
}

// Content writes how many copies of each irrep there are: "2A1' + E' + A2”".
func Content(labels []string, copies []int) string {
	var parts []string
	for i, n := range copies {
		switch {
		case n == 1:
			parts = append(parts, labels[i])
		case n > 1:
			parts = append(parts, Decimal(float64(n), 0)+labels[i])
		}
	}
	return strings.Join(parts, " + ")
}
