//go:build cgo && !nowindow

package window

import (
	"math/rand/v2"
	"os"
	"path/filepath"
	"runtime"
	"slices"
	"strconv"
	"strings"
	"testing"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/test"
	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/picture"
	"lobewright/app/session"
	"lobewright/app/study"
	"lobewright/assets"
)

// A bench is a window under the toolkit's test driver. What other goroutines
// post waits until the test runs it.
type bench struct {
	*ui
	t      testing.TB
	queue  chan func()
	folder string
}

func newBench(t testing.TB, folder string) *bench {
	t.Helper()
	a := test.NewTempApp(t)
	w := test.NewTempWindow(t, nil)
	kept, _ := session.Open(session.Options{Folder: folder, Interval: 10 * time.Millisecond})
	b := &bench{t: t, queue: make(chan func(), 1000), folder: folder}
	b.ui = newUI(a, w, kept, "test", func(f func()) { b.queue <- f })
	b.ui.motion = false
	w.Resize(fyne.NewSize(1280, 800))
	t.Cleanup(func() { b.shut() })
	return b
}

// shut closes the window while others may still post.
func (b *bench) shut() {
	if b.ui == nil {
		return
	}
	done := make(chan struct{})
	u := b.ui
	go func() {
		u.close()
		close(done)
	}()
	for {
		select {
		case <-b.queue:
		case <-done:
			return
		}
	}
}

// until runs what is posted until something holds.
func (b *bench) until(what string, holds func() bool) {
	b.t.Helper()
	limit := time.After(20 * time.Second)
	for !holds() {
		select {
		case f := <-b.queue:
			f()
		case <-time.After(5 * time.Millisecond):
		case <-limit:
			b.t.Fatalf("%s: it did not come within 20 s", what)
		}
	}
}

// open shows a demonstration and waits for its group orbitals.
func (b *bench) open(name string) {
	b.t.Helper()
	b.start(demoStudy(study.Study{}, name))
	b.until("the group orbitals of "+name, func() bool {
		return b.state.Orbitals != nil && b.state.Group != nil && b.now().Equal(b.state.Study) && b.images.wanted == nil
	})
}

// tap clicks a spot of a pane by its name.
func (b *bench) tap(p *pane, name string) {
	b.t.Helper()
	p.reveal(name)
	p.lay()
	s, ok := p.spotNamed(name)
	if !ok {
		var names []string
		for _, s := range p.spots {
			names = append(names, s.name)
		}
		b.t.Fatalf("there is no spot %q; there are %q", name, names)
	}
	p.Tapped(&fyne.PointEvent{Position: fyne.NewPos(float32(s.x+s.width/2), float32(s.y+s.height/2))})
}

func TestAWorkIsDoneFromTheBasisToAPartnerAndBack(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("octahedron")
	b.tap(b.given, "basis C:sigma")
	if got := b.now().Basis; len(got) != 0 {
		t.Fatalf("the basis is %q after its only part was switched off", got)
	}
	b.tap(b.given, "basis C:pi")
	b.until("π", func() bool { return b.state.Orbitals != nil && len(b.state.Orbitals.Functions) == 12 })
	b.tap(b.given, "function 3")
	if p := b.now().Projection; p.Function != 3 || p.TheSubject() != study.SubjectFunction {
		t.Errorf("function 3 was clicked and %+v is chosen", p)
	}
	b.tap(b.ledger, "operation i")
	if s := b.now(); s.Operation != "i" || s.Moment != 1 {
		t.Errorf("without motion a click on i shows %s at %v", s.Operation, s.Moment)
	}
	list := b.state.Orbitals.Projection.Orbitals
	last := list[len(list)-1]
	b.tap(b.follows, orbitalName(last.Irrep, last.Copy, last.Partner))
	p := b.now().Projection
	if p.Irrep != b.state.Orbitals.Irreps[last.Irrep].Label || p.Partner != last.Partner+1 || p.TheSubject() != study.SubjectOrbital {
		t.Errorf("%+v was clicked and %+v is chosen", last, p)
	}
	if got := b.view.shown.Coefficients; !slices.Equal(got, last.Coefficients) {
		t.Errorf("the picture shows %v, not %v", got, last.Coefficients)
	}
	steps := 0
	for b.CanUndo() {
		b.undo()
		steps++
	}
	if !b.now().Equal(demoStudy(study.Study{}, "octahedron")) {
		t.Errorf("after %d steps back it is %+v", steps, b.now())
	}
	for range steps {
		b.redo()
	}
	if got := b.now().Projection; got != p {
		t.Errorf("forward again it is %+v, not %+v", got, p)
	}
}

