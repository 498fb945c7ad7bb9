//go:build cgo && !nowindow

package window

import (
	"fmt"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"
	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/session"
	"lobewright/app/study"
)

// A command is something that a person can have done. Menus, shortcuts and the
// list of all commands are made from the same commands.
type command struct {
	key  string        // of its text
	more []any         // arguments of the text
	also func() string // other words that it is found by
	do   func()

	// A combination of keys, which works everywhere; key names without a
	// modifier stand in hand and are served by ui.key and ui.typed, those that
	// entries must keep for themselves by addShortcuts.
	letter   fyne.KeyName
	modifier fyne.KeyModifier
	hand     []string

	label   func() string // where the text changes; else that of the key
	on      func() bool   // commands that can be switched
	can     func() bool   // nil: always
	why     string        // key of why it cannot be done, where can says no
	menu    []*command    // a menu of its own
	refresh func() []*command
	item    *fyne.MenuItem
}

// A commandMenu is one menu of the bar; nil commands are rules.
type commandMenu struct {
	key      string
	commands []*command
}

// Modifiers, as shortcuts use them.
const (
	control = fyne.KeyModifierShortcutDefault
	shift   = fyne.KeyModifierShift
)

// rule separates commands.
var rule *command

// withKey gives a command a combination of keys.
func (c *command) withKey(letter fyne.KeyName, modifier fyne.KeyModifier) *command {
	c.letter, c.modifier = letter, modifier
	return c
}

// byHand names the keys that do the same in the picture.
func (c *command) byHand(keys ...string) *command {
	c.hand = keys
	return c
}

// text is what the command is called now.
func (c *command) text() string {
	if c.label != nil {
		return c.label()
	}
	return say(c.key, c.more...)
}

// keysText names the keys of a command.
func (c *command) keysText() string {
	var parts []string
	if c.letter != "" {
		parts = append(parts, keyText(c.letter, c.modifier))
	}
	for _, k := range c.hand {
		parts = append(parts, handKey(k))
	}
	return strings.Join(parts, ", ")
}

// handKey is the name of a key in the language in force: a key of the texts,
// or a letter as it is.
func handKey(k string) string {
	if len(k) > len("menu.") && strings.HasPrefix(k, "menu.") {
		return say(k)
	}
	return k
}

func keyText(key fyne.KeyName, modifier fyne.KeyModifier) string {
	text := say("menu.keyControl") + "+"
	if modifier&fyne.KeyModifierSuper != 0 {
		text = "Cmd+"
	}
	if modifier&fyne.KeyModifierShift != 0 {
		text += say("menu.keyShift") + "+"
	}
	if key == fyne.KeyMinus {
		return text + "−"
	}
	return text + string(key)
}

// commandMenus are all commands in their menus. Everything that the window can
// do can be reached from here.
func (u *ui) commandMenus() []commandMenu {
	return []commandMenu{
		{"menu.file", u.fileCommands()},
		{"menu.edit", u.editCommands()},
		{"menu.axes", u.axesCommands()},
		{"menu.view", u.viewCommands()},
		{"menu.play", u.playCommands()},
		{"partners.menu", u.partnerCommands()},
		{"menu.figure", u.figureCommands()},
		{"menu.help", u.helpCommands()},
	}
}

func (u *ui) fileCommands() []*command {
	quit := (&command{key: "menu.quit", do: u.quit}).withKey(fyne.KeyQ, control)
	return []*command{
		(&command{key: "menu.open", do: u.askOpen}).withKey(fyne.KeyO, control),
		{key: "menu.recent", refresh: u.recentCommands},
		{key: "menu.demos", menu: u.demoCommands()},
		(&command{key: "menu.paste", do: u.paste}).byHand("menu.keyPaste"),
		rule,
		(&command{key: "menu.saveStudy", do: u.save}).withKey(fyne.KeyS, control),
		(&command{key: "menu.saveStudyAs", do: u.askSave}).withKey(fyne.KeyS, control|shift),
		(&command{key: "menu.savePicture", do: u.askPicture}).withKey(fyne.KeyE, control),
		(&command{key: "menu.copyPicture", do: u.copyPicture}).withKey(fyne.KeyC, control|shift),
		{key: "menu.copyTable", menu: u.copyCommands()},
		rule,
		quit,
	}
}

