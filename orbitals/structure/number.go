package structure

import (
	"errors"
	"math"
	"strconv"
	"strings"

	"lobewright/symmetry/message"
)

// What would be right in place of a bad number.
var (
	errNumber = message.Errorf("expected a number such as -1.234 or 1.2D-3")
	errComma  = message.Errorf("write decimals with a point")
	errFinite = message.Errorf("expected a finite number")
)

// number reads a decimal number with an optional exponent after e, E, d or D, or after q or Q (Fortran). A minus
// may be the sign U+2212. Hexadecimal numbers, NaN and infinities are refused.
func number(text string) (float64, error) {
	text = strings.ReplaceAll(text, "\u2212", "-")
	plain := []byte(text)
	for i, c := range plain {
		switch c {
		case 'd', 'D', 'q', 'Q', 'E':
			plain[i] = 'e'
		case '0', '1', '2', '3', '4', '5', '6', '7', '8', '9', '+', '-', '.', 'e':
		case ',':
			return 0, errComma
		default:
			if notFinite(text) {
				return 0, errFinite
			}
			return 0, errNumber
		}
	}
	x, err := strconv.ParseFloat(string(plain), 64)
	switch {
	case errors.Is(err, strconv.ErrRange) || err == nil && (math.IsInf(x, 0) || math.IsNaN(x)):
		return 0, errFinite
	case err != nil:
		return 0, errNumber
	}
	return x, nil
}

// notFinite tells whether a text is one of the usual spellings of what is no finite number.
func notFinite(text string) bool {
	switch strings.ToLower(strings.TrimLeft(text, "+-")) {
	case "nan", "inf", "infinity":
		return true
	}
	return strings.HasPrefix(strings.ToLower(text), "nan(")
}
