//go:build cgo && !nowindow

package window

import (
	"errors"
	"math"
	"slices"
	"strconv"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/widget"

	"lobewright/app/notation"
	"lobewright/app/study"
	"lobewright/app/work"
)

// A setView is what the window remembers of the right pane beside the study:
// which two partners a turn exchanges, which two copies are mixed, and what was
// computed for them.
type setView struct {
	turning, mixing [2]int // from 1; zero stands for 1 and 2
	characters      bool   // the characters of the basis are shown

	marksOf marksKey
	marks   []work.Mark
}

type marksKey struct {
	orbitals *work.Orbitals
	irrep    string
	before   string
	pair     [2]int
}

// pairOf is a chosen pair, or 1 and 2 where it does not exist.
func pairOf(chosen [2]int, n int) [2]int {
	if chosen[0] < 1 || chosen[1] < 1 || chosen[0] > n || chosen[1] > n || chosen[0] == chosen[1] {
		return [2]int{1, 2}
	}
	return chosen
}

// set is the irrep of the chosen group orbital, by index; ok is false if none
// is chosen.
func (u *ui) set() (o *work.Orbitals, irrep int, ok bool) {
	orbital := u.orbital()
	if orbital == nil || len(u.now().Basis) == 0 {
		return nil, 0, false
	}
	return u.state.Orbitals, orbital.Irrep, true
}

// turnPair are the partners that a turn exchanges; ok is false if there are no
// two.
func (u *ui) turnPair() (pair [2]int, ok bool) {
	o, a, ok := u.set()
	if !ok || o.Irreps[a].Dimension < 2 {
		return pair, false
	}
	return pairOf(u.sets.turning, o.Irreps[a].Dimension), true
}

// mixPair are the copies that are mixed; ok is false if there are no two.
func (u *ui) mixPair() (pair [2]int, ok bool) {
	o, a, ok := u.set()
	if !ok || o.Content[a] < 2 {
		return pair, false
	}
	return pairOf(u.sets.mixing, o.Content[a]), true
}

// turnAngle is the angle, in degrees, that the slider of a pair shows.
func turnAngle(list []study.PlaneRotation, pair [2]int) float64 {
	_, angle := work.LastTurn(list, pair[0], pair[1])
	return work.OneTurn(angle)
}

// turnMarks are the marks of the turn at hand, kept as long as they hold.
func (u *ui) turnMarks() []work.Mark {
	pair, ok := u.turnPair()
	if !ok {
		return nil
	}
	s, o := u.now(), u.state.Orbitals
	before, _ := work.LastTurn(s.Turn, pair[0], pair[1])
	plain := o
	if o.Plain != nil {
		plain = o.Plain
	}
	var text strings.Builder
	for _, r := range before {
		text.WriteString(strconv.Itoa(r.From) + " " + strconv.Itoa(r.To) + " " + strconv.FormatFloat(r.Angle, 'g', -1, 64) + ";")
	}
	key := marksKey{plain, s.Projection.Irrep, text.String(), pair}
	if u.sets.marksOf != key {
		marks, err := o.TurnMarks(s, pair[0], pair[1])
		if err != nil {
			marks = nil
		}
		u.sets.marksOf, u.sets.marks = key, marks
	}
	return u.sets.marks
}

// snapReach (degrees) is how near a turn by hand comes to a mark before it takes
// it.
const snapReach = 2.5

// mostRotations is how many rotations of different pairs a study holds.
const mostRotations = 60

// setTurn turns the pair at hand to an angle (degrees); snap takes a mark near
// by. It is part of a gesture.
func (u *ui) setTurn(angle float64, snap bool) {
	pair, ok := u.turnPair()
	if !ok {
		return
	}
	if m, near := work.Snapped(u.turnMarks(), angle, snapReach); snap && near {
		angle = m.Angle
	} else {
		angle = math.Round(10*angle) / 10
	}
	s := u.now()
	if next := work.WithTurn(s.Turn, pair[0], pair[1], angle); len(next) <= mostRotations {
		s.Turn = next
	}
	u.gesture(study.StepTurn, s)
}

