//go:build cgo && !nowindow

package window

import (
	"fmt"
	"path/filepath"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"
	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/session"
	"lobewright/app/study"
	"lobewright/assets"
)

// stepTexts say what undo takes back.
var stepTexts = map[study.Step]string{
	study.StepOpen: "opening", study.StepCore: "choice of core", study.StepTolerance: "tolerance", study.StepFrame: "frame",
	study.StepBasis: "basis", study.StepAtoms: "choice of atoms", study.StepFunction: "choice of function",
	study.StepIrrep: "choice of group orbital", study.StepPartner: "choice of partner", study.StepElement: "matrix element",
	study.StepOperation: "choice of operation", study.StepPlay: "playing", study.StepScrub: "scrubbing", study.StepAngle: "angle",
	study.StepOrbit: "turning", study.StepZoom: "zooming", study.StepPan: "moving", study.StepFit: "fitting", study.StepAlong: "looking along an axis",
	study.StepPerspective: "perspective", study.StepLook: "look", study.StepFigure: "figure", study.StepChange: "change",
}

// menuItems are those whose text or state changes.
type menuItems struct {
	undo, redo, parallel, ink, labels, motion *fyne.MenuItem
	themes                                    map[session.Theme]*fyne.MenuItem
	recent                                    *fyne.MenuItem
	last                                      string // what they showed
}

// A hiddenShortcut works like any other. The toolkit writes shortcuts that it
// knows in the colour of shadows, too pale to read, so labels name the keys.
type hiddenShortcut struct{ shortcut *desktop.CustomShortcut }

// ShortcutName implements fyne.Shortcut.
func (h hiddenShortcut) ShortcutName() string { return h.shortcut.ShortcutName() }

func keyText(key fyne.KeyName, modifier fyne.KeyModifier) string {
	text := "Ctrl+"
	if modifier&fyne.KeyModifierSuper != 0 {
		text = "Cmd+"
	}
	if modifier&fyne.KeyModifierShift != 0 {
		text += "Shift+"
	}
	return text + string(key)
}

// menus makes the main menu. Everything in the window can be reached from it.
func (u *ui) menus() *fyne.MainMenu {
	item := func(label string, do func()) *fyne.MenuItem {
		return fyne.NewMenuItem(label, func() { u.guard(do) })
	}
	with := func(i *fyne.MenuItem, key fyne.KeyName, modifier fyne.KeyModifier) *fyne.MenuItem {
		i.Shortcut = hiddenShortcut{&desktop.CustomShortcut{KeyName: key, Modifier: modifier}}
		if text := keyText(key, modifier); !strings.Contains(i.Label, "   ") {
			i.Label += "   " + text
		}
		return i
	}
	const control, shift = fyne.KeyModifierShortcutDefault, fyne.KeyModifierShift
	rule := fyne.NewMenuItemSeparator
	m := &u.items
	m.recent = item("Open recent", nil)
	m.recent.ChildMenu = u.recentMenu()
	demos := item("Demonstrations", nil)
	demos.ChildMenu = u.demoMenu()
	quit := item("Quit", u.quit)
	quit.IsQuit = true
	file := fyne.NewMenu(say("menu.file"),
		with(item("Open …", u.askOpen), fyne.KeyO, control), m.recent, demos, item("Paste coordinates   Ctrl+V", u.paste), rule(),
		with(item("Save study as …", u.askSave), fyne.KeyS, control), with(item("Save picture as …", u.askPicture), fyne.KeyE, control), rule(), quit)

	m.undo, m.redo = item("Undo", u.undo), item("Redo", u.redo)
	edit := fyne.NewMenu(say("menu.edit"), m.undo, m.redo, rule(),
		with(item("Type a selection of functions", func() { u.win.Canvas().Focus(u.basis) }), fyne.KeyB, control),
		item("No functions", func() { u.setBasis(nil) }), rule(),
		item("Axes …", u.askAxes), item("Core …", u.askCore), item("Spectators …", u.askIgnore), item("Tolerance …", u.askTolerance))

	m.parallel = item("Without perspective", func() {
		s := u.now()
		s.Camera.Orthographic = !s.Camera.Orthographic
		u.do(study.StepPerspective, s)
	})
	lookAlong := func(label string, v mgl64.Vec3) *fyne.MenuItem { return item(label, func() { u.along(v) }) }
	axes := fyne.NewMenu("Axes",
		lookAlong("Look along x   x", mgl64.Vec3{1, 0, 0}), lookAlong("Look along y   y", mgl64.Vec3{0, 1, 0}), lookAlong("Look along z   z", mgl64.Vec3{0, 0, 1}),
		item("Look along the operation's axis   a", u.alongOperation), rule(),
		item("Fit   f", u.fit), item("First view", u.firstView),
		with(item("Larger   +", func() { u.zoomBy(1.2) }), fyne.KeyEqual, control), with(item("Smaller   −", func() { u.zoomBy(1 / 1.2) }), fyne.KeyMinus, control),
		rule(), m.parallel)

	m.motion = item("Motion", func() {
		u.motion = !u.motion
		u.preferences(func(p *session.Preferences) { p.NoMotion = !u.motion })
		u.updateMenus()
	})
	play := fyne.NewMenu("Play",
		with(item("Play or pause   Space", u.togglePlay), fyne.KeyP, control), item("To the start   Home", func() { u.jump(0) }), item("To the end   End", func() { u.jump(1) }), rule(),
		with(item("Next operation   .", func() { u.nextOperation(1) }), fyne.KeyPeriod, control), with(item("Operation before   ,", func() { u.nextOperation(-1) }), fyne.KeyComma, control),
		item("Next function   n", func() { u.nextFunction(1) }), item("Function before   N", func() { u.nextFunction(-1) }),
		item("Next group orbital   Page down", func() { u.nextOrbital(1) }), item("Group orbital before   Page up", func() { u.nextOrbital(-1) }), rule(), m.motion)

	m.ink = item("Drawn in ink", func() {
		s := u.now()
		if s.Look.Style == "ink" {
			s.Look.Style = ""
		} else {
			s.Look.Style = "ink"
		}
		u.thumbs.forget()
		u.do(study.StepLook, s)
	})
	m.labels = item("Labels of atoms", func() {
		s := u.now()
		s.Look.NoLabels = !s.Look.NoLabels
		u.do(study.StepLook, s)
	})
	m.themes = map[session.Theme]*fyne.MenuItem{}
	theme := func(label string, t session.Theme) *fyne.MenuItem {
		i := item(label, func() { u.setTheme(t) })
		m.themes[t] = i
		return i
	}
	sizes := item("Size of text", nil)
	sizes.ChildMenu = fyne.NewMenu("")
	for _, percent := range []float64{85, 100, 115, 130, 150} {
		sizes.ChildMenu.Items = append(sizes.ChildMenu.Items, item(fmt.Sprintf("%.0f %%", percent), func() { u.setScale(percent / 100) }))
	}
	figure := fyne.NewMenu("Figure", m.ink, m.labels, rule(),
		theme("Colours of the system", ""), theme("Light", session.ThemeLight), theme("Dark", session.ThemeDark), theme("High contrast", session.ThemeContrast), rule(), sizes)

	help := fyne.NewMenu("Help", with(item("Keys and mouse", u.showKeys), fyne.KeyH, control|shift), item("About Lobewright", u.about))
	return fyne.NewMainMenu(file, edit, axes, play, figure, help)
}

