//go:build cgo && !nowindow

package window

import (
	"go/ast"
	"go/parser"
	"go/token"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"testing"

	"lobewright/app/notation"
	"lobewright/assets"
)

// literals calls a function for every string literal of the package's own
// files, with the nodes that it stands in, the outermost first.
func literals(t *testing.T, f func(file string, position token.Position, text string, within []ast.Node)) {
	t.Helper()
	names, err := filepath.Glob("*.go")
	if err != nil {
		t.Fatal(err)
	}
	set := token.NewFileSet()
	for _, name := range names {
		if strings.HasSuffix(name, "_test.go") {
			continue
		}
		file, err := parser.ParseFile(set, name, nil, 0)
		if err != nil {
			t.Fatal(err)
		}
		var within []ast.Node
		ast.Inspect(file, func(n ast.Node) bool {
			if n == nil {
				within = within[:len(within)-1]
				return true
			}
			if l, ok := n.(*ast.BasicLit); ok && l.Kind == token.STRING {
				if text, err := strconv.Unquote(l.Value); err == nil {
					f(name, set.Position(l.Pos()), text, within)
				}
			}
			within = append(within, n)
			return true
		})
	}
}

// regions are the files of texts that the window uses.
func regions() []string {
	var out []string
	for _, key := range assets.TextsIn(assets.English).Keys() {
		region, _, _ := strings.Cut(key, ".")
		if !slices.Contains(out, region) {
			out = append(out, region)
		}
	}
	return out
}

// Keys are written out whole wherever they stand, so that they can be found.
func TestEveryKeyHasATextAndEveryTextIsUsed(t *testing.T) {
	english := assets.TextsIn(assets.English)
	key := regexp.MustCompile(`^(` + strings.Join(regions(), "|") + `)\.[a-z][A-Za-z0-9]*$`)
	used := map[string]bool{}
	literals(t, func(_ string, at token.Position, text string, within []ast.Node) {
		if called(within) == "say" && !key.MatchString(text) {
			if call := within[len(within)-1].(*ast.CallExpr); call.Args[0].Pos() == literalAt(call, text) {
				t.Errorf("%v: say needs a key, not %q", at, text)
			}
		}
		if !key.MatchString(text) {
			return
		}
		used[text] = true
		for _, l := range assets.Languages() {
			if _, known := assets.TextsIn(l)[text]; !known {
				t.Errorf("%v: %q has no text in %q", at, text, l)
			}
		}
	})
	rooms, err := filepath.Glob("../*/*.go")
	if err != nil {
		t.Fatal(err)
	}
	quoted := regexp.MustCompile(`"([a-z]+\.[a-z][A-Za-z0-9]*)"`)
	for _, file := range rooms {
		if strings.HasSuffix(file, "_test.go") {
			continue
		}
		text, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		for _, m := range quoted.FindAllStringSubmatch(string(text), -1) {
			used[m[1]] = true
		}
	}
	for _, k := range english.Keys() {
		if !used[k] {
			t.Errorf("%q is used nowhere", k)
		}
	}
	if len(used) < 100 {
		t.Errorf("only %d keys were found", len(used))
	}
}

// literalAt is the place of the first argument if it is that literal.
func literalAt(call *ast.CallExpr, text string) token.Pos {
	if l, ok := call.Args[0].(*ast.BasicLit); ok && l.Kind == token.STRING {
		if s, err := strconv.Unquote(l.Value); err == nil && s == text {
			return l.Pos()
		}
	}
	return token.NoPos
}

// called names the function whose argument a literal is, alone or as part of a
// sum.
func called(within []ast.Node) string {
	for i := len(within) - 1; i >= 0; i-- {
		switch n := within[i].(type) {
		case *ast.BinaryExpr, *ast.ParenExpr:
		case *ast.CallExpr:
			switch f := n.Fun.(type) {
			case *ast.Ident:
				return f.Name
			case *ast.SelectorExpr:
				return f.Sel.Name
			}
			return ""
		default:
			return ""
		}
	}
	return ""
}

// showing are functions whose literals a person would read.
var showing = []string{
	"Words", "newSheetButton", "NewLabel", "NewLabelWithStyle", "NewButton", "NewButtonWithIcon", "NewCheck", "NewMenuItem", "NewMenu", "NewText",
	"NewEntry", "SetPlaceHolder", "SetText", "ask", "askLater", "askPath", "askNewPath", "showText", "showSheet", "words", "heading", "New", "Sprintf",
	"Sprint", "Errorf", "NewSelect", "NewRadioGroup",
}