// CanUndo tells whether there is a step to take back.
func (u *ui) CanUndo() bool {
	_, ok := u.history.CanUndo()
	return ok
}

func TestTheSentenceSaysWhatTheFunctionHasBecome(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	cases := []struct{ operation, want string }{
		{"E", "E: φ1 (σ on Cl2) has become φ1 (σ on Cl2)"},
		{"C4(z)", "C4(z): φ1 (σ on Cl2) has become φ2 (σ on Cl3)"},
		{"σv(yz)", "σv(yz): φ1 (σ on Cl2) has become φ3 (σ on Cl4)"},
	}
	for _, c := range cases {
		b.chooseOperation(c.operation)
		b.jump(1)
		if got := b.sentence().String(); got != c.want {
			t.Errorf("%s: %s\nwant %s", c.operation, got, c.want)
		}
	}
	b.chooseOrbital("Eu", 1, 1)
	b.chooseOperation("C2(z)")
	b.jump(1)
	if got, want := b.sentence().String(), "C2(z): eu(x) has become −eu(x)"; got != want {
		t.Errorf("%s\nwant %s", got, want)
	}
	b.chooseOrbital("B1g", 1, 1)
	b.chooseOperation("C4(z)")
	b.jump(1)
	if got, want := b.sentence().String(), "C4(z): b1g has become its negative"; got != want {
		t.Errorf("%s\nwant %s", got, want)
	}
}

func TestASumOfFunctionsIsWrittenInClosedForm(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("tetrahedron")
	b.setBasis([]string{"Cl:pi"})
	b.until("π", func() bool {
		return b.state.Orbitals != nil && len(b.state.Orbitals.Functions) == 8 && b.images.basis == b.state.Basis
	})
	sums := 0
	for _, op := range b.state.Group.Operations(0) {
		b.chooseOperation(op.Name)
		b.jump(1)
		if s := b.sentence().String(); strings.Contains(s, "√3/2") && strings.Contains(s, "1/2") {
			sums++
		}
	}
	if sums == 0 {
		t.Error("no operation of Td makes a sum 1/2, √3/2 of π functions")
	}
}

func TestLinearMoleculesHaveAnAngle(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("rod")
	if !b.angles.Visible() {
		t.Error("there is no bar for φ")
	}
	b.tap(b.ledger, "operation C(φ)")
	if b.now().Angle != firstAngle {
		t.Errorf("φ is %v", b.now().Angle)
	}
	b.angle.SetValue(60)
	b.commit()
	b.jump(1)
	b.until("the image", func() bool { return b.state.Play != nil && b.state.Play.Operation.Angle > 1 })
	if got, want := b.sentence().String(), "C(60°): φ1 (px on N4) has become 1/2 φ1 + √3/2 φ2"; got != want {
		t.Errorf("%s\nwant %s", got, want)
	}
	b.open("square-plane")
	if b.angles.Visible() {
		t.Error("a finite group has a bar for φ")
	}
}

func TestABadFileChangesNothing(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("water")
	before := b.now()
	bad := filepath.Join(t.TempDir(), "bad.xyz")
	if err := os.WriteFile(bad, []byte("2\n\nH 0 0\n"), 0o666); err != nil {
		t.Fatal(err)
	}
	b.ui.open(bad, nil)
	b.until("the message", func() bool { return b.openProblem != "" })
	if !strings.Contains(b.openProblem, bad+":3") {
		t.Errorf("it says %q", b.openProblem)
	}
	if !b.now().Equal(before) || b.CanUndo() {
		t.Error("the work is not as it was")
	}
	b.tap(b.given, "dismiss open")
	if b.openProblem != "" {
		t.Error("the message stays")
	}
	// The same beside the path that was typed.
	var typed error
	b.ui.open(bad, func(err error) { typed = err })
	b.until("the answer", func() bool { return typed != nil })
	if b.openProblem != "" {
		t.Error("the message stands in two places")
	}
}

