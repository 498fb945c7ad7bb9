//go:build cgo && !nowindow

package window

import (
	"math"
	"testing"

	"fyne.io/fyne/v2"
)

func TestAViewIsKeptRecalledAndForgotten(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("octahedron")
	b.key(&fyne.KeyEvent{Name: fyne.KeyLeft})
	b.commit()
	kept := b.view.sight
	b.askView()
	entry := b.win.Canvas().Focused().(*answerEntry)
	entry.SetText("from the left")
	entry.OnSubmitted(entry.Text)
	if v := b.now().Views; len(v) != 1 || v[0].Name != "from the left" {
		t.Fatalf("%+v", v)
	}
	b.typed('z')
	if same(b.view.sight.Rows(), kept.Rows()) {
		t.Fatal("z does not look along z")
	}
	list := found(b.everything(), "from the left")
	if len(list) != 2 {
		t.Fatalf("%d commands have the view's name", len(list))
	}
	b.run(list[0].command)
	if !same(b.view.sight.Rows(), kept.Rows()) {
		t.Error("the view is not recalled")
	}
	b.run(list[1].command)
	if len(b.now().Views) != 0 {
		t.Error("the view is not forgotten")
	}
	b.undo()
	if len(b.now().Views) != 1 {
		t.Error("undo does not bring it back")
	}
}

func same(a, b [9]float64) bool {
	for i := range a {
		if math.Abs(a[i]-b[i]) > 1e-6 {
			return false
		}
	}
	return true
}

// The wheel neither loses the molecule nor goes into a bond.
func TestTheWheelStopsAtSizesThatCanBeRead(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	b.view.width, b.view.height = 600, 500
	whole := b.view.sight.Span
	for range 60 {
		b.zoomBy(1 / 1.2)
	}
	if got := b.view.sight.Span; got > 2.6*whole {
		t.Errorf("far out it shows %.1f Å, the whole has %.1f Å", got, whole)
	}
	for range 80 {
		b.zoomBy(1.2)
	}
	if got := b.view.sight.Span; got < 1.3 || got > 1.6 {
		t.Errorf("near by it shows %.2f Å", got)
	}
}
