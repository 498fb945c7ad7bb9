package picture

import (
	"math"
	"time"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/symmetry"
)

// A Motion is an operation as something that happens: a turn about an axis,
// then, if Improper, the reflection in the plane square to it. The inversion
// is the way through the centre. The zero Motion is E.
type Motion struct {
	// Axis is a unit vector: of the turn, or the normal of the plane.
	Axis mgl64.Vec3
	// Angle of the turn in radians, counterclockwise for an eye on the
	// positive end of the axis. It is not reduced: C3^2 is two thirds of a
	// full turn.
	Angle float64
	// Improper adds the reflection; Inverts makes it the inversion, whatever
	// the other fields say.
	Improper, Inverts bool
}

// MotionOf is the motion of an operation.
func MotionOf(op symmetry.Operation) Motion {
	t := op.Turn
	switch {
	case t.Improper && 2*t.Num == t.Den:
		return Motion{Inverts: true}
	case op.Axis.Len() == 0:
		return Motion{}
	}
	return Motion{Axis: op.Axis, Angle: 2 * math.Pi * float64(t.Num) / float64(t.Den), Improper: t.Improper}
}

// Steps is the number of steps: 2 for a turn followed by a reflection, else
// 1.
func (m Motion) Steps() int {
	if m.Improper && !m.Inverts && m.Angle != 0 {
		return 2
	}
	return 1
}

// At is the linear map at a moment from 0, the start, to 1, the end, where it
// is the operation. Bodies turn as a whole, and pass through the plane of a
// reflection or the centre of the inversion: halfway they lie flat in it.
func (m Motion) At(moment float64) mgl64.Mat3 {
	moment = min(max(moment, 0), 1)
	turn, through := moment, moment
	if m.Steps() == 2 {
		turn, through = min(2*moment, 1), max(2*moment-1, 0)
	}
	switch {
	case m.Inverts:
		return mgl64.Ident3().Mul(1 - 2*moment)
	case m.Axis.Len() == 0:
		return mgl64.Ident3()
	}
	a := mgl64.Ident3()
	if m.Angle != 0 {
		a = mgl64.QuatRotate(m.Angle*turn, m.Axis).Mat4().Mat3()
	}
	if m.Improper {
		a = flattened(m.Axis, 1-2*through).Mul3(a)
	}
	return a
}

// flattened is the map that multiplies lengths along a unit vector.
func flattened(n mgl64.Vec3, factor float64) mgl64.Mat3 {
	return mgl64.Ident3().Sub(n.OuterProd3(n).Mul(1 - factor))
}

// Times of a motion: our own choice, found by looking.
const (
	oneStep   = 1200 * time.Millisecond
	eachStep  = 800 * time.Millisecond
	betweenIt = 250 * time.Millisecond
)

// Duration is how long the motion takes at its usual speed.
func (m Motion) Duration() time.Duration {
	switch {
	case m.Steps() == 2:
		return 2*eachStep + betweenIt
	case m.Axis.Len() == 0 && !m.Inverts:
		return eachStep // E: nothing moves, but one sees that it happens
	}
	return oneStep
}

// Moment is the moment that is reached after a time, eased at both ends of
// every step, with a rest between two steps.
func (m Motion) Moment(elapsed time.Duration) float64 {
	if m.Steps() == 1 {
		return eased(float64(elapsed) / float64(m.Duration()))
	}
	first := eased(float64(elapsed) / float64(eachStep))
	second := eased(float64(elapsed-eachStep-betweenIt) / float64(eachStep))
	return (first + second) / 2
}

// Elapsed is the time after which Moment is reached, so that playing can go on
// from any place.
func (m Motion) Elapsed(moment float64) time.Duration {
	low, high := time.Duration(0), m.Duration()
	for high-low > time.Millisecond {
		if middle := (low + high) / 2; m.Moment(middle) < moment {
			low = middle
		} else {
			high = middle
		}
	}
	return low
}

// eased goes from 0 to 1 with no speed at both ends.
func eased(t float64) float64 {
	t = min(max(t, 0), 1)
	return t * t * (3 - 2*t)
}
