package study

import (
	"io"
	"strings"

	"lobewright/app/study/record"
	"lobewright/symmetry/message"
)

// Version is the version of the study's file that this program writes. Every
// lower one is read.
const Version = 4

// Extension is what the names of study files end with.
const Extension = ".lobewright"

// MaxBytes is the most bytes that a study's file may have: the coordinates,
// each character written with up to six, and room for the rest.
const MaxBytes = 16 << 20

var form = record.Form{Version: Version, MaxBytes: MaxBytes, Steps: []record.Step{unchanged, unchanged, unchanged}}

// unchanged is the step to a version that only knows more keys.
func unchanged(*record.Node) error { return nil }

// Encode writes a study as its file: JSON with one choice a line in a fixed
// order, without what is left at its default. Equal studies give the same
// bytes. The error says what Check says, or that the file would be too large.
func Encode(s Study) ([]byte, error) { return form.Encode(s) }

// Decode reads a study's file, of this version or an older one. name stands in
// messages. The error is a *record.Error: one line with name, line and key.
func Decode(data []byte, name string) (Study, error) {
	var s Study
	if err := form.Decode(data, name, &s); err != nil {
		return Study{}, err
	}
	return s, nil
}

// Read is Decode of what r holds; a file that is too large is refused early.
func Read(r io.Reader, name string) (Study, error) {
	var s Study
	if err := form.Read(r, name, &s); err != nil {
		return Study{}, err
	}
	return s, nil
}

// WithCoordinates is the study with a coordinate list that was pasted or
// dropped, under a name for messages; else it does what Opened does. Bytes that
// are no UTF-8, as old files have in their titles, become U+FFFD. The error is
// one line: the text is too long. Whether it is a coordinate list shows when it
// is read.
func (s Study) WithCoordinates(name, text string) (Study, error) {
	text = strings.ToValidUTF8(text, "\uFFFD")
	if len(text) > MaxCoordinates {
		return s, message.Errorf("%s: the text has %d bytes; at most %d are taken, more come from a file", name, len(text), MaxCoordinates)
	}
	out := s.Opened(name)
	out.Coordinates = text
	if err := out.Check(); err != nil {
		return s, err
	}
	return out, nil
}
