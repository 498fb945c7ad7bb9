//go:build cgo && !nowindow

package window

import (
	"testing"

	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/test"
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