func TestWhatIsWrongWithTypedFunctionsStandsAboveThem(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("water")
	before := b.now()
	b.basis.SetText("H:sigm")
	b.basis.OnSubmitted("H:sigm")
	if !strings.Contains(b.typedProblem, "sigm") || !b.fault.Visible() || b.basis.Text != "H:sigm" || !b.now().Equal(before) {
		t.Errorf("it says %q, and %q is typed", b.typedProblem, b.basis.Text)
	}
	b.basis.SetText("H:sigma")
	if b.fault.Visible() {
		t.Error("the message stays while one types")
	}
	b.basis.OnSubmitted("H:sigma")
	if got := b.now().Basis; len(got) != 2 || got[1] != "H:sigma" || b.basis.Text != "" {
		t.Errorf("the basis is %q", got)
	}
}

func TestCoordinatesCanBePastedAndDropped(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("water")
	const text = "3\na bent one\nO 0 0 0\nH 0 0.76 0.59\nH 0 -0.76 0.59\n"
	b.app.Clipboard().SetContent(text)
	b.paste()
	b.until("the pasted structure", func() bool { return b.state.Group != nil && b.state.Group.Molecule.Title == "a bent one" })
	b.undo()
	b.until("the structure before", func() bool { return b.state.Group != nil && b.state.Group.Molecule.Title != "a bent one" })
	file := filepath.Join(t.TempDir(), "dropped.xyz")
	if err := os.WriteFile(file, []byte(strings.Replace(text, "a bent one", "dropped", 1)), 0o666); err != nil {
		t.Fatal(err)
	}
	b.dropped(fyne.Position{}, []fyne.URI{fileURI(file)})
	b.until("the dropped structure", func() bool { return b.state.Group != nil && b.state.Group.Molecule.Title == "dropped" })
	if got := b.session.Recent(); len(got) == 0 || got[0] != file {
		t.Errorf("recent files are %q", got)
	}
	b.app.Clipboard().SetContent("no coordinates\nat all")
	b.paste()
	b.until("the message", func() bool { return b.openProblem != "" })
}

type fileURI string

func (f fileURI) String() string    { return "file://" + string(f) }
func (f fileURI) Extension() string { return filepath.Ext(string(f)) }
func (f fileURI) Name() string      { return filepath.Base(string(f)) }
func (f fileURI) MimeType() string  { return "chemical/x-xyz" }
func (f fileURI) Scheme() string    { return "file" }
func (f fileURI) Authority() string { return "" }
func (f fileURI) Path() string      { return string(f) }
func (f fileURI) Query() string     { return "" }
func (f fileURI) Fragment() string  { return "" }

func TestPathsAreTyped(t *testing.T) {
	dir := t.TempDir()
	for _, n := range []string{"palladium.xyz", "palladate.xyz", ".hidden.xyz"} {
		if err := os.WriteFile(filepath.Join(dir, n), nil, 0o666); err != nil {
			t.Fatal(err)
		}
	}
	if err := os.Mkdir(filepath.Join(dir, "paper"), 0o777); err != nil {
		t.Fatal(err)
	}
	t.Setenv("HOME", dir)
	if got, want := expanded("~/palladium.xyz"), filepath.Join(dir, "palladium.xyz"); got != want {
		t.Errorf("~ becomes %s", got)
	}
	if got := expanded("demo:water"); got != "demo:water" {
		t.Errorf("a demonstration becomes %s", got)
	}
	if got := completed("~/pal"); got != "~/pallad" {
		t.Errorf("it is completed to %s", got)
	}
	if got := completions(dir + "/p"); !slices.Equal(got, []string{"paper/", "palladate.xyz", "palladium.xyz"}) {
		t.Errorf("completions are %q", got)
	}
}

