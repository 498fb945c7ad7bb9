//go:build cgo && !nowindow

package window

import (
	"slices"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"

	"lobewright/app/session"
	"lobewright/app/study"
)

// firstSteps show the main job on the demonstration, in four steps: a card on
// the picture, which never takes the keyboard or the mouse from the rest. Doing
// what a step says goes to the next one. It goes away for good.
type firstSteps struct {
	u    *ui
	pane *pane
	at   int // the step, from 0
}

// A step is what to do, what counts as done, and how the program would do it.
type step struct {
	title, text string // keys
	done        []study.Step
	show        func(u *ui)
}

// theSteps are made anew at each call, since what they do leads back to them.
func theSteps() []step {
	return []step{
		{"help.step1", "help.step1Text", []study.Step{study.StepBasis, study.StepFunction}, func(u *ui) { u.setBasis([]string{"Cl:sigma"}) }},
		{"help.step2", "help.step2Text", []study.Step{study.StepOperation, study.StepPlay}, func(u *ui) { u.nextOperation(1) }},
		{"help.step3", "help.step3Text", []study.Step{study.StepIrrep, study.StepPartner}, func(u *ui) { u.nextOrbital(1) }},
		{"help.step4", "help.step4Text", nil, nil},
	}
}

func newFirstSteps(u *ui) *firstSteps {
	f := &firstSteps{u: u}
	f.pane = newPane(f.draw, u)
	f.pane.least = fyne.NewSize(290, 148)
	f.pane.onKey = func(e *fyne.KeyEvent) bool {
		if e.Name == fyne.KeyEscape {
			f.close()
			return true
		}
		return false
	}
	f.pane.Hide()
	return f
}

// over lays the card over the corner of the picture.
func (f *firstSteps) over(picture fyne.CanvasObject) fyne.CanvasObject {
	return container.NewStack(picture, container.New(corner{}, f.pane))
}

// corner puts what is small at the top on the left.
type corner struct{}

// Layout implements fyne.Layout.
func (corner) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	for _, o := range objects {
		least := o.MinSize()
		o.Move(fyne.NewPos(10, 10))
		o.Resize(fyne.NewSize(min(least.Width, size.Width-20), min(least.Height, size.Height-20)))
	}
}

// MinSize implements fyne.Layout.
func (corner) MinSize([]fyne.CanvasObject) fyne.Size { return fyne.Size{} }

// begin shows the first step, on the demonstration.
func (f *firstSteps) begin() {
	f.at = 0
	f.pane.Show()
	f.pane.Update()
}

// beginOnDemo opens the demonstration for the steps.
func (f *firstSteps) beginOnDemo() {
	f.u.openDemo(firstDemo)
	f.begin()
}

// did follows what a person does.
func (f *firstSteps) did(s study.Step) {
	if f.pane.Visible() && slices.Contains(theSteps()[f.at].done, s) {
		f.next()
	}
}

func (f *firstSteps) next() {
	if f.at+1 >= len(theSteps()) {
		f.close()
		return
	}
	f.at++
	f.pane.Update()
}

// close sends the card away for good.
func (f *firstSteps) close() {
	f.pane.Hide()
	f.u.preferences(func(p *session.Preferences) { p.Shown = true })
	f.u.win.Canvas().Focus(f.u.view)
}

func (f *firstSteps) draw(b *board) {
	p := b.palette
	b.fill(0, 0, b.width, b.height, p.Panel)
	b.frame(0, 0, b.width, b.height, 1, p.Rule)
	s := theSteps()[f.at]
	head := style{size: textSize, color: p.Ink, align: -1, bold: true}
	plain := style{size: secondSize + 1, color: p.Ink, align: -1}
	b.text(pad, 22, words(say("help.stepOf", f.at+1, len(theSteps()), say(s.title))), head)
	b.paragraph(pad, 43, b.width-2*pad, words(say(s.text)), plain)
	x := float64(pad)
	offer := func(name, label, hint string, on bool, do func()) {
		w := b.measure(words(label), plain) + 16
		drawChip(b, x, b.height-chipHeight-8, w, words(label), secondSize, chip{name: name, hint: hint, on: on, do: do})
		x += w + 5
	}
	if s.show != nil {
		offer("steps show", say("help.stepShow"), say("help.stepShowHint"), false, func() { s.show(f.u) })
		offer("steps next", say("help.stepNext"), say("help.stepNextHint"), true, f.next)
		offer("steps close", say("help.stepClose"), say("help.stepCloseHint"), false, f.close)
	} else {
		offer("steps close", say("help.stepDone"), say("help.stepCloseHint"), true, f.close)
	}
}
