//go:build cgo && !nowindow

package window

import (
	"fmt"
	"os"
	"runtime"
	"runtime/debug"
	"strings"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"

	"lobewright/app/picture"
	"lobewright/app/session"
	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/assets"
	"lobewright/orbitals"
	"lobewright/orbitals/structure"
	"lobewright/render"
)

// An ui is the whole window. Its fields belong to the toolkit's goroutine.
type ui struct {
	app     fyne.App
	win     fyne.Window
	version string
	post    func(func())

	session *session.Session
	history *study.History
	work    *work.Work
	service *work.Service
	state   *work.State // the newest; never nil
	colours look
	motion  bool // operations move; else they are shown as stills

	view      *viewport
	given     *pane      // left
	atoms     *atomTable // in the place of given while atoms are edited
	pages     pages      // in the place of given: all about frames
	follows   *pane      // right: content and group orbitals
	detail    *pane      // right, below: the chosen group orbital
	beside    *pane      // below a split picture: the matrix
	sets      setView
	forms     formCache
	ledger    *pane // below: one column an operation
	said      *pane // below: what the function has become
	scrub     *scrubBar
	angle     *scrubBar
	tracks    []track
	scale     angleScale
	angles    *fyne.Container // angle with its name and value, for linear molecules
	angleText *widget.Button  // names the angle; a click asks for it
	basis     *hintEntry
	fault     *pane // above basis: what is wrong with what was typed
	play      *hintButton
	oneByOne  *hintButton
	scrolled  string // the structure that the panes are scrolled for
	hints     *hintBox
	thumbs    *thumbs
	player    *player
	commands  []commandMenu
	menusSaid string // the state that the menus show
	menusDue  *time.Timer
	panes     render.Renderer // of all panes

	// typedProblem is what is wrong with the functions that were typed.
	typedProblem string
	// openProblem is what is wrong with the file that was to be opened last.
	openProblem string
	notice      string // a remark of the program itself
	// studyFile is where the study was read from or saved to last; see hasFile.
	studyFile, studyOf string

	watch       *fileWatch
	changedFile *changedFile // on the disk, by another program
	steps       *firstSteps
	afterSheet  fyne.Focusable // gets the keyboard back when a text is closed

	sights  sightCache
	images  imageCache
	book    ledgerBook
	tally   *tally
	glide   *glide
	fading  *fading
	closing bool
	mark    func(string) // measures, if asked
	// measured is nil if nobody asks.
	measured *measured
}

// firstDemo is what the window shows the first time.
const firstDemo = "square-plane"

// newUI makes the window's content for an app. Nothing is computed or drawn
// before the study is set.
// post has a function run on the toolkit's goroutine.
func newUI(app fyne.App, win fyne.Window, s *session.Session, version string, post func(func())) *ui {
	u := &ui{app: app, win: win, version: version, session: s, state: &work.State{}, post: post}
	p := s.Preferences()
	u.colours = look{chosen: p.Theme, dark: systemIsDark(app), scale: float32(p.Scale)}
	u.motion = !p.NoMotion
	app.Settings().SetTheme(u.colours)

	u.history = study.NewHistory(study.Study{})
	u.work = work.New(structure.Inputs{Demo: assets.Demos()})
	u.service = work.NewService(u.work, post, func(st *work.State) { u.guard(func() { u.deliver(st) }) })
	u.hints = newHintBox(u)
	u.steps = newFirstSteps(u)
	u.watch = newFileWatch(lookInterval, u.fileChanged)
	u.thumbs = newThumbs(u)
	u.player, u.tally = newPlayer(u), newTally(u)
	u.view = u.newView()
	u.given = newPane(u.drawGiven, u)
	u.given.least = fyne.NewSize(leftWidth, 100)
	u.atoms = newAtomTable(u)
	u.newPages()
	u.follows = newPane(u.drawFollows, u)
	u.follows.least = fyne.NewSize(rightWidth, 100)
	u.detail = newPane(u.drawDetail, u)
	u.detail.least = fyne.NewSize(rightWidth, 176)
	u.beside = newPane(u.drawBeside, u)
	u.beside.Hide()
	u.ledger = newPane(u.drawLedger, u)
	u.ledger.sideways = true
	u.ledger.onKey = u.ledgerKeys
	u.ledger.least = fyne.NewSize(200, ledgerHeight)
	u.said = newPane(u.drawSaid, u)
	u.said.least = fyne.NewSize(160, 36)
	u.scrub = newScrubBar(u, 1, 0.01, "ledger.scrubHint")
	u.scrub.change = u.scrubbed
	u.scrub.end = u.commit
	u.angle = newScrubBar(u, 359, 1, "ledger.angleHint")
	u.angle.change = u.angled
	u.angle.end = u.commit
	u.angleText = newAngleButton(u)
	u.angles = container.NewBorder(nil, nil, container.New(widest{}, u.angleText), nil, u.onScale(u.angle))
	u.angles.Hide()
	u.fault = newPane(u.drawFault, u)
	u.fault.least = fyne.NewSize(100, 54)
	u.fault.Hide()
	u.basis = &hintEntry{hint: "given.typeHint", onHint: u.hint, help: u.showHelp}
	u.basis.ExtendBaseWidget(u.basis)
	u.basis.leave = func() { u.win.Canvas().Focus(u.view) }
	u.sayBasisExample()
	u.basis.OnChanged = func(string) { u.sayTyped("") }
	u.basis.OnSubmitted = func(text string) { u.guard(func() { u.typeBasis(text) }) }
	win.SetContent(u.assemble())
	win.SetMainMenu(u.mainMenu())
	u.addShortcuts()
	return u
}

