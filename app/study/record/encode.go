package record

import (
	"bytes"
	"encoding/json"

	"math"
	"reflect"
	"strconv"
	"strings"
	"unicode/utf8"

	"lobewright/symmetry/message"
)

// Encode writes a value, a struct. Equal values give the same bytes. The
// error is that of the value's Check, or names what JSON cannot hold.
func (f Form) Encode(value any) ([]byte, error) {
	if c, ok := value.(Checker); ok {
		if err := c.Check(); err != nil {
			return nil, err
		}
	}
	w := &writer{}
	w.WriteString("{\n  \"version\": " + strconv.Itoa(f.Version))
	if err := w.members(reflect.ValueOf(value), "", 1, true); err != nil {
		return nil, err
	}
	w.WriteString("\n}\n")
	if w.Len() > f.MaxBytes {
		return nil, &Error{What: message.Words("the file would have %d bytes; it may have %d", w.Len(), f.MaxBytes)}
	}
	return w.Bytes(), nil
}

type writer struct{ bytes.Buffer }

// members writes what is not zero of a struct, each on its own line. following
// says that a member stands before the first.
func (w *writer) members(v reflect.Value, key string, depth int, following bool) error {
	for _, f := range fieldsOf(v.Type()) {
		value := v.Field(f.index)
		if isZero(value) {
			continue
		}
		if following {
			w.WriteByte(',')
		}
		following = true
		w.newLine(depth)
		w.text(f.key)
		w.WriteString(": ")
		if err := w.value(value, join(key, f.key), depth, f.lines); err != nil {
			return err
		}
	}
	return nil
}

// isZero tells whether a value says nothing: an empty list and a negative zero
// say nothing either.
func isZero(v reflect.Value) bool {
	switch v.Kind() {
	case reflect.Slice:
		return v.Len() == 0
	case reflect.Float64:
		return v.Float() == 0
	case reflect.Struct:
		for i := range v.NumField() {
			if !isZero(v.Field(i)) {
				return false
			}
		}
		return true
	case reflect.Array:
		for i := range v.Len() {
			if !isZero(v.Index(i)) {
				return false
			}
		}
		return true
	}
	return v.IsZero()
}

func (w *writer) newLine(depth int) { w.WriteString("\n" + strings.Repeat("  ", depth)) }

func (w *writer) value(v reflect.Value, key string, depth int, lines bool) error {
	switch v.Kind() {
	case reflect.Struct:
		w.WriteByte('{')
		if err := w.members(v, key, depth+1, false); err != nil {
			return err
		}
		w.newLine(depth)
		w.WriteByte('}')
	case reflect.Slice, reflect.Array:
		w.WriteByte('[')
		for i := range v.Len() {
			if i > 0 {
				w.WriteString(", ")
			}
			if err := w.value(v.Index(i), item(key, i), depth, false); err != nil {
				return err
			}
		}
		w.WriteByte(']')
	case reflect.Bool:
		w.WriteString(strconv.FormatBool(v.Bool()))
	case reflect.Int:
		w.WriteString(strconv.FormatInt(v.Int(), 10))
	case reflect.Float64:
		x := v.Float() + 0 // no negative zero
		if math.IsNaN(x) || math.IsInf(x, 0) {
			return Wrong(key, "%g is no finite number", x)
		}
		w.WriteString(strconv.FormatFloat(x, 'g', -1, 64))
	case reflect.String:
		if !utf8.ValidString(v.String()) {
			return Wrong(key, "the text is not UTF-8")
		}
		if lines {
			w.lines(v.String(), depth)
		} else {
			w.text(v.String())
		}
	default:
		panic("record: " + key + " has a type that no file holds")
	}
	return nil
}

// lines writes the lines of a text as a list, one under the other.
func (w *writer) lines(text string, depth int) {
	w.WriteByte('[')
	first := true
	for line := range strings.SplitSeq(text, "\n") {
		if !first {
			w.WriteByte(',')
		}
		first = false
		w.newLine(depth + 1)
		w.text(line)
	}
	w.newLine(depth)
	w.WriteByte(']')
}

// text writes a string without escaping more than JSON asks for.
func (w *writer) text(s string) {
	e := json.NewEncoder(&w.Buffer)
	e.SetEscapeHTML(false)
	_ = e.Encode(s) // a string can always be written to memory
	w.Truncate(w.Len() - 1)
}
