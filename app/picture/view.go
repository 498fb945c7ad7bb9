package picture

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/study"
	"lobewright/render"
)

// A view is a direction of sight: from where the eye looks at the scene.
type view struct{ azimuth, elevation float64 } // radians

// back is the unit vector from the scene to the eye.
func (v view) back() mgl64.Vec3 {
	return mgl64.Vec3{
		math.Cos(v.elevation) * math.Cos(v.azimuth),
		math.Cos(v.elevation) * math.Sin(v.azimuth),
		math.Sin(v.elevation),
	}
}

// up is the direction that is vertical in the picture: z as far as possible,
// and seen from above y, so that x runs to the right.
func (v view) up() mgl64.Vec3 {
	back := v.back()
	up := mgl64.Vec3{0, 0, 1}
	if math.Abs(back[2]) > 0.999 {
		up = mgl64.Vec3{0, 1, 0}
	}
	return up.Sub(back.Mul(up.Dot(back))).Normalize()
}

// viewOf takes the view that a study asks for, or the one that shows most, as
// rows right, up and back.
func viewOf(c study.Camera, lobes, atoms []ball) mgl64.Mat3 {
	if rows, chosen := c.View(); chosen {
		return rows
	}
	return bestView(lobes, atoms).rows()
}

// rows are the directions right, up and back of the view.
func (v view) rows() mgl64.Mat3 {
	back, up := v.back(), v.up()
	return mgl64.Mat3FromRows(up.Cross(back), up, back)
}

// bestView tries views from the octant in which x points to the viewer's left
// and toward the viewer, y to the right and z up, as frames are usually drawn.
// It takes the one in which bodies cover each other least; among equals the
// one nearest to a middle view. Views along an axis are not tried.
func bestView(lobes, atoms []ball) view {
	const middleAzimuth, middleElevation = 28, 20 // degrees
	best, least := view{}, math.Inf(1)
	for elevation := 12.0; elevation <= 44; elevation += 4 {
		for azimuth := 16.0; azimuth <= 64; azimuth += 3 {
			v := view{mgl64.DegToRad(azimuth), mgl64.DegToRad(elevation)}
			off := math.Hypot(azimuth-middleAzimuth, elevation-middleElevation)
			cost := off/degreesForCover + covered(v, lobes, atoms)
			if cost < least-1e-9 {
				best, least = v, cost
			}
		}
	}
	return best
}

// degreesForCover says how many degrees off the middle view are worth a cover
// of 1: found by looking at pictures of all kinds.
const degreesForCover = 90

// covered adds up how far balls overlap as seen along a view, each pair as a
// share of the largest ball's size. Pairs that lie in each other anyway do not
// count, nor do atoms before atoms as much as lobes before lobes.
func covered(v view, lobes, atoms []ball) float64 {
	if len(lobes)+len(atoms) > maxBallsCompared {
		return 0
	}
	largest := max(largestBall(lobes), largestBall(atoms))
	back := v.back()
	sum := 0.0
	overlap := func(a, b ball, weight float64) {
		d := a.centre.Sub(b.centre)
		together := a.radius + b.radius
		if d.Len() < together {
			return
		}
		apart := d.Sub(back.Mul(d.Dot(back))).Len()
		if apart < together {
			sum += weight * (together - apart) / (2 * largest)
		}
	}
	for i, a := range lobes {
		for _, b := range lobes[:i] {
			overlap(a, b, 1)
		}
		for _, b := range atoms {
			overlap(a, b, 0.6)
		}
	}
	for i, a := range atoms {
		for _, b := range atoms[:i] {
			overlap(a, b, 0.4)
			d := a.centre.Sub(b.centre)
			if len(atoms) <= fewAtoms && d.Len() > 0 {
				aside := d.Sub(back.Mul(d.Dot(back))).Len() / d.Len()
				sum += behind * max(0, 1-aside/fairlyAside)
			}
		}
	}
	// What counts is the share of bodies that are covered.
	return sum / math.Sqrt(float64(max(1, len(lobes)+len(atoms))))
}

// In structures of few atoms a view along the line between two of them costs as
// much as covering behind lobes, and less so up to an angle of which this is
// the sine.
const (
	fewAtoms    = 24
	behind      = 1.5
	fairlyAside = 0.5
)

func largestBall(balls []ball) float64 {
	largest := 0.0
	for _, b := range balls {
		largest = max(largest, b.radius)
	}
	return largest
}

// maxBallsCompared bounds the time that choosing a view may take: 150 views
// times half the square of this number of comparisons is a tenth of a second.
// In larger structures no view shows everything anyway.
const maxBallsCompared = 250

// A screen is the picture in pixels, with the rectangle in which the bodies
// have to lie.
type screen struct {
	width, height            int
	left, right, top, bottom float64
	pixelsPerMM              float64
}

// distanceInRadii is how far the eye is, in radii of the scene: near enough
// for depth, far enough to keep parallel bonds nearly parallel.
const distanceInRadii = 7

type rectangle struct{ left, right, top, bottom float64 }

func (r rectangle) overlaps(o rectangle) bool {
	return r.left < o.right && o.left < r.right && r.top < o.bottom && o.top < r.bottom
}

// distance is how far a point lies outside of r, 0 inside.
func (r rectangle) distance(x, y float64) float64 {
	return math.Hypot(x-min(max(x, r.left), r.right), y-min(max(y, r.top), r.bottom))
}

// A disc is a ball as seen on the picture, in pixels.
type disc struct{ x, y, radius float64 }

// A sight is a camera with a screen, ready to see many balls.
type sight struct {
	camera        render.Camera
	turn          mgl64.Mat3
	width, height float64
}

func newSight(c render.Camera, s screen) sight {
	return sight{c, c.Rotation(), float64(s.width), float64(s.height)}
}

// disc agrees with render.Camera.Project, which turns the camera anew for
// every point.
func (v sight) disc(b ball) disc {
	q := v.turn.Mul3x1(b.centre.Sub(v.camera.Eye))
	scale := v.height / v.camera.Height
	if v.camera.Height == 0 {
		scale = v.height / (2 * math.Tan(v.camera.FovY/2) * -q[2])
	}
	return disc{v.width/2 + q[0]*scale, v.height/2 - q[1]*scale, b.radius * scale}
}

// bounds is the smallest rectangle around all balls on the picture.
func (v sight) bounds(balls []ball) rectangle {
	r := rectangle{math.Inf(1), math.Inf(-1), math.Inf(1), math.Inf(-1)}
	for _, b := range balls {
		d := v.disc(b)
		r.left, r.right = min(r.left, d.x-d.radius), max(r.right, d.x+d.radius)
		r.top, r.bottom = min(r.top, d.y-d.radius), max(r.bottom, d.y+d.radius)
	}
	return r
}

// enclosing is a ball around all balls: about their common middle.
func enclosing(balls []ball) (centre mgl64.Vec3, radius float64) {
	low, high := balls[0].centre, balls[0].centre
	for _, b := range balls {
		for i, x := range b.centre {
			low[i], high[i] = min(low[i], x-b.radius), max(high[i], x+b.radius)
		}
	}
	centre = low.Add(high).Mul(0.5)
	for _, b := range balls {
		radius = max(radius, b.centre.Sub(centre).Len()+b.radius)
	}
	return centre, radius
}