// systemIsDark tells whether the desktop asks for dark colours. Without a
// desktop the toolkit says dark; the program's own choice is light.
func systemIsDark(app fyne.App) bool {
	if runtime.GOOS == "linux" && os.Getenv("DBUS_SESSION_BUS_ADDRESS") == "" {
		return false
	}
	return app.Settings().ThemeVariant() == theme.VariantDark
}

// sayBasisExample shows where functions are typed what may be typed there for
// the structure at hand: its commonest atoms, hydrogen only if there are no
// others, with σ functions.
func (u *ui) sayBasisExample() {
	example := "Cl:sigma" // no words: it is typed
	if g := u.state.Group; g != nil {
		count, best := map[string]int{}, ""
		for _, a := range g.Molecule.Atoms {
			count[a.Element.Symbol()]++
		}
		for _, a := range g.Molecule.Atoms {
			if e := a.Element.Symbol(); best == "" || best == "H" || e != "H" && count[e] > count[best] {
				best = e
			}
		}
		example = best + ":sigma"
		if best == "H" {
			example = "H:s"
		}
	}
	u.basis.SetPlaceHolder(say("given.typeExample", example))
}

// Widths and heights of the regions, in units.
const (
	leftWidth  = 250
	rightWidth = 262
	pad        = 12
)

func (u *ui) assemble() fyne.CanvasObject {
	u.play = u.newIconButton(theme.MediaPlayIcon(), "ledger.playHint", u.togglePlay)
	u.oneByOne = u.newIconButton(nil, "ledger.oneByOneHint", u.tally.start)
	u.oneByOne.SetText(say("ledger.oneByOne"))
	hint := u.oneByOne.hint
	u.oneByOne.hint = func() string {
		switch g := u.state.Group; {
		case !u.oneByOne.Disabled():
			return hint()
		case g != nil && g.Fit.Setting.Infinite():
			return say("ledger.oneByOneInfinite")
		}
		return u.ledgerNeed()
	}
	controls := container.NewHBox(
		u.newIconButton(theme.MediaSkipPreviousIcon(), "ledger.startHint", func() { u.jump(0) }),
		u.play,
		u.newIconButton(theme.MediaSkipNextIcon(), "ledger.endHint", func() { u.jump(1) }),
		u.oneByOne,
	)
	rule := func() fyne.CanvasObject { return widget.NewSeparator() }
	bars := container.New(&shares{weights: []float32{1, 1.1}}, u.onTrack(u.scrub), u.angles)
	row := container.NewBorder(nil, nil, controls, nil, container.New(&shares{weights: []float32{1, 1.1}}, bars, u.said))
	left := container.New(&column{down: true, share: sideShare}, container.NewStack(u.given, u.atoms.pane, u.pages.pane), u.fault, container.NewPadded(u.basis))
	right := container.New(&column{down: true, share: detailShare}, u.follows, rule(), u.detail)
	picture := container.New(&column{down: true, share: ledgerShare}, u.steps.over(container.NewStack(u.view, u.pages.preview.pane)), u.beside)
	first := func() float32 {
		if u.pages.pane.Visible() || u.atoms.pane.Visible() {
			return pageShare
		}
		return sideShare
	}
	middle := container.New(&column{rest: 2, share: sideShare, first: first}, left, rule(), picture, rule(), right)
	whole := container.New(&column{down: true, share: ledgerShare}, middle, rule(), u.ledger, rule(), container.NewPadded(row))
	return container.New(layout.NewStackLayout(), whole, u.hints.layer)
}

