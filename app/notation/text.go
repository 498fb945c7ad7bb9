// Package notation writes the names of the trade for people: labels of
// irreps, operations, groups and functions, closed forms, and the sentences
// for the keys that the packages below hand out.
//
// Everything starts as the plain characters of the JSON contract ("A1g",
// "C3^2(z)", "dx2-y2"). Parsing gives a Text, a line made of runs with real
// sub- and superscripts; a Text is drawn by whoever knows fonts, or written
// as LaTeX. On a terminal the plain characters stand as they are.
//
// Type follows the IUPAC recommendation (Schutte and others, Notations and
// conventions in molecular spectroscopy, Part 2, Pure Appl. Chem. 69, 1641
// (1997), known here through a quotation): operations and group symbols
// italic with upright indices, symmetry species upright.
package notation

import (
	"strings"
	"unicode"
)

// Place tells where a Run stands relative to the line.
type Place int

// The places of a Run.
const (
	OnLine Place = iota
	Sub
	Super
)

// A Run is a piece of text of one style.
type Run struct {
	Text   string
	Italic bool
	Place  Place
}

// A Text is one line of runs. The zero Text is empty.
type Text []Run

// Words makes a Text of upright words on the line.
func Words(s string) Text {
	if s == "" {
		return nil
	}
	return Text{{Text: s}}
}

// Then returns t followed by the other texts. A run of the same style as the
// one before is joined to it.
func (t Text) Then(more ...Text) Text {
	out := append(Text(nil), t...)
	for _, m := range more {
		for _, r := range m {
			out = out.add(r)
		}
	}
	return out
}

func (t Text) add(r Run) Text {
	if r.Text == "" {
		return t
	}
	if n := len(t); n > 0 && t[n-1].Italic == r.Italic && t[n-1].Place == r.Place {
		t[n-1].Text += r.Text
		return t
	}
	return append(t, r)
}

// Fill puts set texts in the places {} of a sentence, in their order. A place
// that is left over stays empty.
func Fill(sentence string, parts ...Text) Text {
	var t Text
	for i, words := range strings.Split(sentence, "{}") {
		if i > 0 && i <= len(parts) {
			t = t.Then(parts[i-1])
		}
		t = t.Then(Words(words))
	}
	return t
}

// String is the characters of t without their places; digits that stand
// raised become superscript characters.
func (t Text) String() string {
	var b strings.Builder
	for _, r := range t {
		if r.Place == Super {
			b.WriteString(raised(r.Text))
		} else {
			b.WriteString(r.Text)
		}
	}
	return b.String()
}

var raisedRunes = strings.NewReplacer(
	"0", "⁰", "1", "¹", "2", "²", "3", "³", "4", "⁴",
	"5", "⁵", "6", "⁶", "7", "⁷", "8", "⁸", "9", "⁹",
	"+", "⁺", "−", "⁻")

func raised(s string) string { return raisedRunes.Replace(s) }

// Width is the number of columns that s takes on a terminal: marks that are
// set over the letter before take none. Nothing that this program prints is
// two columns wide.
func Width(s string) int {
	n := 0
	for _, r := range s {
		if !unicode.Is(unicode.Mn, r) {
			n++
		}
	}
	return n
}

// Minus replaces each hyphen of a number or a formula by a true minus sign.
func Minus(s string) string { return strings.ReplaceAll(s, "-", "−") }

// prettyPrimes turns the apostrophes of a plain label into primes.
func prettyPrimes(s string) string {
	s = strings.ReplaceAll(s, "'''", "‴")
	s = strings.ReplaceAll(s, "''", "″")
	return strings.ReplaceAll(s, "'", "′")
}
