package picture

import (
	"time"

	"lobewright/app/work"
)

// Times of an operation that plays: our own choice, found by looking.
const (
	oneStep   = 1200 * time.Millisecond
	eachStep  = 800 * time.Millisecond
	betweenIt = 250 * time.Millisecond
)

// Duration is how long an operation takes at its usual speed.
func Duration(op work.Operation) time.Duration {
	switch op.Steps() {
	case 2:
		return 2*eachStep + betweenIt
	case 0:
		return eachStep // E: nothing moves, but one sees that it happens
	}
	return oneStep
}

// Moment is the moment, from 0 to 1, that an operation has reached after a
// time: eased at both ends of every step, with a rest between two steps.
func Moment(op work.Operation, elapsed time.Duration) float64 {
	if op.Steps() < 2 {
		return Eased(float64(elapsed) / float64(Duration(op)))
	}
	first := Eased(float64(elapsed) / float64(eachStep))
	second := Eased(float64(elapsed-eachStep-betweenIt) / float64(eachStep))
	return (first + second) / 2
}

// Elapsed is the time after which a moment is reached, so that playing can go
// on from any place.
func Elapsed(op work.Operation, moment float64) time.Duration {
	low, high := time.Duration(0), Duration(op)
	for high-low > time.Millisecond {
		if middle := (low + high) / 2; Moment(op, middle) < moment {
			low = middle
		} else {
			high = middle
		}
	}
	return low
}

// Eased goes from 0 to 1 with no speed at both ends.
func Eased(t float64) float64 {
	t = min(max(t, 0), 1)
	return t * t * (3 - 2*t)
}

// Times of a sum that grows operation by operation. The first operations are
// played as ever, so that one sees what happens; the others quickly, but never
// more than two a second: a sum that is 0 now and then must not flicker.
const (
	SlowSteps = 3
	quickStep = 500 * time.Millisecond
	growth    = 400 * time.Millisecond
)

// StepDuration is how long step n, counted from 0, of a growing sum takes.
func StepDuration(op work.Operation, n int) time.Duration {
	if n < SlowSteps {
		return Duration(op) + growth
	}
	return quickStep
}

// StepMoment is how far the operation of step n has come after a time, and how
// far the sum has grown, both from 0 to 1. In a slow step the sum grows when
// the function has arrived, in a quick one while it arrives.
func StepMoment(op work.Operation, n int, elapsed time.Duration) (moment, grown float64) {
	if n < SlowSteps {
		return Moment(op, elapsed), Eased(float64(elapsed-Duration(op)) / float64(growth))
	}
	share := float64(elapsed) / float64(quickStep)
	return Moment(op, time.Duration(share/0.7*float64(Duration(op)))), Eased((share - 0.4) / 0.6)
}
