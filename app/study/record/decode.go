package record

import (
	"io"
	"math"
	"reflect"
	"strconv"
	"strings"

	"lobewright/symmetry/message"
)

// Read is Decode of all that r holds; a file that is too large is refused
// without being read to its end.
func (f Form) Read(r io.Reader, name string, value any) error {
	data, err := io.ReadAll(io.LimitReader(r, int64(f.MaxBytes)+1))
	if err != nil {
		return message.Errorf("%s: cannot be read: %w", oneLine(name), err)
	}
	return f.Decode(data, name, value)
}

// Decode reads a file into value, a pointer to a struct with its zero value.
// name stands in messages. The error is an *Error, one line with the name, the
// line and the key; value may then be half filled.
func (f Form) Decode(data []byte, name string, value any) error {
	err := f.decode(data, value)
	if e, ok := err.(*Error); ok && e.Name == "" {
		e.Name = name
	}
	return err
}

func (f Form) decode(data []byte, value any) error {
	if len(data) > f.MaxBytes {
		return &Error{What: message.Words("the file is larger than %d bytes", f.MaxBytes)}
	}
	root, err := parse(data)
	if err != nil {
		return err
	}
	if err := f.raise(root); err != nil {
		return err
	}
	if err := fill(reflect.ValueOf(value).Elem(), root, "", false); err != nil {
		return err
	}
	c, ok := value.(Checker)
	if !ok {
		return nil
	}
	err = c.Check()
	if e, ok := err.(*Error); ok && e.Line == 0 {
		e.Line = root.find(e.Key).Line
	}
	return err
}

// raise takes the version off and brings an older file to the version of the
// form.
func (f Form) raise(root *Node) error {
	if root.Kind != Object {
		return &Error{Line: root.Line, What: message.Words("the file holds %s where an object is due", root.Kind.text())}
	}
	node := root.Take("version")
	if node == nil {
		return &Error{Key: "version", What: message.Words("the key is missing; this is no file of this program")}
	}
	version, err := strconv.Atoi(node.Text)
	switch {
	case node.Kind != Number || err != nil || version < 1:
		return &Error{Line: node.Line, Key: "version", What: message.Words("a whole number from 1 is due")}
	case version > f.Version:
		return &Error{Line: node.Line, Key: "version",
			What: message.Words("%d is newer than this program, which reads up to version %d", version, f.Version)}
	}
	for _, step := range f.Steps[version-1:] {
		if err := step(root); err != nil {
			return err
		}
	}
	return nil
}

// fill sets a value from a node of the right kind.
func fill(v reflect.Value, n *Node, key string, lines bool) error {
	switch v.Kind() {
	case reflect.Struct:
		return fillStruct(v, n, key)
	case reflect.Slice, reflect.Array:
		return fillList(v, n, key)
	case reflect.Bool:
		if n.Kind != Bool {
			return mistaken(n, key, Bool)
		}
		v.SetBool(n.Text == "true")
	case reflect.String:
		if lines {
			return fillLines(v, n, key)
		}
		if n.Kind != String {
			return mistaken(n, key, String)
		}
		v.SetString(n.Text)
	case reflect.Int:
		if n.Kind != Number {
			return mistaken(n, key, Number)
		}
		i, err := strconv.ParseInt(n.Text, 10, 32)
		if err != nil {
			return &Error{Line: n.Line, Key: key, What: message.Words("%s is no whole number of a sensible size", cut(n.Text))}
		}
		v.SetInt(i)
	case reflect.Float64:
		if n.Kind != Number {
			return mistaken(n, key, Number)
		}
		x, err := strconv.ParseFloat(n.Text, 64)
		if err != nil || math.IsInf(x, 0) {
			return &Error{Line: n.Line, Key: key, What: message.Words("%s is too large for a number", cut(n.Text))}
		}
		v.SetFloat(x + 0)
	default:
		panic("record: " + key + " has a type that no file holds")
	}
	return nil
}

func mistaken(n *Node, key string, due Kind) *Error {
	found := n.Kind.text()
	switch n.Kind {
	case String:
		found = message.Words("the text %s", quoted(n.Text))
	case Number, Bool:
		found = message.Words("%s", cut(n.Text))
	}
	return &Error{Line: n.Line, Key: key, What: message.Words("%s is due, not %s", due.text(), found)}
}

func fillStruct(v reflect.Value, n *Node, key string) error {
	if n.Kind != Object {
		return mistaken(n, key, Object)
	}
	fields := fieldsOf(v.Type())
members:
	for _, m := range n.Members {
		for _, f := range fields {
			if f.key == m.Key {
				if err := fill(v.Field(f.index), m.Value, join(key, f.key), f.lines); err != nil {
					return err
				}
				continue members
			}
		}
		return &Error{Line: m.Value.Line, Key: join(key, cut(m.Key)), What: nearest(m.Key, fields)}
	}
	return nil
}

// nearest names the key that was probably meant in the place of one that there
// is not.
func nearest(key string, fields []field) message.Text {
	for _, f := range fields {
		if strings.EqualFold(f.key, key) {
			return message.Words("there is no such key; %s is one", quoted(f.key))
		}
	}
	names := make([]string, len(fields))
	for i, f := range fields {
		names[i] = f.key
	}
	return message.Words("there is no such key; there are %s", strings.Join(names, ", "))
}

func fillList(v reflect.Value, n *Node, key string) error {
	if n.Kind != List {
		return mistaken(n, key, List)
	}
	if v.Kind() == reflect.Slice {
		v.Set(reflect.MakeSlice(v.Type(), len(n.Items), len(n.Items)))
	} else if len(n.Items) != v.Len() {
		return &Error{Line: n.Line, Key: key, What: message.Words("%d numbers are due, not %d", v.Len(), len(n.Items))}
	}
	for i, entry := range n.Items {
		if err := fill(v.Index(i), entry, item(key, i), false); err != nil {
			return err
		}
	}
	return nil
}

func fillLines(v reflect.Value, n *Node, key string) error {
	if n.Kind != List {
		return mistaken(n, key, List)
	}
	lines := make([]string, len(n.Items))
	for i, entry := range n.Items {
		if entry.Kind != String {
			return mistaken(entry, item(key, i), String)
		}
		lines[i] = entry.Text
	}
	v.SetString(strings.Join(lines, "\n"))
	return nil
}
