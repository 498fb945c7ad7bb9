package notation

import (
	"math"
	"slices"
	"strings"

	"lobewright/orbitals"
)

// A Coefficient writes the absolute value of a coefficient.
type Coefficient func(x float64) string

// ExactCoefficient writes closed forms where there are some, else four
// decimals; the JSON has them to the last bit.
func ExactCoefficient(x float64) string {
	if exact, ok := Exact(x); ok {
		return exact
	}
	return Decimal(x, 4)
}

// OneKind is ExactCoefficient for a sum whose numbers are of one kind besides
// halves and roots. Where it would mix numbers with √5 and cosines, all are
// written as cosines; where it would mix closed forms and decimals, all are
// decimals.
func OneKind(terms []orbitals.Term) Coefficient {
	all := func(forms ...func(float64) string) bool {
		return !slices.ContainsFunc(terms, func(t orbitals.Term) bool { return firstForm(math.Abs(t.Coefficient), forms) == "" })
	}
	switch {
	case all(halves, roots, golden):
		return ExactCoefficient
	case all(halves, roots, cosines):
		return func(x float64) string { return firstForm(x, []func(float64) string{halves, roots, cosines}) }
	}
	return DecimalCoefficient
}

func firstForm(x float64, forms []func(float64) string) string {
	for _, form := range forms {
		if s := form(x); s != "" {
			return s
		}
	}
	return ""
}

// DecimalCoefficient writes whole numbers as such, others with three decimals.
func DecimalCoefficient(x float64) string { return Short(x, 3) }

// Combination writes a sum of functions term by term, each with its sign:
// "φ3"; "−φ2"; "1/2 φ1", "− √3/2 φ4". Terms too small to be seen are left out;
// an empty sum is "0".
func Combination(terms []orbitals.Term, write Coefficient) []string {
	var parts []string
	for _, t := range terms {
		body := write(math.Abs(t.Coefficient))
		if strings.Trim(body, "0.") == "" {
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

// CombinationText sets a sum of functions on one line, each named by name from
// its number, counted from 1.
func CombinationText(terms []orbitals.Term, name func(number string) Text, write Coefficient) Text {
	var t Text
	for _, part := range Combination(terms, write) {
		if len(t) > 0 {
			t = t.Then(Words(" "))
		}
		before, number, named := strings.Cut(part, "φ")
		t = t.Then(Words(Minus(before)))
		if named {
			t = t.Then(name(number))
		}
	}
	return t
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
