package record

import (
	"errors"
	"math"
	"strings"
	"testing"

	"lobewright/symmetry/message"
)

type inner struct {
	Weight float64    `record:"weight"`
	Pair   [2]float64 `record:"pair"`
}

type sample struct {
	Name  string   `record:"name"`
	Text  string   `record:"text,lines"`
	Count int      `record:"count"`
	On    bool     `record:"on"`
	Words []string `record:"words"`
	Ints  []int    `record:"ints"`
	Inner inner    `record:"inner"`
}

var (
	one   = Form{Version: 1, MaxBytes: 1 << 20}
	whole = sample{"a<b>&\"c\"", "first\n\tsecond\n", -3, true, []string{"x", "y"}, []int{1, 2}, inner{0.5, [2]float64{1e-9, -2}}}
)

const wholeText = `{
  "version": 1,
  "name": "a<b>&\"c\"",
  "text": [
    "first",
    "\tsecond",
    ""
  ],
  "count": -3,
  "on": true,
  "words": ["x", "y"],
  "ints": [1, 2],
  "inner": {
    "weight": 0.5,
    "pair": [1e-09, -2]
  }
}
`

func TestFilesAreForPeople(t *testing.T) {
	got, err := one.Encode(whole)
	if err != nil || string(got) != wholeText {
		t.Errorf("%v\n%s", err, got)
	}
	got, err = one.Encode(sample{Ints: []int{}, Inner: inner{Weight: math.Copysign(0, -1)}})
	if err != nil || string(got) != "{\n  \"version\": 1\n}\n" {
		t.Errorf("a value that says nothing: %v\n%s", err, got)
	}
	var back sample
	if err := one.Decode([]byte(wholeText), "f", &back); err != nil || back.Text != whole.Text || back.Inner != whole.Inner || back.Name != whole.Name {
		t.Errorf("%v: %#v", err, back)
	}
}

func TestOrderSpacesAndMarksDoNotMatter(t *testing.T) {
	var back sample
	text := "\ufeff\r\n{\"count\":7,\r\n\"name\" : \"\\u0041\",\"version\":1}  "
	if err := one.Decode([]byte(text), "f", &back); err != nil || back.Count != 7 || back.Name != "A" {
		t.Errorf("%v: %#v", err, back)
	}
}

// TestBadFilesAreToldInOneLine holds name, line and key of what is wrong.
func TestBadFilesAreToldInOneLine(t *testing.T) {
	for text, want := range map[string]string{
		"":                                      "f: the file is empty",
		"\n \n":                                 "f: the file is empty",
		"{\"version\": 1,\n\"name":              "f:2: the file is cut off here",
		"{\"version\": 1,\n":                    "f:2: the file is cut off here",
		"{\"version\": 1,\n}":                   "f:2: this is not JSON: invalid character '}' looking for beginning of object key string",
		"{\"version\": 1} {}":                   "f:1: this is not JSON: invalid character '{' after top-level value",
		"\n[1,]":                                "f:2: this is not JSON: invalid character ']' looking for beginning of value",
		"C 0 0 0":                               "f:1: this is not JSON: invalid character 'C' looking for beginning of value",
		"[1]":                                   "f:1: the file holds a list where an object is due",
		"{\"version\": 1,\n\"name\": \"\xff\"}": "f:2: the file is not UTF-8 text",
		"{}":                                    "f: version: the key is missing; this is no file of this program",
		"{\"version\": \"1\"}":                  "f:1: version: a whole number from 1 is due",
		"{\"version\": 0}":                      "f:1: version: a whole number from 1 is due",
		"{\"version\": 1.5}":                    "f:1: version: a whole number from 1 is due",
		"{\n\"version\": 2, \"unheard\": 3}":    "f:2: version: 2 is newer than this program, which reads up to version 1",
		"{\"version\": 1,\n\"Name\": \"x\"}":    "f:2: Name: there is no such key; \"name\" is one",
		"{\"version\": 1,\n\"inner\": {\n\"mass\": 2}}":                                           "f:3: inner.mass: there is no such key; there are weight, pair",
		"{\"version\": 1,\n\"count\": 1,\n\"count\": 2}":                                          "f:3: count: the key stands here a second time",
		"{\"version\": 1,\n\"name\": 3}":                                                          "f:2: name: a text is due, not 3",
		"{\"version\": 1,\n\"name\": null}":                                                       "f:2: name: a text is due, not null",
		"{\"version\": 1,\n\"on\": \"yes\"}":                                                      "f:2: on: true or false is due, not the text \"yes\"",
		"{\"version\": 1,\n\"inner\": [1]}":                                                       "f:2: inner: an object is due, not a list",
		"{\"version\": 1,\n\"inner\":\n{\"weight\": \"\\n" + strings.Repeat("x", 99) + "\"}}":     "f:3: inner.weight: a number is due, not the text \"\\n" + strings.Repeat("x", 39) + "…\"",
		"{\"version\": 1,\n\"inner\": {\"weight\": 1e999}}":                                       "f:2: inner.weight: 1e999 is too large for a number",
		"{\"version\": 1,\n\"count\": 1.5}":                                                       "f:2: count: 1.5 is no whole number of a sensible size",
		"{\"version\": 1,\n\"count\": 99999999999}":                                               "f:2: count: 99999999999 is no whole number of a sensible size",
		"{\"version\": 1,\n\"words\": \"x\"}":                                                     "f:2: words: a list is due, not the text \"x\"",
		"{\"version\": 1,\n\"words\": [\"x\",\n1]}":                                               "f:3: words[2]: a text is due, not 1",
		"{\"version\": 1,\n\"text\": \"x\"}":                                                      "f:2: text: a list is due, not the text \"x\"",
		"{\"version\": 1,\n\"text\": [\"x\",\n{}]}":                                               "f:3: text[2]: a text is due, not an object",
		"{\"version\": 1,\n\"inner\": {\"pair\": [1]}}":                                           "f:2: inner.pair: 2 numbers are due, not 1",
		"{\"version\": 1,\n\"name\":" + strings.Repeat("[", 100) + strings.Repeat("]", 100) + "}": "f:2: name[1][1][1][1][1][1][1]: objects and lists stand within each other more than 8 deep",
		"{\"version\": 1, \"ints\": [" + strings.Repeat("1,", 200001) + "1]}":                     "f:1: the file holds more than 200000 values",
		"{\"version\": 1, \"name\": \"" + strings.Repeat("x", 1<<20) + "\"}":                      "f: the file is larger than 1048576 bytes",
	} {
		var s sample
		err := one.Decode([]byte(text), "f", &s)
		var e *Error
		if !errors.As(err, &e) {
			t.Errorf("%.60q: %v", text, err)
			continue
		}
		if e.Error() != want {
			t.Errorf("%.60q:\n got %s\nwant %s", text, e, want)
		}
		var read sample
		if err := one.Read(strings.NewReader(text), "f", &read); err == nil || err.Error() != want {
			t.Errorf("%.60q: reading it says %v", text, err)
		}
	}
}

