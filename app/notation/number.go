package notation

import (
	"fmt"
	"math"
	"strconv"
	"strings"
)

// exactTolerance is how near a number must lie to a closed form to be written
// as one. Characters and matrix elements are sums of a few products of
// numbers good to 1e-15, and no two of the forms tried lie nearer than 1e-5.
const exactTolerance = 1e-11

// Decimal writes x with a number of places after the point, with a true
// minus and without a negative zero.
func Decimal(x float64, places int) string {
	s := strconv.FormatFloat(x, 'f', places, 64)
	if strings.Trim(s, "-0.") == "" {
		s = strings.TrimPrefix(s, "-")
	}
	return Minus(s)
}

// Short writes a whole number as such and any other with a number of places.
func Short(x float64, places int) string {
	if r := math.Round(x); math.Abs(x-r) < exactTolerance {
		return Decimal(r, 0)
	}
	return Decimal(x, places)
}

// Vector writes a vector with a number of places.
func Vector(v []float64, places int) string {
	parts := make([]string, len(v))
	for i, x := range v {
		parts[i] = Short(x, places)
	}
	return "(" + strings.Join(parts, ", ") + ")"
}

// Exact writes x in closed form if it is a whole number or a half of one, a
// square root of a fraction of small numbers, the golden ratio or its like, or
// a cosine 2cos(2πk/n) or cos(2πk/n) with n up to 48.
func Exact(x float64) (string, bool) {
	if math.IsNaN(x) || math.IsInf(x, 0) || math.Abs(x) > 1e6 {
		return "", false
	}
	for _, form := range []func(float64) string{halves, roots, golden, cosines} {
		if s := form(x); s != "" {
			return s, true
		}
	}
	return "", false
}

func near(x, y float64) bool { return math.Abs(x-y) < exactTolerance }

func halves(x float64) string {
	twice := math.Round(2 * x)
	switch {
	case !near(2*x, twice):
		return ""
	case math.Mod(twice, 2) == 0:
		return Decimal(twice/2, 0)
	}
	return sign(x) + fmt.Sprintf("%.0f/2", math.Abs(twice))
}

// roots writes ±√p/q with the root and the denominator in lowest terms.
func roots(x float64) string {
	for q := 1; q <= 12; q++ {
		square := x * x * float64(q*q)
		p := int(math.Round(square))
		if p < 1 || p > 60 || !near(square, float64(p)) {
			continue
		}
		outer, inner := 1, p
		for d := 2; d*d <= inner; d++ {
			for inner%(d*d) == 0 {
				inner /= d * d
				outer *= d
			}
		}
		if inner == 1 {
			return sign(x) + fraction(strconv.Itoa(outer), q)
		}
		factor := ""
		if outer > 1 {
			factor = strconv.Itoa(outer)
		}
		return sign(x) + fraction(factor+"√"+strconv.Itoa(inner), q)
	}
	return ""
}

func fraction(top string, bottom int) string {
	if bottom == 1 {
		return top
	}
	return top + "/" + strconv.Itoa(bottom)
}

// golden writes ±(√5 ± 1)/2 and ±(√5 ± 1)/4, the positive part first.
func golden(x float64) string {
	root := math.Sqrt(5)
	for _, q := range []int{2, 4} {
		top := ""
		switch y := x * float64(q); {
		case near(y, 1+root):
			top = "(1 + √5)"
		case near(y, root-1):
			top = "(√5 − 1)"
		case near(y, 1-root):
			top = "(1 − √5)"
		case near(y, -1-root):
			top = "−(1 + √5)"
		default:
			continue
		}
		return top + "/" + strconv.Itoa(q)
	}
	return ""
}

func cosines(x float64) string {
	for n := 7; n <= 48; n++ {
		for k := 1; 2*k < n; k++ {
			c := math.Cos(2 * math.Pi * float64(k) / float64(n))
			switch {
			case near(x, 2*c):
				return "2cos(" + angle(k, n) + ")"
			case near(x, c):
				return "cos(" + angle(k, n) + ")"
			}
		}
	}
	return ""
}

// angle writes 2πk/n in lowest terms.
func angle(k, n int) string {
	top, bottom := 2*k, n
	if n%2 == 0 {
		top, bottom = k, n/2
	}
	factor := ""
	if top > 1 {
		factor = strconv.Itoa(top)
	}
	return factor + "π/" + strconv.Itoa(bottom)
}

func sign(x float64) string {
	if x < 0 {
		return "−"
	}
	return ""
}
