package picture

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/study"
	"lobewright/render"
)

// A Viewpoint is from where the bodies of a sheet are seen: one for all panels,
// so that all show the same view at the same scale.
type Viewpoint struct {
	rows     mgl64.Mat3 // right, up and back
	target   mgl64.Vec3
	distance float64 // Å
	parallel bool
	zoom     float64
	// Width and Height are the room that the bodies take as they are seen, in Å
	// at their middle.
	Width, Height float64
}

// NewViewpoint sees all of some bodies: from where a person chose, or from where
// they cover each other least. Zoom and pan of the camera are kept, so a part
// of the bodies may then lie outside.
func NewViewpoint(c study.Camera, bodies ...*Body) Viewpoint {
	first := bodies[0]
	var balls []ball
	for _, b := range bodies {
		balls = append(balls, b.must()...)
	}
	centre, radius := enclosing(balls)
	v := Viewpoint{
		rows: viewOf(c, first.room, first.stage.atoms), target: centre,
		distance: distanceInRadii * radius, parallel: c.Orthographic, zoom: c.TheZoom(),
	}
	right, up := v.rows.Row(0), v.rows.Row(1)
	for range 6 {
		b := v.bounds(balls)
		v.Width, v.Height = b.right-b.left, b.bottom-b.top
		v.target = v.target.Add(right.Mul((b.left + b.right) / 2)).Sub(up.Mul((b.top + b.bottom) / 2))
	}
	v.target = v.target.Sub(right.Mul(c.Pan[0])).Sub(up.Mul(c.Pan[1]))
	return v
}

// Turned is the same view of a scene that is given in other axes: turn takes
// directions of the other axes to those here.
func (v Viewpoint) Turned(turn mgl64.Mat3) Viewpoint {
	v.rows = v.rows.Mul3(turn)
	v.target = turn.Transpose().Mul3x1(v.target)
	return v
}

// seen is where a ball is seen, in Å at the target, to the right and down of
// the middle.
func (v Viewpoint) seen(b ball) disc {
	q := v.rows.Mul3x1(b.centre.Sub(v.target))
	f := 1.0
	if !v.parallel {
		f = v.distance / max(v.distance-q[2], 1e-3*v.distance)
	}
	return disc{q[0] * f, -q[1] * f, b.radius * f}
}

func (v Viewpoint) bounds(balls []ball) rectangle {
	r := rectangle{math.Inf(1), math.Inf(-1), math.Inf(1), math.Inf(-1)}
	for _, b := range balls {
		d := v.seen(b)
		r.left, r.right = min(r.left, d.x-d.radius), max(r.right, d.x+d.radius)
		r.top, r.bottom = min(r.top, d.y-d.radius), max(r.bottom, d.y+d.radius)
	}
	return r
}

// A Panel is the paper that bodies are seen on: its size in millimetres and its
// scale in millimetres an ångström.
type Panel struct {
	Width, Height, Scale float64
}

// Camera is the camera for a panel.
func (v Viewpoint) Camera(p Panel) render.Camera {
	c := render.Camera{Eye: v.target.Add(v.rows.Row(2).Mul(v.distance)), Target: v.target, Up: v.rows.Row(1)}
	tall := p.Height / (p.Scale * v.zoom) // Å
	if v.parallel {
		c.Height = tall
	} else {
		c.FovY = 2 * math.Atan(tall/(2*v.distance))
	}
	return c
}

// on is where a ball is seen on a panel, in millimetres from its upper left
// corner.
func (v Viewpoint) on(p Panel, b ball) disc {
	d, k := v.seen(b), p.Scale*v.zoom
	return disc{p.Width/2 + d.x*k, p.Height/2 + d.y*k, d.radius * k}
}

// Axes are the ends of the axes x, y and z of a triad as it is seen, for axes of
// length 1, to the right and down.
func (v Viewpoint) Axes() [3][2]float64 {
	var out [3][2]float64
	for i := range out {
		c := v.rows.Col(i)
		out[i] = [2]float64{c[0], -c[1]}
	}
	return out
}
