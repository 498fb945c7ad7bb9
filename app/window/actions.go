//go:build cgo && !nowindow

package window

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/notation"
	"lobewright/app/picture"
	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/orbitals"
	"lobewright/symmetry"
)

// newView makes the picture and says what the hand does in it.
func (u *ui) newView() *viewport {
	v := newViewport(u)
	rows := func() mgl64.Mat3 { return v.sight.Rows() }
	camera := func(step study.Step, change func(study.Camera) study.Camera) {
		s := u.now()
		s.Camera = change(s.Camera.WithView(rows()))
		if !u.history.Open() {
			u.history.Begin(step)
		}
		u.history.Set(s)
		u.show(true)
	}
	v.begin = func(pan bool) {
		u.stopGlide()
		if pan {
			u.history.Begin(study.StepPan)
		} else {
			u.history.Begin(study.StepOrbit)
		}
	}
	v.end = func(bool) {
		u.history.Commit()
		u.session.Keep(u.now())
		u.show(false)
		u.updateMenus()
	}
	v.turnBy = func(dx, dy float64) {
		// Over the short side it is half a turn.
		perPixel := math.Pi / float64(max(1, min(v.width, v.height)))
		camera(study.StepOrbit, func(c study.Camera) study.Camera { return c.Orbited(rows(), dx*perPixel, -dy*perPixel) })
	}
	v.panBy = func(dx, dy float64) {
		perPixel := v.perPixel()
		camera(study.StepPan, func(c study.Camera) study.Camera { return c.Panned(dx*perPixel, -dy*perPixel) })
	}
	v.zoomAt = func(factor, x, y float64) {
		u.stopGlide()
		if factor = u.limited(factor); factor == 1 {
			return
		}
		u.history.Begin(study.StepZoom)
		perPixel := v.perPixel()
		middle := v.cellAt(x, y)
		at := [2]float64{(x - middle.x) * perPixel, (middle.y - y) * perPixel}
		camera(study.StepZoom, func(c study.Camera) study.Camera { return c.ZoomedAt(factor, at) })
		u.session.Keep(u.now())
	}
	v.fit = u.fit
	v.click = u.clicked
	v.hintFor = u.nameOf
	v.key = u.key
	v.typed = u.typed
	return v
}

// clicked chooses what is seen under the pointer: an atom, and the function on
// it, or the next one where it has several. Empty ground lets go of the atoms.
func (u *ui) clicked(p picture.Picked, ok bool, add bool) {
	s := u.now()
	switch {
	case !ok:
		if len(s.Atoms) > 0 {
			s.Atoms = nil
			u.do(study.StepAtoms, s)
		}
	case p.Element:
		u.alongOperation()
	case add:
		atoms := slices.Clone(s.Atoms)
		if i := slices.Index(atoms, p.Atom+1); i >= 0 {
			atoms = slices.Delete(atoms, i, i+1)
		} else {
			atoms = append(atoms, p.Atom+1)
			slices.Sort(atoms)
		}
		s.Atoms = atoms
		u.do(study.StepAtoms, s)
	default:
		s.Atoms = []int{p.Atom + 1}
		step := study.StepAtoms
		if n := u.functionAt(p, s); n > 0 {
			s.Projection.Function, s.Projection.Subject, s.Moment = n, study.SubjectFunction, 0
			step = study.StepFunction
			u.fade()
		}
		u.do(step, s)
	}
}

// functionAt is the function, from 1, that a click on an atom means; 0 if the
// atom has none.
func (u *ui) functionAt(p picture.Picked, s study.Study) int {
	b := u.state.Basis
	if b == nil || len(s.Basis) == 0 {
		return 0
	}
	var here []int
	for i, f := range b.Functions {
		if f.Site == p.Atom {
			here = append(here, i+1)
		}
	}
	if len(here) == 0 {
		return 0
	}
	if s.Projection.TheSubject() == study.SubjectFunction {
		if i := slices.Index(here, s.Projection.Function); i >= 0 {
			return here[(i+1)%len(here)]
		}
	}
	return here[0]
}

// nameOf says what lies under the pointer.
func (u *ui) nameOf(p picture.Picked) string {
	if p.Element {
		if op, ok := u.operation(); ok {
			return say("follows.lookAlong", op.Name)
		}
		return ""
	}
	g := u.state.Group
	if g == nil || p.Atom < 0 || p.Atom >= len(g.Molecule.Atoms) {
		return ""
	}
	text := g.AtomNames()[p.Atom]
	if b := u.state.Basis; b != nil && len(u.now().Basis) > 0 {
		for i, f := range b.Functions {
			if f.Site == p.Atom {
				text += fmt.Sprintf("  φ%d %s", i+1, notation.Function(f.Name).String())
			}
		}
	}
	return text
}

func (u *ui) chooseFunction(n int) {
	s := u.now()
	s.Projection.Function, s.Projection.Subject, s.Moment = n, study.SubjectFunction, 0
	u.fade()
	u.do(study.StepFunction, s)
}

