//go:build cgo && !nowindow

package window

import (
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"

	"lobewright/assets"
)

// TestLargeTypeLeavesThePictureItsRoom lays the window out at twice the size
// of type on a small screen: everything stays on it, the picture keeps a third
// of the width, and no pane is set larger than its content allows.
func TestLargeTypeLeavesThePictureItsRoom(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("octahedron")
	b.chooseOrbital("Eg", 1, 1)
	for _, size := range []fyne.Size{{Width: 1024, Height: 700}, {Width: 1920, Height: 1080}} {
		for _, scale := range []float64{0.85, 1, 1.5, 2} {
			b.setScale(scale)
			content := b.win.Content()
			if least := content.MinSize(); least.Width > size.Width || least.Height > size.Height {
				t.Fatalf("at %g the window needs %v", scale, least)
			}
			content.Resize(size)
			if w := b.view.Size().Width; w < size.Width/3 {
				t.Errorf("%v at %g: the picture is %g wide", size, scale, w)
			}
			for name, p := range map[string]*pane{"given": b.given, "follows": b.follows, "detail": b.detail, "ledger": b.ledger} {
				got := p.scale()
				if fits := float64(p.Size().Width / p.least.Width); got > scale+1e-6 || !p.sideways && got > max(fits, min(scale, 1))+1e-6 {
					t.Errorf("%v at %g: %s is magnified by %g, with room for %g", size, scale, name, got, fits)
				}
				if size.Width == 1920 && got < min(scale, 1.9) {
					t.Errorf("%v at %g: %s is magnified by %g only", size, scale, name, got)
				}
			}
		}
	}
}

func TestLongCombinationsAreCountedAndNotListed(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("cage")
	b.chooseOrbital("T1g", 1, 1)
	b.until("the orbital", func() bool { return b.state.Orbital != nil })
	b.follows.Resize(fyne.NewSize(rightWidth, 700))
	long := terms(b.orbital().Coefficients)
	if long < 40 {
		t.Fatalf("the combination has %d functions: choose another", long)
	}
	words := ""
	for _, text := range textsOf(b.follows.lay()) {
		words += text.words + " "
	}
	if want, _, _ := strings.Cut(say("partners.longForm", long), ";"); !strings.Contains(words, want) {
		t.Errorf("the list does not say %q:\n%s", want, words)
	}
}

// A page is read more than the picture beside it: larger type reaches it.
func TestLargeTypeReachesAPage(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("octahedron")
	b.pages.turnTo(axesPage)
	content := b.win.Content()
	content.Resize(fyne.NewSize(1024, 700))
	usual := b.pages.pane.Size().Width
	b.setScale(1.5)
	content.Resize(fyne.NewSize(1024, 700))
	if w, z := b.pages.pane.Size().Width, b.pages.pane.scale(); w < 1.25*usual || w > pageShare*1024+1 || z < 1.25 {
		t.Errorf("the page is %g wide after %g, and magnified by %g", w, usual, z)
	}
}

func TestTheListOfKeysIsNoWiderThanItsSheet(t *testing.T) {
	defer speak(assets.English)
	b := newBench(t, t.TempDir())
	b.win.Resize(fyne.NewSize(1024, 700))
	for _, l := range []assets.Language{assets.English, assets.German} {
		speak(l)
		for _, scale := range []float64{1, 1.5, 2} {
			b.setScale(scale)
			list := keysTable(b.ui).(*container.Scroll).Content
			if w, room := list.MinSize().Width, sheetWidth(b.ui); w > room-24 {
				t.Errorf("%s at %g: the list is %g wide, the sheet %g", l, scale, w, room)
			}
		}
	}
}
