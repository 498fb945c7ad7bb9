//go:build cgo && !nowindow

package window

import (
	"slices"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"

	"lobewright/app/study"
	"lobewright/assets"
	"lobewright/render"
)

func TestTheMatrixIsThatOfTheOperationThatIsAdded(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.project("demo:square-plane", "Cl:sigma", "Eu", 1, [2]int{})
	b.chooseOrbital("Eu", 1, 1)
	b.chooseOperation("i")
	b.until("the ledger", func() bool { return b.theLedger() != nil })
	b.win.Canvas().Capture() // all panes are drawn
	b.tally.start()
	for i := range 3 {
		if !b.detail.stale {
			t.Errorf("step %d leaves the matrix of the step before", i)
		}
		b.win.Canvas().Capture()
		b.tally.stepBy(1)
	}
}

// What scrolls in the ledger passes under the names of the rows, and nothing
// that can be looked through is drawn over them.
func TestNothingOfTheColumnsShinesThroughTheHeads(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.project("demo:octahedron", "C:sigma", "T1u", 1, [2]int{})
	b.ledger.Resize(fyne.NewSize(700, ledgerHeight))
	b.ledger.lay()
	last := b.theLedger().Group.Operations(0)
	for _, scroll := range []float64{0, 37, 61, 130, 400} {
		b.ledger.scroll = scroll
		for _, op := range last[:12] {
			b.ledger.focused, b.ledger.mark, b.ledger.hover = true, "operation "+op.Name, "operation "+op.Name
			s := b.now()
			s.Operation = op.Name
			b.history.Reset(s)
			board := b.ledger.lay()
			b.ledger.extent = 0 // without the scroll bar
			b.ledger.decorate(board)
			for _, shape := range board.scene.Shapes {
				polygon, ok := shape.Geometry.(render.Polygon)
				if !ok || shape.Material.Opacity == 1 && polygon.Points[0][0] == 0 {
					continue
				}
				if left := polygon.Points[0][0]; left < headWidth-1 {
					t.Fatalf("scrolled by %v with %s a field begins at %v", scroll, op.Name, left)
				}
			}
		}
	}
}

func TestOneByOneIsOfferedWhereThereIsASum(t *testing.T) {
	defer speak(assets.English)
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	if !b.oneByOne.Disabled() {
		t.Error("it is offered without an irrep")
	}
	if got := b.oneByOne.hint(); got != say("ledger.needIrrep") {
		t.Errorf("it hints %q", got)
	}
	b.project("demo:square-plane", "Cl:sigma", "Eu", 1, [2]int{})
	if b.oneByOne.Disabled() {
		t.Error("it is not offered with a ledger")
	}
	if got := b.oneByOne.hint(); got != say("ledger.oneByOneHint") {
		t.Errorf("it hints %q", got)
	}
	b.open("rod")
	if got := b.oneByOne.hint(); !b.oneByOne.Disabled() || got != say("ledger.oneByOneInfinite") {
		t.Errorf("of an infinite group it hints %q", got)
	}
}

func TestAnotherStructureIsShownFromItsBeginning(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.project("demo:cage", "C:pz", "T1u", 1, [2]int{})
	for _, p := range []*pane{b.ledger, b.follows} {
		p.lay()
		p.scrollTo(300)
		if p.scroll == 0 {
			t.Fatal("there is nothing to scroll")
		}
	}
	b.openDemo("octahedron")
	b.until("the octahedron", func() bool { return b.now().Structure == "demo:octahedron" })
	for _, p := range []*pane{b.ledger, b.follows} {
		if p.scroll != 0 {
			t.Errorf("a pane is still scrolled by %v", p.scroll)
		}
	}
}

func TestCommandsAreFoundByOtherWords(t *testing.T) {
	defer speak(assets.English)
	b := newBench(t, t.TempDir())
	b.start(study.Study{})
	names := func(typed string) (out []string) {
		for _, c := range found(b.everything(), typed) {
			out = append(out, c.name)
		}
		return out
	}
	for _, d := range assets.DemoList() {
		if !slices.Contains(names(d.Name), d.Title) {
			t.Errorf("%q does not find %q", d.Name, d.Title)
		}
	}
	if got := names("structure"); !slices.Contains(got, say("menu.atomTable")) {
		t.Errorf("structure finds %q", got)
	}
	speak(assets.German)
	if got := names("struktur"); !slices.Contains(got, say("menu.atomTable")) {
		t.Errorf("struktur finds %q", got)
	}
}

func TestAHintGoesWhenItsPaneScrolls(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.project("demo:cage", "C:pz", "T1u", 1, [2]int{})
	b.ledger.lay()
	b.ledger.MouseMoved(&desktop.MouseEvent{PointEvent: fyne.PointEvent{Position: fyne.NewPos(headWidth+30, classRow+10)}})
	if !b.hints.back.Visible() {
		t.Fatal("there is no hint")
	}
	b.ledger.Scrolled(&fyne.ScrollEvent{Scrolled: fyne.NewDelta(0, -40)})
	if b.ledger.scroll == 0 || b.hints.back.Visible() {
		t.Errorf("scrolled by %v the hint is still there", b.ledger.scroll)
	}
}