func TestJSONThatIsNestedWithoutEndDoesNoHarm(t *testing.T) {
	form := Form{Version: 1, MaxBytes: 64 << 20}
	for _, text := range []string{
		strings.Repeat("[", 10<<20), strings.Repeat(`{"a":`, 4<<20), `{"version":1,"name":` + strings.Repeat("[", 9000) + strings.Repeat("]", 9000) + "}",
	} {
		if err := form.Decode([]byte(text), "f", &sample{}); err == nil || strings.Contains(err.Error(), "\n") {
			t.Errorf("%.20q: %v", text, err)
		}
	}
}

func TestMessagesStayOnOneLine(t *testing.T) {
	err := one.Decode([]byte("{\"version\": 1, \"a\\nb\": 1}"), "two\nlines", &sample{})
	if err == nil || strings.ContainsAny(err.Error(), "\n\r") || !strings.Contains(err.Error(), "a b") {
		t.Errorf("%q", err)
	}
}

func TestNumbersThatJSONLacksAreNotWritten(t *testing.T) {
	_, err := one.Encode(sample{Inner: inner{Pair: [2]float64{1, math.Inf(1)}}})
	if err == nil || err.Error() != "inner.pair[2]: +Inf is no finite number" {
		t.Error(err)
	}
	if _, err := one.Encode(sample{Words: []string{"\xff"}}); err == nil || err.Error() != "words[1]: the text is not UTF-8" {
		t.Error(err)
	}
	if _, err := one.Encode(sample{Text: strings.Repeat("x", 2<<20)}); err == nil {
		t.Error("a file that could not be read is written")
	}
}

// limited refuses counts over ten.
type limited sample

func (l limited) Check() error {
	if l.Count > 10 {
		return Wrong("count", "%d is too large", l.Count)
	}
	if l.Inner.Pair[1] > 1 {
		return Wrong("inner.pair[2]", "too large")
	}
	return nil
}

func TestLimitsAreToldWithTheirLine(t *testing.T) {
	for text, want := range map[string]string{
		"{\"version\": 1,\n\n\"count\": 11}":                  "f:3: count: 11 is too large",
		"{\"version\": 1,\n\"inner\": {\n\"pair\":\n[1, 2]}}": "f:4: inner.pair[2]: too large",
	} {
		if err := one.Decode([]byte(text), "f", &limited{}); err == nil || err.Error() != want {
			t.Errorf("%v, want %s", err, want)
		}
	}
	if _, err := one.Encode(limited{Count: 12}); err == nil || err.Error() != "count: 12 is too large" {
		t.Error(err)
	}
}

// TestOlderFilesAreReadForEver: a form that has come to version 3 reads what
// versions 1 and 2 wrote.
func TestOlderFilesAreReadForEver(t *testing.T) {
	three := Form{Version: 3, MaxBytes: 1 << 20, Steps: []Step{
		func(root *Node) error { // 1 → 2: "title" became "name"
			root.Put("name", root.Take("title"))
			return nil
		},
		func(root *Node) error { // 2 → 3: the weight moved into an object
			if w := root.Take("weight"); w != nil {
				if w.Kind != Number {
					return &Error{Line: w.Line, Key: "weight", What: message.Words("a number is due")}
				}
				root.Put("inner", &Node{Kind: Object, Line: w.Line, Members: []Member{{"weight", w}}})
			}
			return nil
		},
	}}
	for _, text := range []string{
		`{"version": 1, "title": "t", "weight": 2}`,
		`{"version": 2, "name": "t", "weight": 2}`,
		`{"version": 3, "name": "t", "inner": {"weight": 2}}`,
	} {
		var s sample
		if err := three.Decode([]byte(text), "f", &s); err != nil || s.Name != "t" || s.Inner.Weight != 2 {
			t.Errorf("%s: %v %#v", text, err, s)
		}
	}
	if err := three.Decode([]byte("{\"version\": 2,\n \"weight\": \"x\"}"), "f", &sample{}); err == nil || err.Error() != "f:2: weight: a number is due" {
		t.Error(err)
	}
	if err := three.Decode([]byte(`{"version": 3, "title": "t"}`), "f", &sample{}); err == nil {
		t.Error("a new file with an old key is read")
	}
}