// shares lays its visible objects side by side by weights.
type shares struct{ weights []float32 }

func (s *shares) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	sum := float32(0)
	for i, o := range objects {
		if o.Visible() {
			sum += s.weights[i]
		}
	}
	x := float32(0)
	for i, o := range objects {
		if o.Visible() {
			w := size.Width * s.weights[i] / sum
			o.Move(fyne.NewPos(x, 0))
			o.Resize(fyne.NewSize(w, size.Height))
			x += w
		}
	}
}

func (s *shares) MinSize(objects []fyne.CanvasObject) fyne.Size {
	var least fyne.Size
	for _, o := range objects {
		if o.Visible() {
			m := o.MinSize()
			least.Width += m.Width
			least.Height = max(least.Height, m.Height)
		}
	}
	return least
}

func (u *ui) palette() assets.Palette { return u.colours.palette() }

func (u *ui) zoom() float64 {
	if u.colours.scale > 0 {
		return float64(u.colours.scale)
	}
	return 1
}

// now is the study in force.
func (u *ui) now() study.Study { return u.history.Now() }

// start puts a study on the screen without a step of history.
func (u *ui) start(s study.Study) {
	u.history.Reset(s)
	u.changed()
}

// do is one finished step.
func (u *ui) do(step study.Step, s study.Study) {
	u.player.stop()
	u.history.Do(step, s)
	u.changed()
	u.steps.did(step)
}

// commit ends a gesture.
func (u *ui) commit() {
	u.history.Commit()
	u.changed()
}

// changed follows a change of the study.
func (u *ui) changed() {
	s := u.now()
	u.hints.show("", fyne.Position{})
	if s.Structure != u.scrolled {
		u.scrolled = s.Structure
		for _, p := range []*pane{u.given, u.ledger, u.follows, u.detail} {
			p.scrollTo(0)
		}
	}
	u.session.Keep(s)
	u.measured.chosen(s.Basis)
	u.watchFiles()
	u.service.Request(s)
	u.pages.changed()
	u.show(false)
	u.refreshPanes()
}

func (u *ui) refreshPanes() {
	u.given.Update()
	if u.atoms.pane.Visible() {
		u.atoms.follow()
		u.atoms.pane.Update()
	}
	u.pages.pane.Update()
	if u.pages.open == sheetPage {
		u.pages.preview.pane.Update()
	}
	u.follows.Update()
	u.detail.Update()
	u.beside.Update()
	u.ledger.Update()
	u.said.Update()
	u.allowOneByOne()
	u.updateMenus()
}

// allowOneByOne lets the sum be played where there is one.
func (u *ui) allowOneByOne() {
	can := u.tally.ledger != nil || u.ledgerNeed() == ""
	switch {
	case can && u.oneByOne.Disabled():
		u.oneByOne.Enable()
	case !can && !u.oneByOne.Disabled():
		u.oneByOne.Disable()
	}
}

// deliver takes new results.
func (u *ui) deliver(st *work.State) {
	before := u.state
	if before.Group == nil && st.Group != nil && u.mark != nil {
		u.mark("the group is known")
	}
	u.state = st
	if p := st.Problem(work.ConcernProgram); p != nil {
		u.notice = say("errors.fault", told(p), say("errors.saved"))
		_ = u.session.SaveNow()
	}
	if before.Group != st.Group && st.Group != nil {
		u.win.SetTitle(title(st.Group))
		u.sayBasisExample()
		u.session.Settled()
	}
	if before.Basis != st.Basis {
		u.thumbs.forget()
	}
	u.images.update(u)
	if u.tally.ledger != nil && u.tally.ledger != st.Ledger {
		u.tally.drop()
	}
	u.show(false)
	u.refreshPanes()
	if before.Orbital != st.Orbital && st.Orbital != nil {
		u.follows.reveal(chosenSet)
		if u.now().Projection.TheSubject() != study.SubjectOrbital {
			u.follows.reveal(orbitalName(st.Orbital.Irrep, st.Orbital.Copy, st.Orbital.Partner))
		}
	}
}

func title(g *work.Group) string {
	return strings.TrimSpace(g.Molecule.Title) + " — Lobewright"
}

// coefficients are those of the function or group orbital that is shown; nil
// if none is chosen or its results are not there yet.
func (u *ui) coefficients() []float64 {
	s, st := u.now(), u.state
	if st.Basis == nil || len(s.Basis) == 0 {
		return nil
	}
	switch s.Projection.TheSubject() {
	case study.SubjectFunction:
		if n := s.Projection.Function; n >= 1 && n <= len(st.Basis.Functions) {
			c := make([]float64, len(st.Basis.Functions))
			c[n-1] = 1
			return c
		}
	case study.SubjectOrbital:
		if o := u.orbital(); o != nil {
			return o.Coefficients
		}
	}
	return nil
}

