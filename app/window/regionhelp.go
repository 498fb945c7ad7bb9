//go:build cgo && !nowindow

package window

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/widget"

	"lobewright/app/notation"
)

// words is a text of plain words.
func words(s string) notation.Text { return notation.Words(s) }

// regionHelp is title and text, as keys, of the region that has the keyboard.
func (u *ui) regionHelp() (title, text string) {
	switch f := u.win.Canvas().Focused(); f {
	case u.given, u.fault, u.basis:
		return "help.given", "help.givenText"
	case u.atoms.pane:
		return "help.atoms", "help.atomsText"
	case u.pages.pane, u.pages.preview.pane:
		if u.pages.open == sheetPage || u.pages.open == filmPage {
			return "figure.help", "figure.helpText"
		}
	case u.follows:
		return "help.follows", "help.followsText"
	case u.detail:
		return "help.detail", "help.detailText"
	case u.ledger:
		return "help.ledger", "help.ledgerText"
	case u.scrub, u.angle, u.play, u.said:
		return "help.play", "help.playText"
	}
	return "help.picture", "help.pictureText"
}

// showHelp says what the region with the keyboard is for.
func (u *ui) showHelp() {
	if u.win.Canvas().Overlays().Top() != nil {
		return
	}
	back := u.win.Canvas().Focused()
	title, text := u.regionHelp()
	u.showText(say(title), say(text))
	u.afterSheet = back
}

// A hintButton says what it does while the pointer rests on it.
type hintButton struct {
	widget.Button
	hint   func() string
	onHint func(text string, at fyne.Position)
	help   func()
}

// MouseIn implements desktop.Hoverable.
func (b *hintButton) MouseIn(e *desktop.MouseEvent) {
	b.Button.MouseIn(e)
	b.onHint(b.hint(), e.AbsolutePosition)
}

// MouseOut implements desktop.Hoverable.
func (b *hintButton) MouseOut() {
	b.Button.MouseOut()
	b.onHint("", fyne.Position{})
}

// TypedKey implements fyne.Focusable.
func (b *hintButton) TypedKey(e *fyne.KeyEvent) {
	if e.Name == fyne.KeyF1 {
		b.help()
		return
	}
	b.Button.TypedKey(e)
}

// newIconButton makes a button without words.
func (u *ui) newIconButton(icon fyne.Resource, hint string, do func()) *hintButton {
	b := &hintButton{hint: func() string { return say(hint) }, onHint: u.hint, help: u.showHelp}
	b.Icon, b.Importance = icon, widget.LowImportance
	b.OnTapped = func() { u.guard(do) }
	b.ExtendBaseWidget(b)
	return b
}

// A hintEntry says what may be typed while the pointer rests on it.
type hintEntry struct {
	widget.Entry
	hint   string
	onHint func(text string, at fyne.Position)
	help   func()
	leave  func() // gives the keyboard back
}

// MouseIn implements desktop.Hoverable.
func (e *hintEntry) MouseIn(m *desktop.MouseEvent) { e.onHint(say(e.hint), m.AbsolutePosition) }

// MouseMoved implements desktop.Hoverable.
func (e *hintEntry) MouseMoved(*desktop.MouseEvent) {}

// MouseOut implements desktop.Hoverable.
func (e *hintEntry) MouseOut() { e.onHint("", fyne.Position{}) }

// TappedSecondary implements fyne.SecondaryTappable. See answerEntry.
func (e *hintEntry) TappedSecondary(p *fyne.PointEvent) {
	defer func() { _ = recover() }()
	e.Entry.TappedSecondary(p)
}

// TypedKey implements fyne.Focusable.
func (e *hintEntry) TypedKey(k *fyne.KeyEvent) {
	switch k.Name {
	case fyne.KeyF1:
		e.help()
	case fyne.KeyEscape:
		e.SetText("")
		e.leave()
	default:
		e.Entry.TypedKey(k)
	}
}
