// Package record writes plain values as JSON that people can read and compare
// line by line, and reads it back without trusting it.
//
// A value is a struct whose exported fields carry a tag `record:"key"`; they
// are strings, booleans, ints, float64s, lists and arrays of these, and
// structs of the same sort. What has its zero value is left out. A string
// with `record:"key,lines"` is written as a list of its lines.
//
// The file begins with its version. Whoever changes the form of a value,
// adding a key included, raises the version and adds a Step from the one
// before, so that every older file can be read for ever.
package record

import (
	"strconv"
	"strings"

	"lobewright/symmetry/message"
)

// A Form says how one sort of file is written and read.
type Form struct {
	// Version is the version that is written, from 1.
	Version int
	// Steps[k] raises a file of version k+1 to version k+2; there are
	// Version − 1 of them.
	Steps []Step
	// MaxBytes is the most that a file may have.
	MaxBytes int
}

// A Step changes a file as read from one version to the next. It changes
// root, which is an object, in place.
type Step func(root *Node) error

// A Checker is a value that knows its limits. Decode and Encode refuse a
// value whose Check fails; an *Error with a Key is given the line of that key.
type Checker interface{ Check() error }

// Limits of every file.
const (
	maxDepth  = 8      // of objects and lists within each other
	maxValues = 200000 // of all sorts: a few megabytes of memory
)

// An Error says what is wrong with a file or a value and where.
type Error struct {
	Name string // of the file; may be empty
	Line int    // from 1, 0 for none
	Key  string // such as "camera.zoom"; may be empty
	What message.Text
}

// Error is one line: name, line, key, what is wrong.
func (e *Error) Error() string { return e.In(nil) }

// In is Error in a language.
func (e *Error) In(l *message.Language) string {
	var parts []string
	place := oneLine(e.Name)
	switch {
	case e.Line > 0 && place == "":
		place = message.Words("line %d", e.Line).In(l)
	case e.Line > 0:
		place += ":" + strconv.Itoa(e.Line)
	}
	if place != "" {
		parts = append(parts, place)
	}
	if e.Key != "" {
		parts = append(parts, oneLine(e.Key))
	}
	return strings.Join(append(parts, oneLine(e.What.In(l))), ": ")
}

// Wrong makes an Error about a key, for the Check of a value.
func Wrong(key, format string, arguments ...any) *Error {
	return &Error{Key: key, What: message.Words(format, arguments...)}
}

// oneLine keeps a message on one line, whatever a file or its name contains.
func oneLine(s string) string {
	return strings.Map(func(r rune) rune {
		if r < ' ' || r == 0x7f {
			return ' '
		}
		return r
	}, s)
}

// quoted is a found word for a message, cut where it is long.
func quoted(s string) string {
	const most = 40
	if runes := []rune(s); len(runes) > most {
		s = string(runes[:most]) + "…"
	}
	return strconv.Quote(s)
}

// join makes the key of a member of an object.
func join(key, member string) string {
	if key == "" {
		return member
	}
	return key + "." + member
}

// item makes the key of an entry of a list, counted from 1.
func item(key string, index int) string { return key + "[" + strconv.Itoa(index+1) + "]" }
