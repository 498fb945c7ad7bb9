package main_test

import (
	"fmt"
	"go/parser"
	"go/token"
	"io/fs"
	"os"
	"path"
	"slices"
	"strconv"
	"strings"
	"testing"
	"testing/fstest"
)

// This file holds the arrows of the project: which package may know which. Whoever needs a new arrow changes the
// tables here and says why.

const module = "lobewright"

// topLevel is all that stands at the top, beside hidden files and what .gitignore names.
var topLevel = []string{"app", "render", "symmetry", "orbitals", "assets", "testdata",
	"README.md", "DEVELOPERS.md", "Makefile", "go.mod", "go.sum"}

// madeHere is what the Makefile puts at the top.
var madeHere = []string{"lobewright", "out"}

// knows says which other folders at the top a folder may import. app may import all.
var knows = map[string][]string{
	"symmetry": {},
	"render":   {},
	"assets":   {},
	"orbitals": {"symmetry"},
	"app":      {"symmetry", "render", "assets", "orbitals"},
}

// rooms says which other rooms of app a room may import. A study is plain values, so whoever may know what is
// worked out from it may also name it.
var rooms = map[string][]string{
	"notation": {},
	"study":    {},
	"files":    {},
	"session":  {"study", "files"},
	"work":     {"study"},
	"picture":  {"study", "work", "notation"},
	"table":    {"study", "work", "notation"},
	"sheet":    {"study", "work", "notation", "picture"},
	"export":   {"study", "sheet", "picture", "files"},
	"command":  {"notation", "study", "session", "work", "picture", "table", "sheet", "export", "files"},
	"window":   {"notation", "study", "session", "work", "picture", "table", "sheet", "export", "files"},
}

// onlyWindow are imports that app/window alone may have: the toolkit, and C, which needs a C compiler.
func onlyWindow(imported string) bool {
	return imported == "C" || strings.HasPrefix(imported, "fyne.io/")
}

// brokenArrows returns a line for each import that breaks an arrow and each entry that has no place, sorted.
func brokenArrows(tree fs.FS) ([]string, error) {
	var out []string
	entries, err := fs.ReadDir(tree, ".")
	if err != nil {
		return nil, err
	}
	for _, e := range entries {
		name := e.Name()
		if !strings.HasPrefix(name, ".") && !slices.Contains(topLevel, name) && !slices.Contains(madeHere, name) {
			out = append(out, name+": nothing else may stand at the top")
		}
	}
	err = fs.WalkDir(tree, ".", func(file string, e fs.DirEntry, err error) error {
		switch {
		case err != nil:
			return err
		case e.IsDir() && (e.Name() == "testdata" || file != "." && strings.HasPrefix(e.Name(), ".")):
			return fs.SkipDir
		case e.IsDir() || path.Ext(file) != ".go":
			return nil
		}
		text, err := fs.ReadFile(tree, file)
		if err != nil {
			return err
		}
		parsed, err := parser.ParseFile(token.NewFileSet(), file, text, parser.ImportsOnly)
		if err != nil {
			return err
		}
		for _, spec := range parsed.Imports {
			imported, err := strconv.Unquote(spec.Path.Value)
			if err != nil {
				return err
			}
			if why := breaks(path.Dir(file), imported); why != "" {
				out = append(out, fmt.Sprintf("%s: imports %s; %s", file, imported, why))
			}
		}
		return nil
	})
	slices.Sort(out)
	return out, err
}

// breaks tells why a folder may not have an import; "" if it may.
func breaks(folder, imported string) string {
	if onlyWindow(imported) && folder != "app/window" && !strings.HasPrefix(folder, "app/window/") {
		return "only app/window may"
	}
	target, ok := strings.CutPrefix(imported, module+"/")
	if !ok {
		return ""
	}
	from, fromRest, _ := strings.Cut(folder, "/")
	to, toRest, _ := strings.Cut(target, "/")
	if from != to {
		return missing(knows, from, from, to)
	}
	if from != "app" {
		return ""
	}
	fromRoom, _, _ := strings.Cut(fromRest, "/")
	toRoom, _, _ := strings.Cut(toRest, "/")
	switch {
	case fromRoom == "" || fromRoom == toRoom: // the program itself knows all
		return ""
	case toRoom == "":
		return "nobody knows the program itself"
	}
	return missing(rooms, fromRoom, "app/"+fromRoom, toRoom)
}

