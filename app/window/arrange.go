//go:build cgo && !nowindow

package window

import "fyne.io/fyne/v2"

// sideShare and ledgerShare are how much of the window a region at its side, or
// below, takes for larger type: the picture is the subject and keeps its room.
const (
	sideShare   = 0.32
	pageShare   = 0.45 // of an open page, which is read more than the picture beside it
	ledgerShare = 0.34
	detailShare = 0.46 // of the right region
)

// A column lays its visible objects out in a row (or below each other, where
// down). All but one take what they would like for their size of type, though
// no more than a share of the whole if their least size allows that; the one
// called rest takes what remains.
type column struct {
	down  bool
	rest  int
	share float32
	// first, which may be nil, is the share of the first object where another
	// holds for it.
	first func() float32
}

// Layout implements fyne.Layout.
func (c *column) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	whole := c.along(size)
	left := whole
	lengths := make([]float32, len(objects))
	for i, o := range objects {
		if i != c.rest && o.Visible() {
			share := c.share
			if i == 0 && c.first != nil {
				share = c.first()
			}
			lengths[i] = max(min(c.along(wanted(o)), share*whole), c.along(o.MinSize()))
			left -= lengths[i]
		}
	}
	if c.rest < len(objects) {
		lengths[c.rest] = max(0, left)
	}
	at := float32(0)
	for i, o := range objects {
		if !o.Visible() {
			continue
		}
		if c.down {
			o.Move(fyne.NewPos(0, at))
			o.Resize(fyne.NewSize(size.Width, lengths[i]))
		} else {
			o.Move(fyne.NewPos(at, 0))
			o.Resize(fyne.NewSize(lengths[i], size.Height))
		}
		at += lengths[i]
	}
}

// MinSize implements fyne.Layout.
func (c *column) MinSize(objects []fyne.CanvasObject) fyne.Size {
	var least fyne.Size
	for _, o := range objects {
		if !o.Visible() {
			continue
		}
		m := o.MinSize()
		if c.down {
			least.Width, least.Height = max(least.Width, m.Width), least.Height+m.Height
		} else {
			least.Width, least.Height = least.Width+m.Width, max(least.Height, m.Height)
		}
	}
	return least
}

func (c *column) along(s fyne.Size) float32 {
	if c.down {
		return s.Height
	}
	return s.Width
}

// wanted is the size that an object would like: its least one, and more where
// it holds a pane whose type is magnified.
func wanted(o fyne.CanvasObject) fyne.Size {
	size := o.MinSize()
	switch o := o.(type) {
	case *pane:
		return o.wanted()
	case *fyne.Container:
		var more fyne.Size
		for _, child := range o.Objects {
			if child.Visible() {
				more = more.Max(wanted(child).Subtract(child.MinSize()))
			}
		}
		return size.Add(more)
	}
	return size
}
