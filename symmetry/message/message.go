// Package message makes sentences that keep their parts: the form with its
// gaps, and what stands in them. So a sentence, or an error, that was made in
// English deep in the program can be said in another language where a person
// reads it. It knows nothing of the rest of the program.
//
// A form is written as for package fmt and is its own key: a Language has
// another form for it, with the same gaps in an order of its own ("%[2]s").
package message

import (
	"fmt"
	"strconv"
	"strings"
)

// A Language says how sentences are said in it. The nil Language is English.
type Language struct {
	// Forms are the forms of this language by the English ones.
	Forms map[string]string
	// Point stands between a whole number and its decimals, Thousands between
	// groups of three digits; empty stands for the English ones.
	Point, Thousands string
}

// A Said is something that a language says in its own way. What an error or
// an argument says in English is what Error or String returns.
type Said interface {
	In(l *Language) string
}

// A Text is a sentence or a part of one. The zero value is empty.
type Text struct {
	form      string
	arguments []any
	english   string
}

// Words makes a text as fmt.Sprintf does.
func Words(form string, arguments ...any) Text {
	return Text{form, arguments, fmt.Sprintf(form, arguments...)}
}

// Join puts texts one after another with a separator between them, which is
// the same in every language.
func Join(texts []Text, separator string) Text {
	forms := make([]string, len(texts))
	arguments := make([]any, len(texts))
	for i, t := range texts {
		forms[i], arguments[i] = "%s", t
	}
	return Words(strings.Join(forms, separator), arguments...)
}

// String is the text in English.
func (t Text) String() string { return t.english }

// Empty tells whether there is nothing to say.
func (t Text) Empty() bool { return t.english == "" }

// In is the text in a language, with everything in its gaps that the language
// can say. What it has no form for stays English.
func (t Text) In(l *Language) string {
	if l == nil || t.form == "" {
		return t.english
	}
	form, known := l.Forms[t.form]
	if !known {
		form = t.form
	}
	arguments := make([]any, len(t.arguments))
	for i, a := range t.arguments {
		arguments[i] = l.argument(a)
	}
	return fmt.Sprintf(wrapping.Replace(form), arguments...)
}

// wrapping makes the verb that only fmt.Errorf knows into a plain one.
var wrapping = strings.NewReplacer("%w", "%v", "]w", "]v")

func (l *Language) argument(a any) any {
	switch a := a.(type) {
	case Said:
		return a.In(l)
	case error:
		return In(a, l)
	case float64:
		if l.Point != "" {
			return decimal{a, l.Point}
		}
	}
	return a
}

// A decimal is printed like the number with another decimal point.
type decimal struct {
	x     float64
	point string
}

// Format prints as the number itself would be.
func (d decimal) Format(f fmt.State, verb rune) {
	_, _ = fmt.Fprint(f, strings.Replace(fmt.Sprintf(fmt.FormatString(f, verb), d.x), ".", d.point, 1))
}

// A Count is a number that is written with its thousands apart: 20,000.
type Count int

// String is the count in English.
func (c Count) String() string { return c.grouped(",") }

// In is the count in a language.
func (c Count) In(l *Language) string {
	if l == nil || l.Thousands == "" {
		return c.String()
	}
	return c.grouped(l.Thousands)
}

func (c Count) grouped(separator string) string {
	s := strconv.Itoa(int(c))
	for i := len(s) - 3; i > 0; i -= 3 {
		s = s[:i] + separator + s[i:]
	}
	return s
}

// An Error is an error made of a text. It may wrap others, as those of
// fmt.Errorf do.
type Error struct {
	Text
	err error
}

// Errorf makes an *Error as fmt.Errorf does.
func Errorf(form string, arguments ...any) error {
	err := fmt.Errorf(form, arguments...)
	return &Error{Text{form, arguments, err.Error()}, err}
}

// Error is the text in English.
func (e *Error) Error() string { return e.english }

// Unwrap returns what fmt.Errorf would have returned, which wraps the rest.
func (e *Error) Unwrap() error { return e.err }

// In says an error in a language: an error that is Said says itself, of
// another the words are looked up among the forms. The rest stays as it is.
func In(err error, l *Language) string {
	if s, ok := err.(Said); ok {
		return s.In(l)
	}
	text := err.Error()
	return Text{form: strings.ReplaceAll(text, "%", "%%"), english: text}.In(l)
}
