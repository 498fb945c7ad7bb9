//go:build cgo && !nowindow

package window

import (
	"errors"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"

	"lobewright/app/study"
	"lobewright/assets"
)

func TestTheFirstStepsGoAwayForGood(t *testing.T) {
	folder := t.TempDir()
	b := newBench(t, folder)
	b.begin("")
	if !b.steps.pane.Visible() {
		t.Fatal("the first start shows no steps")
	}
	b.until("the demonstration", func() bool { return b.state.Orbitals != nil && b.images.wanted == nil })
	b.chooseFunction(2)
	b.playOperation("C4(z)")
	b.nextOrbital(1)
	if b.steps.at != 3 {
		t.Errorf("doing what they say leads to step %d", b.steps.at+1)
	}
	b.tap(b.steps.pane, "steps close")
	if b.steps.pane.Visible() || !b.session.Preferences().Shown {
		t.Error("they do not go away")
	}
	b.shut()
	b.ui = nil
	again := newBench(t, folder)
	again.begin("")
	if again.steps.pane.Visible() {
		t.Error("they come back")
	}
	again.steps.beginOnDemo()
	for range 4 { // by the keyboard alone
		again.win.Canvas().Focus(again.steps.pane)
		press(again.steps.pane, fyne.KeyEscape)
	}
	if again.steps.pane.Visible() {
		t.Error("Escape does not close them")
	}
}

func TestTheStepsFitTheirCardInEveryLanguage(t *testing.T) {
	defer speak(assets.English)
	b := newBench(t, t.TempDir())
	b.steps.pane.Resize(b.steps.pane.MinSize())
	for _, l := range assets.Languages() {
		speak(l)
		for i := range theSteps() {
			b.steps.at = i
			board := b.steps.pane.lay()
			for _, text := range textsOf(board) {
				if text.left < 0 || text.right > board.width {
					t.Errorf("%s, step %d: %q is cut", l, i+1, text.words)
				}
			}
			lines := len(board.wrapped(words(say(theSteps()[i].text)), board.width-2*pad, style{size: secondSize + 1}))
			if lines > 4 {
				t.Errorf("%s, step %d has %d lines", l, i+1, lines)
			}
		}
	}
}

func TestEveryRegionSaysWhatItIsFor(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("water")
	seen := map[string]bool{}
	for _, o := range []fyne.Focusable{b.given, b.follows, b.detail, b.ledger, b.scrub, b.view, b.basis} {
		b.win.Canvas().Focus(o)
		o.TypedKey(&fyne.KeyEvent{Name: fyne.KeyF1})
		if b.win.Canvas().Overlays().Top() == nil {
			t.Fatalf("%T: F1 says nothing", o)
		}
		b.win.Canvas().Focused().TypedKey(&fyne.KeyEvent{Name: fyne.KeyEscape})
		if b.win.Canvas().Overlays().Top() != nil || b.win.Canvas().Focused() != o {
			t.Errorf("%T: the keyboard does not come back", o)
		}
		title, text := b.regionHelp()
		if n := strings.Count(say(text), ". ") + 1; n != 2 {
			t.Errorf("%s has %d sentences", title, n)
		}
		seen[title] = true
	}
	if len(seen) != 6 {
		t.Errorf("there are texts for %d regions", len(seen))
	}
}

// Every control tells what it does while the pointer rests on it.
func TestEveryControlHasAHint(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("tetrahedron")
	b.openProblem, b.notice = "x", "y"
	for name, p := range map[string]*pane{"left": b.given, "below": b.ledger, "steps": b.steps.pane} {
		if name == "steps" {
			p.Resize(p.MinSize())
		}
		for _, s := range p.lay().spots {
			if s.do != nil && s.hint == "" {
				t.Errorf("%s: %q has no hint", name, s.name)
			}
		}
	}
	for _, h := range []desktop.Hoverable{b.play, b.scrub, b.angle, b.basis} {
		b.hints.show("", fyne.Position{})
		h.MouseIn(&desktop.MouseEvent{})
		if b.hints.text.Text == "" || !b.hints.text.Visible() {
			t.Errorf("%T has no hint", h)
		}
		h.MouseOut()
		if b.hints.text.Visible() {
			t.Errorf("%T: the hint stays", h)
		}
	}
}

// TestAnotherStructureIsSeenFromTheTop opens one and goes back: the panes do
// not stay where those of the other one were scrolled to.
func TestAnotherStructureIsSeenFromTheTop(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("octahedron")
	b.do(study.StepOpen, demoStudy(b.now(), "sandwich-staggered"))
	b.until("the other", func() bool { return b.state.Orbitals != nil && b.now().Equal(b.state.Study) })
	panes := map[string]*pane{"right": b.follows, "below": b.ledger}
	for _, p := range panes {
		p.Resize(fyne.NewSize(240, 180))
		p.lay()
		if p.scrollTo(60); p.scroll == 0 {
			t.Fatal("the pane cannot be scrolled")
		}
	}
	b.undo()
	b.until("the one before", func() bool { return b.now().Structure == "demo:octahedron" && b.now().Equal(b.state.Study) })
	for name, p := range panes {
		if p.scroll != 0 {
			t.Errorf("%s: the pane stands at %g", name, p.scroll)
		}
	}
}

// TestWhatHasNoSumToPlaySaysWhatIsMissing asks for one by one without a function.
func TestWhatHasNoSumToPlaySaysWhatIsMissing(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.do(study.StepOpen, b.now().Opened("demo:water"))
	b.until("the group", func() bool { return b.state.Group != nil })
	b.typed('o')
	if want := b.ledgerNeed(); want == "" || b.hints.text.Text != want {
		t.Errorf("it says %q, want %q", b.hints.text.Text, want)
	}
}

