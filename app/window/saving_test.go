//go:build cgo && !nowindow

package window

import (
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/test"
	"fyne.io/fyne/v2/widget"

	"lobewright/app/study"
)

// sheets are the sheets that lie over the window.
func (b *bench) sheets() int { return len(b.win.Canvas().Overlays().List()) }

// answer types into the sheet on top and presses Return.
func (b *bench) answer(text string) {
	b.t.Helper()
	e, ok := b.win.Canvas().Focused().(*answerEntry)
	if !ok {
		b.t.Fatalf("%T has the focus", b.win.Canvas().Focused())
	}
	e.SetText(text)
	e.TypedKey(&fyne.KeyEvent{Name: fyne.KeyReturn})
}

func (b *bench) press(key fyne.KeyName) {
	b.win.Canvas().Focused().TypedKey(&fyne.KeyEvent{Name: key})
}

func TestAnExistingFileIsReplacedOnlyAfterAQuestion(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("water")
	path := filepath.Join(t.TempDir(), "mine"+study.Extension)
	if err := os.WriteFile(path, []byte("other"), 0o666); err != nil {
		t.Fatal(err)
	}
	holds := func() string {
		text, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		return string(text)
	}
	b.askSave()
	b.answer(path)
	if b.sheets() != 2 || holds() != "other" {
		t.Fatalf("%d sheets, the file holds %q", b.sheets(), holds())
	}
	b.press(fyne.KeyEscape)
	if b.sheets() != 1 || holds() != "other" {
		t.Fatalf("after Escape: %d sheets, the file holds %q", b.sheets(), holds())
	}
	b.answer(path)
	b.press(fyne.KeyReturn)
	if b.sheets() != 0 || !strings.Contains(holds(), "demo:water") {
		t.Fatalf("after Return: %d sheets, the file holds %q", b.sheets(), holds())
	}

	// From now on it is the study's own file.
	b.setTolerance(0.03)
	b.askSave()
	b.press(fyne.KeyReturn)
	if b.sheets() != 0 || !strings.Contains(holds(), "0.03") {
		t.Fatalf("its own file: %d sheets, it holds %q", b.sheets(), holds())
	}

	// Not that of another structure.
	b.open("benzene")
	b.askSave()
	b.answer(path)
	if b.sheets() != 2 || !strings.Contains(holds(), "demo:water") {
		t.Errorf("another structure: %d sheets, it holds %q", b.sheets(), holds())
	}
	b.press(fyne.KeyEscape)
	b.press(fyne.KeyEscape)

	// Opened, it is the study's own again.
	b.open("water")
	opened := false
	b.openStudy(path, func(err error) { opened = err == nil })
	b.until("the study", func() bool { return opened })
	b.setTolerance(0.04)
	b.askSave()
	b.press(fyne.KeyReturn)
	if b.sheets() != 0 || !strings.Contains(holds(), "0.04") {
		t.Errorf("the opened file: %d sheets, it holds %q", b.sheets(), holds())
	}
}

func TestAPictureIsReplacedOnlyAfterAQuestion(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("water")
	b.view.generate(60, 50)
	path := filepath.Join(t.TempDir(), "mine.png")
	if err := os.WriteFile(path, nil, 0o666); err != nil {
		t.Fatal(err)
	}
	b.askPicture()
	b.answer(path)
	b.until("the question", func() bool { return b.sheets() == 2 })
	if info, _ := os.Stat(path); info.Size() != 0 {
		t.Error("it was written before the answer")
	}
	b.press(fyne.KeyReturn)
	b.until("the picture", func() bool { return b.sheets() == 0 })
	if info, _ := os.Stat(path); info.Size() == 0 {
		t.Error("it was not written")
	}
}

func TestSeveralSelectionsAreTypedAtOnce(t *testing.T) {
	b := newBench(t, t.TempDir())
	for _, text := range []string{"Cl:sigma; 1:d", "Cl:sigma, 1:d", " Cl:sigma ;1:d; Cl:sigma"} {
		b.open("square-plane")
		b.setBasis(nil)
		b.typeBasis(text)
		if want := []string{"Cl:sigma", "1:d"}; !slices.Equal(b.now().Basis, want) || b.typedProblem != "" {
			t.Errorf("%q: %q %s", text, b.now().Basis, b.typedProblem)
		}
	}
	b.setBasis(nil)
	if b.typeBasis("Cl:sigma; 1:nothing"); len(b.now().Basis) != 0 || b.typedProblem == "" {
		t.Errorf("half of a wrong text was taken: %q", b.now().Basis)
	}
}

// What is shown does not turn or shrink when other functions are chosen.
func TestTheViewStaysWhenOtherFunctionsAreChosen(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("trimer")
	turn := b.view.sight.Turn
	for _, basis := range [][]string{{"Cl:sigma"}, nil, {"Re:d", "Cl:p"}} {
		b.setBasis(basis)
		b.until("the basis", func() bool { return b.now().Equal(b.state.Study) && (basis == nil || b.state.Basis != nil) })
		if b.view.sight.Turn != turn {
			t.Errorf("%q: the view turned", basis)
		}
	}
}

func TestANewNameIsNoFault(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("water")
	texts := func() string {
		var all strings.Builder
		for _, o := range test.LaidOutObjects(b.win.Canvas().Overlays().Top()) {
			switch o := o.(type) {
			case *widget.Label:
				all.WriteString(o.Text + "\n")
			case *canvas.Text:
				all.WriteString(o.Text + "\n")
			}
		}
		return all.String()
	}
	b.askSave()
	b.win.Canvas().Focused().(*answerEntry).SetText(filepath.Join(t.TempDir(), "new"))
	if text := texts(); !strings.Contains(text, "a new file") || strings.Contains(text, "no such file") {
		t.Errorf("it says %q", text)
	}
}

func TestKeysStandInTwoColumns(t *testing.T) {
	b := newBench(t, t.TempDir())
	table := keysTable(b.ui).(*container.Scroll)
	if size := table.Content.MinSize(); size.Height > 530 || size.Width > 660 {
		t.Errorf("the table is %g wide and %g high", size.Width, size.Height)
	}
	for _, row := range keysText {
		if row[0] == "" {
			t.Errorf("%q has no key", row[1])
		}
	}
}
