//go:build cgo && !nowindow

package window

import (
	"testing"

	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/test"

	"lobewright/app/work"
	"lobewright/symmetry"
)

// reply types an answer into the sheet that is open and returns what it says
// is wrong.
func (b *bench) reply(text string) string {
	b.t.Helper()
	entry, ok := b.win.Canvas().Focused().(*answerEntry)
	if !ok {
		b.t.Fatalf("nothing is asked; the keyboard is on %T", b.win.Canvas().Focused())
	}
	entry.SetText(text)
	entry.OnSubmitted(text)
	popup := b.win.Canvas().Overlays().Top()
	if popup == nil {
		return ""
	}
	fault := ""
	for _, o := range test.LaidOutObjects(popup) {
		if c, ok := o.(*canvas.Text); ok && c.Color == b.palette().Accent {
			fault += c.Text
		}
	}
	return fault
}

// Groups of a higher n than the pages list are had by their symbols.
func TestALinearMoleculeIsTakenForAnyFiniteGroupWithItsAxis(t *testing.T) {
	for _, c := range []struct{ demo, group, wrong string }{
		{"cyanide", "C7v", "D3h"}, {"rod", "D8h", "Td"}, {"rod", "D7d", "C∞v"}, {"rod", "C7h", "C1v"},
	} {
		b := newBench(t, t.TempDir())
		b.open(c.demo)
		b.pages.turnTo(ladderPage)
		b.until("the ladder", func() bool { return b.pages.nearby.Ladder != nil && !b.pages.nearby.Running })
		b.tap(b.pages.pane, "other group")
		if said := b.reply(c.wrong); said == "" || b.now().As != "" {
			t.Errorf("%s is taken for %s", c.demo, c.wrong)
		}
		if said := b.reply(c.group); said != "" {
			t.Fatalf("%s for %s: %s", c.group, c.demo, said)
		}
		b.settled(c.group)
		if got := b.state.Group.Fit.Setting.Symbol; got != c.group {
			t.Errorf("%s was typed and %s is shown", c.group, got)
		}
		b.tap(b.pages.pane, "group "+c.group) // it has a button of its own now
		b.undo()
		b.settled("the linear group")

		b.pages.turnTo(subgroupsPage)
		b.tap(b.pages.pane, "other subgroup")
		if said := b.reply(c.wrong); said == "" {
			t.Errorf("%s is followed into %s", c.demo, c.wrong)
		}
		if said := b.reply(c.group); said != "" {
			t.Fatalf("%s for %s: %s", c.group, c.demo, said)
		}
		if b.now().Subgroup != c.group {
			t.Errorf("the subgroup is %q", b.now().Subgroup)
		}
		b.tap(b.pages.pane, "use group")
		b.settled(c.group)
		if got := b.state.Group.Fit.Setting.Symbol; got != c.group {
			t.Errorf("%s is used and %s is shown", c.group, got)
		}
		b.shut()
	}
}

// Subgroups of one symbol are told apart by what their buttons say.
func TestLikeSubgroupsAreToldApartByWhatTheyHold(t *testing.T) {
	for _, symbol := range []string{"D2h", "D4h", "D6h", "Oh", "D4d"} {
		g, err := symmetry.New(symbol)
		if err != nil {
			t.Fatal(err)
		}
		all, err := work.Subgroups(g)
		if err != nil {
			t.Fatal(err)
		}
		seen := map[string]string{}
		several := 0
		for _, e := range all {
			if e.Of < 2 {
				continue
			}
			several++
			label := markedGroup(e, all).String()
			if other, twice := seen[label]; twice {
				t.Errorf("%s: %s and %s are both called %q", symbol, other, e.Name(), label)
			}
			seen[label] = e.Name()
		}
		if several == 0 {
			t.Errorf("%s has no like subgroups", symbol)
		}
	}
}

// What cannot be done now stands last in the list of everything, with the
// reason.
func TestWhatCannotBeDoneStandsLast(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("water")
	list := found(b.everything(), say("menu.addAtom"))
	if len(list) == 0 || !list[len(list)-1].off() {
		t.Fatalf("%d commands are found", len(list))
	}
	off := false
	for _, c := range found(b.everything(), "atom") {
		if off && !c.off() {
			t.Errorf("%q stands after what cannot be done", c.name)
		}
		off = off || c.off()
	}
	if !off {
		t.Error("nothing is off")
	}
}
