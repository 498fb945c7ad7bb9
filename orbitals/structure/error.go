package structure

import (
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"

	"lobewright/symmetry/message"
)

// A Problem is the key of an Error or a Note: it stays the same whatever the language of the text.
type Problem string

// The problems that an input can have.
const (
	CannotOpen     Problem = "cannot-open"     // no such file, no permission
	CannotRead     Problem = "cannot-read"     // reading broke off
	IsDirectory    Problem = "is-directory"    // a directory where a file was expected
	IsEmpty        Problem = "is-empty"        // nothing in it
	NotText        Problem = "not-text"        // binary data, UTF-16
	TooLarge       Problem = "too-large"       // more bytes than MaxBytes
	LineTooLong    Problem = "line-too-long"   // more bytes than MaxLine
	BadCount       Problem = "bad-count"       // line 1 is not a count
	TooManyAtoms   Problem = "too-many-atoms"  // more than MaxAtoms
	CutShort       Problem = "cut-short"       // fewer atoms than counted
	AtomsLeft      Problem = "atoms-left"      // more atoms than counted
	BadAtom        Problem = "bad-atom"        // not of the form El x y z
	UnknownElement Problem = "unknown-element" // neither a symbol nor an atomic number
	BadNumber      Problem = "bad-number"      // not a finite number
	TooFar         Problem = "too-far"         // a coordinate beyond MaxCoordinate
	OneSpot        Problem = "one-spot"        // two atoms nearer than MinDistance
	BadIdeal       Problem = "bad-ideal"       // the text after ideal: is not understood
	UnknownShape   Problem = "unknown-shape"   // no such polyhedral symbol
	UnknownDemo    Problem = "unknown-demo"    // no such demonstration
	BadAtoms       Problem = "bad-atoms"       // a choice of atoms that is not understood
	NoSuchAtom     Problem = "no-such-atom"    // an atom, element or orbit that the structure lacks
	NoCore         Problem = "no-core"         // no atom is left to decide the group
)

// What a reader may say about an input that it accepted.
const (
	FirstFrame   Problem = "first-frame"   // further frames follow, the first one was taken
	TextLeft     Problem = "text-left"     // text after the last atom was not read
	LabelsRead   Problem = "labels-read"   // numbered labels (C12) were read as elements
	IsotopesRead Problem = "isotopes-read" // D or T were read as hydrogen
	TitleDecoded Problem = "title-decoded" // the title was not UTF-8
)

// An Error says what is wrong with an input and where.
type Error struct {
	// File is the name of the file, "standard input", or the text of a choice; it may be empty.
	File string
	// Line counts from 1; it is 0 where no line is to blame.
	Line int
	// Problem is the key of what is wrong.
	Problem Problem
	// What says what is wrong, with the words found; Want says what would be right. Want may be empty.
	What, Want message.Text
	// Err is the error of the system below, or nil.
	Err error
}

// Error returns one line: file, line, what is wrong, what would be right.
func (e *Error) Error() string { return e.In(nil) }

// In is Error in a language.
func (e *Error) In(l *message.Language) string {
	var b strings.Builder
	if e.File != "" {
		b.WriteString(printable(e.File))
		if e.Line > 0 {
			b.WriteString(":" + strconv.Itoa(e.Line))
		}
		b.WriteString(": ")
	} else if e.Line > 0 {
		b.WriteString(message.Words("line %d: ", e.Line).In(l))
	}
	b.WriteString(e.What.In(l))
	if !e.Want.Empty() {
		b.WriteString("; " + e.Want.In(l))
	}
	return b.String()
}

// Unwrap returns the error of the system below.
func (e *Error) Unwrap() error { return e.Err }

// A Note is a remark on an input that was accepted.
type Note struct {
	File string
	Line int // from 1, 0 for none
	// Problem is the key of what is remarked.
	Problem Problem
	What    message.Text
}

// String returns one line: file, line, remark.
func (n Note) String() string { return n.In(nil) }

// In is String in a language.
func (n Note) In(l *message.Language) string {
	return (&Error{File: n.File, Line: n.Line, What: n.What}).In(l)
}

// printable returns text that fits on one line of a terminal: control characters and what is not UTF-8 are
// written as escapes.
func printable(text string) string {
	for _, r := range text {
		if r == utf8.RuneError || !unicode.IsPrint(r) {
			q := strconv.Quote(text)
			return q[1 : len(q)-1]
		}
	}
	return text
}

// found quotes what was found in an input, shortened, for a message.
func found(text string) string {
	const most = 40
	if utf8.RuneCountInString(text) > most {
		runes := []rune(text)
		return strconv.Quote(string(runes[:most])) + " …"
	}
	return strconv.Quote(text)
}

func appendInt(b []byte, n int) []byte { return strconv.AppendInt(b, int64(n), 10) }