func TestASheetStaysUntilItsAnswerIsRight(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("water")
	b.askTolerance()
	top := func() fyne.CanvasObject { return b.win.Canvas().Overlays().Top() }
	entry := b.win.Canvas().Focused().(*answerEntry)
	for _, wrong := range []string{"", "much", "-1", "NaN"} {
		entry.SetText(wrong)
		entry.OnSubmitted(wrong)
		if top() == nil {
			t.Fatalf("%q is taken for an answer", wrong)
		}
	}
	entry.SetText("0,05 Å")
	entry.OnSubmitted("0,05 Å")
	if top() != nil || b.now().Tolerance != 0.05 {
		t.Errorf("the tolerance is %v, the sheet %v", b.now().Tolerance, top())
	}
	for _, open := range []func(){b.askTolerance, b.askOpen, b.askCore, b.askAxes, b.showKeys, b.about} {
		open()
		b.win.Canvas().Focused().TypedKey(&fyne.KeyEvent{Name: fyne.KeyEscape})
		if top() != nil {
			t.Fatal("Escape leaves a sheet open")
		}
	}
}

func TestAxesAreChosenByRuleAndByHand(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	rules := 0
	for _, f := range b.state.Group.Fit.Frames() {
		if f.Rule.Name == "default" {
			continue
		}
		rules++
		before := b.state.Group
		b.tap(b.given, "frame "+f.Rule.Name)
		b.until("the axes "+f.Rule.Name, func() bool { return b.state.Group != before && b.state.Group.Fit.Rule.Name == f.Rule.Name })
	}
	if rules == 0 {
		t.Error("D4h has one frame only")
	}
	b.setAxes("", "C4(z)", "3")
	b.until("the axes by hand", func() bool { return b.state.Group.Fit.Rule.Name == "explicit" })
	group := b.state.Group
	if b.tryAxes("", "99", "") == nil {
		t.Error("an atom that is not there makes an axis")
	}
	if b.state.Group != group || b.now().Z != "C4(z)" {
		t.Error("the axes before are gone")
	}
}

func TestTheWorkIsFoundAgainAfterAKill(t *testing.T) {
	folder := t.TempDir()
	b := newBench(t, folder)
	b.open("square-plane")
	b.chooseOrbital("Eu", 1, 2)
	want := b.now()
	if err := b.session.SaveNow(); err != nil {
		t.Fatal(err)
	}
	b.shut()
	again := newBench(t, folder)
	again.begin("")
	if !again.now().Equal(want) {
		t.Errorf("found is %+v\nleft was %+v", again.now(), want)
	}
}

func TestAPanicIsCaughtAndTheStudySaved(t *testing.T) {
	folder := t.TempDir()
	b := newBench(t, folder)
	b.open("water")
	b.given.guard(func() { panic("a test\nof it") })
	if !strings.Contains(b.notice, "a test") || !strings.Contains(b.notice, "the study is saved") {
		t.Errorf("it says %q", b.notice)
	}
	b.tap(b.given, "dismiss notice")
	files, _ := filepath.Glob(filepath.Join(folder, "*"+study.Extension))
	if len(files) == 0 {
		t.Error("no study is saved")
	}
}

func TestPlayingEndsAtTheEndAsOneStep(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	b.motion = true
	b.playOperation("S4(z)")
	between := 0
	b.until("the end", func() bool {
		if m := b.now().Moment; m > 0 && m < 1 {
			between++
		}
		return !b.player.playing
	})
	if b.now().Moment != 1 || between < 5 {
		t.Errorf("it ended at %v after %d moments between", b.now().Moment, between)
	}
	b.undo()
	if s := b.now(); s.Moment != 0 || s.Operation != "S4(z)" {
		t.Errorf("one step back it is %s at %v", s.Operation, s.Moment)
	}
}