func TestAFileThatChangesOnTheDiskIsNoticed(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.watch.close()
	b.watch = newFileWatch(5*time.Millisecond, b.fileChanged)
	file := filepath.Join(t.TempDir(), "w.xyz")
	write := func(text string) {
		// Whole at once: a look between emptying and writing would see two changes.
		if err := os.WriteFile(file+".new", []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
		if err := os.Rename(file+".new", file); err != nil {
			t.Fatal(err)
		}
	}
	const water = "3\nbent\nO 0 0 0\nH 0 0.76 0.59\nH 0 -0.76 0.59\n"
	write(water)
	b.ui.open(file, nil)
	b.until("the structure", func() bool { return b.state.Group != nil && b.state.Group.Molecule.Title == "bent" })
	b.setBasis([]string{"H:s"})
	seen := func() bool {
		b.watch.mu.Lock()
		defer b.watch.mu.Unlock()
		return b.watch.paths[file] != nil
	}
	b.until("the first look", seen)
	// Written again with the same content, nothing has happened.
	write(water)
	if err := os.Chtimes(file, time.Now(), time.Now().Add(time.Hour)); err != nil {
		t.Fatal(err)
	}
	time.Sleep(50 * time.Millisecond)
	b.until("a quiet moment", func() bool { return true })
	if b.changedFile != nil {
		t.Error("it tells of the same content")
	}
	write(strings.Replace(water, "bent", "changed", 1))
	b.until("the notice", func() bool { return b.changedFile != nil })
	if b.state.Group.Molecule.Title != "bent" {
		t.Error("it was read without a question")
	}
	b.tap(b.given, "changed read")
	b.until("the new content", func() bool { return b.state.Group != nil && b.state.Group.Molecule.Title == "changed" })
	if got := b.now().Basis; len(got) != 1 || got[0] != "H:s" {
		t.Errorf("the basis is %q", got)
	}
	if b.changedFile != nil {
		t.Error("the notice stays")
	}
	// What cannot be read changes nothing.
	write("nonsense")
	b.until("the notice", func() bool { return b.changedFile != nil })
	b.tap(b.given, "changed read")
	b.until("the message", func() bool { return b.openProblem != "" })
	if b.state.Group.Molecule.Title != "changed" {
		t.Error("the structure is lost")
	}
	b.openProblem = ""
	if err := os.Remove(file); err != nil {
		t.Fatal(err)
	}
	b.until("the notice", func() bool { return b.changedFile != nil && b.changedFile.gone })
	b.tap(b.given, "changed keep")
	if b.changedFile != nil {
		t.Error("the notice stays")
	}
}

// A study's file that another program has changed is not written over without
// a question.
func TestAForeignChangeOfTheStudyIsNotWrittenOver(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("water")
	path := filepath.Join(t.TempDir(), "s"+study.Extension)
	if err := b.writeStudy(path, false); err != nil {
		t.Fatal(err)
	}
	b.changedFile = &changedFile{path: path}
	b.save()
	if b.win.Canvas().Overlays().Top() == nil {
		t.Error("it does not ask")
	}
}

func TestAPictureGoesToTheClipboardOrToAFile(t *testing.T) {
	none := func(string) (string, error) { return "", errors.New("none") }
	all := func(name string) (string, error) { return "/bin/" + name, nil }
	env := func(names ...string) func(string) string {
		return func(n string) string {
			for _, x := range names {
				if x == n {
					return "1"
				}
			}
			return ""
		}
	}
	for _, c := range []struct {
		env  func(string) string
		find func(string) (string, error)
		want string
	}{
		{env("WAYLAND_DISPLAY", "DISPLAY"), all, "/bin/wl-copy --type image/png"},
		{env("DISPLAY"), all, "/bin/xclip -selection clipboard -t image/png"},
		{env(), all, ""}, {env("DISPLAY", "WAYLAND_DISPLAY"), none, ""},
	} {
		if got := strings.Join(imageTool(c.env, c.find), " "); got != c.want {
			t.Errorf("%q, not %q", got, c.want)
		}
	}
	b := newBench(t, t.TempDir())
	b.open("water")
	folder := t.TempDir()
	r := request{shown: b.view.shown, sight: b.view.sight, width: 120, height: 90, dpi: 96}
	for _, want := range []string{"lobewright.png", "lobewright-2.png"} {
		path, err := copyImage(r, []string{"/no/such/tool"}, folder)
		if err != nil || filepath.Base(path) != want {
			t.Errorf("%s %v", path, err)
		}
	}
	out := filepath.Join(folder, "taken")
	tool := filepath.Join(folder, "tool")
	if err := os.WriteFile(tool, []byte("#!/bin/sh\ncat > "+out+"\n"), 0o777); err != nil {
		t.Fatal(err)
	}
	path, err := copyImage(r, []string{tool}, folder)
	taken, _ := os.ReadFile(out)
	if err != nil || path != "" || !strings.HasPrefix(string(taken), "\x89PNG") {
		t.Errorf("%q %v, %d bytes", path, err, len(taken))
	}
}

func TestTablesAreCopiedInEveryFormat(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	b.chooseOrbital("Eu", 1, 1)
	b.until("the ledger", func() bool { return b.theLedger() != nil })
	n := 0
	for _, c := range b.everything() {
		if !strings.HasPrefix(c.place, say("menu.file")+" › "+say("menu.copyTable")) {
			continue
		}
		n++
		b.app.Clipboard().SetContent("")
		b.run(c.command)
		if got := b.app.Clipboard().Content(); strings.Count(got, "\n") < 2 {
			t.Errorf("%s, %s: %q", c.place, c.name, got)
		}
	}
	if n != 28 {
		t.Errorf("%d commands copy tables", n)
	}
}
