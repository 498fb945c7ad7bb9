//go:build cgo && !nowindow

package window

import (
	"path/filepath"
	"slices"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// A question is a small sheet over the window with one line to type. What is
// wrong with the answer appears beside it, and the sheet stays.
type question struct {
	u       *ui
	popup   *widget.PopUp
	entry   *answerEntry
	fault   *canvas.Text
	asked   func(text string, done func(error))
	content *fyne.Container
}

// An answerEntry tells of the keys that an entry leaves unused.
type answerEntry struct {
	widget.Entry
	escape func()
	tab    func()
	move   func(by int) // through a list below
}

// TypedKey implements fyne.Focusable.
func (e *answerEntry) TypedKey(k *fyne.KeyEvent) {
	switch {
	case k.Name == fyne.KeyEscape && e.escape != nil:
		e.escape()
	case k.Name == fyne.KeyTab && e.tab != nil:
		e.tab()
	case e.move != nil && k.Name == fyne.KeyDown:
		e.move(1)
	case e.move != nil && k.Name == fyne.KeyUp:
		e.move(-1)
	case e.move != nil && k.Name == fyne.KeyPageDown:
		e.move(10)
	case e.move != nil && k.Name == fyne.KeyPageUp:
		e.move(-10)
	default:
		e.Entry.TypedKey(k)
	}
}

// TappedSecondary implements fyne.SecondaryTappable. The toolkit (2.7.1) fails
// on a nil pointer when the menu of an entry is asked for at the wrong moment;
// then there is none.
func (e *answerEntry) TappedSecondary(p *fyne.PointEvent) {
	defer func() { _ = recover() }()
	e.Entry.TappedSecondary(p)
}

// AcceptsTab implements fyne.Tabbable.
func (e *answerEntry) AcceptsTab() bool { return e.tab != nil }

// A sheetButton closes its sheet by Escape too.
type sheetButton struct {
	widget.Button
	escape func()
}

func newSheetButton(label string, do, escape func()) *sheetButton {
	b := &sheetButton{escape: escape}
	b.Text, b.OnTapped = label, do
	b.ExtendBaseWidget(b)
	return b
}

// TypedKey implements fyne.Focusable.
func (b *sheetButton) TypedKey(k *fyne.KeyEvent) {
	switch k.Name {
	case fyne.KeyEscape:
		b.escape()
	case fyne.KeyReturn, fyne.KeyEnter:
		b.OnTapped()
	default:
		b.Button.TypedKey(k)
	}
}

// ask opens a sheet; answer returns what is wrong, or nil to close it.
func (u *ui) ask(title, text, now string, answer func(string) error) *question {
	return u.askLater(title, text, now, func(text string, done func(error)) { done(answer(text)) })
}

// askLater is ask for answers that take time.
func (u *ui) askLater(title, text, now string, answer func(text string, done func(error)), more ...fyne.CanvasObject) *question {
	q := &question{u: u, asked: answer}
	q.entry = &answerEntry{escape: q.close}
	q.entry.ExtendBaseWidget(q.entry)
	q.entry.SetText(now)
	q.entry.CursorColumn = len([]rune(now))
	q.entry.OnSubmitted = func(string) { u.guard(q.submit) }
	p := u.palette()
	q.fault = canvas.NewText("", p.Accent)
	q.fault.TextSize = secondSize * float32(u.zoom())
	head := widget.NewLabelWithStyle(title, fyne.TextAlignLeading, fyne.TextStyle{Bold: true})
	ok := newSheetButton(say("files.ok"), func() { u.guard(q.submit) }, q.close)
	ok.Importance = widget.HighImportance
	cancel := newSheetButton(say("files.cancel"), q.close, q.close)
	explain := widget.NewLabel(text)
	explain.Wrapping = fyne.TextWrapWord
	q.content = container.NewVBox(head, explain, q.entry, q.fault)
	for _, m := range more {
		q.content.Add(m)
	}
	q.content.Add(container.NewBorder(nil, nil, nil, container.NewHBox(cancel, ok)))
	q.popup = widget.NewModalPopUp(container.NewPadded(q.content), u.win.Canvas())
	q.popup.Show()
	q.fitted()
	u.win.Canvas().Focus(q.entry)
	q.entry.TypedShortcut(&fyne.ShortcutSelectAll{}) // typing replaces it
	return q
}

// fitted gives the sheet a width that suits the window.
func (q *question) fitted() {
	room := q.u.win.Canvas().Size()
	q.popup.Resize(fyne.NewSize(min(560*float32(q.u.zoom()), room.Width-40), q.popup.MinSize().Height))
}

func (q *question) close() {
	q.popup.Hide()
	q.u.win.Canvas().Focus(q.u.view)
}

func (q *question) submit() { q.asked(q.entry.Text, q.answered) }

// answered closes the sheet, or says what is wrong.
func (q *question) answered(err error) {
	if err == nil {
		q.close()
		return
	}
	q.say(told(err))
}

// say shows what is wrong, in as many lines as the sheet is wide.
func (q *question) say(text string) {
	q.fault.Text = ""
	width := q.popup.Size().Width - 48
	lines := wrapPlain(text, width, q.fault.TextSize)
	// One canvas.Text is one line, so the others follow it.
	for i := len(q.content.Objects) - 1; i >= 0; i-- {
		if t, ok := q.content.Objects[i].(*canvas.Text); ok && t != q.fault {
			q.content.Remove(t)
		}
	}
	at := slices.Index(q.content.Objects, fyne.CanvasObject(q.fault))
	for i, line := range lines {
		if i == 0 {
			q.fault.Text = line
			continue
		}
		t := canvas.NewText(line, q.fault.Color)
		t.TextSize = q.fault.TextSize
		q.content.Objects = slices.Insert(q.content.Objects, at+i, fyne.CanvasObject(t))
	}
	q.content.Refresh()
	q.fitted()
}

func wrapPlain(text string, width, size float32) []string {
	var lines []string
	line := ""
	for _, word := range strings.Fields(text) {
		longer := strings.TrimSpace(line + " " + word)
		if line != "" && fyne.MeasureText(longer, size, fyne.TextStyle{}).Width > width {
			lines = append(lines, line)
			longer = word
		}
		line = longer
	}
	return append(lines, line)
}

// askReplace asks whether a file may be written over, on top of the sheet that
// asked for its name, which stays if it may not.
func (u *ui) askReplace(path string, replace func()) {
	under := u.win.Canvas().Focused()
	var popup *widget.PopUp
	back := func() {
		popup.Hide()
		if under != nil {
			u.win.Canvas().Focus(under)
		}
	}
	ok := newSheetButton(say("files.replace"), func() { back(); u.guard(replace) }, back)
	ok.Importance = widget.HighImportance
	cancel := newSheetButton(say("files.cancel"), back, back)
	text := widget.NewLabel(say("files.exists", filepath.Base(path)))
	text.Wrapping = fyne.TextWrapWord
	popup = widget.NewModalPopUp(container.NewPadded(container.NewVBox(text,
		container.NewBorder(nil, nil, nil, container.NewHBox(cancel, ok)))), u.win.Canvas())
	popup.Show()
	width := min(420*float32(u.zoom()), u.win.Canvas().Size().Width-40)
	popup.Resize(fyne.NewSize(width, popup.MinSize().Height))
	popup.Resize(fyne.NewSize(width, popup.MinSize().Height)) // the text has been wrapped
	u.win.Canvas().Focus(ok)
}