func (u *ui) editCommands() []*command {
	step := func(key, why string, of func() (study.Step, bool), do func()) *command {
		return &command{key: key, do: do, why: why,
			can: func() bool { _, can := of(); return can },
			label: func() string {
				if s, can := of(); can {
					return say(key) + ": " + say(stepTexts[s])
				}
				return say(key)
			}}
	}
	return []*command{
		step("menu.undo", "menu.undoWhy", u.history.CanUndo, u.undo).byHand("menu.keyUndo"),
		step("menu.redo", "menu.redoWhy", u.history.CanRedo, u.redo).byHand("menu.keyRedo"),
		rule,
		(&command{key: "menu.typeBasis", do: func() { u.win.Canvas().Focus(u.basis) }}).withKey(fyne.KeyB, control),
		{key: "menu.noBasis", do: func() { u.setBasis(nil) }},
		rule,
		(&command{key: "menu.atomTable", also: func() string { return say("menu.atomTableAlso") }, do: u.showAtoms, on: func() bool { return u.atoms.pane.Visible() }}).withKey(fyne.KeyT, control),
		{key: "menu.addAtom", do: u.atoms.add, can: u.atoms.pane.Visible, why: "menu.addAtomWhy"},
		{key: "menu.removeAtom", do: u.atoms.remove, can: u.atoms.pane.Visible, why: "menu.addAtomWhy"},
		rule,
		{key: "menu.core", do: u.askCore},
		{key: "menu.spectators", do: u.askIgnore},
		{key: "menu.tolerance", do: u.askTolerance},
	}
}

func (u *ui) axesCommands() []*command {
	return append(u.frameCommands(), rule, &command{key: "menu.axesByHand", do: u.askAxes})
}

func (u *ui) viewCommands() []*command {
	look := func(key, letter string, v mgl64.Vec3) *command {
		return (&command{key: key, do: func() { u.along(v) }}).byHand(letter)
	}
	return []*command{
		look("menu.alongX", "x", mgl64.Vec3{1, 0, 0}),
		look("menu.alongY", "y", mgl64.Vec3{0, 1, 0}),
		look("menu.alongZ", "z", mgl64.Vec3{0, 0, 1}),
		(&command{key: "menu.alongOperation", do: u.alongOperation}).byHand("a"),
		rule,
		(&command{key: "menu.fit", do: u.fit}).byHand("f"),
		{key: "menu.firstView", do: u.firstView},
		(&command{key: "menu.larger", do: func() { u.zoomBy(1.2) }}).withKey(fyne.KeyEqual, control).byHand("+"),
		(&command{key: "menu.smaller", do: func() { u.zoomBy(1 / 1.2) }}).withKey(fyne.KeyMinus, control).byHand("−"),
		{key: "menu.parallel", on: func() bool { return u.now().Camera.Orthographic }, do: func() {
			s := u.now()
			s.Camera.Orthographic = !s.Camera.Orthographic
			u.do(study.StepPerspective, s)
		}},
		rule,
		(&command{key: "menu.keepView", do: u.askView}).withKey(fyne.KeyD, control),
		{key: "menu.views", refresh: u.viewCommandsKept},
		{key: "menu.forgetView", refresh: u.viewCommandsForget},
		rule,
		{key: "menu.colours", menu: []*command{
			u.themeCommand("menu.themeSystem", session.ThemeSystem), u.themeCommand("menu.themeLight", session.ThemeLight),
			u.themeCommand("menu.themeDark", session.ThemeDark), u.themeCommand("menu.themeContrast", session.ThemeContrast),
		}},
		{key: "menu.textSize", menu: u.sizeCommands()},
		{key: "menu.language", menu: u.languageCommands()},
		{key: "menu.motion", on: func() bool { return u.motion }, do: func() {
			u.motion = !u.motion
			u.preferences(func(p *session.Preferences) { p.NoMotion = !u.motion })
			u.updateMenus()
		}},
	}
}

func (u *ui) themeCommand(key string, t session.Theme) *command {
	return &command{key: key, do: func() { u.setTheme(t) }, on: func() bool { return u.colours.chosen == t }}
}

func (u *ui) sizeCommands() []*command {
	var out []*command
	for _, percent := range []int{85, 100, 115, 130, 150, 175, 200} {
		scale := float64(percent) / 100
		out = append(out, &command{key: "menu.percent", more: []any{percent}, do: func() { u.setScale(scale) },
			on: func() bool { return float32(u.zoom()) == float32(scale) }})
	}
	return out
}