// orbital is the chosen group orbital, taken from the results at hand so that
// a choice among them is seen at once.
func (u *ui) orbital() *orbitals.GroupOrbital {
	if u.state.Orbitals == nil {
		return nil
	}
	o, err := u.state.Orbitals.Orbital(u.now().Projection)
	if err != nil {
		return nil
	}
	return o
}

// operation is the operation at hand.
func (u *ui) operation() (work.Operation, bool) {
	s := u.now()
	if s.Operation == "" || u.state.Group == nil {
		return work.Operation{}, false
	}
	op, err := u.state.Group.Operation(s.Operation, s.Angle)
	return op, err == nil
}

// show has the picture drawn as the study and the results say.
func (u *ui) show(moving bool) {
	s, st := u.now(), u.state
	shown := picture.Shown{Group: st.Group, Look: s.Look}
	palette := u.palette()
	shown.Palette = &palette
	if len(s.Basis) > 0 {
		shown.Basis = st.Basis
	}
	shown.Coefficients = u.coefficients()
	for _, a := range s.Atoms {
		shown.Marked = append(shown.Marked, a-1)
	}
	if op, ok := u.operation(); ok {
		shown.Operation, shown.Moment = &op, s.Moment
	}
	u.pages.show(&shown)
	u.fading.apply(u, &shown)
	u.tally.apply(&shown)
	shown.Nodes = u.nodes(s, u.orbital())
	first, beside := u.split(shown)
	pictures := u.stills(append([]picture.Shown{first}, beside...))
	u.view.shown, u.view.beside = pictures[0], pictures[1:]
	u.fitBeside()
	if st.Group != nil {
		u.view.sight = u.sights.sight(s.Camera, st.Group, shown.Basis, len(s.Basis) > 0 && shown.Basis == nil)
		if u.glide != nil {
			u.view.sight = u.glide.at(u.view.sight)
		}
	}
	u.view.ask(moving || u.player.playing || u.tally.playing || u.glide != nil || shown.Fade < 1 && shown.Before != nil)
	u.scrub.set(s.Moment)
	u.angle.set(s.Angle)
	if text := angleText(s.Angle); text != u.angleText.Text {
		u.angleText.SetText(text)
	}
	if infinite := st.Group != nil && st.Group.Fit.Setting.Infinite(); infinite != u.angles.Visible() {
		if infinite {
			u.angles.Show()
		} else {
			u.angles.Hide()
		}
		u.win.Content().Refresh()
	}
	u.player.label()
}

// guard runs what a person asked for. A panic is a fault of this program: the
// study is saved and a message shown; the window goes on.
func (u *ui) guard(f func()) {
	defer func() {
		if fault := recover(); fault != nil {
			u.failed(fault)
		}
	}()
	f()
}

func (u *ui) failed(fault any) {
	trace()
	saved := say("errors.saved")
	if err := u.session.SaveNow(); err != nil {
		saved = say("errors.notSaved", told(err))
	}
	u.notice = say("errors.fault", fmt.Sprint(fault), saved)
	fmt.Fprintln(os.Stderr, "lobewright: "+strings.ReplaceAll(u.notice, "\n", " "))
	u.given.Update()
}

// trace prints where a fault happened, for whoever looks for it.
func trace() {
	if os.Getenv("LOBEWRIGHT_MEASURE") != "" {
		os.Stderr.Write(debug.Stack())
	}
}

// failedAside is failed for other goroutines.
func (u *ui) failedAside(fault any) {
	trace()
	u.post(func() { u.failed(fault) })
}

// hint shows a few words beside the pointer.
func (u *ui) hint(text string, at fyne.Position) { u.hints.show(text, at) }

// close stops all that runs beside the toolkit and saves.
func (u *ui) close() {
	if u.closing {
		return
	}
	u.closing = true
	if u.menusDue != nil {
		u.menusDue.Stop()
	}
	u.watch.close()
	u.player.stop()
	u.service.Close()
	u.pages.search.Close()
	u.pages.preview.close()
	u.pages.writing.close()
	u.view.frames.close()
	u.thumbs.close()
	p := u.session.Preferences()
	size := u.win.Canvas().Size()
	p.Width, p.Height = float64(size.Width), float64(size.Height)
	_ = u.session.SetPreferences(p)
	if err := u.session.Close(); err != nil {
		fmt.Fprintln(os.Stderr, "lobewright: "+err.Error())
	}
}
