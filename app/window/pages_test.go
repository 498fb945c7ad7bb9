//go:build cgo && !nowindow

package window

import (
	"slices"
	"strings"
	"testing"

	"fyne.io/fyne/v2"

	"lobewright/app/study"
	"lobewright/app/work"
)

// drawnOut is an octahedron, drawn out along z and skewed a little.
const drawnOut = `7
an octahedron that is none
Cu 0 0 0
O 2.00 0.05 0
O -2.00 -0.05 0
O 0.03 2.00 0
O 0 -1.96 0.02
O 0 0.02 2.30
O 0 0 -2.28
`

func (b *bench) openText(text string, basis ...string) {
	b.t.Helper()
	b.start(study.Study{Structure: "typed", Coordinates: text, Basis: basis})
	b.until("the group", func() bool { return b.state.Group != nil && b.state.Study.Equal(b.now()) && !b.state.AnyStale() })
}

func (b *bench) settled(what string) {
	b.t.Helper()
	b.until(what, func() bool { return b.state.Study.Equal(b.now()) && b.state.Progress == nil && !b.state.AnyStale() })
}

func TestARowOfTheLadderTakesTheStructureForItsGroup(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.openText(drawnOut, "O:sigma")
	found := b.state.Group.Fit.Setting.Symbol
	b.pages.turnTo(ladderPage)
	b.until("the ladder", func() bool { return b.pages.nearby.Ladder != nil && !b.pages.nearby.Running })
	b.tap(b.pages.pane, "group Oh")
	b.settled("Oh")
	if got := b.state.Group.Fit.Setting.Symbol; got != "Oh" || b.now().As != "Oh" {
		t.Fatalf("a click on Oh gives %s", got)
	}
	b.tap(b.pages.pane, "displacements")
	if s := b.view.shown; !s.Look.Displacements || len(s.Notes) != 1 || !strings.Contains(s.Notes[0].String(), "× 5") {
		t.Errorf("the arrows are explained by %q", s.Notes)
	}
	b.tap(b.pages.pane, "embeddings D4h")
	b.tap(b.pages.pane, "group D4h:2")
	b.settled("D4h")
	if got := b.state.Group.Fit.Setting.Symbol; got != "D4h" {
		t.Errorf("a click on the second D4h gives %s", got)
	}
	b.tap(b.pages.pane, "keep axes")
	b.settled("D4h with the axes of Oh")
	if got := b.state.Group.Fit.Rule.Name; got != work.RuleHeld {
		t.Errorf("the axes are those of the rule %s", got)
	}
	b.tap(b.pages.pane, "as found")
	b.settled("as found")
	if got := b.state.Group.Fit.Setting.Symbol; got != found || b.now().As != "" {
		t.Errorf("as found it was %s, and now is %s", found, got)
	}
	for range 5 {
		b.undo()
	}
	if s := b.now(); s.As != "" || s.Look.Displacements || s.KeepAxes {
		t.Errorf("five steps back it is %+v", s)
	}
}

// TestTheLadderOfABentMoleculeHasEveryGroupOnce: that of the line, D2h for it,
// and C2h with its axis across the line, of which the one along it is a part of
// the linear group.
func TestTheLadderOfABentMoleculeHasEveryGroupOnce(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.openText("3\n\nS 0 0 0\nO 1.235 0.72 0\nO -1.235 0.72 0\n")
	b.pages.turnTo(ladderPage)
	b.until("the ladder", func() bool { return b.pages.nearby.Ladder != nil && !b.pages.nearby.Running })
	b.pages.pane.Resize(fyne.NewSize(pageWidth, 900))
	rows := map[string]int{}
	for _, s := range b.pages.pane.lay().spots {
		if name, ok := strings.CutPrefix(s.name, "group "); ok {
			symbol, _, _ := strings.Cut(name, ":")
			rows[symbol]++
		}
	}
	for _, symbol := range []string{"D∞h", "D2h", "C2v", "C2h", "Cs", "C2", "Ci", "C1"} {
		if rows[symbol] != 1 {
			t.Errorf("%s has %d rows", symbol, rows[symbol])
		}
	}
	if len(rows) != 8 {
		t.Errorf("the rows are %v", rows)
	}
}

