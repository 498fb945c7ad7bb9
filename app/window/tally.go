//go:build cgo && !nowindow

package window

import (
	"math"
	"strconv"
	"time"

	"lobewright/app/notation"
	"lobewright/app/picture"
	"lobewright/app/study"
	"lobewright/app/table"
	"lobewright/app/work"
)

// A tally plays a projection operation by operation while the sum grows, in
// the ledger and in the picture. Whether it runs is no part of the study.
type tally struct {
	u *ui
	// ledger is what is summed; nil if nothing is.
	ledger *work.Ledger
	step   int // the row that is being added
	// backward says that the row after step is being taken out again.
	backward bool
	playing  bool
	single   bool // it rests after the step at hand
	done     bool // the whole sum stands there
	speed    float64
	began    time.Time
	spent    time.Duration // of the step at hand, when it rests
	clock    *clock
	seen     int // the sums that the ledger shows
}

func newTally(u *ui) *tally { return &tally{u: u, speed: 1} }

// speeds are how fast it can go. With more than six operations a second a lobe
// that changes its sign each time would flash more than three times a second.
var speeds = []float64{0.5, 1, 2, 3}

const (
	takeBack = 300 * time.Millisecond // to take an operation out again
	settling = 400 * time.Millisecond // from the scale of the sums to that of the result
)

// start begins with the first operation, or stops what runs. Without motion
// every call shows the next sum.
func (t *tally) start() {
	u := t.u
	if t.ledger != nil && !t.done {
		t.stop()
		return
	}
	u.player.stop()
	l := u.theLedger()
	if l == nil {
		u.remark(u.oneByOne.hint())
		return
	}
	u.history.Begin(study.StepPlay)
	t.ledger, t.step, t.done, t.backward, t.single, t.seen = l, 0, false, false, false, -1
	t.begin(!u.motion)
}

// begin starts the step at hand; still shows its end at once.
func (t *tally) begin(still bool) {
	u := t.u
	s := u.now()
	s.Operation, s.Moment = t.operation().Name, 0
	if !u.history.Open() {
		u.history.Begin(study.StepPlay)
	}
	u.history.Set(s)
	u.ledger.mark = "operation " + s.Operation
	u.ledger.reveal(u.ledger.mark)
	t.began, t.spent = time.Now(), 0
	if still {
		t.rest(t.duration())
	} else {
		t.run()
		u.show(true)
	}
	u.detail.Update() // both have the matrix of the operation
	u.beside.Update()
	u.ledger.Update()
	u.said.Update()
}

func (t *tally) operation() work.Operation {
	o := t.ledger.Rows[t.step].Operation
	return t.ledger.Group.Operations(0)[o]
}

// duration is how long the step at hand takes at the usual speed.
func (t *tally) duration() time.Duration {
	if t.backward {
		return takeBack
	}
	return picture.StepDuration(t.operation(), t.step)
}

func (t *tally) run() {
	if t.playing {
		return
	}
	t.playing = true
	t.began = time.Now().Add(-time.Duration(float64(t.spent) / t.speed))
	t.clock = startClock(t.u.post, func() { t.u.guard(t.tick) })
	t.u.player.label()
}

// rest stops the clock with a share of the step done.
func (t *tally) rest(spent time.Duration) {
	t.spent = spent
	if t.playing {
		t.playing = false
		t.clock.stop()
	}
	t.u.player.label()
	t.u.show(false)
	t.u.ledger.Update()
	t.u.said.Update()
}

// elapsed is how much of the step at hand is done.
func (t *tally) elapsed() time.Duration {
	if !t.playing {
		return t.spent
	}
	return time.Duration(float64(time.Since(t.began)) * t.speed)
}

func (t *tally) tick() {
	if t.ledger == nil || !t.playing {
		return
	}
	switch {
	case t.done:
		if t.elapsed() >= settling {
			t.rest(settling)
			return
		}
	case t.elapsed() >= t.duration():
		if t.single || t.backward {
			t.rest(t.duration())
			t.backward, t.single = false, false
			t.spent = t.duration()
			t.finishIfLast()
			return
		}
		t.next()
		return
	}
	t.u.show(true)
	if at, _ := t.column(); at != t.seen {
		t.seen = at
		t.u.ledger.Update()
		t.u.said.Update()
	}
}

// next goes to the step after the one at hand.
func (t *tally) next() {
	if t.finishIfLast() {
		return
	}
	t.step++
	playing := t.playing
	t.began, t.spent = time.Now(), 0
	t.begin(!playing && !t.u.motion)
}

// finishIfLast ends the sum after the last step, and tells whether it did. The
// group orbital that it has made is chosen.
func (t *tally) finishIfLast() bool {
	if t.done || t.step < len(t.ledger.Rows)-1 || t.elapsed() < t.duration() {
		return t.done
	}
	u := t.u
	t.done, t.single, t.backward = true, false, false
	s := u.now()
	s.Operation, s.Moment = "", 0
	if o, sign := u.madeOrbital(t.ledger); o != nil && sign > 0 {
		s.Projection.Copy, s.Projection.Partner, s.Projection.Subject = o.Copy+1, o.Partner+1, study.SubjectOrbital
	}
	u.history.Set(s)
	u.history.Commit()
	t.began, t.spent = time.Now(), 0
	if !u.motion {
		t.rest(settling)
	} else if !t.playing {
		t.run()
	}
	u.ledger.scrollTo(math.Inf(1))
	u.changed()
	return true
}

