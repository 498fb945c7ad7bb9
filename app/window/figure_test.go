//go:build cgo && !nowindow

package window

import (
	"bytes"
	"image"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"

	"fyne.io/fyne/v2"

	"lobewright/app/export"
	"lobewright/app/study"
	"lobewright/assets"
)

// previewed opens the page of sheets and waits for the sheet of the study.
func (b *bench) previewed(what string) *image.RGBA {
	b.t.Helper()
	p := b.pages.preview
	if b.pages.open != sheetPage {
		b.pages.turnTo(sheetPage)
	}
	p.pane.lay()
	b.until(what, func() bool { p.pane.lay(); return !p.running })
	return p.image
}

func TestASheetIsPreviewedWhileItIsSet(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	p := b.pages.preview
	first := b.previewed("the sheet")
	if first == nil || p.problem != "" || !p.pane.Visible() {
		t.Fatalf("there is no sheet: %q", p.problem)
	}
	if got := p.made.Width; got != study.DefaultWidth {
		t.Errorf("the sheet is %v mm wide", got)
	}
	b.tap(b.pages.pane, "width 180")
	p.pane.lay()
	if p.image != first || !p.running {
		t.Error("the sheet before does not stay while the new one is made")
	}
	marked := false
	for _, text := range textsOf(p.pane.lay()) {
		marked = marked || text.words == say("figure.makingAnew")
	}
	if !marked {
		t.Error("the sheet before is not marked as such")
	}
	if second := b.previewed("a wider sheet"); second == first || p.made.Width != 180 {
		t.Errorf("the sheet is %v mm wide", p.made.Width)
	}
	b.tap(b.pages.pane, "kind molecule")
	molecule := b.previewed("the molecule")
	b.tap(b.pages.pane, "look ink")
	if ink := b.previewed("in ink"); bytes.Equal(ink.Pix, molecule.Pix) {
		t.Error("ink looks the same")
	}
	if s := b.now(); s.Figure.Width != 180 || s.Figure.Sheet != "molecule" || s.Look.Style != "ink" {
		t.Errorf("the study says %+v, %+v", s.Figure, s.Look)
	}
	for range 3 {
		b.undo()
	}
	if again := b.previewed("as before"); !bytes.Equal(again.Pix, first.Pix) {
		t.Error("three steps back the sheet is another one")
	}
	// What a sheet cannot show is said in its place.
	b.tap(b.pages.pane, "kind descent")
	if b.previewed("the message") != nil || p.problem == "" {
		t.Error("a descent without a subgroup is shown")
	}
	b.tap(b.pages.pane, "choose missing")
	if b.pages.open != subgroupsPage || p.pane.Visible() {
		t.Error("it does not lead to the page of subgroups")
	}
	s := b.now()
	s.Subgroup = "C2v"
	b.do(study.StepSubgroup, s)
	if b.previewed("the descent") == nil || p.problem != "" {
		t.Errorf("with a subgroup it says %q", p.problem)
	}
	// What is left out is said below.
	b.tap(b.pages.pane, "kind all")
	s = b.now()
	s.Figure.Height = 45
	b.do(study.StepFigure, s)
	b.previewed("a low sheet")
	said := false
	for _, text := range textsOf(p.pane.lay()) {
		said = said || len(p.made.Notes) == 1 && strings.Contains(p.made.Notes[0], text.words) && len(text.words) > 10
	}
	if !said {
		t.Errorf("it does not say what is left out: %q, %q", p.problem, p.made.Notes)
	}
	press(b.pages.pane, fyne.KeyEscape)
	if p.pane.Visible() || b.pages.open != noPage {
		t.Error("Escape does not close the page")
	}
}

func TestEveryChoiceOfASheetAndAnAnimationIsAStep(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("water")
	start := b.now()
	leave := map[string]bool{"close page": true, "save sheet": true, "save film": true, "play film": true}
	for _, open := range []page{sheetPage, filmPage} {
		b.pages.turnTo(open)
		b.pages.pane.lay()
		names := 0
		for _, s := range b.pages.pane.spots {
			if s.hint == "" {
				t.Errorf("%q has no hint", s.name)
			}
			if leave[s.name] {
				continue
			}
			before := b.now()
			b.tap(b.pages.pane, s.name)
			if top := b.win.Canvas().Overlays().Top(); top != nil {
				b.answer("no number")
				if b.win.Canvas().Overlays().Top() == nil {
					t.Errorf("%q takes what is no number", s.name)
				}
				b.press(fyne.KeyEscape)
				continue
			}
			if err := b.now().Check(); err != nil {
				t.Errorf("%q: %v", s.name, err)
			}
			if !b.now().Equal(before) {
				names++
				b.undo()
			}
			if !b.now().Equal(before) {
				t.Errorf("%q is not taken back in one step", s.name)
			}
		}
		if names < 12 {
			t.Errorf("page %d has %d choices", open, names)
		}
	}
	if !b.now().Equal(start) {
		t.Error("something stays")
	}
	b.pages.turnTo(filmPage)
	b.tap(b.pages.pane, "pixels typed")
	b.answer("320x240")
	if a := b.now().Animation; a.Width != 320 || a.Height != 240 {
		t.Errorf("the size is %+v", a)
	}
}

