package picture

import (
	"github.com/go-gl/mathgl/mgl64"

	"lobewright/render"
)

// The triad of axes stands in the lower left corner.
const (
	triadShare  = 0.12 // length of an axis, of the picture's short side
	triadLetter = 1.22 // place of a letter along its axis, in lengths of it
	triadInset  = 2.5  // mm from the rim
	axisWidth   = 0.35 // mm
)

// addTriad draws the axes x, y and z with their letters and returns a camera
// under which no body lies behind them.
func (s *stage) addTriad(v view, balls []ball, scr screen, camera render.Camera, orthographic bool, fonts *render.Fonts) render.Camera {
	length := triadShare * min(float64(scr.width), float64(scr.height)) / scr.pixelsPerMM // mm
	box := triadBox(camera, length)
	captionTop := (float64(scr.height) - scr.bottom) / scr.pixelsPerMM
	place := render.Place{
		OffsetX: triadInset - box.left, OffsetY: max(captionTop, triadInset) + box.bottom,
		Share: triadShare, Turn: true,
	}
	ink := flat(s.palette.Ink)
	add := func(g render.Geometry) {
		at := place
		s.scene.Shapes = append(s.scene.Shapes, render.Shape{Geometry: g, Material: ink, Place: &at})
	}
	half := axisWidth / 2 / length
	for i, letter := range []string{"x", "y", "z"} {
		var e mgl64.Vec3
		e[i] = 1
		add(render.Arrow{To: e, Radius: half, HeadLength: 0.22, HeadRadius: 0.07})
		add(render.Text{
			At: e.Mul(triadLetter), Runs: []render.Run{{Text: letter, Italic: true}}, Size: labelSize, Fixed: true, Through: true,
		})
	}
	corner := rectangle{
		left:   0,
		right:  (place.OffsetX + box.right + 1) * scr.pixelsPerMM,
		top:    float64(scr.height) - (place.OffsetY-box.top+1)*scr.pixelsPerMM,
		bottom: float64(scr.height),
	}
	s.corner = corner
	return clearOf(corner, v, balls, scr, camera, orthographic)
}

// triadBox is the room of the triad around its origin, in millimetres with y
// downward.
func triadBox(camera render.Camera, length float64) rectangle {
	const letter = 1.6 // mm, half the room of a letter
	turn := camera.Rotation()
	var r rectangle
	for i := range 3 {
		var e mgl64.Vec3
		e[i] = triadLetter * length
		p := turn.Mul3x1(e)
		r.left, r.right = min(r.left, p[0]-letter), max(r.right, p[0]+letter)
		r.top, r.bottom = min(r.top, -p[1]-letter), max(r.bottom, -p[1]+letter)
	}
	return r
}

// clearOf makes the bodies smaller, and moves them away from the corner as far
// as the room allows, until none lies in it.
func clearOf(corner rectangle, v view, balls []ball, scr screen, camera render.Camera, orthographic bool) render.Camera {
	for shrink := 1.0; shrink > 0.3; shrink *= 0.95 {
		for _, move := range [][2]float64{{0, 0}, {0, 1}, {1, 0}, {1, 1}} {
			width, height := (scr.right-scr.left)*shrink, (scr.bottom-scr.top)*shrink
			inner := scr
			inner.left += (scr.right - scr.left - width) / 2 * (1 + move[0])
			inner.right = inner.left + width
			inner.top += (scr.bottom - scr.top - height) / 2 * (1 - move[1])
			inner.bottom = inner.top + height
			c := cameraFor(v, balls, inner, orthographic)
			if isClear(corner, balls, c, inner) {
				return c
			}
		}
	}
	return camera
}

func isClear(corner rectangle, balls []ball, c render.Camera, scr screen) bool {
	seen := newSight(c, scr)
	for _, b := range balls {
		d := seen.disc(b)
		if corner.distance(d.x, d.y) < d.radius {
			return false
		}
	}
	return true
}
