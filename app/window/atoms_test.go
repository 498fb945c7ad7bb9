//go:build cgo && !nowindow

package window

import (
	"fmt"
	"strings"
	"testing"
	"time"

	"fyne.io/fyne/v2"

	"lobewright/app/study"
	"lobewright/app/work"
)

func press(p *pane, keys ...fyne.KeyName) {
	for _, k := range keys {
		p.TypedKey(&fyne.KeyEvent{Name: k})
	}
}

func typeIn(p *pane, text string) {
	for _, r := range text {
		p.TypedRune(r)
	}
}

func TestAtomsAreEditedInATable(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("water")
	before := b.now()
	b.showAtoms()
	p := b.atoms.pane
	if !p.Visible() || b.given.Visible() || len(b.atoms.rows) != 3 {
		t.Fatal("the table does not open")
	}
	// x of the first atom, letter by letter; the picture and the group follow.
	typeIn(p, "0,3")
	if got := b.atoms.rows[0][1]; got != "0,3" {
		t.Errorf("the cell holds %q", got)
	}
	b.until("the group of the bent structure", func() bool {
		return b.state.Group != nil && b.state.Group.Fit.Setting.Symbol == "Cs"
	})
	if b.view.shown.Group != b.state.Group {
		t.Error("the picture does not follow")
	}
	press(p, fyne.KeyReturn)
	if row, column, ok := b.atoms.marked(); !ok || row != 1 || column != 1 {
		t.Errorf("the mark is on %d, %d", row, column)
	}
	// What is wrong stays in the table, with the reason beside it.
	right := b.now()
	press(p, fyne.KeyLeft)
	typeIn(p, "Hx")
	press(p, fyne.KeyTab)
	if len(b.atoms.faults) != 1 || b.atoms.faults[0].Problem != work.CellElement || b.atoms.rows[1][0] != "Hx" {
		t.Errorf("%+v", b.atoms.faults)
	}
	board := p.lay()
	said := false
	for _, s := range board.scene.Shapes {
		said = said || textOf(s.Geometry) == say("atoms.noElement")
	}
	if !said {
		t.Error("the reason does not stand there")
	}
	if b.now().Coordinates != right.Coordinates {
		t.Error("a wrong cell reached the study")
	}
	press(p, fyne.KeyLeft)
	typeIn(p, "F")
	press(p, fyne.KeyReturn)
	b.until("fluorine", func() bool { return b.state.Group != nil && strings.Contains(b.state.Group.Molecule.Formula(), "F") })
	// A row more, a row less.
	b.atoms.add()
	if len(b.atoms.rows) != 4 || len(b.atoms.faults) != 0 {
		t.Fatalf("%d rows, %+v", len(b.atoms.rows), b.atoms.faults)
	}
	b.until("four atoms", func() bool { return b.state.Group != nil && len(b.state.Group.Molecule.Atoms) == 4 })
	b.atoms.remove()
	b.until("three atoms", func() bool { return b.state.Group != nil && len(b.state.Group.Molecule.Atoms) == 3 })
	// Back, step by step, and the table goes with it.
	for b.CanUndo() {
		b.undo()
	}
	if !b.now().Equal(before) {
		t.Errorf("after undo it is %+v", b.now())
	}
	b.until("the rows from before", func() bool { b.atoms.follow(); return b.atoms.rows[0][1] != "0,3" && b.atoms.rows[1][0] == "H" })
	press(p, fyne.KeyEscape)
	if p.Visible() || !b.given.Visible() {
		t.Error("the table does not close")
	}
}

func TestEscapePutsACellBack(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("water")
	before := b.now()
	b.showAtoms()
	was := b.atoms.rows[0][1]
	typeIn(b.atoms.pane, "7")
	press(b.atoms.pane, fyne.KeyEscape)
	b.until("the cell as it was", func() bool { b.atoms.follow(); return b.atoms.rows[0][1] == was })
	if !b.now().Equal(before) {
		t.Error("the study is not as it was")
	}
}

// With 200 atoms a letter costs no more than a frame or two, drawing included.
func TestTwoHundredAtomsAreEditedSmoothly(t *testing.T) {
	b := newBench(t, t.TempDir())
	var text strings.Builder
	text.WriteString("200\nmany\n")
	for i := range 200 {
		fmt.Fprintf(&text, "C %d.25 %d.5 %d.125\n", i%6*2, i/6%6*2, i/36*2)
	}
	s, err := study.Study{}.WithCoordinates("many", text.String())
	if err != nil {
		t.Fatal(err)
	}
	b.start(s)
	b.until("the structure", func() bool { return b.state.Group != nil && len(b.state.Group.Molecule.Atoms) == 200 })
	b.showAtoms()
	p := b.atoms.pane
	b.atoms.mark(150, 1)
	began := time.Now()
	const letters = 20
	for range letters / 2 {
		typeIn(p, "1")
		p.lay()
		press(p, fyne.KeyBackspace)
		p.lay()
	}
	if each := time.Since(began) / letters; each > 60*time.Millisecond {
		t.Errorf("a letter takes %v", each)
	} else {
		t.Logf("a letter takes %v", each)
	}
	shapes := len(p.lay().scene.Shapes)
	if shapes > 900 {
		t.Errorf("%d shapes are drawn for the rows that are seen", shapes)
	}
	for range 60 { // to the end and back
		press(p, fyne.KeyEscape, fyne.KeyPageDown)
		if !p.Visible() {
			b.showAtoms()
		}
	}
}

// Number, Tab, number, Tab … fills a row and goes on in the next one; Tab never
// leaves the table, whether something was typed or not.
func TestTabGoesFromCellToCellOfTheTable(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("water")
	b.showAtoms()
	p := b.atoms.pane
	at := func() [2]int {
		row, column, ok := b.atoms.marked()
		if !ok {
			t.Fatalf("the mark is on %q", p.mark)
		}
		return [2]int{row, column}
	}
	b.atoms.mark(0, 1)
	for _, cell := range [][2]int{{0, 2}, {0, 3}, {1, 0}} {
		typeIn(p, "0.5")
		if !p.AcceptsTab() {
			t.Fatal("Tab leaves a cell that is being typed in")
		}
		press(p, fyne.KeyTab)
		if at() != cell {
			t.Errorf("Tab leads to %v, not to %v", at(), cell)
		}
	}
	if r := b.atoms.rows[0]; r[1] != "0.5" || r[2] != "0.5" || r[3] != "0.5" {
		t.Errorf("the row holds %q", r)
	}
	press(p, fyne.KeyReturn, fyne.KeyReturn)
	if !p.AcceptsTab() {
		t.Fatal("Tab leaves the table after Return")
	}
	press(p, fyne.KeyTab)
	if at() != [2]int{2, 1} {
		t.Errorf("after Return Tab leads to %v", at())
	}
	for range 10 {
		press(p, fyne.KeyTab)
	}
	if at() != [2]int{2, 3} {
		t.Errorf("the table ends at %v", at())
	}
	for range 20 {
		b.atoms.step(-1)
	}
	if at() != [2]int{0, 0} {
		t.Errorf("the table begins at %v", at())
	}
}
