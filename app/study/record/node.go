package record

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"strings"
	"unicode/utf8"

	"lobewright/symmetry/message"
)

// A Kind is the key of a sort of JSON value.
type Kind string

// The kinds.
const (
	Object Kind = "object"
	List   Kind = "list"
	String Kind = "text"
	Number Kind = "number"
	Bool   Kind = "bool"
	Null   Kind = "null"
)

var kinds = map[Kind]message.Text{
	Object: message.Words("an object"), List: message.Words("a list"), String: message.Words("a text"),
	Number: message.Words("a number"), Bool: message.Words("true or false"), Null: message.Words("null"),
}

func (k Kind) text() message.Text { return kinds[k] }

// A Node is a JSON value as read.
type Node struct {
	Kind Kind
	Line int
	// Text is the string, or the number or truth value as written.
	Text    string
	Members []Member // of an Object, in their order
	Items   []*Node  // of a List
}

// A Member is a key with its value.
type Member struct {
	Key   string
	Value *Node
}

// Get returns the value of a key of an object, or nil.
func (n *Node) Get(key string) *Node {
	for _, m := range n.Members {
		if m.Key == key {
			return m.Value
		}
	}
	return nil
}

// Take removes a key from an object and returns its value, or nil.
func (n *Node) Take(key string) *Node {
	for i, m := range n.Members {
		if m.Key == key {
			n.Members = append(n.Members[:i:i], n.Members[i+1:]...)
			return m.Value
		}
	}
	return nil
}

// Put sets a key of an object; a nil value removes it.
func (n *Node) Put(key string, value *Node) {
	n.Take(key)
	if value != nil {
		n.Members = append(n.Members, Member{key, value})
	}
}

// find returns the node of a key such as "camera.pan[2]", or the nearest one
// around it.
func (n *Node) find(key string) *Node {
	for part := range strings.SplitSeq(key, ".") {
		name, _, _ := strings.Cut(part, "[")
		inner := n.Get(name)
		if inner == nil {
			return n
		}
		n = inner
	}
	return n
}

// parse makes nodes of JSON text. Whatever is no JSON, or too deep or too
// much, is an *Error with its line.
func parse(data []byte) (*Node, error) {
	data = bytes.TrimPrefix(data, []byte("\ufeff"))
	if len(bytes.TrimSpace(data)) == 0 {
		return nil, &Error{What: message.Words("the file is empty")}
	}
	if !utf8.Valid(data) {
		return nil, &Error{Line: lineOf(data, invalidAt(data)), What: message.Words("the file is not UTF-8 text")}
	}
	p := &parser{data: data, decoder: json.NewDecoder(bytes.NewReader(data))}
	p.decoder.UseNumber()
	// The tokens alone do not tell every fault of grammar.
	var whole json.RawMessage
	if err := json.Unmarshal(data, &whole); err != nil {
		return nil, syntaxError(data, err)
	}
	root, err := p.value("", 0)
	if err != nil {
		return nil, err
	}
	return root, nil
}

func syntaxError(data []byte, err error) *Error {
	var syntax *json.SyntaxError
	if !errors.As(err, &syntax) {
		return &Error{What: message.Words("%s", err)}
	}
	at := int(syntax.Offset)
	if at >= len(bytes.TrimRight(data, " \t\r\n")) && strings.Contains(syntax.Error(), "end of JSON") {
		return &Error{Line: lineOf(data, at), What: message.Words("the file is cut off here")}
	}
	return &Error{Line: lineOf(data, at-1), What: message.Words("this is not JSON: %s", syntax)}
}

func invalidAt(data []byte) int {
	for i := 0; i < len(data); {
		r, n := utf8.DecodeRune(data[i:])
		if r == utf8.RuneError && n == 1 {
			return i
		}
		i += n
	}
	return len(data)
}

// lineOf is the line, from 1, in which a byte stands.
func lineOf(data []byte, at int) int {
	return 1 + bytes.Count(data[:max(0, min(at, len(data)))], []byte("\n"))
}

type parser struct {
	data    []byte
	decoder *json.Decoder
	values  int
	line    int // of what was read up to at
	at      int
}

// here is the line of the token read last. No token goes over a line's end.
func (p *parser) here() int {
	end := int(p.decoder.InputOffset())
	p.line += bytes.Count(p.data[p.at:end], []byte("\n"))
	p.at = end
	return p.line + 1
}

// value reads a value; key is its own, for messages.
func (p *parser) value(key string, depth int) (*Node, error) {
	token, err := p.decoder.Token()
	line := p.here()
	if err != nil {
		return nil, &Error{Line: line, What: message.Words("this is not JSON: %s", err)}
	}
	if p.values++; p.values > maxValues {
		return nil, &Error{Line: line, What: message.Words("the file holds more than %d values", maxValues)}
	}
	n := &Node{Line: line}
	switch t := token.(type) {
	case nil:
		n.Kind = Null
	case bool:
		n.Kind, n.Text = Bool, fmt.Sprint(t)
	case string:
		n.Kind, n.Text = String, t
	case json.Number:
		n.Kind, n.Text = Number, t.String()
	case json.Delim:
		if depth == maxDepth {
			return nil, &Error{Line: line, Key: key, What: message.Words("objects and lists stand within each other more than %d deep", maxDepth)}
		}
		if t == '{' {
			n.Kind = Object
			err = p.members(n, key, depth)
		} else {
			n.Kind = List
			err = p.items(n, key, depth)
		}
	}
	return n, err
}

func (p *parser) members(n *Node, key string, depth int) error {
	seen := make(map[string]bool)
	for p.decoder.More() {
		token, err := p.decoder.Token()
		if err != nil {
			return &Error{Line: p.here(), What: message.Words("this is not JSON: %s", err)}
		}
		name, _ := token.(string) // the grammar has been checked
		line := p.here()
		if seen[name] {
			return &Error{Line: line, Key: join(key, cut(name)), What: message.Words("the key stands here a second time")}
		}
		seen[name] = true
		value, err := p.value(join(key, cut(name)), depth+1)
		if err != nil {
			return err
		}
		n.Members = append(n.Members, Member{name, value})
	}
	_, err := p.decoder.Token() // }
	return err
}

func (p *parser) items(n *Node, key string, depth int) error {
	for i := 0; p.decoder.More(); i++ {
		value, err := p.value(item(key, i), depth+1)
		if err != nil {
			return err
		}
		n.Items = append(n.Items, value)
	}
	_, err := p.decoder.Token() // ]
	return err
}

// cut shortens a foreign key for messages.
func cut(key string) string {
	if runes := []rune(key); len(runes) > 40 {
		return string(runes[:40]) + "…"
	}
	return key
}