func TestWithoutMotionStillsAreShown(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	for _, operation := range []string{"C4(z)", "S4(z)"} {
		b.chooseOperation(operation)
		for i, m := range []float64{0, 1, 0} {
			if got := b.now().Moment; got != m {
				t.Errorf("%s: after %d presses it is at %v, not %v", operation, i, got, m)
			}
			b.togglePlay()
		}
		if got := len(b.view.beside); got != 2 {
			t.Fatalf("%s: %d stills stand beside the first", operation, got)
		}
		moments := []float64{b.view.shown.Moment, b.view.beside[0].Moment, b.view.beside[1].Moment}
		if !slices.Equal(moments, []float64{0, 0.5, 1}) {
			t.Errorf("%s: the stills are at %v", operation, moments)
		}
	}
	// Partners side by side have three each.
	b.chooseOrbital("Eu", 1, 1)
	b.toggleSplit()
	b.togglePlay()
	for i, shown := range append([]picture.Shown{b.view.shown}, b.view.beside...) {
		if want := 0.5 * float64(i%3); shown.Moment != want || len(shown.Notes) != 2 {
			t.Errorf("still %d is at %v, want %v, and has the headings %v", i, shown.Moment, want, shown.Notes)
		}
	}
	if got := len(b.view.beside); got != 5 {
		t.Errorf("%d stills of two partners stand beside the first", got)
	}
}

func TestTheHandTurnsMovesAndZooms(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	v := b.view
	v.generate(700, 600)
	mouse := func(button desktop.MouseButton, x, y float32) *desktop.MouseEvent {
		return &desktop.MouseEvent{PointEvent: fyne.PointEvent{Position: fyne.NewPos(x, y)}, Button: button}
	}
	drag := func(button desktop.MouseButton) {
		v.MouseDown(mouse(button, 300, 300))
		for i := range 10 {
			e := mouse(button, 300+float32(5*i), 300)
			if button == desktop.MouseButtonSecondary {
				v.MouseMoved(e)
			} else {
				v.Dragged(&fyne.DragEvent{PointEvent: e.PointEvent})
			}
		}
		v.MouseUp(mouse(button, 345, 300))
	}
	front := v.sight.Rows().Row(2)
	drag(desktop.MouseButtonPrimary)
	if after := v.sight.Rows().Mul3x1(front); after[0] < 0.1 || after[1] > 0.01 || after[1] < -0.01 {
		t.Errorf("the front went to %v", after)
	}
	drag(desktop.MouseButtonSecondary)
	if pan := b.now().Camera.Pan; pan[0] < 0.1 || pan[1] != 0 {
		t.Errorf("it was moved by %v", pan)
	}
	for range 3 {
		v.Scrolled(&fyne.ScrollEvent{PointEvent: fyne.PointEvent{Position: fyne.NewPos(100, 100)}, Scrolled: fyne.NewDelta(0, 25)})
	}
	if z := b.now().Camera.TheZoom(); z < 1.3 {
		t.Errorf("the zoom is %v", z)
	}
	// Three gestures are three steps; the notches of the wheel are one.
	for range 3 {
		b.undo()
	}
	if b.CanUndo() {
		t.Error("there is more to undo than three gestures")
	}
	if _, chosen := b.now().Camera.View(); chosen {
		t.Errorf("the camera is %+v", b.now().Camera)
	}
}

func TestAClickInThePictureChoosesAnAtomsFunction(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	b.along(mgl64.Vec3{0, 0, 1})
	b.view.generate(700, 600)
	b.until("a full frame", func() bool {
		d := b.view.frames.take()
		return d != nil && d.full && d.image.Rect.Dx() == 700
	})
	d := b.view.frames.shown
	s := b.view.scale()
	for i := 1; i <= 4; i++ {
		x, y, _, _ := d.cells[0].frame.Camera.Project(b.state.Group.Sites.Positions[i], 700, 600)
		at := fyne.NewPos(float32(x/s), float32(y/s))
		b.view.lastClick = time.Time{}
		b.view.MouseDown(&desktop.MouseEvent{PointEvent: fyne.PointEvent{Position: at}, Button: desktop.MouseButtonPrimary})
		began := time.Now()
		b.view.MouseUp(&desktop.MouseEvent{PointEvent: fyne.PointEvent{Position: at}, Button: desktop.MouseButtonPrimary})
		t.Logf("a click is answered in %v", time.Since(began))
		if got := b.now(); got.Projection.Function != i || !slices.Equal(got.Atoms, []int{i + 1}) {
			t.Errorf("a click on Cl%d chooses function %d and atoms %v", i+1, got.Projection.Function, got.Atoms)
		}
	}
}

