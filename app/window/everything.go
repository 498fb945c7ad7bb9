//go:build cgo && !nowindow

package window

import (
	"slices"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// A listedCommand is a command with where it stands.
type listedCommand struct {
	*command
	place string // menus, outermost first
	name  string
}

// everything lists all commands of all menus, in their order.
func (u *ui) everything() []listedCommand {
	var out []listedCommand
	u.each(func(place []string, c *command) {
		out = append(out, listedCommand{c, strings.Join(place, " › "), c.text()})
	})
	return out
}

// found are the commands whose name, menu or other words hold every word that is
// typed; those whose name begins with the first word come first, and what cannot
// be done now last.
func found(all []listedCommand, typed string) []listedCommand {
	words := strings.Fields(strings.ToLower(typed))
	rank := func(c listedCommand) int {
		name := strings.ToLower(c.name)
		switch {
		case c.off():
			return 3
		case len(words) == 0:
			return 0
		case strings.HasPrefix(name, words[0]):
			return 0
		case strings.Contains(name, words[0]):
			return 1
		}
		return 2
	}
	var out []listedCommand
	for _, c := range all {
		text := strings.ToLower(c.name + " " + c.place + " " + c.keysText())
		if c.also != nil {
			text += " " + strings.ToLower(c.also())
		}
		if !slices.ContainsFunc(words, func(w string) bool { return !strings.Contains(text, w) }) {
			out = append(out, c)
		}
	}
	slices.SortStableFunc(out, func(a, b listedCommand) int { return rank(a) - rank(b) })
	return out
}

// showEverything opens the list of all commands: typing narrows it, Return
// does the marked one.
func (u *ui) showEverything() {
	all := u.everything()
	list := newChooser(u)
	var popup *widget.PopUp
	hide := func() {
		popup.Hide()
		u.win.Canvas().Focus(u.view)
	}
	entry := &answerEntry{escape: hide, move: list.move}
	entry.ExtendBaseWidget(entry)
	entry.SetPlaceHolder(say("menu.everythingType"))
	show := func(typed string) {
		var rows []choiceRow
		for _, c := range found(all, typed) {
			beside := c.place
			if keys := c.keysText(); keys != "" {
				beside = keys + "   " + beside
			}
			name := c.name
			if c.off() && c.why != "" {
				beside = say(c.why) + "   " + beside
			}
			if c.on != nil && c.on() {
				name = "✓ " + name
			}
			rows = append(rows, choiceRow{name: name, beside: beside, off: c.off(), do: func() {
				hide()
				u.run(c.command)
			}})
		}
		if len(rows) == 0 {
			list.show([]choiceRow{{name: say("menu.everythingNone", typed), off: true}}, -1)
			return
		}
		list.show(rows, 0)
	}
	entry.OnChanged = func(s string) { u.guard(func() { show(s) }) }
	entry.OnSubmitted = func(string) { u.guard(list.take) }
	head := widget.NewLabelWithStyle(say("menu.everything"), fyne.TextAlignLeading, fyne.TextStyle{Bold: true})
	content := container.NewBorder(container.NewVBox(head, entry), nil, nil, nil, container.New(high{u, 380}, list.list))
	popup = widget.NewModalPopUp(container.NewPadded(content), u.win.Canvas())
	popup.Show()
	room := u.win.Canvas().Size()
	popup.Resize(fyne.NewSize(min(640*float32(u.zoom()), room.Width-40), popup.MinSize().Height))
	show("")
	u.win.Canvas().Focus(entry)
}
