//go:build cgo && !nowindow

package window

import (
	"path/filepath"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/widget"

	"lobewright/app/session"
	"lobewright/app/study"
	"lobewright/assets"
)

// stepTexts are the keys of what undo takes back.
var stepTexts = map[study.Step]string{
	study.StepOpen: "menu.stepOpen", study.StepCore: "menu.stepCore", study.StepTolerance: "menu.stepTolerance", study.StepFrame: "menu.stepFrame",
	study.StepBasis: "menu.stepBasis", study.StepAtoms: "menu.stepAtoms", study.StepFunction: "menu.stepFunction",
	study.StepIrrep: "menu.stepIrrep", study.StepPartner: "menu.stepPartner", study.StepElement: "menu.stepElement",
	study.StepTurn: "partners.stepTurn", study.StepMixing: "partners.stepMixing", study.StepCentral: "partners.stepCentral",
	study.StepOperation: "menu.stepOperation", study.StepPlay: "menu.stepPlay", study.StepScrub: "menu.stepScrub", study.StepAngle: "menu.stepAngle",
	study.StepOrbit: "menu.stepOrbit", study.StepZoom: "menu.stepZoom", study.StepPan: "menu.stepPan", study.StepFit: "menu.stepFit", study.StepAlong: "menu.stepAlong",
	study.StepPerspective: "menu.stepPerspective", study.StepLook: "menu.stepLook", study.StepFigure: "menu.stepFigure", study.StepChange: "menu.stepChange", study.StepAtomTable: "menu.stepAtomTable", study.StepView: "menu.stepView",
	study.StepAs: "frames.stepAs", study.StepHeld: "frames.stepHeld", study.StepSubgroup: "frames.stepSubgroup",
}

// A hiddenShortcut works like any other. The toolkit writes shortcuts that it
// knows in the colour of shadows, too pale to read, so labels name the keys.
type hiddenShortcut struct{ shortcut *desktop.CustomShortcut }

// ShortcutName implements fyne.Shortcut.
func (h hiddenShortcut) ShortcutName() string { return h.shortcut.ShortcutName() }

// mainMenu makes the main menu from the commands.
func (u *ui) mainMenu() *fyne.MainMenu {
	u.commands = u.commandMenus()
	var menus []*fyne.Menu
	for _, m := range u.commands {
		menu := fyne.NewMenu(say(m.key))
		for _, c := range m.commands {
			menu.Items = append(menu.Items, u.makeItem(c))
		}
		menus = append(menus, menu)
	}
	return fyne.NewMainMenu(menus...)
}

func (u *ui) recentCommands() []*command {
	var out []*command
	for _, r := range u.session.Recent() {
		label := r
		if filepath.IsAbs(r) {
			label = filepath.Base(r) + "   " + filepath.Dir(r)
		}
		out = append(out, &command{key: "menu.recent", label: func() string { return label }, do: func() { u.open(r, nil) }})
	}
	if len(out) == 0 {
		out = append(out, &command{key: "menu.noRecent", can: func() bool { return false }})
	}
	return out
}

func (u *ui) demoCommands() []*command {
	var out []*command
	for _, d := range assets.DemoList() {
		out = append(out, &command{key: "menu.demos", label: func() string { return d.Title }, also: func() string { return d.Name }, do: func() { u.openDemo(d.Name) }})
	}
	return out
}

// updateMenus shows what can be undone and what is on.
func (u *ui) updateMenus() {
	if u.commands == nil {
		return
	}
	state := u.menuState()
	if state == u.menusSaid {
		return
	}
	u.menusSaid = state
	var update func(list []*command)
	update = func(list []*command) {
		for _, c := range list {
			if c == rule || c.item == nil {
				continue
			}
			c.item.Label = c.menuLabel()
			c.item.Checked = c.on != nil && c.on()
			c.item.Disabled = c.can != nil && !c.can()
			if c.refresh != nil {
				c.item.ChildMenu = u.childMenu(c)
			}
			update(c.menu)
		}
	}
	for _, m := range u.commands {
		update(m.commands)
	}
	u.menusLater()
}

// menusLater has the bar of menus made anew when nothing has changed for a
// while: the toolkit makes every menu with all its items, which costs more than
// a picture.
func (u *ui) menusLater() {
	const rest = 300 * time.Millisecond
	if u.menusDue != nil {
		u.menusDue.Stop()
	}
	u.menusDue = time.AfterFunc(rest, func() {
		u.post(func() {
			menu := u.win.MainMenu()
			if u.closing || menu == nil {
				return
			}
			if _, open := u.win.Canvas().Focused().(interface{ Child() *widget.Menu }); open {
				u.menusLater() // it would close
				return
			}
			menu.Refresh()
		})
	})
}

// addShortcuts adds the keys that entries must keep for themselves, so that
// they cannot stand on menu items.
func (u *ui) addShortcuts() {
	c := u.win.Canvas()
	add := func(s fyne.Shortcut, do func()) { c.AddShortcut(s, func(fyne.Shortcut) { u.guard(do) }) }
	add(&fyne.ShortcutUndo{}, u.undo)
	add(&fyne.ShortcutRedo{}, u.redo)
	add(&desktop.CustomShortcut{KeyName: fyne.KeyZ, Modifier: fyne.KeyModifierShortcutDefault | fyne.KeyModifierShift}, u.redo)
	add(&fyne.ShortcutPaste{}, u.paste)
	// Where Tab goes from cell to cell these go to the next region.
	add(&desktop.CustomShortcut{KeyName: fyne.KeyTab, Modifier: fyne.KeyModifierControl}, c.FocusNext)
	add(&desktop.CustomShortcut{KeyName: fyne.KeyTab, Modifier: fyne.KeyModifierControl | fyne.KeyModifierShift}, c.FocusPrevious)
	c.SetOnTypedKey(func(e *fyne.KeyEvent) { u.guard(func() { u.key(e) }) })
	c.SetOnTypedRune(func(r rune) { u.guard(func() { u.typed(r) }) })
}

func (u *ui) modifiers() fyne.KeyModifier {
	if d, ok := u.app.Driver().(desktop.Driver); ok {
		return d.CurrentKeyModifiers()
	}
	return 0
}

// preferences changes what is kept of a person's habits.
func (u *ui) preferences(change func(*session.Preferences)) {
	p := u.session.Preferences()
	change(&p)
	if err := u.session.SetPreferences(p); err != nil {
		u.notice = told(err)
	}
}

func (u *ui) setTheme(t session.Theme) {
	u.preferences(func(p *session.Preferences) { p.Theme = t })
	u.colours.chosen = t
	u.restyle()
}

func (u *ui) setScale(scale float64) {
	u.preferences(func(p *session.Preferences) { p.Scale = scale })
	u.colours.scale = float32(scale)
	u.restyle()
}

// restyle follows a change of theme or size.
func (u *ui) restyle() {
	u.app.Settings().SetTheme(u.colours)
	u.thumbs.forget()
	u.view.ring.paint(u.palette().Accent)
	u.scale.restyle(u)
	for _, t := range u.tracks {
		t.line.FillColor = u.palette().Rule
	}
	u.win.Content().Refresh()
	u.show(false)
	u.refreshPanes()
}

func (u *ui) quit() {
	u.close()
	u.app.Quit()
}