func TestEverySpotCanBeReachedByKeys(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	for name, p := range map[string]*pane{"left": b.given, "right": b.follows, "below": b.ledger} {
		p.lay()
		p.FocusGained()
		reached := map[string]bool{p.mark: true}
		for queue := []string{p.mark}; len(queue) > 0; queue = queue[1:] {
			for _, key := range []fyne.KeyName{fyne.KeyRight, fyne.KeyDown, fyne.KeyLeft, fyne.KeyUp} {
				p.mark = queue[0]
				p.lay()
				p.TypedKey(&fyne.KeyEvent{Name: key})
				if !reached[p.mark] {
					reached[p.mark] = true
					queue = append(queue, p.mark)
				}
			}
		}
		for _, s := range p.spots {
			if s.do != nil && !reached[s.name] {
				t.Errorf("%s: keys do not reach %q", name, s.name)
			}
		}
	}
}

// eventsVariable is how many random events a whole test has; without it there
// are fewer.
const eventsVariable = "LOBEWRIGHT_TEST_EVENTS"

func eventsWanted(usual int) int {
	if n, err := strconv.Atoi(os.Getenv(eventsVariable)); err == nil {
		return n
	}
	if testing.Short() {
		return usual / 10
	}
	return usual
}

// All that a hand can do, thousands of times at random.
func TestRandomEventsDoNoHarm(t *testing.T) {
	defer speak(assets.English)
	events := eventsWanted(5000)
	before := runtime.NumGoroutine()
	heapBefore := heap()
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	b.view.generate(640, 480)
	r := rand.New(rand.NewPCG(1, 2))
	keys := []fyne.KeyName{
		fyne.KeyLeft, fyne.KeyRight, fyne.KeyUp, fyne.KeyDown, fyne.KeyHome, fyne.KeyEnd, fyne.KeySpace, fyne.KeyReturn,
		fyne.KeyPageUp, fyne.KeyPageDown, fyne.KeyEscape, fyne.KeyTab, fyne.KeyF5,
	}
	demos := []string{"square-plane", "water", "rod", "tetrahedron", "cyanide", "trimer"}
	panes := []*pane{b.given, b.atoms.pane, b.steps.pane, b.pages.pane, b.pages.preview.pane, b.follows, b.ledger, b.detail, b.said}
	at := func(s fyne.Size) fyne.Position { return fyne.NewPos(s.Width*r.Float32(), s.Height*r.Float32()) }
	buttons := []desktop.MouseButton{desktop.MouseButtonPrimary, desktop.MouseButtonSecondary, desktop.MouseButtonTertiary}
	for n := range events {
		p := panes[r.IntN(len(panes))]
		v := b.view
		mouse := &desktop.MouseEvent{PointEvent: fyne.PointEvent{Position: at(v.Size())}, Button: buttons[r.IntN(3)]}
		switch r.IntN(17) {
		case 0, 1:
			p.Tapped(&fyne.PointEvent{Position: at(p.Size())})
		case 2:
			p.TypedKey(&fyne.KeyEvent{Name: keys[r.IntN(len(keys))]})
		case 3:
			p.Scrolled(&fyne.ScrollEvent{Scrolled: fyne.NewDelta(0, 200*r.Float32()-100)})
		case 4:
			p.MouseMoved(&desktop.MouseEvent{PointEvent: fyne.PointEvent{Position: at(p.Size())}})
		case 5, 6:
			v.MouseDown(mouse)
		case 7, 8:
			v.MouseUp(mouse)
		case 9:
			v.Dragged(&fyne.DragEvent{PointEvent: mouse.PointEvent})
		case 10:
			v.MouseMoved(mouse)
		case 11:
			v.Scrolled(&fyne.ScrollEvent{PointEvent: mouse.PointEvent, Scrolled: fyne.NewDelta(0, 500*r.Float32()-250)})
		case 12:
			v.TypedKey(&fyne.KeyEvent{Name: keys[r.IntN(len(keys))]})
		case 13:
			v.TypedRune([]rune("+-fxyzXYZa.,nN0?éoo<>")[r.IntN(21)])
		case 14:
			switch r.IntN(17) {
			case 16:
				b.pages.turnTo(page(r.IntN(int(filmPage) + 1)))
			case 14:
				list := append(b.weightCommands(), b.irrepCommands()...)
				b.run(list[r.IntN(len(list))])
			case 15:
				b.tally.began = b.tally.began.Add(-time.Second)
				b.tally.tick()
			case 13:
				b.turnStep(1 - 2*r.IntN(2))
			case 9:
				b.setTurn(400*r.Float64()-20, r.IntN(2) == 0)
				b.setMixing(400 * r.Float64())
			case 10:
				b.toggleSplit()
			case 11:
				b.toggleNodes()
				b.holdOrbital()
			case 12:
				p.Dragged(&fyne.DragEvent{PointEvent: fyne.PointEvent{Position: at(p.Size())}, Dragged: fyne.NewDelta(3, 1)})
				p.DragEnd()
			case 0:
				b.openDemo(demos[r.IntN(len(demos))])
			case 1:
				b.typeBasis([]string{"Cl:sigma", "1:s", "H:s", "nonsense", "all:p", "N:d"}[r.IntN(6)])
			case 2:
				b.undo()
			case 3:
				b.redo()
			case 4:
				b.motion = !b.motion
			case 5:
				b.setTheme([]session.Theme{"", session.ThemeDark, session.ThemeLight, session.ThemeContrast}[r.IntN(4)])
			case 6:
				b.setTolerance(tolerances[r.IntN(len(tolerances))])
			case 7:
				b.scrub.SetValue(r.Float64())
			case 8:
				b.pages.turnTo(page(r.IntN(5)))
			}
		case 16:
			b.somethingElse(r)
		case 15:
			if r.IntN(10) == 0 {
				p.generate(1+r.IntN(400), 1+r.IntN(300))
				v.generate(1+r.IntN(700), 1+r.IntN(500))
			}
		}
		b.drain()
		if strings.Contains(b.notice, "fault") {
			t.Fatalf("after %d events: %s", n, b.notice)
		}
	}
	b.until("rest", func() bool { return len(b.queue) == 0 && b.state.Progress == nil })
	b.shut()
	b.ui = nil
	limit := time.Now().Add(5 * time.Second)
	for runtime.NumGoroutine() > before+2 && time.Now().Before(limit) {
		time.Sleep(20 * time.Millisecond)
	}
	if n := runtime.NumGoroutine(); n > before+2 {
		t.Errorf("%d goroutines are left of %d before", n, before)
	}
	grown := heap() - heapBefore
	t.Logf("after %d events the heap has grown by %d KiB, and there are %d goroutines of %d", events, grown>>10, runtime.NumGoroutine(), before)
	if grown > 90<<20 { // meshes, typefaces and what the toolkit keeps of widgets for a while
		t.Errorf("the heap has grown by %d MiB", grown>>20)
	}
}

