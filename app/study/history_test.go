package study

import (
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

func at(moment float64) Study { return Study{Structure: "demo:cage", Moment: moment} }

func TestAGestureIsOneStep(t *testing.T) {
	h := NewHistory(at(0))
	h.Begin(StepScrub)
	for i := range 50 {
		h.Set(at(float64(i) / 50))
	}
	if step, ok := h.CanUndo(); !ok || step != StepScrub || !h.Open() {
		t.Errorf("within the gesture: %q %v", step, ok)
	}
	h.Commit()
	h.Commit()
	if h.Open() || h.Now().Moment != 0.98 {
		t.Error("the gesture does not end at its last study")
	}
	if s, ok := h.Undo(); !ok || s.Moment != 0 {
		t.Errorf("undone: %v", s.Moment)
	}
	if _, ok := h.Undo(); ok {
		t.Error("there was one step only")
	}
	if s, ok := h.Redo(); !ok || s.Moment != 0.98 {
		t.Errorf("done again: %v", s.Moment)
	}
	if _, ok := h.Redo(); ok {
		t.Error("there is nothing to redo")
	}
}

func TestAGestureThatChangesNothingIsNoStep(t *testing.T) {
	h := NewHistory(at(0))
	h.Do(StepOperation, at(0.5))
	h.Undo()
	h.Begin(StepOrbit)
	h.Set(at(0.1))
	h.Set(at(0))
	h.Commit()
	if _, ok := h.CanUndo(); ok {
		t.Error("there is a step")
	}
	if step, ok := h.CanRedo(); !ok || step != StepOperation {
		t.Error("what was undone is forgotten")
	}
	h.Do(StepLook, at(0))
	if _, ok := h.CanRedo(); !ok {
		t.Error("doing nothing forgets what was undone")
	}
}

func TestNotchesOfAWheelAreOneGesture(t *testing.T) {
	h := NewHistory(at(0))
	for i := range 5 {
		h.Begin(StepZoom)
		h.Set(at(float64(i+1) / 10))
	}
	h.Begin(StepOrbit) // ends the zoom
	h.Set(at(0.9))
	h.Do(StepLook, at(1)) // ends the orbit
	want := []Step{StepLook, StepOrbit, StepZoom}
	for _, step := range want {
		if got, ok := h.CanUndo(); !ok || got != step {
			t.Errorf("%q, want %q", got, step)
		}
		h.Undo()
	}
	if !h.Now().Equal(at(0)) {
		t.Error("not back at the start")
	}
}

func TestUndoWithinAGestureTakesItBack(t *testing.T) {
	h := NewHistory(at(0))
	h.Do(StepFunction, at(0.2))
	h.Begin(StepOrbit)
	h.Set(at(0.5))
	if s, _ := h.Undo(); s.Moment != 0.2 || h.Open() {
		t.Errorf("%v", s.Moment)
	}
	if step, ok := h.CanRedo(); !ok || step != StepOrbit {
		t.Error("the gesture cannot be done again")
	}
}

func TestAGestureCanBeGivenUp(t *testing.T) {
	h := NewHistory(at(0.1))
	h.Begin(StepScrub)
	h.Set(at(0.7))
	if s := h.Cancel(); s.Moment != 0.1 || h.Open() {
		t.Errorf("%v", s.Moment)
	}
	if _, ok := h.CanUndo(); ok {
		t.Error("what was given up is a step")
	}
	h.Set(at(0.3)) // without a gesture
	if step, ok := h.CanUndo(); !ok || step != StepChange {
		t.Errorf("%q", step)
	}
}

func TestSomethingNewForgetsWhatWasUndone(t *testing.T) {
	h := NewHistory(at(0))
	h.Do(StepBasis, at(0.1))
	h.Do(StepIrrep, at(0.2))
	h.Undo()
	h.Do(StepPartner, at(0.3))
	if _, ok := h.CanRedo(); ok {
		t.Error("there is something to redo")
	}
	if s, _ := h.Undo(); s.Moment != 0.1 {
		t.Errorf("%v", s.Moment)
	}
	h.Reset(at(0.5))
	if _, ok := h.Undo(); ok || h.Now().Moment != 0.5 {
		t.Error("not everything is forgotten")
	}
}

// TestHistoryIsAPathWithAPlaceOnIt holds the history against a list of all
// studies with a place in it.
func TestHistoryIsAPathWithAPlaceOnIt(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		h := NewHistory(at(0))
		path, place := []float64{0}, 0
		for range rapid.IntRange(0, 60).Draw(t, "length") {
			switch rapid.IntRange(0, 3).Draw(t, "what") {
			case 0, 1:
				m := rapid.Float64Range(0, 1).Draw(t, "moment")
				h.Begin(StepScrub)
				h.Set(at(m / 2))
				h.Set(at(m))
				h.Commit()
				if m != path[place] {
					path, place = append(path[:place+1], m), place+1
				}
			case 2:
				if _, ok := h.Undo(); ok != (place > 0) {
					t.Fatal("undo")
				}
				place = max(0, place-1)
			case 3:
				if _, ok := h.Redo(); ok != (place < len(path)-1) {
					t.Fatal("redo")
				}
				place = min(len(path)-1, place+1)
			}
			if h.Now().Moment != path[place] {
				t.Fatalf("at %v, not %v", h.Now().Moment, path[place])
			}
		}
	})
}

func TestHistoryKeepsWithinItsMemory(t *testing.T) {
	h := NewHistory(at(0))
	for i := range 3 * MaxSteps {
		h.Do(StepScrub, at(float64(i%7+1)/10))
	}
	if n := len(h.back); n != MaxSteps {
		t.Errorf("%d steps are kept", n)
	}
	h.Reset(at(0))
	for i := range 100 {
		s, err := Study{}.WithCoordinates("pasted", strings.Repeat(string(rune('a'+i%20)), MaxCoordinates-i))
		if err != nil {
			t.Fatal(err)
		}
		h.Do(StepOpen, s)
	}
	if h.bytes > MaxHistoryBytes {
		t.Errorf("%d bytes", h.bytes)
	}
	most := len(h.back)
	if most < 15 || most > 25 {
		t.Errorf("%d steps with large texts are kept", most)
	}
	// Turning the camera costs next to nothing, however large the text is.
	s := h.Now()
	for i := range 500 {
		s.Moment = float64(i%7+1) / 10
		h.Do(StepScrub, s)
	}
	if len(h.back) < 500 {
		t.Errorf("%d steps are kept", len(h.back))
	}
	for _, ok := h.Undo(); ok; _, ok = h.Undo() {
	}
	for _, ok := h.Redo(); ok; _, ok = h.Redo() {
	}
	if sum := total(h); sum != h.bytes {
		t.Errorf("%d bytes are counted, %d are there", h.bytes, sum)
	}
	h.Do(StepOpen, at(0.5))
	if sum := total(h); sum != h.bytes {
		t.Errorf("%d bytes are counted, %d are there", h.bytes, sum)
	}
}

func total(h *History) int {
	sum := 0
	for _, e := range slices.Concat(h.back, h.next) {
		sum += e.bytes
	}
	return sum
}

func TestStepsAreListedOnce(t *testing.T) {
	seen := make(map[Step]bool)
	for _, s := range Steps() {
		if s == "" || seen[s] {
			t.Errorf("%q", s)
		}
		seen[s] = true
	}
	if len(seen) != 31 {
		t.Errorf("%d steps", len(seen))
	}
}
