//go:build cgo && !nowindow

package window

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
)

// hintBox is a small text beside the pointer.
type hintBox struct {
	u     *ui
	layer *fyne.Container
	back  *canvas.Rectangle
	text  *canvas.Text
}

func newHintBox(u *ui) *hintBox {
	h := &hintBox{u: u, back: canvas.NewRectangle(nil), text: canvas.NewText("", nil)}
	h.layer = container.NewWithoutLayout(h.back, h.text)
	h.back.Hide()
	h.text.Hide()
	return h
}

// show takes the place of the hint before; an empty text hides it.
func (h *hintBox) show(text string, at fyne.Position) {
	if text == "" {
		if h.back.Visible() {
			h.back.Hide()
			h.text.Hide()
		}
		return
	}
	p := h.u.palette()
	h.text.Text, h.text.TextSize, h.text.Color = text, secondSize*float32(h.u.zoom()), p.Ink
	h.back.FillColor, h.back.StrokeColor, h.back.StrokeWidth = p.Ground, p.Rule, 1
	size := h.text.MinSize()
	box := fyne.NewSize(size.Width+12, size.Height+6)
	room := h.u.win.Canvas().Size()
	origin := fyne.CurrentApp().Driver().AbsolutePositionForObject(h.layer)
	x := max(0, min(at.X+14, room.Width-box.Width-4))
	y := at.Y + 18
	if y+box.Height > 0.8*room.Height {
		y = at.Y - box.Height - 30 // above a column of the ledger
	}
	x, y = x-origin.X, y-origin.Y
	h.back.Move(fyne.NewPos(x, y))
	h.back.Resize(box)
	h.text.Move(fyne.NewPos(x+6, y+3))
	h.text.Resize(size)
	h.back.Show()
	h.text.Show()
	h.back.Refresh()
	h.text.Refresh()
}
