package main_test

import (
	"context"
	"go/ast"
	"go/parser"
	"go/token"
	"io/fs"
	"os"
	"path"
	"path/filepath"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"testing"

	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/assets"
	"lobewright/orbitals/structure"
	"lobewright/symmetry/message"
)

// speaking are the folders whose errors and messages a person may read in the window. The commands speak English
// alone; errors of render and assets are faults of this program.
var speaking = []string{"symmetry", "orbitals", "app/work", "app/study", "app/session", "app/files", "app/notation",
	"app/picture", "app/table", "app/sheet", "app/export"}

// A wrapper is a function that hands a form on to package message.
type wrapper struct {
	folder string // where it can be called by its name alone, or as a method
	name   string
	at     int // the argument that is the form
}

// forms finds every form in the sources of the folders that speak, with a place where it stands, and reports what keeps
// a form from being found.
func forms(t *testing.T) map[string]token.Position {
	t.Helper()
	set := token.NewFileSet()
	files := map[string][]*ast.File{}
	for _, folder := range speaking {
		err := filepath.WalkDir(filepath.Join("..", folder), func(file string, e fs.DirEntry, err error) error {
			if err != nil || e.IsDir() || path.Ext(file) != ".go" || strings.HasSuffix(file, "_test.go") {
				return err
			}
			parsed, err := parser.ParseFile(set, file, nil, parser.SkipObjectResolution)
			files[filepath.Dir(file)] = append(files[filepath.Dir(file)], parsed)
			return err
		})
		if err != nil {
			t.Fatal(err)
		}
	}
	delete(files, filepath.Join("..", "symmetry", "message"))
	known := []wrapper{{"", "message.Words", 0}, {"", "message.Errorf", 0}}
	for before := 0; before < len(known); {
		before = len(known)
		for folder, list := range files {
			for _, f := range list {
				known = wrappersIn(f, folder, known)
			}
		}
	}
	out := map[string]token.Position{}
	for folder, list := range files {
		for _, f := range list {
			for _, decl := range f.Decls {
				formsIn(t, set, decl, folder, known, out)
			}
		}
	}
	return out
}

// wrappersIn adds the functions of a file that hand their own form on.
func wrappersIn(f *ast.File, folder string, known []wrapper) []wrapper {
	for _, decl := range f.Decls {
		fn, ok := decl.(*ast.FuncDecl)
		if !ok || fn.Body == nil {
			continue
		}
		at, own := ownForm(fn)
		if at < 0 {
			continue
		}
		ast.Inspect(fn.Body, func(n ast.Node) bool {
			if call, ok := n.(*ast.CallExpr); ok {
				if form := formOf(call, folder, known); form != nil {
					id, ok := form.(*ast.Ident)
					w := wrapper{folder, fn.Name.Name, at}
					if ok && id.Name == own && !slices.Contains(known, w) {
						known = append(known, w)
					}
				}
			}
			return true
		})
	}
	return known
}

// ownForm is the parameter of a function before its last one, which takes any number of any values; -1 if it is no such
// function.
func ownForm(fn *ast.FuncDecl) (int, string) {
	var names []string
	for _, field := range fn.Type.Params.List {
		for _, n := range field.Names {
			names = append(names, n.Name)
		}
	}
	list := fn.Type.Params.List
	if len(names) < 2 {
		return -1, ""
	}
	if _, variadic := list[len(list)-1].Type.(*ast.Ellipsis); !variadic {
		return -1, ""
	}
	return len(names) - 2, names[len(names)-2]
}

// formOf is the form of a call of a wrapper, or nil.
func formOf(call *ast.CallExpr, folder string, known []wrapper) ast.Expr {
	name, qualified := "", ""
	switch f := call.Fun.(type) {
	case *ast.Ident:
		name = f.Name
	case *ast.SelectorExpr:
		name = f.Sel.Name
		if x, ok := f.X.(*ast.Ident); ok {
			qualified = x.Name + "." + name
		}
	}
	for _, w := range known {
		exported := ast.IsExported(w.name) && path.Base(filepath.ToSlash(w.folder))+"."+w.name == qualified
		if (w.folder == "" && w.name == qualified || w.folder == folder && w.name == name || exported) && len(call.Args) > w.at {
			return call.Args[w.at]
		}
	}
	return nil
}

// formsIn notes the forms of a declaration.
func formsIn(t *testing.T, set *token.FileSet, decl ast.Decl, folder string, known []wrapper, out map[string]token.Position) {
	own := ""
	if fn, ok := decl.(*ast.FuncDecl); ok {
		_, own = ownForm(fn)
	}
	ast.Inspect(decl, func(n ast.Node) bool {
		call, ok := n.(*ast.CallExpr)
		if !ok {
			return true
		}
		if s, ok := call.Fun.(*ast.SelectorExpr); ok {
			if x, ok := s.X.(*ast.Ident); ok && (x.Name == "fmt" && s.Sel.Name == "Errorf" || x.Name == "errors" && s.Sel.Name == "New") {
				t.Errorf("%v: make errors that a person may read with message.Errorf", set.Position(call.Pos()))
			}
		}
		form := formOf(call, folder, known)
		if form == nil {
			return true
		}
		if id, ok := form.(*ast.Ident); ok && id.Name == own {
			return true
		}
		text, ok := constant(form)
		if !ok {
			t.Errorf("%v: the form must stand here as a text", set.Position(form.Pos()))
		}
		out[text] = set.Position(form.Pos())
		return true
	})
}