// shownFields are fields whose literals a person would read.
var shownFields = []string{"hint", "label", "title", "Text", "Label", "PlaceHolder"}

// onTerminal are files whose messages appear where the program was started, in
// the language of the commands.
var onTerminal = []string{"run.go", "display.go", "missing.go", "options.go", "clock_linux.go", "clock_other.go"}

var (
	word     = regexp.MustCompile(`[A-Za-z]{3,}`)
	sentence = regexp.MustCompile(`[A-Za-z]+,? [a-z]+ [a-z]+`)
)

// No text for people stands in the code: no word where something is shown, and
// no three words in a row anywhere.
func TestTheCodeHoldsNoTextsForPeople(t *testing.T) {
	literals(t, func(file string, at token.Position, text string, within []ast.Node) {
		if slices.Contains(onTerminal, file) {
			return
		}
		if sentence.MatchString(text) && !printed(within) {
			t.Errorf("%v: %q belongs to assets/texts", at, text)
			return
		}
		if _, key := assets.TextsIn(assets.English)[text]; key || !word.MatchString(text) || slices.Contains(noWords, text) {
			return
		}
		shown := slices.Contains(showing, called(within))
		for _, n := range within {
			if k, ok := n.(*ast.KeyValueExpr); ok {
				name, _ := k.Key.(*ast.Ident)
				// Only the value itself, or a sum that it is part of.
				shown = shown || name != nil && slices.Contains(shownFields, name.Name) && sumOnly(k.Value, within)
			}
		}
		if shown {
			t.Errorf("%v: %q belongs to assets/texts", at, text)
		}
	})
}

// noWords are names that are the same in every language, or that nobody sees.
var noWords = []string{"Lobewright", "Lobewright ", "picture.png", "orbital %d %d %d"}

// sumOnly tells whether a literal is part of a value by sums alone.
func sumOnly(value ast.Expr, within []ast.Node) bool {
	at := slices.Index(within, ast.Node(value))
	if at < 0 {
		return true
	}
	for _, n := range within[at:] {
		if _, ok := n.(*ast.BinaryExpr); !ok {
			return false
		}
	}
	return true
}

// printed tells whether a literal goes to the terminal.
func printed(within []ast.Node) bool {
	name := called(within)
	return strings.HasPrefix(name, "Fprint") || strings.HasPrefix(name, "Print") || name == "panic" || name == "mark"
}

func TestPartsStandInSentences(t *testing.T) {
	got := fill("{} carries {} into {}", notation.Words("a"), notation.Words("b"), notation.Words("c")).String()
	if got != "a carries b into c" {
		t.Error(got)
	}
}

func TestTheWholeWindowSpeaksTheChosenLanguage(t *testing.T) {
	defer speak(assets.English)
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	b.setLanguage(string(assets.German))
	if got := b.win.MainMenu().Items[0].Label; got != "Datei" {
		t.Errorf("the first menu is %q", got)
	}
	said := b.sentence().String()
	if !strings.Contains(said, "aus ") && !strings.Contains(said, "führt") {
		t.Errorf("it says %q", said)
	}
	english := regexp.MustCompile(`\b(the|of|and|with|along|rule|axis|are|operations|functions|on)\b`)
	for _, p := range []*pane{b.given, b.follows, b.detail, b.ledger, b.said} {
		board := p.lay()
		for _, s := range board.scene.Shapes {
			// The title of the molecule is the file's.
			if text := textOf(s.Geometry); english.MatchString(text) && !strings.Contains(b.state.Group.Molecule.Title, strings.TrimSpace(text)) {
				t.Errorf("it shows %q", text)
			}
		}
		for _, s := range board.spots {
			if english.MatchString(s.hint) {
				t.Errorf("it hints %q", s.hint)
			}
		}
	}
	if kept := b.session.Preferences().Language; kept != "de" {
		t.Errorf("%q is kept", kept)
	}
	b.setLanguage(string(assets.English))
	if got := b.win.MainMenu().Items[0].Label; got != "File" {
		t.Errorf("the first menu is %q", got)
	}
}
