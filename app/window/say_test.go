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

	"fyne.io/fyne/v2/lang"

	"lobewright/app/notation"
	"lobewright/app/study"
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

// The words of the menu of an entry, which the toolkit makes, follow at once,
// whatever the language of the system.
func TestTheToolkitSpeaksTheChosenLanguage(t *testing.T) {
	defer func() {
		speak(assets.English)
		speakToolkit()
	}()
	b := newBench(t, t.TempDir())
	for _, l := range []assets.Language{assets.German, assets.English, assets.German} {
		b.setLanguage(string(l))
		for english, german := range map[string]string{"Cut": "Ausschneiden", "Copy": "Kopieren", "Paste": "Einfügen", "Select all": "Alles auswählen", "Undo": "Rückgängig"} {
			want := english
			if l == assets.German {
				want = german
			}
			if got := lang.L(english); got != want {
				t.Errorf("%q, want %q", got, want)
			}
		}
	}
}

func TestNumbersOnTheScreenHaveTheDecimalPointOfTheLanguage(t *testing.T) {
	defer speak(assets.English)
	for l, want := range map[assets.Language][]string{
		assets.English: {"0.125", "0.5", "(0.50, 0, −0.25)", "0.408 φ1 − 12.5"},
		assets.German:  {"0,125", "0,5", "(0,50; 0; −0,25)", "0,408 φ1 − 12,5"},
	} {
		speak(l)
		got := []string{decimalText(0.125, 3), plainText(0.5), vectorText([]float64{0.5, 0, -0.25}, 2), spelled("0.408 φ1 − 12.5")}
		if !slices.Equal(got, want) {
			t.Errorf("%q, want %q", got, want)
		}
		for _, typed := range []string{"-1.25", "−1,25 Å", " -1.25Å"} {
			if x, err := readNumber(typed, "Å"); x != -1.25 || err != nil {
				t.Errorf("%q: %v %v", typed, x, err)
			}
		}
	}
	if _, err := readNumber("1,2,3", ""); err == nil {
		t.Error("1,2,3 is taken for a number")
	}
}

// What is refused is said in German, with the numbers of German.
func TestRefusalsAreGermanInTheGermanWindow(t *testing.T) {
	defer speak(assets.English)
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	b.setLanguage(string(assets.German))
	for want, change := range map[string]func(*study.Study){
		"liegen nur 3,":    func(s *study.Study) { s.Tolerance = 5 },
		"nicht nahe an Ih": func(s *study.Study) { s.As = "Ih" },
		"ist keine Funktion; wählen Sie eine Schale": func(s *study.Study) { s.Basis = []string{"Cl:q"} },
	} {
		s := b.now()
		change(&s)
		b.do(study.StepOpen, s)
		b.until(want, func() bool { return len(b.state.Problems) > 0 && strings.Contains(paneText(b.given), want) })
		b.undo()
		b.until("undone", func() bool { return len(b.state.Problems) == 0 })
	}
}

// paneText is all that a pane shows, its lines joined by blanks.
func paneText(p *pane) string {
	var lines []string
	for _, s := range p.lay().scene.Shapes {
		if text := textOf(s.Geometry); text != "" {
			lines = append(lines, strings.TrimSpace(text))
		}
	}
	return strings.Join(lines, " ")
}
