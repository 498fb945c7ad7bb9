//go:build cgo && !nowindow

package window

import (
	"encoding/csv"
	"math"
	"slices"
	"strings"
	"testing"
	"time"

	"fyne.io/fyne/v2"

	"lobewright/app/picture"
	"lobewright/app/study"
	"lobewright/app/table"
)

// project chooses a function and a group orbital and waits for the ledger.
func (b *bench) project(spec, basis, irrep string, function int, element [2]int) *ledgerSheet {
	b.t.Helper()
	b.start(study.Study{Structure: spec, Basis: []string{basis}, Projection: study.Projection{
		Function: function, Irrep: irrep, Subject: study.SubjectFunction, Element: element}})
	b.until("the ledger", func() bool { return b.theLedger() != nil && b.images.basis == b.state.Basis })
	return b.sheetOf(newBoard(100, 100, b.palette()).measure)
}

// row lists the entries of a row of the ledger.
func (s *ledgerSheet) row(i int) string {
	var out []string
	for _, c := range s.columns {
		out = append(out, c.set[i].String())
	}
	return strings.Join(out, " | ")
}

func (s *ledgerSheet) ends() (out []string) {
	for _, line := range s.end {
		out = append(out, line.text.String())
	}
	return out
}

// σ functions of a square plane onto Eu, done by hand: the operations that
// leave or exchange atoms 1 and 3 on the x axis count, with the sign that x
// gets.
func TestTheLedgerOfTheSquarePlane(t *testing.T) {
	b := newBench(t, t.TempDir())
	s := b.project("demo:square-plane", "Cl:sigma", "Eu", 1, [2]int{})
	for i, want := range []string{
		"E | C4(z) | C4³(z) | C2(z) | C2′(x) | C2′(y) | C2″(1) | C2″(2) | i | S4(z) | S4³(z) | σh | σv(xz) | σv(yz) | σd(1) | σd(2)",
		"φ1 | φ2 | φ4 | φ3 | φ1 | φ3 | φ2 | φ4 | φ3 | φ2 | φ4 | φ1 | φ1 | φ3 | φ2 | φ4",
		"1 | 0 | 0 | −1 | 1 | −1 | 0 | 0 | −1 | 0 | 0 | 1 | 1 | −1 | 0 | 0",
	} {
		if got := s.row(i); got != want {
			t.Errorf("row %d is\n%s\nwant\n%s", i, got, want)
		}
	}
	if got, want := s.ends(), []string{"total 4(φ1 − φ3)", "length 4√2 = 5.657", "⇒ (φ1 − φ3)/√2", "= eu(x)"}; !slices.Equal(got, want) {
		t.Errorf("it ends with %q, want %q", got, want)
	}
	b.tap(b.ledger, "ledger result")
	if p := b.now().Projection; p.TheSubject() != study.SubjectOrbital || p.Partner != 1 {
		t.Errorf("the result chooses %+v", p)
	}
}

func TestTheLedgerSaysWhyNothingIsLeft(t *testing.T) {
	b := newBench(t, t.TempDir())
	s := b.project("demo:water", "H:s", "A2", 1, [2]int{})
	want := []string{"total 0", "cancel each other: a: E, σv′(yz); b: C2(z), σv(xz)", "φ1 has no part in A2"}
	if got := s.ends(); !slices.Equal(got, want) {
		t.Errorf("it ends with %q, want %q", got, want)
	}
	if marks := []string{s.columns[0].mark, s.columns[1].mark, s.columns[2].mark, s.columns[3].mark}; !slices.Equal(marks, []string{"a", "b", "b", "a"}) {
		t.Errorf("the marks are %q", marks)
	}
	// The same from the menu of the row of weights.
	b.project("demo:water", "H:s", "A1", 1, [2]int{})
	b.run(b.irrepCommands()[1])
	b.until("A2", func() bool { return b.theLedger() != nil })
	if p := b.now().Projection; p.Irrep != "A2" || p.TheSubject() != study.SubjectFunction {
		t.Errorf("the menu chooses %+v", p)
	}
	s = b.project("ideal:TPY-3,N,H,1.01", "H:s", "E", 1, [2]int{2, 2})
	ends := s.ends()
	if got, want := ends[len(ends)-1], "φ1 has no part in e(y), but one in e(x)"; got != want {
		t.Errorf("it says %q, want %q", got, want)
	}
	b.tap(b.ledger, "ledger otherElement")
	b.until("the other element", func() bool { return b.theLedger() != nil })
	if l := b.theLedger(); l.Element != [2]int{1, 0} || l.Norm == 0 {
		t.Errorf("it goes on with the element %v, length %v", l.Element, l.Norm)
	}
}