// setMixing mixes the pair of copies at hand by an angle (degrees), whole
// eighths of a circle near by being taken.
func (u *ui) setMixing(angle float64) {
	pair, ok := u.mixPair()
	if !ok {
		return
	}
	if whole := 45 * math.Round(angle/45); math.Abs(whole-angle) < snapReach {
		angle = whole
	} else {
		angle = math.Round(10*angle) / 10
	}
	s := u.now()
	if next := work.WithTurn(s.Mixing, pair[0], pair[1], angle); len(next) <= mostRotations {
		s.Mixing = next
	}
	u.gesture(study.StepMixing, s)
}

// gesture is a study on the way of a gesture by hand.
func (u *ui) gesture(step study.Step, s study.Study) {
	u.player.stop()
	u.history.Begin(step)
	u.history.Set(s)
	u.service.Request(s)
	u.show(true)
	u.follows.Update()
	u.detail.Update()
	u.beside.Update()
}

// turnStep goes to the next mark in a direction.
func (u *ui) turnStep(by int) {
	pair, ok := u.turnPair()
	if !ok {
		return
	}
	now := turnAngle(u.now().Turn, pair)
	best, least := 0.0, math.Inf(1)
	for _, m := range u.turnMarks() {
		d := math.Mod(float64(by)*(m.Angle-now)+720, 360)
		if d > 1e-6 && d < least {
			best, least = m.Angle, d
		}
	}
	if math.IsInf(least, 1) {
		best = now + 15*float64(by)
	}
	u.setTurn(best, false)
	u.commit()
}

// mixStep mixes by an eighth of a circle.
func (u *ui) mixStep(by int) {
	if pair, ok := u.mixPair(); ok {
		u.setMixing(45 * (math.Round(turnAngle(u.now().Mixing, pair)/45) + float64(by)))
		u.commit()
	}
}

// askTurn asks for the angle of the turn.
func (u *ui) askTurn() {
	if pair, ok := u.turnPair(); ok {
		u.askAngle(say("partners.turnBy", pair[0], pair[1]), turnAngle(u.now().Turn, pair), func(x float64) { u.setTurn(x, false) })
	}
}

func (u *ui) askMixing() {
	if pair, ok := u.mixPair(); ok {
		u.askAngle(say("partners.mixBy", pair[0], pair[1]), turnAngle(u.now().Mixing, pair), u.setMixing)
	}
}

func (u *ui) askAngle(text string, now float64, set func(float64)) {
	u.ask(say("partners.angle"), text, plainText(now), func(typed string) error {
		x, err := readNumber(typed, "°")
		if err != nil || !(math.Abs(x) <= 360) {
			return errors.New(say("partners.noAngle"))
		}
		set(x)
		u.commit()
		return nil
	})
}

// unturn takes every turn and mixing back.
func (u *ui) unturn() {
	s := u.now()
	if len(s.Turn)+len(s.Mixing) == 0 {
		return
	}
	s.Turn, s.Mixing = nil, nil
	u.do(study.StepTurn, s)
}

func (u *ui) toggleNodes() {
	s := u.now()
	s.Look.Nodes = !s.Look.Nodes
	u.do(study.StepLook, s)
}

func (u *ui) toggleSplit() {
	s := u.now()
	s.Look.Split = !s.Look.Split
	u.do(study.StepLook, s)
}

// holdOrbital keeps the chosen group orbital beside the picture, or lets the one that
// is kept go.
func (u *ui) holdOrbital() {
	s := u.now()
	if s.Held.Irrep != "" {
		s.Held.Irrep, s.Held.Copy, s.Held.Partner = "", 0, 0
		u.do(study.StepHeld, s)
		return
	}
	if o := u.orbital(); o != nil {
		s.Held.Irrep, s.Held.Copy, s.Held.Partner = u.state.Orbitals.Irreps[o.Irrep].Label, o.Copy+1, o.Partner+1
		u.do(study.StepHeld, s)
	}
}

// chooseCentral takes an atom, from 1, as the central one; 0 leaves the choice
// to the program.
func (u *ui) chooseCentral(atom int) {
	s := u.now()
	s.Central = atom
	u.do(study.StepCentral, s)
}

// centralCommands are the atoms that can be the central one.
func (u *ui) centralCommands() []*command {
	g := u.state.Group
	out := []*command{{key: "partners.centralDefault", do: func() { u.chooseCentral(0) }, on: func() bool { return u.now().Central == 0 }}}
	if g == nil {
		return out
	}
	names := g.AtomNames()
	const most = 40
	for i, k := range g.CentralAtoms() {
		if i == most {
			break
		}
		out = append(out, &command{key: "partners.central", label: func() string { return names[k] },
			do: func() { u.chooseCentral(k + 1) }, on: func() bool { return u.now().Central == k+1 }})
	}
	return out
}