// somethingElse types in what has the keyboard, does a command of the list, or
// edits an atom.
func (b *bench) somethingElse(r *rand.Rand) {
	c := b.win.Canvas()
	letters := []rune("C1.5-x, 0eH/~")
	switch r.IntN(6) {
	case 0:
		list := b.everything()
		if cmd := list[r.IntN(len(list))]; cmd.key != "menu.quit" && cmd.key != "menu.copyPicture" && cmd.key != "menu.savePicture" {
			b.run(cmd.command)
		}
	case 1:
		if !b.atoms.pane.Visible() {
			b.showAtoms()
		}
	case 2:
		if b.atoms.pane.Visible() {
			press(b.atoms.pane, []fyne.KeyName{fyne.KeyReturn, fyne.KeyDown, fyne.KeyTab, fyne.KeyBackspace, fyne.KeyInsert, fyne.KeyEscape, fyne.KeyLeft}[r.IntN(7)])
		}
	case 3:
		if b.atoms.pane.Visible() {
			typeIn(b.atoms.pane, string(letters[r.IntN(len(letters))]))
		}
	case 4:
		if f := c.Focused(); f != nil {
			f.TypedRune(letters[r.IntN(len(letters))])
		}
	case 5:
		if f := c.Focused(); f != nil {
			f.TypedKey(&fyne.KeyEvent{Name: []fyne.KeyName{fyne.KeyDown, fyne.KeyUp, fyne.KeyEscape, fyne.KeyEscape, fyne.KeyF1, fyne.KeyRight}[r.IntN(6)]})
		}
	}
}