func TestASheetIsSavedInEveryFormatWithItsStudy(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("water")
	b.previewed("the sheet")
	dir := t.TempDir()
	save := func(path string) { b.tap(b.pages.pane, "save sheet"); b.answer(path) }
	for _, ending := range export.SheetEndings {
		path := filepath.Join(dir, "sheet"+ending)
		save(path)
		b.until(path, func() bool { return !b.pages.writing.running })
		if s, err := export.StudyIn(path); err != nil || !strings.HasPrefix(s.Basis[0], "H:") {
			t.Errorf("%s: %v %v; it says %q", ending, s.Basis, err, b.pages.writing.said)
		}
	}
	save(filepath.Join(dir, "sheet.bmp"))
	if b.win.Canvas().Overlays().Top() == nil {
		t.Error("an unknown ending is taken")
	}
	b.press(fyne.KeyEscape)
	// One that is there is written over only after a question.
	path := filepath.Join(dir, "sheet.png")
	if err := os.WriteFile(path, []byte("mine"), 0o666); err != nil {
		t.Fatal(err)
	}
	save(path)
	if data, _ := os.ReadFile(path); string(data) != "mine" {
		t.Fatal("it was written over")
	}
	b.press(fyne.KeyReturn)
	b.until("the file", func() bool { return !b.pages.writing.running })
	if data, _ := os.ReadFile(path); string(data) == "mine" {
		t.Error("it was not written over")
	}
}

func TestAnAnimationIsSavedInEveryFormatWithItsStudy(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	b.pages.turnTo(filmPage)
	s := b.now()
	s.Animation = study.Animation{Width: 80, Height: 64, Seconds: 0.3, Rate: 10}
	b.do(study.StepFigure, s)
	dir := t.TempDir()
	for _, ending := range filmEndings {
		if _, err := exec.LookPath("ffmpeg"); err != nil && ending == ".mp4" {
			continue
		}
		path := filepath.Join(dir, "film"+ending)
		b.tap(b.pages.pane, "save film")
		b.answer(path)
		b.until(path, func() bool { return !b.pages.writing.running })
		if ending == ".png" {
			path = filepath.Join(dir, "film-1.png")
		}
		got, err := export.StudyIn(path)
		if err != nil || got.Operation != "C4(z)" || got.Animation != s.Animation {
			t.Errorf("%s: %v %v; it says %q", ending, got.Operation, err, b.pages.writing.said)
		}
	}
	if n, _ := filepath.Glob(filepath.Join(dir, "film-*.png")); len(n) != 4 {
		t.Errorf("there are pictures %q", n)
	}
}

func TestWritingAnAnimationIsCancelledAndLeavesNoFile(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	b.pages.turnTo(filmPage)
	s := b.now()
	s.Animation.Seconds = 30
	b.do(study.StepFigure, s)
	path := filepath.Join(t.TempDir(), "long.gif")
	b.tap(b.pages.pane, "save film")
	b.answer(path)
	b.until("some of it", func() bool { return b.pages.writing.share > 0 })
	b.tap(b.pages.pane, "cancel writing")
	b.until("the end", func() bool { return !b.pages.writing.running })
	if left, _ := os.ReadDir(filepath.Dir(path)); len(left) != 0 || b.pages.writing.said != say("figure.cancelled", "long.gif") {
		t.Errorf("it leaves %v and says %q", left, b.pages.writing.said)
	}
	// Without an operation there is nothing to write.
	b.chooseOperation("")
	if s := b.now(); s.Operation == "" {
		b.tap(b.pages.pane, "save film")
		if b.win.Canvas().Overlays().Top() != nil || !b.pages.writing.failed {
			t.Error("an animation without an operation is asked for a name")
		}
	}
}

func TestThePagesOfFiguresFitTheirPaneInEveryLanguage(t *testing.T) {
	defer speak(assets.English)
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	for _, l := range assets.Languages() {
		speak(l)
		for _, open := range []page{sheetPage, filmPage} {
			b.pages.turnTo(open)
			board := b.pages.pane.lay()
			for _, text := range textsOf(board) {
				if text.left < 0 || text.right > board.width {
					t.Errorf("%s: %q is cut", l, text.words)
				}
			}
		}
	}
}