// missing tells why a table has no arrow from one entry to another.
func missing(table map[string][]string, from, name, to string) string {
	known, ok := table[from]
	switch {
	case !ok:
		return name + " is in no table of arrows"
	case slices.Contains(known, to):
		return ""
	case len(known) == 0:
		return name + " may know none of the others"
	}
	return name + " may know only " + strings.Join(known, ", ")
}

func TestNobodyKnowsMoreThanItMay(t *testing.T) {
	broken, err := brokenArrows(os.DirFS(".."))
	if err != nil {
		t.Fatal(err)
	}
	for _, b := range broken {
		t.Error(b)
	}
}

func source(imports ...string) *fstest.MapFile {
	text := "package p\n"
	for _, i := range imports {
		text += "import " + strconv.Quote(i) + "\n"
	}
	return &fstest.MapFile{Data: []byte(text)}
}

func TestABrokenArrowIsNamed(t *testing.T) {
	cases := []struct {
		file string
		from *fstest.MapFile
		want string // "" if the import is right
	}{
		{"symmetry/a.go", source("lobewright/orbitals"), "symmetry/a.go: imports lobewright/orbitals; symmetry may know none of the others"},
		{"symmetry/a_test.go", source("lobewright/assets"), "symmetry/a_test.go: imports lobewright/assets; symmetry may know none of the others"},
		{"symmetry/inner/a.go", source("lobewright/symmetry"), ""},
		{"render/a.go", source("lobewright/app/notation"), "render/a.go: imports lobewright/app/notation; render may know none of the others"},
		{"assets/a.go", source("lobewright/render"), "assets/a.go: imports lobewright/render; assets may know none of the others"},
		{"orbitals/a.go", source("lobewright/symmetry", "math"), ""},
		{"orbitals/structure/a.go", source("lobewright/symmetry"), ""},
		{"orbitals/structure/a.go", source("lobewright/assets"), "orbitals/structure/a.go: imports lobewright/assets; orbitals may know only symmetry"},
		{"orbitals/a.go", source("lobewright/app/work"), "orbitals/a.go: imports lobewright/app/work; orbitals may know only symmetry"},
		{"app/main.go", source("lobewright/app/command", "lobewright/app/window", "lobewright/render"), ""},
		{"app/notation/a.go", source("lobewright/symmetry"), ""},
		{"app/notation/a.go", source("lobewright/app/study"), "app/notation/a.go: imports lobewright/app/study; app/notation may know none of the others"},
		{"app/work/a.go", source("lobewright/app/study", "lobewright/orbitals"), ""},
		{"app/work/a.go", source("lobewright/app/table"), "app/work/a.go: imports lobewright/app/table; app/work may know only study"},
		{"app/picture/a.go", source("lobewright/app/work", "lobewright/app/notation", "lobewright/render"), ""},
		{"app/picture/a.go", source("lobewright/app/sheet"), "app/picture/a.go: imports lobewright/app/sheet; app/picture may know only study, work, notation"},
		{"app/export/a.go", source("lobewright/app/work"), "app/export/a.go: imports lobewright/app/work; app/export may know only study, sheet, picture, files"},
		{"app/command/a.go", source("lobewright/app/window"), "app/command/a.go: imports lobewright/app/window; app/command may know only notation, study, session, work, picture, table, sheet, export, files"},
		{"app/window/a.go", source("lobewright/app/command"), "app/window/a.go: imports lobewright/app/command; app/window may know only notation, study, session, work, picture, table, sheet, export, files"},
		{"app/window/a.go", source("lobewright/app"), "app/window/a.go: imports lobewright/app; nobody knows the program itself"},
		{"app/extra/a.go", source("lobewright/app/study"), "app/extra/a.go: imports lobewright/app/study; app/extra is in no table of arrows"},
		{"app/window/a.go", source("fyne.io/fyne/v2", "C"), ""},
		{"app/window/panel/a.go", source("fyne.io/fyne/v2"), ""},
		{"app/command/a.go", source("fyne.io/fyne/v2/lang"), "app/command/a.go: imports fyne.io/fyne/v2/lang; only app/window may"},
		{"render/a.go", source("C"), "render/a.go: imports C; only app/window may"},
		{"util/a.go", source("math"), "util: nothing else may stand at the top"},
		{"app/work/testdata/a.go", source("lobewright/app/window"), ""},
	}
	for _, c := range cases {
		broken, err := brokenArrows(fstest.MapFS{c.file: c.from, "go.mod": {}, ".gitignore": {}})
		if err != nil {
			t.Fatal(err)
		}
		if got := strings.Join(broken, "\n"); got != c.want {
			t.Errorf("\n got %s\nwant %s", got, c.want)
		}
	}
}
