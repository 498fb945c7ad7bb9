package record

import (
	"reflect"
	"strings"
)

// A field is a field of a struct with what its tag says.
type field struct {
	key   string
	lines bool
	index int
}

// fieldsOf lists the fields of a struct in their order. A field without a
// tag is a fault of the program.
func fieldsOf(t reflect.Type) []field {
	out := make([]field, 0, t.NumField())
	for i := range t.NumField() {
		key, options, _ := strings.Cut(t.Field(i).Tag.Get("record"), ",")
		if key == "" {
			panic("record: " + t.Name() + "." + t.Field(i).Name + " has no key")
		}
		out = append(out, field{key: key, lines: options == "lines", index: i})
	}
	return out
}