func (u *ui) chooseOrbital(irrep string, number, partner int) {
	s := u.now()
	step := study.StepIrrep
	if s.Projection.Irrep == irrep && s.Projection.Copy == number {
		step = study.StepPartner
	}
	if s.Projection.Irrep != irrep {
		s.Turn, s.Mixing = nil, nil // they are of the irrep before
	}
	s.Projection.Irrep, s.Projection.Copy, s.Projection.Partner = irrep, number, partner
	s.Projection.Subject, s.Moment = study.SubjectOrbital, 0
	if !s.Projection.Character {
		s.Projection.Element = elementFor(partner)
	}
	if o := u.state.Orbitals; o != nil && s.Projection.Function > 0 {
		s.Projection.Function = functionWithPart(o, s.Projection)
	}
	u.fade()
	u.do(step, s)
}

// functionWithPart is the chosen function, counted from 1, if it has a part in
// the chosen group orbital or another copy of it, so that its projection shows
// how that comes about; else the first function that has one.
func functionWithPart(o *work.Orbitals, p study.Projection) int {
	const seen = 1e-9
	first := p.Function
	for _, x := range o.Projection.Orbitals {
		if o.Irreps[x.Irrep].Label != p.Irrep || x.Partner != p.Partner-1 || p.Function > len(x.Coefficients) {
			continue
		}
		if math.Abs(x.Coefficients[p.Function-1]) > seen {
			return p.Function
		}
		if x.Copy == p.Copy-1 {
			first = 1 + slices.IndexFunc(x.Coefficients, func(c float64) bool { return math.Abs(c) > seen })
		}
	}
	return max(first, 1)
}

// nextOrbital goes to another group orbital of the list.
func (u *ui) nextOrbital(by int) {
	o := u.state.Orbitals
	if o == nil || len(o.Projection.Orbitals) == 0 {
		return
	}
	list := o.Projection.Orbitals
	at := slices.IndexFunc(list, func(x orbitals.GroupOrbital) bool { return &x == u.orbital() })
	if now := u.orbital(); now != nil && u.now().Projection.TheSubject() == study.SubjectOrbital {
		at = slices.IndexFunc(list, func(x orbitals.GroupOrbital) bool {
			return x.Irrep == now.Irrep && x.Copy == now.Copy && x.Partner == now.Partner
		})
	}
	at = (at + by + len(list)) % len(list)
	if at < 0 {
		at = 0
	}
	u.chooseOrbital(o.Irreps[list[at].Irrep].Label, list[at].Copy+1, list[at].Partner+1)
}

// nextFunction goes to another function of the basis.
func (u *ui) nextFunction(by int) {
	b := u.state.Basis
	if b == nil || len(b.Functions) == 0 || len(u.now().Basis) == 0 {
		return
	}
	n := len(b.Functions)
	u.chooseFunction((u.now().Projection.Function-1+by+n)%n + 1)
}

// nextOperation goes to another operation and plays it, as a click on its
// column does. While a sum grows it goes a step of the sum.
func (u *ui) nextOperation(by int) { u.operationFrom(u.now().Operation, by) }

// operationFrom is nextOperation from any operation, or from none.
func (u *ui) operationFrom(name string, by int) {
	if u.state.Group == nil {
		return
	}
	if u.tally.ledger != nil && !u.tally.done {
		u.tally.stepBy(by)
		return
	}
	list := u.state.Group.Operations(u.now().Angle)
	at := slices.IndexFunc(list, func(o work.Operation) bool { return o.Name == name })
	if at < 0 && by < 0 {
		at = 0
	}
	next := list[(at+by+len(list))%len(list)].Name
	u.playOperation(next)
	u.ledger.mark = "operation " + next
}

// firstAngle (degrees) is φ for the operations of a linear molecule until a
// person chooses another.
const firstAngle = 50

func (u *ui) chooseOperation(name string) {
	s := u.now()
	s.Operation, s.Moment = name, 0
	if s.Angle == 0 && strings.Contains(name, "φ") {
		s.Angle = firstAngle // by 0 nothing would be seen
	}
	u.do(study.StepOperation, s)
	u.ledger.reveal("operation " + name)
}

// playOperation chooses an operation and plays it from the start.
func (u *ui) playOperation(name string) {
	u.chooseOperation(name)
	u.player.start()
}

// scrubbed follows the bar: a gesture that ends with its release.
func (u *ui) scrubbed(moment float64) {
	u.player.stop()
	u.history.Begin(study.StepScrub)
	s := u.now()
	s.Moment = moment
	u.history.Set(s)
	u.show(true)
	u.said.Update()
}

// angled follows the bar of the angle of a linear molecule's operation.
func (u *ui) angled(degrees float64) {
	u.player.stop()
	u.history.Begin(study.StepAngle)
	s := u.now()
	s.Angle = degrees
	u.history.Set(s)
	u.service.Request(s)
	u.show(true)
	u.said.Update()
	u.ledger.Update()
}

func (u *ui) toggleBasis(entry string) {
	s := u.now()
	list := slices.Clone(s.Basis)
	if i := slices.Index(list, entry); i >= 0 {
		list = slices.Delete(list, i, i+1)
	} else {
		list = append(list, entry)
	}
	u.setBasis(list)
}