func TestAnImpossibleAxisLeavesTheOldOneAndSaysWhatIsPossible(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	b.pages.turnTo(axesPage)
	b.tap(b.pages.pane, "rule x-between")
	b.settled("the rule")
	before, group := b.now(), b.state.Group
	if err := b.tryAxes("", "C2'(x)", ""); err == nil {
		t.Fatal("z along a C2′ of D4h was taken")
	}
	if !b.now().Equal(before) || b.state.Group != group {
		t.Errorf("after a refusal the study is %+v", b.now())
	}
	if !strings.Contains(b.pages.axesProblem, "C4") {
		t.Errorf("the message is %q", b.pages.axesProblem)
	}
	b.pages.pane.lay()
	for _, c := range group.XChoices() {
		if !c.Now {
			b.tap(b.pages.pane, "x "+c.Text)
			break
		}
	}
	b.settled("x by hand")
	if s := b.now(); s.X == "" || s.Frame != "" || b.pages.axesProblem != "" {
		t.Errorf("x was chosen and the study says frame %q, z %q, x %q, problem %q", s.Frame, s.Z, s.X, b.pages.axesProblem)
	}
}

func TestASecondFrameGivesB1AndB2OfAPlaneEachOthersNames(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("water")
	b.pages.turnTo(secondPage)
	b.tap(b.pages.pane, "second plane-xz")
	e, err := b.pages.second.of(b.state.Group, b.now().Held)
	if err != nil || e == nil || b.view.shown.Held != e {
		t.Fatalf("the second frame is %v (%v)", e, err)
	}
	// By hand: with the plane of the molecule in yz, the function on the two H
	// that changes its sign under C2 goes like y, which is b2; in xz like x, b1.
	names := map[string]string{}
	for i, ir := range b.state.Group.Fit.Setting.Irreps {
		names[ir.Label] = e.Fit.Setting.Irreps[e.Names.Irreps[i]].Label
	}
	want := map[string]string{"A1": "A1", "A2": "A2", "B1": "B2", "B2": "B1"}
	for here, there := range want {
		if names[here] != there {
			t.Errorf("%s is called %s there, not %s", here, names[here], there)
		}
	}
	text := namesText(b.state.Group, e)
	for _, part := range []string{"x and y are exchanged", "B1 here is B2 there", "σv(xz)", "plane-xz"} {
		if !strings.Contains(text, part) {
			t.Errorf("the copied table lacks %q:\n%s", part, text)
		}
	}
	b.tap(b.pages.pane, "copy names")
	if got := b.app.Clipboard().Content(); got != text {
		t.Errorf("the clipboard holds %q", got)
	}
	b.hold("", "C7", "")
	if b.now().Held.Frame != "plane-xz" || b.pages.second.tried == "" {
		t.Errorf("an impossible second axis leaves %+v, %q", b.now().Held, b.pages.second.tried)
	}
	b.tap(b.pages.pane, "second none")
	if b.view.shown.Held != nil {
		t.Error("a frame is held still")
	}
}

func TestASubgroupIsFollowedAndUsed(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	b.pages.turnTo(subgroupsPage)
	c := &b.pages.subgroups
	b.until("the subgroups", func() bool { return c.list != nil })
	if len(c.list) != 26 {
		t.Errorf("D4h has %d subgroups beside itself up to conjugacy, not 26", len(c.list))
	}
	b.tap(b.pages.pane, "subgroup D2h:2")
	if b.now().Subgroup != "D2h:2" {
		t.Fatalf("a click on D2h chose %q", b.now().Subgroup)
	}
	b.tap(b.pages.pane, "use group")
	b.until("D2h", func() bool { return b.now().As != "" })
	b.settled("D2h")
	if got := b.state.Group.Fit.Setting.Symbol; got != "D2h" {
		t.Errorf("the group is %s", got)
	}
	b.undo()
	b.settled("D4h")
	b.until("the subgroups again", func() bool { b.pages.pane.lay(); return c.list != nil && c.setting == b.state.Group.Fit.Setting })
	c.keep = []string{"C4(z)"}
	for _, e := range c.narrow(b.state.Group) {
		if s := e.Subgroup.Symbol; s != "D4" && s != "C4v" && s != "C4h" && s != "C4" {
			t.Errorf("%s holds a C4", s)
		}
	}
	c.keep, c.leave = nil, []int{1}
	if list := c.narrow(b.state.Group); list[0].Subgroup.Symbol != "C2v" {
		t.Errorf("Cl2 is left in place by %s", list[0].Subgroup.Symbol)
	}
	// Which of the like subgroups is meant stays in the study: Cl2 is left in place
	// by the C2v about x, not by that about y which stands in the list of all.
	b.pages.pane.lay()
	site := c.narrow(b.state.Group)[0]
	b.tap(b.pages.pane, "subgroup "+site.Name())
	c.leave = nil
	all, err := work.Descents(b.state.Group.Fit.Setting, "C2v", nil)
	if err != nil || b.now().Subgroup != site.Name() || b.now().Kept == "" {
		t.Fatalf("%q with %q (%v)", b.now().Subgroup, b.now().Kept, err)
	}
	d, err := b.state.Group.Conjugate(all[site.Embedding-1], b.now().Kept)
	if err != nil || !slices.Equal(d.Operations, b.state.Group.Leaving([]int{1})) {
		t.Errorf("%v holds not what leaves Cl2 in place: %v", d, err)
	}
}