// constant is the text of a literal or of a sum of literals.
func constant(e ast.Expr) (string, bool) {
	switch e := e.(type) {
	case *ast.BasicLit:
		text, err := strconv.Unquote(e.Value)
		return text, err == nil
	case *ast.BinaryExpr:
		a, ok := constant(e.X)
		b, too := constant(e.Y)
		return a + b, ok && too
	}
	return "", false
}

var (
	verbOfForm = regexp.MustCompile(`%(\[\d+\])?[-+#0 ]*[\d.]*(\[\d+\])?[a-zA-Z]`)
	aLetter    = regexp.MustCompile(`\pL`)
)

// gaps lists which argument stands in which verb, sorted. That an error is wrapped makes no difference.
func gaps(form string) []string {
	form = strings.ReplaceAll(form, "%%", "")
	var out []string
	next := 1
	for _, v := range verbOfForm.FindAllString(form, -1) {
		at := next
		if i, j := strings.Index(v, "["), strings.Index(v, "]"); i > 0 {
			at, _ = strconv.Atoi(v[i+1 : j])
			v = v[:i] + v[j+1:]
		}
		next = at + 1
		out = append(out, strconv.Itoa(at)+" "+strings.NewReplacer("w", "s", "v", "s").Replace(v))
	}
	slices.Sort(out)
	return slices.Compact(out)
}

// needsWords tells whether a form says anything by itself.
func needsWords(form string) bool {
	return aLetter.MatchString(verbOfForm.ReplaceAllString(form, ""))
}

func TestEveryMessageIsSaidInGermanAndNoneIsLeftOver(t *testing.T) {
	german := assets.Sentences(assets.German)
	used := forms(t)
	for form, at := range used {
		text, known := german[form]
		switch {
		case !needsWords(form):
		case !known:
			t.Errorf("%v: %q has no German form in assets/sentences/de", at, form)
		case !slices.Equal(gaps(form), gaps(text)):
			t.Errorf("%q: %v, but in German %v", form, gaps(form), gaps(text))
		}
	}
	for form := range german {
		if _, found := used[form]; !found && !slices.Contains(assets.SystemSentences(assets.German), form) {
			t.Errorf("%q is said nowhere", form)
		}
	}
	if len(used) < 200 {
		t.Errorf("only %d forms were found", len(used))
	}
}

func TestGapsAreComparedByTheirArguments(t *testing.T) {
	for _, c := range []struct {
		a, b string
		same bool
	}{
		{"%s of %d", "von %[2]d ist %[1]s", true},
		{"%s: %w", "%v: %s", true},
		{"%.2f %%", "%.2f %%", true},
		{"%.2f", "%.3f", false},
		{"%s of %d", "%s von %s", false},
		{"%s", "", false},
		{"%s %s", "%[2]s %[2]s", false},
	} {
		if got := slices.Equal(gaps(c.a), gaps(c.b)); got != c.same {
			t.Errorf("%q, %q: %v", c.a, c.b, got)
		}
	}
}

