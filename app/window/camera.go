//go:build cgo && !nowindow

package window

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/study"
)

func (u *ui) stopGlide() {
	if u.glide != nil {
		u.glide.clock.stop()
		u.glide = nil
	}
}

// moveCamera is a step of the camera that the picture glides through.
func (u *ui) moveCamera(step study.Step, change func(study.Camera) study.Camera) {
	from := u.view.sight
	s := u.now()
	s.Camera = change(s.Camera.WithView(from.Rows()))
	u.do(step, s)
	u.glideFrom(from)
}

func (u *ui) fit() {
	u.moveCamera(study.StepFit, func(c study.Camera) study.Camera { return c.Fitted() })
}

// along looks along an axis of the frame.
func (u *ui) along(axis mgl64.Vec3) {
	up := mgl64.Vec3{0, 0, 1}
	if math.Abs(axis.Normalize()[2]) > 0.99 {
		up = mgl64.Vec3{0, 1, 0}
	}
	u.moveCamera(study.StepAlong, func(c study.Camera) study.Camera { return c.Along(axis, up) })
}

// alongOperation looks along the axis, or the normal of the plane, of the
// operation at hand.
func (u *ui) alongOperation() {
	if op, ok := u.operation(); ok && op.Axis.Len() > 0 {
		u.along(op.Axis)
	}
}

// firstView goes back to the view that the program chooses.
func (u *ui) firstView() {
	from := u.view.sight
	s := u.now()
	s.Camera = study.Camera{Orthographic: s.Camera.Orthographic}
	u.do(study.StepFit, s)
	u.glideFrom(from)
}

// moveBy is a step of the camera by a key; repeated keys are one step.
func (u *ui) moveBy(step study.Step, change func(study.Camera, mgl64.Mat3) study.Camera) {
	u.stopGlide()
	u.history.Begin(step)
	s := u.now()
	rows := u.view.sight.Rows()
	s.Camera = change(s.Camera.WithView(rows), rows)
	u.history.Set(s)
	u.session.Keep(s)
	u.show(true)
	u.updateMenus()
}

func (u *ui) zoomBy(factor float64) {
	at := u.view.cellAt(0, 0)
	u.view.zoomAt(factor, at.x, at.y)
	u.updateMenus()
}