func (u *ui) playCommands() []*command {
	return append([]*command{
		(&command{key: "menu.playOrPause", do: u.togglePlay}).withKey(fyne.KeyP, control).byHand("menu.keySpace"),
		(&command{key: "menu.toStart", do: func() { u.jump(0) }}).byHand("menu.keyHome"),
		(&command{key: "menu.toEnd", do: func() { u.jump(1) }}).byHand("menu.keyEnd"),
		rule,
		(&command{key: "menu.nextOperation", do: func() { u.nextOperation(1) }}).withKey(fyne.KeyPeriod, control).byHand("."),
		(&command{key: "menu.previousOperation", do: func() { u.nextOperation(-1) }}).withKey(fyne.KeyComma, control).byHand(","),
		(&command{key: "menu.nextFunction", do: func() { u.nextFunction(1) }}).byHand("n"),
		(&command{key: "menu.previousFunction", do: func() { u.nextFunction(-1) }}).byHand("N"),
		(&command{key: "menu.nextOrbital", do: func() { u.nextOrbital(1) }}).byHand("menu.keyPageDown"),
		(&command{key: "menu.previousOrbital", do: func() { u.nextOrbital(-1) }}).byHand("menu.keyPageUp"),
		rule,
	}, u.tallyCommands()...)
}

func (u *ui) figureCommands() []*command {
	look := func(key string, on func() bool, change func(*study.Study)) *command {
		return &command{key: key, on: on, do: func() {
			s := u.now()
			change(&s)
			u.thumbs.forget()
			u.do(study.StepLook, s)
		}}
	}
	ink := func() bool { return u.now().Look.Style == "ink" }
	return append(u.sheetCommands(), []*command{
		rule,
		look("menu.ink", ink, func(s *study.Study) {
			if s.Look.Style == "ink" {
				s.Look.Style = ""
			} else {
				s.Look.Style = "ink"
			}
		}),
		look("menu.coloured", func() bool { return u.now().Look.Coloured }, func(s *study.Study) { s.Look.Coloured = !s.Look.Coloured }),
		look("menu.labels", func() bool { return !u.now().Look.NoLabels }, func(s *study.Study) { s.Look.NoLabels = !s.Look.NoLabels }),
	}...)
}

func (u *ui) helpCommands() []*command {
	return []*command{
		(&command{key: "menu.everything", do: u.showEverything}).withKey(fyne.KeyF, control),
		rule,
		(&command{key: "menu.regionHelp", do: u.showHelp}).byHand("F1"),
		{key: "menu.firstSteps", do: u.steps.beginOnDemo},
		(&command{key: "menu.keys", do: u.showKeys}).withKey(fyne.KeyH, control|shift),
		{key: "menu.about", do: u.about},
	}
}

// menuLabel is the text of a command with its keys, as a menu shows it.
func (c *command) menuLabel() string {
	if keys := c.keysText(); keys != "" {
		return c.text() + "   " + keys
	}
	return c.text()
}

// off tells whether a command cannot be done now.
func (c *command) off() bool { return c.can != nil && !c.can() }

// makeItem makes the menu item of a command.
func (u *ui) makeItem(c *command) *fyne.MenuItem {
	if c == rule {
		return fyne.NewMenuItemSeparator()
	}
	var do func()
	if c.do != nil {
		do = func() { u.run(c) }
	}
	c.item = fyne.NewMenuItem(c.menuLabel(), do)
	if c.letter != "" {
		c.item.Shortcut = hiddenShortcut{&desktop.CustomShortcut{KeyName: c.letter, Modifier: c.modifier}}
	}
	if c.key == "menu.quit" {
		c.item.IsQuit = true
	}
	if c.menu != nil || c.refresh != nil {
		c.item.ChildMenu = u.childMenu(c)
	}
	return c.item
}

func (u *ui) childMenu(c *command) *fyne.Menu {
	menu := fyne.NewMenu("")
	for _, child := range c.children() {
		menu.Items = append(menu.Items, u.makeItem(child))
	}
	return menu
}

// children are the commands of a command's own menu.
func (c *command) children() []*command {
	if c.refresh != nil {
		return c.refresh()
	}
	return c.menu
}

// run does what a command says if that is possible: the toolkit runs the
// shortcuts of disabled items too.
func (u *ui) run(c *command) {
	u.guard(func() {
		if c.do != nil && (c.can == nil || c.can()) {
			c.do()
		}
	})
}

// each calls a function for every command with the texts of the menus that it
// stands in.
func (u *ui) each(f func(place []string, c *command)) {
	var within func(place []string, list []*command)
	within = func(place []string, list []*command) {
		for _, c := range list {
			switch {
			case c == rule:
			case c.menu != nil || c.refresh != nil:
				within(append(place[:len(place):len(place)], c.text()), c.children())
			default:
				f(place, c)
			}
		}
	}
	for _, m := range u.commands {
		within([]string{say(m.key)}, m.commands)
	}
}

// state tells when menus must be made anew.
func (u *ui) menuState() string {
	var b strings.Builder
	u.each(func(_ []string, c *command) {
		fmt.Fprint(&b, c.text(), c.on != nil && c.on(), c.can == nil || c.can(), "\n")
	})
	return b.String()
}