// What is put into the gaps of a message, such as what would be possible, is German too.
func TestRefusalsAreGermanToTheLastWord(t *testing.T) {
	folder := t.TempDir()
	write := func(name, text string) string {
		path := filepath.Join(folder, name)
		if err := os.WriteFile(path, []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
		return path
	}
	german := &message.Language{Forms: assets.Sentences(assets.German), Point: ",", Thousands: "."}
	w := work.New(structure.Inputs{Demo: assets.Demos()})
	octahedron := study.Study{Structure: "ideal:OC-6,Co,F"}
	with := func(change func(*study.Study)) study.Study {
		s := octahedron
		change(&s)
		return s
	}
	file := func(name, text string) study.Study { return study.Study{Structure: write(name, text)} }
	basis := func(choices ...string) study.Study { return with(func(s *study.Study) { s.Basis = choices }) }
	orbital := func(p study.Projection) study.Study {
		return with(func(s *study.Study) { s.Basis, s.Projection = []string{"F:sigma"}, p })
	}
	wrong := []study.Study{
		{Structure: filepath.Join(folder, "none.xyz")}, {Structure: folder}, {Structure: "demo:nothing"}, {Structure: "ideal:XX-3"},
		{Structure: "ideal:OC-6,Co,F,0.01"}, {Structure: "ideal:OC-6,Qq"}, {Structure: "ideal:ring-2"}, {Structure: "ideal:OC-6,Co,F,far"},
		file("empty.xyz", ""), file("word.xyz", "many\n"), file("short.xyz", "3\n\nO 0 0 0\n"), file("long.xyz", "1\n\nO 0 0 0\nO 0 0 2\n"),
		file("comma.xyz", "1\n\nO 0,5 0 0\n"), file("nan.xyz", "1\n\nO nan 0 0\n"), file("far.xyz", "1\n\nO 1e9 0 0\n"),
		file("spot.xyz", "2\n\nO 0 0 0\nH 0 0 0.01\n"), file("element.xyz", "1\n\nQq 0 0 0\n"), file("many.xyz", "20001\n\n"),
		file("binary.xyz", "\x00\x01\x02\x03"), file("zero.xyz", "0\n\n"), file("label.xyz", "1\n\nC12ab 0 0 0\n"),
		with(func(s *study.Study) { s.Core = "Fe" }), with(func(s *study.Study) { s.Core = "9" }), with(func(s *study.Study) { s.Core = "4-2" }),
		with(func(s *study.Study) { s.Core = "?" }), with(func(s *study.Study) { s.Core, s.Ignore = "F", "F" }),
		with(func(s *study.Study) { s.Tolerance = 2 }), with(func(s *study.Study) { s.As = "D5h" }), with(func(s *study.Study) { s.As = "Oh:7" }),
		with(func(s *study.Study) { s.As = "S3" }), with(func(s *study.Study) { s.As = "Q5" }), with(func(s *study.Study) { s.As = "D99h" }),
		with(func(s *study.Study) { s.Frame = "nothing" }), with(func(s *study.Study) { s.Z = "1,2,3" }), with(func(s *study.Study) { s.Z = "1" }),
		with(func(s *study.Study) { s.Z = "2,2" }), with(func(s *study.Study) { s.Z = "0,0,0" }), with(func(s *study.Study) { s.Z = "C7" }),
		with(func(s *study.Study) { s.Z = "i" }), with(func(s *study.Study) { s.Z = "99" }), with(func(s *study.Study) { s.Z = "1,2,3,4" }),
		with(func(s *study.Study) { s.Z, s.X = "C4(z)", "C4(z)" }), with(func(s *study.Study) { s.Z, s.X = "C4(z)", "0.3,1,0" }),
		{Structure: "demo:water", Z: "0.3,1,0"}, {Structure: "ideal:L-2", X: "C2"},
		basis("F"), basis("F:"), basis(":s"), basis("F:q"), basis("F:dq"), basis("F:s@1"), basis("F:pi@"), basis("orbit:9:s"), basis("F:sigma", "F:p"),
		basis("Co:sigma"), basis("F:sigma@2"),
		orbital(study.Projection{Irrep: "B7", Function: 1}), orbital(study.Projection{Irrep: "A2g", Function: 1}),
		orbital(study.Projection{Irrep: "Eg", Function: 1, Copy: 4}), orbital(study.Projection{Irrep: "Eg", Function: 1, Partner: 5}),
		orbital(study.Projection{Irrep: "Eg", Function: 40}), orbital(study.Projection{Irrep: "Eg", Function: 1, Element: [2]int{1, 7}}),
		with(func(s *study.Study) { s.Operation = "C9" }), with(func(s *study.Study) { s.Basis, s.Central = []string{"F:sigma"}, 4 }),
		with(func(s *study.Study) { s.Basis, s.Central = []string{"F:sigma"}, 40 }),
	}
	english := regexp.MustCompile(`(?i)\b(the|is|are|of|and|or|to|no|not|with|has|there|cannot|it|possible|such|choose|write|expected|atoms|line|at|most)\b`)
	seen := map[string]bool{}
	for _, s := range wrong {
		err := refusal(w, s)
		if err == nil {
			t.Errorf("%+v is taken", s)
			continue
		}
		text := strings.ReplaceAll(message.In(err, german), folder, "")
		if english.MatchString(text) {
			t.Errorf("%q for %q", text, err.Error())
		}
		seen[text] = true
	}
	if len(seen) < 50 {
		t.Errorf("only %d differ", len(seen))
	}
}

// refusal is what is wrong with a study, however far its results can be found.
func refusal(w *work.Work, s study.Study) error {
	ctx := context.Background()
	if _, err := w.Group(ctx, s); err != nil {
		return err
	}
	if s.Operation != "" {
		_, err := w.Play(ctx, s)
		return err
	}
	o, err := w.Orbitals(ctx, s)
	if err != nil {
		return err
	}
	if s.Central != 0 {
		m, err := w.Match(ctx, s)
		if err == nil {
			err = m.None
		}
		return err
	}
	if s.Projection.Function > 0 {
		if _, err := w.Ledger(ctx, s); err != nil {
			return err
		}
	}
	_, err = o.Orbital(s.Projection)
	return err
}
