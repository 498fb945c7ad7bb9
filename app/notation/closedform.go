package notation

import (
	"regexp"
	"strconv"
	"strings"
	"unicode"

	"lobewright/orbitals"
)

// ClosedForm sets a combination in closed form: the functions as an italic φ
// with a lowered number, all else as in its plain form.
func ClosedForm(f orbitals.ClosedForm) Text {
	var t Text
	pieces := strings.Split(f.String(), "φ")
	t = t.add(Run{Text: pieces[0]})
	for _, piece := range pieces[1:] {
		number := leadingDigits(piece)
		t = t.Then(PhiText(number)).add(Run{Text: piece[len(number):]})
	}
	return t
}

// PhiText sets the name of a function of the basis from its number.
func PhiText(number string) Text {
	return Text{{Text: "φ", Italic: true}, {Text: number, Place: Sub}}
}

// Phi is the plain name of a function of the basis, from its index: φ1 for 0.
func Phi(function int) string { return "φ" + strconv.Itoa(function+1) }

// Sentence sets a sentence in which names of axes, operations and planes
// occur: x, y, z and their planes in italic, C4, C2′, σv and the like as
// operations. What follows "toward" is the name of an atom: C2 is one there.
func Sentence(s string) Text {
	var t Text
	naming := false // words after "toward", "of", "lie" may be names of atoms
	for _, word := range strings.SplitAfter(s, " ") {
		core := strings.TrimRightFunc(word, func(r rune) bool { return unicode.IsSpace(r) || strings.ContainsRune(",;:.", r) })
		rest := word[len(core):]
		switch {
		case naming && isAtomName(core):
			t = t.Then(Words(core))
		case isAxes(core):
			t = t.Then(Text{{Text: core, Italic: true}})
		case isOperation(core):
			t = t.Then(Operation(strings.ReplaceAll(core, "′", "'")))
		default:
			t = t.Then(Words(core))
		}
		t = t.Then(Words(rest))
		switch core {
		case "toward", "of", "lie", "lies":
			naming = true
		case "and":
		default:
			naming = naming && isAtomName(core)
		}
	}
	return t
}

// isAtomName tells whether a word may name an atom: "C2", "Cl12".
func isAtomName(word string) bool { return atomName.MatchString(word) }

var atomName = regexp.MustCompile(`^[A-Z][a-z]?[0-9]+$`)

// isAxes tells whether a word is x, y, z or a plane of two of them.
func isAxes(word string) bool {
	return word != "" && len(word) <= 2 && strings.Trim(word, "xyz") == ""
}

// isOperation tells whether a word is a symbol such as C4, C2′, S8 or σv.
func isOperation(word string) bool {
	letter, index := splitFirst(word)
	switch letter {
	case "C", "S":
		index = strings.TrimRight(index, "'′″")
		return index != "" && leadingDigits(index) == index
	case "σ":
		return index == "v" || index == "d" || index == "h"
	}
	return false
}
