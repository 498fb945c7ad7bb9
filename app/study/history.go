package study

import "slices"

// A Step is the key of what a person did, for the menu ("undo: choose
// function").
type Step string

// The steps.
const (
	StepChange      Step = "change" // anything without a name of its own
	StepOpen        Step = "open"
	StepCore        Step = "core"
	StepTolerance   Step = "tolerance"
	StepFrame       Step = "frame"
	StepBasis       Step = "basis"
	StepAtoms       Step = "atoms"
	StepFunction    Step = "function"
	StepIrrep       Step = "irrep"
	StepPartner     Step = "partner"
	StepElement     Step = "element"
	StepTurn        Step = "turn"
	StepMixing      Step = "mixing"
	StepCentral     Step = "central"
	StepOperation   Step = "operation"
	StepPlay        Step = "play"
	StepScrub       Step = "scrub"
	StepAngle       Step = "angle"
	StepOrbit       Step = "orbit"
	StepZoom        Step = "zoom"
	StepPan         Step = "pan"
	StepFit         Step = "fit"
	StepAlong       Step = "along"
	StepPerspective Step = "perspective"
	StepLook        Step = "look"
	StepFigure      Step = "figure"
	StepAtomTable   Step = "atomTable" // atoms typed in a table
	StepView        Step = "view"      // a view kept or forgotten
	StepAs          Step = "as"
	StepHeld        Step = "held"
	StepSubgroup    Step = "subgroup"
)

// Steps lists every step.
func Steps() []Step {
	return []Step{
		StepChange, StepOpen, StepCore, StepTolerance, StepFrame, StepBasis, StepAtoms, StepFunction, StepIrrep,
		StepPartner, StepElement, StepTurn, StepMixing, StepCentral, StepOperation, StepPlay, StepScrub, StepAngle, StepOrbit, StepZoom, StepPan,
		StepFit, StepAlong, StepPerspective, StepLook, StepFigure, StepAtomTable, StepView, StepAs, StepHeld, StepSubgroup,
	}
}

// Bounds of a history: more steps than anyone goes back, and as much memory
// as twenty of the largest coordinate lists.
const (
	MaxSteps        = 1000
	MaxHistoryBytes = 40 << 20
)

// A History is the studies of one sitting. It is made by NewHistory and used
// by one goroutine.
//
// A gesture, such as dragging the scene or scrubbing an operation, sets many
// studies between Begin and Commit and is one step.
type History struct {
	now        Study
	back, next []entry // the last of each is the nearest
	gesture    *entry  // what was before the gesture at hand, or nil
	bytes      int     // of back and next
}

// An entry is the study on the other side of a step.
type entry struct {
	step  Step
	study Study
	bytes int
}

// NewHistory returns a history that begins with a study.
func NewHistory(s Study) *History { return &History{now: s} }

// Now is the study at hand; within a gesture, the last one that was set.
func (h *History) Now() Study { return h.now }

// Do goes to another study in one step. A gesture at hand is committed before.
// A study equal to that at hand makes no step.
func (h *History) Do(step Step, s Study) {
	h.Commit()
	h.do(step, h.now, s)
}

func (h *History) do(step Step, before, after Study) {
	h.now = after
	if before.Equal(after) {
		return
	}
	for _, e := range h.next {
		h.bytes -= e.bytes
	}
	h.next = nil
	h.push(&h.back, step, before, after)
	for len(h.back) > 1 && (len(h.back) > MaxSteps || h.bytes > MaxHistoryBytes) {
		h.bytes -= h.back[0].bytes
		h.back = slices.Delete(h.back, 0, 1) // what is deleted is cleared, and its memory freed
	}
}

// push keeps a study beside another one. It costs what the two do not share.
func (h *History) push(stack *[]entry, step Step, s, beside Study) {
	bytes := cost(s, beside)
	h.bytes += bytes
	*stack = append(*stack, entry{step, s, bytes})
}

// cost is about the memory that a study takes beside one that stays: texts
// that are equal are mostly the same text.
func cost(s, beside Study) int {
	const fixed = 700
	bytes := fixed
	count := func(a, b string) {
		if a != b {
			bytes += len(a)
		}
	}
	count(s.Coordinates, beside.Coordinates)
	count(s.Core, beside.Core)
	count(s.Ignore, beside.Ignore)
	if !slices.Equal(s.Basis, beside.Basis) {
		for _, text := range s.Basis {
			bytes += 16 + len(text)
		}
	}
	if !slices.Equal(s.Atoms, beside.Atoms) {
		bytes += 8 * len(s.Atoms)
	}
	return bytes
}

// Begin starts a gesture. If a gesture of the same step is at hand it goes on
// with it, so that the notches of a wheel can be one; another is committed.
func (h *History) Begin(step Step) {
	if h.gesture != nil && h.gesture.step == step {
		return
	}
	h.Commit()
	h.gesture = &entry{step: step, study: h.now}
}

// Set is the study so far within a gesture. Without a gesture it does a
// StepChange.
func (h *History) Set(s Study) {
	if h.gesture == nil {
		h.Do(StepChange, s)
		return
	}
	h.now = s
}

// Commit ends a gesture, which becomes one step if it changed anything. Without
// a gesture it does nothing.
func (h *History) Commit() {
	if g := h.gesture; g != nil {
		h.gesture = nil
		h.do(g.step, g.study, h.now)
	}
}

// Cancel gives a gesture up and returns the study from before it.
func (h *History) Cancel() Study {
	if h.gesture != nil {
		h.now, h.gesture = h.gesture.study, nil
	}
	return h.now
}

// Open tells whether a gesture is at hand.
func (h *History) Open() bool { return h.gesture != nil }

// Undo goes back one step. It returns the study at hand then, and whether
// there was a step. A gesture at hand is committed before, so that it is what
// is undone.
func (h *History) Undo() (Study, bool) {
	h.Commit()
	return h.move(&h.back, &h.next)
}

// Redo takes back the last Undo.
func (h *History) Redo() (Study, bool) {
	h.Commit()
	return h.move(&h.next, &h.back)
}

func (h *History) move(from, to *[]entry) (Study, bool) {
	last := len(*from) - 1
	if last < 0 {
		return h.now, false
	}
	e := (*from)[last]
	(*from)[last] = entry{}
	*from = (*from)[:last]
	h.bytes -= e.bytes
	h.push(to, e.step, h.now, e.study)
	h.now = e.study
	return h.now, true
}

// CanUndo returns the step that Undo would take back, and whether there is
// one.
func (h *History) CanUndo() (Step, bool) {
	if g := h.gesture; g != nil && !g.study.Equal(h.now) {
		return g.step, true
	}
	return top(h.back)
}

// CanRedo returns the step that Redo would do, and whether there is one. A
// gesture that has changed something leaves nothing to redo.
func (h *History) CanRedo() (Step, bool) {
	if g := h.gesture; g != nil && !g.study.Equal(h.now) {
		return "", false
	}
	return top(h.next)
}

func top(stack []entry) (Step, bool) {
	if len(stack) == 0 {
		return "", false
	}
	return stack[len(stack)-1].step, true
}

// Reset forgets everything and begins with a study.
func (h *History) Reset(s Study) { *h = History{now: s} }