func TestTheWeightIsChosen(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.project("demo:square-plane", "Cl:sigma", "Eu", 2, [2]int{})
	if n := len(b.weightCommands()); n != 5 {
		t.Errorf("%d weights are offered for a pair", n)
	}
	for _, c := range b.weightCommands() {
		b.run(c)
		b.until(c.text(), func() bool { return b.theLedger() != nil })
		if !c.on() {
			t.Errorf("%s is not in force", c.text())
		}
	}
	if !b.theLedger().ByCharacter() {
		t.Error("the last is the character")
	}
	b.tap(b.ledger, "ledger weight")
	if b.win.Canvas().Overlays().Top() == nil {
		t.Error("no menu comes up")
	}
	b.win.Canvas().Overlays().Top().Hide()
}

func TestKeysAndClicksPlayTheSameOperation(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("square-plane")
	b.tap(b.ledger, "operation C4(z)")
	clicked := b.now()
	b.chooseOperation("E")
	b.typed('.')
	if got := b.now(); got.Operation != clicked.Operation || got.Moment != clicked.Moment {
		t.Errorf("the key shows %s at %v, a click %s at %v", got.Operation, got.Moment, clicked.Operation, clicked.Moment)
	}
	for _, c := range []struct {
		key  fyne.KeyName
		want string
	}{{fyne.KeyRight, "C4^3(z)"}, {fyne.KeyRight, "C2(z)"}, {fyne.KeyLeft, "C4^3(z)"}, {fyne.KeyEnd, "σd(2)"}, {fyne.KeyRight, "E"}, {fyne.KeyHome, "E"}} {
		b.ledger.TypedKey(&fyne.KeyEvent{Name: c.key})
		if got := b.now().Operation; got != c.want {
			t.Errorf("%s shows %s, not %s", c.key, got, c.want)
		}
	}
}

func TestOneByOneEndsWithTheGroupOrbital(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.project("demo:square-plane", "Cl:sigma", "Eu", 1, [2]int{})
	before := b.now()
	l := b.theLedger()
	b.tally.start() // without motion: stills
	for i := range l.Rows {
		if b.tally.ledger == nil || b.tally.step != i {
			t.Fatalf("still %d shows step %d", i, b.tally.step)
		}
		if got := b.view.shown.Coefficients; !slices.Equal(got, l.Rows[i].Sum) {
			t.Errorf("still %d shows %v, not %v", i, got, l.Rows[i].Sum)
		}
		b.nextOperation(1)
	}
	if !b.tally.done {
		t.Fatal("it does not end")
	}
	if got, want := b.sentence().String(), "The sum over 16 operations is 4(φ1 − φ3): made of length 1 it is the group orbital eu(x) = (φ1 − φ3)/√2."; got != want {
		t.Errorf("it says\n%s\nwant\n%s", got, want)
	}
	if p := b.now().Projection; p.TheSubject() != study.SubjectOrbital || p.Partner != 1 || p.Copy != 1 {
		t.Errorf("at the end %+v is chosen", p)
	}
	// The picture is that of the group orbital: the same shares of a full lobe.
	shown, orbital := b.view.shown, b.orbital().Coefficients
	for i, c := range shown.Coefficients {
		if math.Abs(c/shown.Full-orbital[i]/largestOf(orbital)) > 1e-9 {
			t.Errorf("function %d is drawn with %v of %v, in the group orbital with %v", i+1, c, shown.Full, orbital[i])
		}
	}
	b.undo()
	if !b.now().Equal(before) {
		t.Errorf("it was more than one step: %+v", b.now())
	}
}