func TestALinearMoleculeIsTakenForFiniteGroups(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("rod")
	b.pages.turnTo(ladderPage)
	b.until("its ladder", func() bool { return b.pages.nearby.Ladder != nil && !b.pages.nearby.Running })
	b.tap(b.pages.pane, "group D2h")
	b.settled("D2h")
	if got := b.state.Group.Fit.Setting.Symbol; got != "D2h" {
		t.Errorf("the rod is taken for %s", got)
	}
	b.undo()
	b.settled("D∞h")
	b.pages.turnTo(subgroupsPage)
	b.tap(b.pages.pane, "subgroup C4v")
	b.pages.pane.lay()
	if _, ok := b.pages.pane.spotNamed("use group"); !ok || b.now().Subgroup != "C4v" {
		t.Errorf("C4v is not followed: %q", b.now().Subgroup)
	}
}

func TestTheAngleOfALinearMoleculeIsTypedAndItsMatricesAreShown(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.start(study.Study{Structure: "demo:rod", Basis: []string{"C:p"}, Operation: "C(φ)", Angle: 50,
		Projection: study.Projection{Irrep: "Πu", Copy: 1, Partner: 1, Subject: study.SubjectOrbital}})
	b.settled("the rod")
	b.askPhi()
	sheet := b.win.Canvas().Overlays().Top()
	if sheet == nil {
		t.Fatal("nothing asks for the angle")
	}
	sheet.Hide()
	s := b.now()
	s.Angle = 90
	b.do(study.StepAngle, s)
	b.settled("90°")
	if got := b.angleText.Text; got != "φ = 90°" {
		t.Errorf("the angle is shown as %q", got)
	}
	ledger := b.sheetOf(newBoard(100, 100, b.palette()).measure)
	for _, c := range ledger.columns {
		if c.op.Name == "C(φ)" && (c.set[2].String() != "(0  −1 | 1  0)" || len(c.set[1]) == 0) {
			t.Errorf("C(90°) has the matrix %q and the image %q", c.set[2], c.set[1])
		}
	}
}

// A study that is opened with a choice that its structure cannot have shows
// what is wrong, and one click leads back.
func TestAChoiceThatLeavesNoGroupIsToldAndTakenBack(t *testing.T) {
	for chip, bad := range map[string]study.Study{
		"group none":     {Structure: "demo:square-plane", As: "Ih"},
		"frame none":     {Structure: "demo:square-plane", Z: "1,2,3"},
		"tolerance less": {Structure: "demo:square-plane", Tolerance: 5},
	} {
		b := newBench(t, t.TempDir())
		b.do(study.StepOpen, bad)
		b.until("what is wrong with "+chip, func() bool { return len(b.state.Problems) > 0 && b.state.Progress == nil })
		if problem := b.state.Problems[0].Error(); !strings.Contains(paneText(b.given), problem) {
			t.Errorf("%q is not shown: %q", problem, paneText(b.given))
		}
		b.tap(b.given, chip)
		b.until("the group", func() bool { return b.state.Group != nil && len(b.state.Problems) == 0 })
	}
}
