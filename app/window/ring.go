//go:build cgo && !nowindow

package window

import (
	"image/color"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
)

// A ring is the frame around what has the keyboard: four thin rectangles, since
// the toolkit would go through every pixel within an empty one.
type ring struct {
	*fyne.Container
	sides [4]*canvas.Rectangle
}

// ringWidth is that of the frame, in units.
const ringWidth = 2

func newRing() *ring {
	r := &ring{Container: &fyne.Container{}}
	for i := range r.sides {
		r.sides[i] = canvas.NewRectangle(nil)
		r.Objects = append(r.Objects, r.sides[i])
	}
	r.Layout = ringLayout{r}
	r.Hide()
	return r
}

// paint gives the frame its colour.
func (r *ring) paint(c color.Color) {
	for _, s := range r.sides {
		s.FillColor = c
		s.Refresh()
	}
}

// A ringLayout puts the sides where they belong.
type ringLayout struct{ *ring }

// MinSize implements fyne.Layout.
func (ringLayout) MinSize([]fyne.CanvasObject) fyne.Size { return fyne.Size{} }

// Layout implements fyne.Layout.
func (r ringLayout) Layout(_ []fyne.CanvasObject, size fyne.Size) {
	w, h := size.Width, size.Height
	for i, at := range [4][4]float32{{0, 0, w, ringWidth}, {0, h - ringWidth, w, ringWidth}, {0, 0, ringWidth, h}, {w - ringWidth, 0, ringWidth, h}} {
		r.sides[i].Move(fyne.NewPos(at[0], at[1]))
		r.sides[i].Resize(fyne.NewSize(at[2], at[3]))
	}
}
