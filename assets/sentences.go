package assets

import (
	"embed"
	"encoding/json"
	"io/fs"
	"maps"
	"path"
	"slices"
	"strings"
	"sync"
)

//go:embed sentences
var sentenceFiles embed.FS

// system is the file of what the operating system says.
const system = "system"

// Sentences are the forms in a language of the messages that the rooms below
// the window make, by their English forms; nil for English. The map is shared
// and must not be changed.
func Sentences(l Language) map[string]string {
	if l != German {
		return nil
	}
	return germanSentences()
}

// SystemSentences lists those of Sentences that no source of this program
// holds, since the operating system says them.
func SystemSentences(l Language) []string {
	if l != German {
		return nil
	}
	return slices.Sorted(maps.Keys(readSentences(German, func(name string) bool { return name == system })))
}

var germanSentences = sync.OnceValue(func() map[string]string {
	return readSentences(German, func(string) bool { return true })
})

// readSentences reads what is embedded; messages_test.go of app holds that it
// can be read.
func readSentences(l Language, wanted func(name string) bool) map[string]string {
	out := map[string]string{}
	folder := path.Join("sentences", string(l))
	files, _ := fs.ReadDir(sentenceFiles, folder)
	for _, file := range files {
		name := strings.TrimSuffix(file.Name(), ".json")
		if !wanted(name) {
			continue
		}
		data, err := sentenceFiles.ReadFile(path.Join(folder, file.Name()))
		var forms map[string]string
		if err == nil {
			err = json.Unmarshal(data, &forms)
		}
		if err != nil {
			panic("assets: " + folder + "/" + file.Name() + ": " + err.Error())
		}
		maps.Copy(out, forms)
	}
	return out
}