func (u *ui) recentMenu() *fyne.Menu {
	menu := fyne.NewMenu("")
	for _, r := range u.session.Recent() {
		label := r
		if filepath.IsAbs(r) {
			label = filepath.Base(r) + "   " + filepath.Dir(r)
		}
		menu.Items = append(menu.Items, fyne.NewMenuItem(label, func() { u.guard(func() { u.open(r, nil) }) }))
	}
	if len(menu.Items) == 0 {
		none := fyne.NewMenuItem("none yet", nil)
		none.Disabled = true
		menu.Items = append(menu.Items, none)
	}
	return menu
}

func (u *ui) demoMenu() *fyne.Menu {
	menu := fyne.NewMenu("")
	for _, d := range assets.DemoList() {
		menu.Items = append(menu.Items, fyne.NewMenuItem(d.Title, func() { u.guard(func() { u.openDemo(d.Name) }) }))
	}
	return menu
}

// updateMenus shows what can be undone and what is on.
func (u *ui) updateMenus() {
	m := &u.items
	if m.undo == nil {
		return
	}
	s := u.now()
	undo, canUndo := u.history.CanUndo()
	redo, canRedo := u.history.CanRedo()
	state := fmt.Sprint(undo, canUndo, redo, canRedo, s.Camera.Orthographic, s.Look.Style, s.Look.NoLabels, u.motion, u.colours.chosen, u.session.Recent())
	if state == m.last {
		return
	}
	m.last = state
	set := func(i *fyne.MenuItem, text string, step study.Step, can bool, key string) {
		i.Label, i.Disabled = text+"   "+key, !can
		if can {
			i.Label = text + ": " + stepTexts[step] + "   " + key
		}
	}
	set(m.undo, "Undo", undo, canUndo, "Ctrl+Z")
	set(m.redo, "Redo", redo, canRedo, "Ctrl+Y")
	m.parallel.Checked = s.Camera.Orthographic
	m.ink.Checked = s.Look.Style == "ink"
	m.labels.Checked = !s.Look.NoLabels
	m.motion.Checked = u.motion
	for t, i := range m.themes {
		i.Checked = t == u.colours.chosen
	}
	m.recent.ChildMenu = u.recentMenu()
	if menu := u.win.MainMenu(); menu != nil {
		menu.Refresh()
	}
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
		u.notice = err.Error()
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
