//go:build cgo && !nowindow

package window

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/widget"
)

// A choiceRow is one line of a chooser.
type choiceRow struct {
	name, beside string // beside stands at the right
	off          bool   // it can be seen and not be chosen
	do           func()
}

// A chooser is a list under a line to type: what is typed narrows it, the arrow
// keys go through it, Return or a click takes a row.
type chooser struct {
	u    *ui
	list *widget.List
	rows []choiceRow
	at   int // the marked row; -1 none
	mute bool
	// heard is told which row is marked.
	heard func(row int)
}

func newChooser(u *ui) *chooser {
	c := &chooser{u: u, at: -1}
	c.list = widget.NewList(func() int { return len(c.rows) },
		func() fyne.CanvasObject {
			name, beside := widget.NewLabel(""), widget.NewLabel("")
			name.Truncation = fyne.TextTruncateEllipsis
			beside.Importance = widget.LowImportance
			return container.New(layout.NewBorderLayout(nil, nil, nil, beside), beside, name)
		},
		func(i widget.ListItemID, o fyne.CanvasObject) {
			if i >= len(c.rows) {
				return
			}
			row, box := c.rows[i], o.(*fyne.Container)
			name, beside := box.Objects[1].(*widget.Label), box.Objects[0].(*widget.Label)
			name.Importance = widget.MediumImportance
			if row.off {
				name.Importance = widget.LowImportance
			}
			name.SetText(row.name)
			beside.SetText(row.beside)
			box.Layout.Layout(box.Objects, box.Size()) // beside has another width
		})
	c.list.HideSeparators = true
	c.list.OnSelected = func(i widget.ListItemID) {
		c.at = i
		if !c.mute {
			u.guard(c.take)
		}
	}
	return c
}

// show takes the place of all rows and marks one, or none with -1.
func (c *chooser) show(rows []choiceRow, at int) {
	c.rows = rows
	c.at = -1
	c.list.UnselectAll()
	c.list.Refresh()
	c.mark(at)
}

// mark moves the mark without taking the row.
func (c *chooser) mark(at int) {
	if at < 0 || at >= len(c.rows) {
		return
	}
	c.mute = true
	c.list.Select(at)
	c.mute = false
	c.at = at
	if c.heard != nil {
		c.heard(at)
	}
}

// move marks another row.
func (c *chooser) move(by int) {
	if len(c.rows) > 0 {
		c.mark(min(max(c.at+by, 0), len(c.rows)-1))
	}
}

// take does what the marked row is for; false if there is none.
func (c *chooser) take() {
	if c.at >= 0 && c.at < len(c.rows) && !c.rows[c.at].off && c.rows[c.at].do != nil {
		c.rows[c.at].do()
	}
}

// high gives an object a height at least, in units at a scale of 1.
type high struct {
	u      *ui
	height float32
}

// Layout implements fyne.Layout.
func (high) Layout(objects []fyne.CanvasObject, size fyne.Size) { stacked{}.Layout(objects, size) }

// MinSize implements fyne.Layout.
func (h high) MinSize(objects []fyne.CanvasObject) fyne.Size {
	least := h.height * float32(h.u.zoom())
	room := h.u.win.Canvas().Size().Height - 230*float32(h.u.zoom())
	return fyne.NewSize(objects[0].MinSize().Width, max(min(least, room), 70))
}
