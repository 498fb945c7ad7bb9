package assets

import (
	"embed"
	"encoding/json"
	"fmt"
	"io/fs"
	"path"
	"slices"
	"strings"
	"sync"
)

// A Language is one in which the window speaks.
type Language string

// The languages.
const (
	English Language = "en"
	German  Language = "de"
)

// Languages lists all languages, English first.
func Languages() []Language { return []Language{English, German} }

// LanguageOf chooses the language of a locale such as "de_AT.UTF-8" or
// "de-CH". Every locale but the German ones gets English.
func LanguageOf(locale string) Language {
	base, _, _ := strings.Cut(locale, ".")
	base, _, _ = strings.Cut(strings.ReplaceAll(base, "-", "_"), "_")
	if strings.EqualFold(base, string(German)) {
		return German
	}
	return English
}

//go:embed texts
var textFiles embed.FS

// Texts are all texts of one language by their keys. A key begins with the
// name of its file: "ledger.sum" stands in texts/en/ledger.json as "sum".
type Texts map[string]string

// TextsIn returns the texts of a language. The map is shared and must not be
// changed.
func TextsIn(l Language) Texts {
	if l == German {
		return germanTexts()
	}
	return englishTexts()
}

var (
	englishTexts = sync.OnceValue(func() Texts { return readTexts(English) })
	germanTexts  = sync.OnceValue(func() Texts { return readTexts(German) })
)

// Say is the text of a key. Arguments are put in as fmt.Sprintf does; a text
// that needs them in another order counts them: %[2]s. A key without a text is
// a fault of the program, which shows as the key itself.
func (t Texts) Say(key string, arguments ...any) string {
	text, known := t[key]
	switch {
	case !known:
		return key
	case len(arguments) == 0:
		return text
	}
	return fmt.Sprintf(text, arguments...)
}

// Keys lists the keys in their order.
func (t Texts) Keys() []string {
	keys := make([]string, 0, len(t))
	for key := range t {
		keys = append(keys, key)
	}
	slices.Sort(keys)
	return keys
}

// readTexts reads what is embedded; texts_test.go holds that it can be read.
func readTexts(l Language) Texts {
	out := Texts{}
	folder := path.Join("texts", string(l))
	files, _ := fs.ReadDir(textFiles, folder)
	for _, file := range files {
		data, err := textFiles.ReadFile(path.Join(folder, file.Name()))
		var texts map[string]string
		if err == nil {
			err = json.Unmarshal(data, &texts)
		}
		if err != nil {
			panic("assets: " + folder + "/" + file.Name() + ": " + err.Error())
		}
		name := strings.TrimSuffix(file.Name(), ".json")
		for key, text := range texts {
			out[name+"."+key] = text
		}
	}
	return out
}
