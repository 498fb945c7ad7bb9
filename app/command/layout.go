package command

import (
	"bytes"
	"encoding/json"
	"strings"
	"unicode/utf8"
)

// encode writes a document as JSON that a person can read and compare line by
// line: what fits stands on one line; longer objects and lists of lists or
// objects have a line for each member, and lists of numbers stay together.
func encode(document any) ([]byte, error) {
	var compact bytes.Buffer
	encoder := json.NewEncoder(&compact)
	// Labels contain ' and <; they need no escapes outside of web pages.
	encoder.SetEscapeHTML(false)
	if err := encoder.Encode(document); err != nil {
		return nil, err
	}
	value, _ := readValue(strings.TrimSpace(compact.String()))
	var out bytes.Buffer
	value.write(&out, 0)
	out.WriteByte('\n')
	return out.Bytes(), nil
}

// lineWidth is how much one line of JSON holds before it is broken.
const lineWidth = 100

// A value is a piece of compact JSON with its members.
type value struct {
	text    string
	keys    []string // of an object, in quotes; empty for a list
	members []value
}

// readValue reads the value at the start of valid compact JSON and returns
// the rest.
func readValue(s string) (v value, rest string) {
	switch s[0] {
	case '{', '[':
		rest = s[1:]
		for rest[0] != '}' && rest[0] != ']' {
			if rest[0] == ',' {
				rest = rest[1:]
			}
			if s[0] == '{' {
				n := stringLength(rest)
				v.keys = append(v.keys, rest[:n])
				rest = rest[n+1:] // and the colon
			}
			var member value
			member, rest = readValue(rest)
			v.members = append(v.members, member)
		}
		rest = rest[1:]
	case '"':
		rest = s[stringLength(s):]
	default:
		end := strings.IndexAny(s, ",]}")
		if end < 0 {
			end = len(s)
		}
		rest = s[end:]
	}
	v.text = s[:len(s)-len(rest)]
	return v, rest
}

// stringLength is the length of the quoted string at the start of s.
func stringLength(s string) int {
	for i := 1; ; i++ {
		switch s[i] {
		case '\\':
			i++
		case '"':
			return i + 1
		}
	}
}

func (v value) write(out *bytes.Buffer, indent int) {
	if !v.breaks(indent) {
		v.writeInline(out)
		return
	}
	out.WriteByte(v.text[0])
	for i, member := range v.members {
		if i > 0 {
			out.WriteByte(',')
		}
		out.WriteString("\n" + strings.Repeat(" ", indent+1))
		if len(v.keys) > 0 {
			out.WriteString(v.keys[i] + ": ")
		}
		member.write(out, indent+1)
	}
	out.WriteString("\n" + strings.Repeat(" ", indent))
	out.WriteByte(v.text[len(v.text)-1])
}

func (v value) writeInline(out *bytes.Buffer) {
	if len(v.members) == 0 {
		out.WriteString(v.text)
		return
	}
	out.WriteByte(v.text[0])
	for i, member := range v.members {
		if i > 0 {
			out.WriteString(", ")
		}
		if len(v.keys) > 0 {
			out.WriteString(v.keys[i] + ": ")
		}
		member.writeInline(out)
	}
	out.WriteByte(v.text[len(v.text)-1])
}

func (v value) breaks(indent int) bool {
	if indent+utf8.RuneCountInString(v.text) <= lineWidth {
		return false
	}
	return len(v.keys) > 0 || len(v.members) > 0 && v.members[0].text[0] != '"' && len(v.members[0].members) > 0
}