// With motion: every frame follows from the one before without a jump, and it
// can rest, go on, go back and end.
func TestTheSumGrowsWithoutAJump(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.project("demo:tetrahedron", "Cl:p", "T2", 2, [2]int{})
	l := b.theLedger()
	b.motion = true
	b.tally.start()
	drawn := func(s picture.Shown) []float64 {
		out := make([]float64, len(s.Coefficients))
		for i, c := range s.Coefficients {
			out[i] = c / s.Full
			if s.Before != nil {
				out[i] = (s.Before[i]*(1-s.Fade) + c*s.Fade) / s.Full
			}
		}
		return out
	}
	last := drawn(b.view.shown)
	for frames := 0; b.tally.playing; frames++ {
		if frames > 5000 {
			t.Fatal("it does not end")
		}
		b.tally.began = b.tally.began.Add(-20 * time.Millisecond) // the clock of the test
		b.tally.tick()
		now := drawn(b.view.shown)
		for i := range now {
			if math.Abs(now[i]-last[i]) > 0.3 {
				t.Fatalf("frame %d: function %d jumps from %v to %v in step %d", frames, i+1, last[i], now[i], b.tally.step)
			}
		}
		last = now
	}
	if !b.tally.done || b.tally.step != len(l.Rows)-1 {
		t.Errorf("it rests in step %d", b.tally.step)
	}
	b.tally.start()
	b.togglePlay()
	if b.tally.playing {
		t.Error("it does not rest")
	}
	b.tally.stepBy(1)
	b.tally.stepBy(1)
	if b.tally.step != 1 {
		t.Errorf("two steps lead to %d", b.tally.step)
	}
	b.tally.stepBy(-1)
	if b.tally.step != 0 {
		t.Errorf("a step back leads to %d", b.tally.step)
	}
	b.tally.faster(1)
	if b.tally.speed != 2 {
		t.Errorf("the speed is %v", b.tally.speed)
	}
	b.escape()
	if b.tally.ledger != nil || b.tally.playing {
		t.Error("it does not stop")
	}
}

func TestTheLedgerIsCopied(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.project("demo:water", "H:s", "B2", 1, [2]int{})
	for _, f := range table.Formats() {
		b.copyLedger(f)
		if got, want := b.app.Clipboard().Content(), table.LedgerGrid(b.theLedger(), say).As(f); got != want || got == "" {
			t.Errorf("%s: on the clipboard is %q", f, got)
		}
	}
	b.copyLedger(table.FormatCSV)
	rows, err := csv.NewReader(strings.NewReader(b.app.Clipboard().Content())).ReadAll()
	if err != nil || len(rows) != 5 {
		t.Errorf("%d rows, %v", len(rows), err)
	}
}

// A hundred and twenty columns are set once and not with every frame.
func TestTheLargestLedgerIsSetOnce(t *testing.T) {
	b := newBench(t, t.TempDir())
	s := b.project("demo:cage", "C:pz", "T1u", 1, [2]int{})
	if len(s.columns) != 120 {
		t.Fatalf("%d columns", len(s.columns))
	}
	b.ledger.Resize(fyne.NewSize(1280, ledgerHeight))
	b.ledger.generate(1280, int(ledgerHeight))
	drawn := b.book.sheet
	b.jump(0.5)
	b.ledger.generate(1280, int(ledgerHeight))
	if b.book.sheet != drawn {
		t.Error("another moment sets the ledger anew")
	}
	for _, c := range s.columns {
		if c.width < 44 {
			t.Errorf("%s is %v wide", c.op.Name, c.width)
		}
	}
}

func TestTheFamiliesOfALinearMoleculeHaveImages(t *testing.T) {
	b := newBench(t, t.TempDir())
	b.open("rod")
	b.setBasis([]string{"all:p"})
	b.until("p", func() bool {
		return b.state.Orbitals != nil && b.state.Basis != nil && b.state.Basis.Functions[0].Name[0] == 'p'
	})
	s := b.now()
	s.Angle = 90
	b.do(study.StepAngle, s)
	sheet := b.sheetOf(newBoard(100, 100, b.palette()).measure)
	for _, c := range sheet.columns {
		if len(c.set[1]) == 0 {
			t.Errorf("%s has no image", c.op.Name)
		}
	}
	if sheet.remark == "" || sheet.rows() != 2 {
		t.Errorf("it says %q with %v rows", sheet.remark, sheet.rows())
	}
}

// The ledger is drawn when an operation is chosen, not with the frames that
// play it.
func BenchmarkDrawingTheLargestLedger(b *testing.B) {
	w := newBench(b, b.TempDir())
	w.project("demo:cage", "C:pz", "T1u", 1, [2]int{})
	w.ledger.Resize(fyne.NewSize(1280, ledgerHeight))
	for range b.N {
		w.ledger.stale = true
		w.ledger.generate(1280, int(ledgerHeight))
	}
}
