package assets

import (
	"fmt"
	"io/fs"
	"path"
	"regexp"
	"slices"
	"strings"
	"testing"
)

var verb = regexp.MustCompile(`%(\[\d+\])?[-+# 0]*[\d.]*[a-zA-Z]`)

// verbs lists what the arguments of a text are, in their order.
func verbs(text string) []string {
	text = strings.ReplaceAll(text, "%%", "")
	var out []string
	next := 1
	for _, v := range verb.FindAllString(text, -1) {
		position := next
		if i := strings.Index(v, "]"); i > 0 {
			_, _ = fmt.Sscanf(v, "%%[%d]", &position)
			v = "%" + v[i+1:]
		}
		next = position + 1
		out = append(out, fmt.Sprint(position, v[len(v)-1:]))
	}
	slices.Sort(out)
	return slices.Compact(out)
}

func TestBothLanguagesSayTheSame(t *testing.T) {
	english, german := TextsIn(English), TextsIn(German)
	for _, key := range english.Keys() {
		text, known := german[key]
		switch {
		case !known:
			t.Errorf("%s has no German text", key)
		case text == "" || english[key] == "":
			t.Errorf("%s is empty", key)
		case !slices.Equal(verbs(english[key]), verbs(text)):
			t.Errorf("%s: %v in English, %v in German", key, verbs(english[key]), verbs(text))
		}
	}
	for _, key := range german.Keys() {
		if _, known := english[key]; !known {
			t.Errorf("%s has no English text", key)
		}
	}
	if len(english) == 0 {
		t.Error("there are no texts")
	}
}

func TestEachLanguageHasTheSameFiles(t *testing.T) {
	names := func(l Language) (out []string) {
		files, err := fs.ReadDir(textFiles, path.Join("texts", string(l)))
		if err != nil {
			t.Fatal(err)
		}
		for _, f := range files {
			out = append(out, f.Name())
		}
		return out
	}
	if en, de := names(English), names(German); !slices.Equal(en, de) {
		t.Errorf("%v, %v", en, de)
	}
}

func TestTheSystemsLocaleChoosesTheLanguage(t *testing.T) {
	for locale, want := range map[string]Language{
		"": English, "C": English, "C.UTF-8": English, "en_GB.UTF-8": English, "nl_NL": English, "den": English,
		"de": German, "de_AT.UTF-8": German, "de-CH": German, "DE": German,
	} {
		if got := LanguageOf(locale); got != want {
			t.Errorf("%q: %s", locale, got)
		}
	}
}

func TestArgumentsArePutIn(t *testing.T) {
	texts := Texts{"a": "%[2]s before %[1]s", "b": "100 %"}
	if got := texts.Say("a", "x", "y"); got != "y before x" {
		t.Error(got)
	}
	if got := texts.Say("b"); got != "100 %" {
		t.Error(got)
	}
	if got := texts.Say("none"); got != "none" {
		t.Error(got)
	}
}
