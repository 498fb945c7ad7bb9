//go:build cgo && !nowindow

package window

import "testing"

// Who works with the keyboard sees that the picture has it.
func TestThePictureWithTheKeyboardHasAFrame(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("water")
	b.win.Canvas().Focus(b.given)
	if b.view.ring.Visible() {
		t.Error("there is a frame while another region has the keyboard")
	}
	b.win.Canvas().Focus(b.view)
	if !b.view.ring.Visible() {
		t.Fatal("there is no frame")
	}
	b.setTheme("dark")
	size := b.view.Size()
	for i, s := range b.view.ring.sides {
		if s.FillColor != b.palette().Accent {
			t.Errorf("side %d has the colour %v", i, s.FillColor)
		}
		if w, h := s.Size().Width, s.Size().Height; min(w, h) != ringWidth || w != size.Width && h != size.Height {
			t.Errorf("side %d measures %g × %g around %v", i, w, h, size)
		}
	}
}
