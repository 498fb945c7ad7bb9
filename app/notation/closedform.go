package notation

import (
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

// atomMark stands before the name of an atom in a sentence that is to be set:
// C2 is a carbon atom there and not an axis.
const atomMark = "\ue000" // for private use

// Sentence sets a sentence in which names of axes, operations and planes
// occur: x, y, z and their planes in italic, C4, C2′, σv and the like as
// operations, by themselves or at the head of a word (C4-Achsen).
func Sentence(s string) Text {
	var t Text
	for _, word := range strings.SplitAfter(s, " ") {
		core := strings.TrimLeft(word, "(")
		before := word[:len(word)-len(core)]
		core = strings.TrimRightFunc(core, func(r rune) bool { return unicode.IsSpace(r) || strings.ContainsRune(",;:.)", r) })
		after := word[len(before)+len(core):]
		t = t.Then(Words(before), wordText(core), Words(after))
	}
	return t
}

func wordText(word string) Text {
	if name, ok := strings.CutPrefix(word, atomMark); ok {
		return Words(name)
	}
	if isAxes(word) {
		return Text{{Text: word, Italic: true}}
	}
	head, tail, compound := strings.Cut(word, "-")
	if !isOperation(head) {
		return Words(word)
	}
	t := Operation(strings.NewReplacer("′", "'", "″", "''").Replace(head))
	if compound {
		t = t.Then(Words("-" + tail))
	}
	return t
}

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