func (b *bench) drain() {
	for {
		select {
		case f := <-b.queue:
			f()
		default:
			return
		}
	}
}

func heap() int64 {
	runtime.GC()
	var m runtime.MemStats
	runtime.ReadMemStats(&m)
	return int64(m.HeapAlloc)
}

func TestEveryStepHasAText(t *testing.T) {
	for _, s := range study.Steps() {
		if key := stepTexts[s]; key == "" || say(key) == key {
			t.Errorf("step %q has no text", s)
		}
	}
}

func TestEveryDemonstrationShowsSomething(t *testing.T) {
	b := newBench(t, t.TempDir())
	for name := range demoStudies {
		b.open(name)
		if len(b.state.Problems) > 0 || len(b.coefficients()) == 0 {
			t.Errorf("%s: %v", name, b.state.Problems)
		}
		if op := demoStudies[name].operation; op != "" {
			if _, ok := b.operation(); !ok {
				t.Errorf("%s has no operation %q", name, op)
			}
		}
	}
}

// The typeface has every sign that the panes write for every demonstration.
func TestTheTypefaceHasEverySign(t *testing.T) {
	b := newBench(t, t.TempDir())
	fonts, err := picture.Fonts()
	if err != nil {
		t.Fatal(err)
	}
	check := func(text string) {
		for _, r := range text {
			if r != '\n' && !fonts.Has(string(r)) {
				t.Errorf("no sign for %q (%U) in %q", r, r, text)
			}
		}
	}
	for _, l := range assets.Languages() {
		for _, text := range assets.TextsIn(l) {
			check(text)
		}
	}
	check(b.basis.PlaceHolder)
	for _, m := range b.win.MainMenu().Items {
		check(m.Label)
		for _, i := range m.Items {
			check(i.Label)
			if i.ChildMenu != nil {
				for _, c := range i.ChildMenu.Items {
					check(c.Label)
				}
			}
		}
	}
	for name := range demoStudies {
		b.open(name)
		for _, op := range b.state.Group.Operations(b.now().Angle)[:min(8, len(b.state.Group.Operations(0)))] {
			b.chooseOperation(op.Name)
			for _, p := range []*pane{b.given, b.follows, b.detail, b.ledger, b.said} {
				board := p.lay()
				for _, s := range board.scene.Shapes {
					check(textOf(s.Geometry))
				}
				for _, s := range board.spots {
					check(s.hint)
				}
			}
		}
	}
}

// Nothing on a pane reaches over its edge sideways, at the least size of the
// window, in any language.
func TestNothingIsCutAtTheSides(t *testing.T) {
	defer speak(assets.English)
	b := newBench(t, t.TempDir())
	for name := range demoStudies {
		b.open(name)
		b.chooseOperation(b.state.Group.Operations(0)[min(1, len(b.state.Group.Operations(0))-1)].Name)
		for _, which := range []int{0, 1} {
			if which == 1 {
				b.nextOrbital(1)
			}
			for _, l := range assets.Languages() {
				speak(l)
				for side, p := range map[string]*pane{"left": b.given, "right": b.follows, "detail": b.detail} {
					board := p.lay()
					for _, text := range textsOf(board) {
						if text.left < 0 || text.right > board.width+0.5 {
							t.Errorf("%s, %s, %s: %q goes from %.0f to %.0f of %.0f", name, l, side, text.words, text.left, text.right, board.width)
						}
					}
				}
			}
		}
	}
}
