//go:build cgo && !nowindow

package window

import (
	"regexp"
	"strconv"
	"strings"

	"lobewright/app/notation"
	"lobewright/orbitals"
)

// Numbers on the screen have the decimal point of the language in force. What
// leaves the window, in a file or on the clipboard, has the point of programs;
// so have coordinates and the vectors that are typed, since commas stand
// between their numbers.

// point is where a number has its decimal point.
var point = regexp.MustCompile(`(\d)\.(\d)`)

// spelled writes a number, or a formula that holds numbers and nothing else with
// a point between digits, as the language in force does.
func spelled(numbers string) string {
	if l := tongue(); l != nil && l.Point != "" {
		return point.ReplaceAllString(numbers, "${1}"+l.Point+"${2}")
	}
	return numbers
}

// spelledText is spelled of a text of formulas.
func spelledText(t notation.Text) notation.Text {
	out := make(notation.Text, len(t))
	for i, r := range t {
		r.Text = spelled(r.Text)
		out[i] = r
	}
	return out
}

// decimalText writes x with a number of places, shortText a whole number without.
func decimalText(x float64, places int) string { return spelled(notation.Decimal(x, places)) }
func shortText(x float64, places int) string   { return spelled(notation.Short(x, places)) }

// plainText writes x with as many digits as it takes.
func plainText(x float64) string {
	return spelled(notation.Minus(strconv.FormatFloat(x, 'f', -1, 64)))
}

// vectorText writes a vector; where the decimal point is a comma, semicolons part
// its numbers.
func vectorText(v []float64, places int) string {
	text := notation.Vector(v, places)
	if spelled("0.5") != "0.5" {
		text = strings.ReplaceAll(text, ", ", "; ")
	}
	return spelled(text)
}

// readNumber reads a number that a person typed, with a unit behind it or
// without, with any sign for minus and either decimal point.
func readNumber(typed, unit string) (float64, error) {
	typed = strings.TrimSpace(strings.TrimSuffix(strings.TrimSpace(typed), unit))
	return strconv.ParseFloat(strings.NewReplacer(",", ".", "−", "-").Replace(typed), 64)
}

// combination sets a sum with the decimal point of the language in force.
func combination(terms []orbitals.Term, name func(number string) notation.Text, write notation.Coefficient) notation.Text {
	return spelledText(notation.CombinationText(terms, name, write))
}