// partnerCommands is the menu of the set at hand.
func (u *ui) partnerCommands() []*command {
	can := func(f func() ([2]int, bool)) func() bool {
		return func() bool { _, ok := f(); return ok }
	}
	return []*command{
		(&command{key: "partners.split", do: u.toggleSplit, on: func() bool { return u.now().Look.Split }}).byHand("p"),
		(&command{key: "partners.hold", do: u.holdOrbital, on: func() bool { return u.now().Held.Irrep != "" },
			can: func() bool { return u.now().Held.Irrep != "" || u.orbital() != nil }}).byHand("h"),
		(&command{key: "partners.nodes", do: u.toggleNodes, on: func() bool { return u.now().Look.Nodes }}).byHand("k"),
		rule,
		(&command{key: "partners.turnNext", do: func() { u.turnStep(1) }, can: can(u.turnPair)}).byHand("]"),
		(&command{key: "partners.turnBack", do: func() { u.turnStep(-1) }, can: can(u.turnPair)}).byHand("["),
		{key: "partners.turnAsk", do: u.askTurn, can: can(u.turnPair)},
		{key: "partners.mixAsk", do: u.askMixing, can: can(u.mixPair)},
		{key: "partners.unturn", do: u.unturn, can: func() bool { s := u.now(); return len(s.Turn)+len(s.Mixing) > 0 }},
		rule,
		{key: "partners.characters", do: u.toggleCharacters, on: func() bool { return u.sets.characters }},
		{key: "partners.central", refresh: u.centralCommands},
	}
}

func (u *ui) toggleCharacters() {
	u.sets.characters = !u.sets.characters
	u.follows.Update()
	u.updateMenus()
}

// centralMenu opens the choice of the central atom at a place of the pane.
func (u *ui) centralMenu() {
	var items []*fyne.MenuItem
	for _, c := range u.centralCommands() {
		items = append(items, u.makeItem(c))
		items[len(items)-1].Checked = c.on()
	}
	at := fyne.CurrentApp().Driver().AbsolutePositionForObject(u.follows)
	widget.ShowPopUpMenuAtPosition(fyne.NewMenu("", items...), u.win.Canvas(), at.AddXY(pad, pad))
}

// markText says what is special at a mark: of each partner, what tells most.
func markText(o *work.Orbitals, m work.Mark) notation.Text {
	var t notation.Text
	for partner := range 5 {
		why, ok := bestReason(o, m, partner)
		if !ok {
			continue
		}
		if len(t) > 0 {
			t = t.Then(notation.Words("; "))
		}
		switch {
		case why.Operation < 0:
			t = t.Then(fill(say("partners.largestOn", partner+1), notation.Words(o.AtomNames()[why.Atom])))
		case why.Sign > 0:
			t = t.Then(fill(say("partners.symmetric", partner+1), notation.Operation(o.Fit.Setting.Operations[why.Operation].Name)))
		default:
			t = t.Then(fill(say("partners.antisymmetric", partner+1), notation.Operation(o.Fit.Setting.Operations[why.Operation].Name)))
		}
	}
	return t
}

// bestReason prefers planes in which a partner lies, then those that it is
// square to, then axes.
func bestReason(o *work.Orbitals, m work.Mark, partner int) (work.MarkReason, bool) {
	rank := func(r work.MarkReason) int {
		if r.Operation < 0 {
			return 4
		}
		turn := o.Fit.Setting.Operations[r.Operation].Turn
		switch {
		case turn.Improper && turn.Num == 0 && r.Sign > 0:
			return 0
		case turn.Improper && turn.Num == 0:
			return 1
		case !turn.Improper && r.Sign > 0:
			return 2
		}
		return 3
	}
	var of []work.MarkReason
	for _, r := range m.Reasons {
		if r.Partner == partner {
			of = append(of, r)
		}
	}
	if len(of) == 0 {
		return work.MarkReason{}, false
	}
	slices.SortStableFunc(of, func(a, b work.MarkReason) int { return rank(a) - rank(b) })
	return of[0], true
}
