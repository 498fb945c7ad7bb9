package notation

import (
	"regexp"
	"slices"
	"strconv"
	"strings"
	"unicode/utf8"
)

// Irrep sets a Mulliken label: upright, number and parity below, sign and
// primes above ("T2u", "A1'", "Σg+").
func Irrep(label string) Text {
	letter, rest := splitFirst(label)
	below := strings.TrimRight(rest, "'+-")
	t := Text{{Text: letter}}
	t = t.add(Run{Text: below, Place: Sub})
	return t.add(marks(rest[len(below):]))
}

// marks sets what stands after the indices of a label: primes on the line,
// since they are raised by their own shape, a sign raised.
func marks(s string) Run {
	if strings.HasPrefix(s, "'") {
		return Run{Text: prettyPrimes(s)}
	}
	return Run{Text: Minus(s), Place: Super}
}

// Orbital is the plain label of a group orbital that belongs to an irrep:
// the same characters with the letter in lower case ("a1g", "t2u", "σg+").
func Orbital(irrep string) string {
	letter, rest := splitFirst(irrep)
	return strings.ToLower(letter) + rest
}

// OrbitalText sets the label of a group orbital.
func OrbitalText(irrep string) Text { return Irrep(Orbital(irrep)) }

// Group sets a Schoenflies symbol: the letter italic, the index upright
// ("D4h", "C∞v", "Td").
func Group(symbol string) Text {
	letter, rest := splitFirst(symbol)
	return Text{{Text: letter, Italic: true}}.add(Run{Text: rest, Place: Sub})
}

// Operation sets the name of an operation or of a class, its count and its
// brackets included ("C3^2(z)", "2S6^5", "σv'(yz)", "3C2(=C4^2)").
func Operation(name string) Text {
	count := leadingDigits(name)
	t := Words(count)
	name = name[len(count):]
	outer, inner, bracketed := strings.Cut(name, "(")
	t = t.Then(symbol(outer))
	if !bracketed {
		return t
	}
	inner = strings.TrimSuffix(inner, ")")
	if same, isEqual := strings.CutPrefix(inner, "="); isEqual {
		return t.Then(Words("(=")).Then(Operation(same)).Then(Words(")"))
	}
	axes := leadingLetters(inner, "xyz")
	t = t.Then(Words("("), Text{{Text: axes, Italic: true}}, Words(inner[len(axes):]+")"))
	return t
}

// symbol sets the symbol of an operation without count and brackets.
func symbol(s string) Text {
	base, power, _ := strings.Cut(s, "^")
	letter, index := splitFirst(base)
	below := strings.TrimRight(index, "'")
	t := Text{}.add(Run{Text: letter, Italic: true})
	t = t.add(Run{Text: below, Place: Sub})
	t = t.add(Run{Text: power, Place: Super})
	return t.add(Run{Text: prettyPrimes(index[len(below):])})
}

// Function sets the name of an orbital: the letter upright, the axes below
// in italic ("pz", "dx2-y2", "fz(x2-y2)"; "sigma", "pi1", "pi-in" by their
// Greek letters).
func Function(name string) Text {
	switch name {
	case "sigma":
		return Text{{Text: "σ"}}
	case "pi1", "pi2":
		return Text{{Text: "π"}, {Text: name[2:], Place: Sub}}
	case "pi-in":
		return Text{{Text: "π"}, {Text: "∥", Place: Sub}}
	case "pi-out":
		return Text{{Text: "π"}, {Text: "⊥", Place: Sub}}
	}
	letter, axes := splitFirst(name)
	t := Text{{Text: letter}}
	return append(t, polynomialRuns(axes, Sub)...)
}

// Polynomial sets a function of an irrep as the contract writes it: "x2-y2",
// "-2xy", "Rz", "z(x2-y2)".
func Polynomial(s string) Text { return polynomialRuns(s, OnLine) }

// polynomialRuns sets variables italic and numbers upright. A digit after a
// variable or a closing bracket is a power, one before it a factor.
func polynomialRuns(s string, place Place) Text {
	var t Text
	afterVariable := false
	for _, r := range decimals.ReplaceAllStringFunc(s, roundedDecimal) {
		switch {
		case strings.ContainsRune("xyzR", r):
			t = t.add(Run{Text: string(r), Italic: true, Place: place})
			afterVariable = true
		case r >= '0' && r <= '9' && afterVariable:
			t = t.add(power(string(r), place))
		case r == '-':
			t = t.add(Run{Text: "−", Place: place})
			afterVariable = false
		default:
			t = t.add(Run{Text: string(r), Place: place})
			afterVariable = r == ')'
		}
	}
	return rotations(t)
}

// decimals are coefficients that have no closed form.
var decimals = regexp.MustCompile(`\d+\.\d+`)

func roundedDecimal(s string) string {
	x, err := strconv.ParseFloat(s, 64)
	if err != nil {
		return s
	}
	return strconv.FormatFloat(x, 'f', 3, 64)
}

// power raises a digit. Within an index there is no second level of runs, so
// the superscript character is used there.
func power(digit string, place Place) Run {
	if place == OnLine {
		return Run{Text: digit, Place: Super}
	}
	return Run{Text: raised(digit), Place: place}
}

// rotations lowers the axis of Rx, Ry, Rz.
func rotations(t Text) Text {
	var out Text
	for _, r := range t {
		if r.Italic && r.Place == OnLine && strings.HasPrefix(r.Text, "R") && len(r.Text) == 2 {
			out = out.add(Run{Text: "R", Italic: true})
			out = out.add(Run{Text: r.Text[1:], Italic: true, Place: Sub})
			continue
		}
		out = out.add(r)
	}
	return out
}

// PlainPolynomial writes a function of an irrep for a terminal: powers as
// superscript characters, a true minus ("x²−y²").
func PlainPolynomial(s string) string { return Polynomial(s).String() }

// Likest is the number of the function that a partner is best compared with,
// of those that span its irrep: the first polynomial, or the first rotation
// where there is nothing else. Functions of other partners at the same place
// go with it.
func Likest(functions []string) int {
	return max(0, slices.IndexFunc(functions, func(f string) bool { return !strings.Contains(f, "R") }))
}

// splitFirst splits off the first letter of a label.
func splitFirst(s string) (first, rest string) {
	_, n := utf8.DecodeRuneInString(s)
	return s[:n], s[n:]
}

func leadingDigits(s string) string { return leadingLetters(s, "0123456789") }

func leadingLetters(s, set string) string {
	return s[:len(s)-len(strings.TrimLeft(s, set))]
}

// PlainLabel writes a label in the plain characters of the contract, however it
// was typed: typographic primes, subscripts, a double quote for two primes.
func PlainLabel(s string) string { return plainLabel.Replace(s) }

var plainLabel = strings.NewReplacer(
	"″", "''", "\"", "''", "′", "'", "’", "'", "−", "-", "⁺", "+", "⁻", "-",
	"₁", "1", "₂", "2", "₃", "3", "₄", "4", "₅", "5", "₆", "6", "₇", "7", "₈", "8", "₉", "9", "₀", "0")