func (u *ui) removeBasis(entry string) {
	u.setBasis(slices.DeleteFunc(slices.Clone(u.now().Basis), func(s string) bool { return s == entry }))
}

// setBasis changes the basis. What was chosen among its functions no longer
// means anything, but the first function is there to be watched.
func (u *ui) setBasis(list []string) {
	s := u.now()
	s.Basis = list
	s.Projection = study.Projection{}
	s.Turn, s.Mixing = nil, nil
	s.Held.Irrep, s.Held.Copy, s.Held.Partner = "", 0, 0
	s.Moment = 0
	if len(list) > 0 {
		s.Projection.Function, s.Projection.Subject = 1, study.SubjectFunction
	}
	u.do(study.StepBasis, s)
}

// typeBasis takes one typed selection or several. A fault of their spelling is
// shown beside them and changes nothing.
func (u *ui) typeBasis(text string) {
	list := slices.Clone(u.now().Basis)
	for _, choice := range orbitals.SplitChoices(text) {
		if _, err := orbitals.ParseChoice(choice); err != nil {
			u.sayTyped(told(err))
			return
		}
		if !slices.Contains(list, choice) {
			list = append(list, choice)
		}
	}
	u.basis.SetText("")
	if len(list) > len(u.now().Basis) {
		u.setBasis(list)
	}
	u.win.Canvas().Focus(u.view) // where keys choose and play what follows
}

// sayTyped shows what is wrong with what was typed, right above it.
func (u *ui) sayTyped(problem string) {
	if problem == u.typedProblem {
		return
	}
	u.typedProblem = problem
	if problem == "" {
		u.fault.Hide()
	} else {
		u.fault.Show()
	}
	u.fault.Update()
	u.win.Content().Refresh()
}

func (u *ui) drawFault(b *board) {
	y := b.paragraph(pad, secondSize+2-u.fault.scroll, b.width-2*pad, notation.Words(u.typedProblem),
		style{size: secondSize, color: b.palette.Accent, align: -1})
	u.fault.extent = y - secondSize + u.fault.scroll
}

func (u *ui) setTolerance(t float64) {
	s := u.now()
	s.Tolerance = t
	u.do(study.StepTolerance, s)
}

func (u *ui) askTolerance() {
	u.ask(say("given.askTolerance"), say("given.askToleranceText"), plainText(u.now().TheTolerance()), func(text string) error {
		t, err := readNumber(text, "Å")
		if err != nil || !(t > 0) || t > 10 {
			return errors.New(say("errors.tolerance"))
		}
		u.setTolerance(t)
		return nil
	})
}

// chooseFrame takes the axes of a rule. Operations and partners may have other
// names there, so what was chosen among them is let go.
func (u *ui) chooseFrame(name string) {
	if name == symmetry.FrameDefault {
		name = ""
	}
	u.setAxes(name, "", "")
}

func (u *ui) setAxes(frame, z, x string) { _ = u.tryAxes(frame, z, x) }

// askAxes asks for z and x.
func (u *ui) askAxes() {
	s := u.now()
	now := strings.TrimSuffix(s.Z+"; "+s.X, "; ")
	u.ask(say("frames.ask"), say("frames.askText"), now, func(text string) error {
		z, x, _ := strings.Cut(text, ";")
		z, x = strings.TrimSpace(z), strings.TrimSpace(x)
		try := u.now()
		try.Frame, try.Z, try.X = "", z, x
		if err := try.Check(); err != nil {
			return err
		}
		return u.tryAxes("", z, x)
	})
}

func (u *ui) askCore() {
	s := u.now()
	u.ask(say("given.askCore"), say("given.askCoreText"), s.Core, func(text string) error {
		return u.tryStudy(study.StepCore, func(s *study.Study) { s.Core, s.Ignore = strings.TrimSpace(text), "" })
	})
}

func (u *ui) askIgnore() {
	s := u.now()
	u.ask(say("given.askSpectators"), say("given.askSpectatorsText"), s.Ignore, func(text string) error {
		return u.tryStudy(study.StepCore, func(s *study.Study) { s.Core, s.Ignore = "", strings.TrimSpace(text) })
	})
}

// tryStudy is a step; what is wrong with it appears beside the thing.
func (u *ui) tryStudy(step study.Step, change func(*study.Study)) error {
	s := u.now()
	change(&s)
	if err := s.Check(); err != nil {
		return err
	}
	u.do(step, s)
	return nil
}

func (u *ui) undo() {
	u.player.stop()
	from := u.view.sight
	if _, ok := u.history.Undo(); !ok {
		u.remark(say("ledger.nothingToUndo")) // after a start too, where one might expect more
	} else {
		u.changed()
		u.glideFrom(from)
	}
}

func (u *ui) redo() {
	u.player.stop()
	from := u.view.sight
	if _, ok := u.history.Redo(); !ok {
		u.remark(say("ledger.nothingToRedo"))
	} else {
		u.changed()
		u.glideFrom(from)
	}
}