// toggle rests or goes on.
func (t *tally) toggle() {
	switch {
	case t.ledger == nil || t.done:
	case t.playing:
		t.rest(t.elapsed())
	case !t.u.motion:
		t.stepBy(1)
	case t.spent >= t.duration():
		t.run()
		t.next()
	default:
		t.single = false
		t.run()
	}
}

// stepBy goes a step forward or back and rests there.
func (t *tally) stepBy(by int) {
	if t.ledger == nil || t.done {
		return
	}
	if by > 0 {
		if t.elapsed() < t.duration() {
			t.rest(t.duration()) // first to the end of the step at hand
			return
		}
		if t.finishIfLast() {
			return
		}
		t.rest(t.duration())
		t.step++
		t.single = true
		t.begin(!t.u.motion)
		return
	}
	if t.step == 0 {
		return
	}
	t.rest(0)
	t.step--
	t.backward, t.single = true, true
	t.begin(!t.u.motion)
	if !t.u.motion {
		t.backward, t.single = false, false
		t.spent = t.duration()
	}
}

// stop leaves the sum; the picture shows again what is chosen.
func (t *tally) stop() {
	if t.ledger == nil {
		return
	}
	t.drop()
	t.u.changed()
}

// drop forgets the sum because something else is done.
func (t *tally) drop() {
	if t.ledger == nil {
		return
	}
	if t.playing {
		t.playing = false
		t.clock.stop()
	}
	t.ledger, t.done = nil, false
	t.u.history.Commit()
	t.u.player.label()
}

// faster changes the speed by steps.
func (t *tally) faster(by int) {
	at := 0
	for i, s := range speeds {
		if s <= t.speed {
			at = i
		}
	}
	spent := t.elapsed()
	t.speed = speeds[min(max(at+by, 0), len(speeds)-1)]
	t.began = time.Now().Add(-time.Duration(float64(spent) / t.speed))
	t.u.said.Update()
}

// finished tells that the whole sum stands there.
func (t *tally) finished() bool { return t.done }

// column is the last row whose sum stands in the ledger, and whether a sum is
// on the way or there.
func (t *tally) column() (int, bool) {
	switch {
	case t.ledger == nil:
		return 0, false
	case t.done || t.backward:
		return t.step, true
	}
	if _, grown := picture.StepMoment(t.operation(), t.step, t.elapsed()); grown > 0 {
		return t.step, true
	}
	return t.step - 1, true
}

// sumAt is the sum up to a row; before the first it is 0.
func (t *tally) sumAt(row int) []float64 {
	if row < 0 {
		return make([]float64, len(t.ledger.Functions))
	}
	return t.ledger.Rows[row].Sum
}

// apply shows the sum in the picture.
func (t *tally) apply(shown *picture.Shown) {
	if t.ledger == nil || shown.Basis != t.ledger.Basis {
		return
	}
	l := t.ledger
	shown.Full = l.Largest()
	shown.Before, shown.Fade = nil, 0
	switch {
	case t.done:
		shown.Coefficients = l.Total()
		shown.Operation = nil
		if last := largestOf(l.Total()); last > 0 {
			share := picture.Eased(float64(t.elapsed()) / float64(settling))
			shown.Full += (last - shown.Full) * share
		}
		return
	case t.backward:
		shown.Coefficients, shown.Before = t.sumAt(t.step), t.sumAt(t.step+1)
		shown.Fade = picture.Eased(float64(t.elapsed()) / float64(takeBack))
		return
	}
	op := t.operation()
	shown.Operation = &op
	moment, grown := picture.StepMoment(op, t.step, t.elapsed())
	shown.Moment = moment
	shown.Coefficients, shown.Before, shown.Fade = t.sumAt(t.step), t.sumAt(t.step-1), grown
	shown.Traveller = make([]float64, len(l.Functions))
	shown.Traveller[l.Ledger.Function] = 1
	if t.elapsed() >= t.duration() && !t.playing {
		shown.Traveller = nil // it has become part of the sum
		shown.Moment = 0
	}
}

func largestOf(v []float64) float64 {
	largest := 0.0
	for _, x := range v {
		largest = max(largest, math.Abs(x))
	}
	return largest
}

// sentence says what is added, and at the end what the sum is.
func (t *tally) sentence() notation.Text {
	l, u := t.ledger, t.u
	n := len(l.Rows)
	if t.done {
		if l.Norm == 0 {
			return fill(say("ledger.doneZero"), notation.Words(strconv.Itoa(n)), u.nonePart(l))
		}
		return fill(say("ledger.doneSum"), notation.Words(strconv.Itoa(n)), totalText(l), u.amongText(l), table.CombinationForm(l.Result()))
	}
	row := l.Rows[t.step]
	sum := abbreviated(notation.Terms(l.Rows[t.step].Sum), notation.PhiText)
	name := notation.Operation(l.Fit.Setting.Operations[row.Operation].Name)
	place := notation.Words(say("ledger.place", t.step+1, n))
	if row.Weight == 0 {
		return fill(say("ledger.addsNothing"), place, name, sum)
	}
	added := notation.Terms(weighted(l, t.step))
	return fill(say("ledger.adds"), place, name, abbreviated(added, notation.PhiText), sum)
}

// weighted is what a row adds.
func weighted(l *work.Ledger, row int) []float64 {
	out := make([]float64, len(l.Functions))
	for _, term := range l.Rows[row].Image {
		out[term.Function] += l.Rows[row].Weight * term.Coefficient
	}
	return out
}
