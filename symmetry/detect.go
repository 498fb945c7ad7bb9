package symmetry

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/symmetry/message"
)

// DefaultTolerance (Å) is the farthest that a point may lie from its ideal
// place unless told otherwise: more than the uncertainty of a good crystal
// structure or of a loosely converged geometry, less than what a chemist calls
// a distortion.
const DefaultTolerance = 0.02

// doubtFactor is the factor in the tolerance within which another group makes
// a Fit doubtful.
const doubtFactor = 3

// Options are the choices that Detect leaves open; the zero value takes the
// defaults.
type Options struct {
	// Tolerance (Å) is the farthest that a point may lie from its ideal
	// place; 0 means DefaultTolerance.
	Tolerance float64
}

// Detect finds the point group of a set of points and the frame that the
// default rules give it (see frame.go), with the least-squares points that
// have the group exactly. Links (bonds) never decide the group; rules for the
// axes count them. Lengths are in Å, in any axes and with any origin.
//
// Moments of inertia may agree by accident; so the operations are found by the
// points that they carry into each other, and the group by what they generate.
//
// It returns an error for no points, for coordinates that are no numbers, for
// a negative tolerance, where the order of an axis exceeds MaxFold, and a
// *CloseError for a tolerance that two points of one kind are too close for.
func Detect(points []Point, links []Link, options Options) (*Fit, error) {
	tolerance := options.Tolerance
	if tolerance == 0 {
		tolerance = DefaultTolerance
	}
	if err := check(points, links, tolerance); err != nil {
		return nil, err
	}
	if len(points) == 1 {
		return detectAtom(points[0], tolerance), nil
	}
	c := newCloud(points)
	closest, a, b := c.closestLike(math.Max(2*cellSize, 2.01*tolerance))
	if a >= 0 && tolerance >= closest/2 {
		return nil, &CloseError{A: a, B: b, Distance: closest, Tolerance: tolerance}
	}
	if axis, ok := c.line(tolerance); ok {
		return c.detectLinear(axis, links, tolerance), nil
	}
	reach := math.Min(2.5*doubtFactor*tolerance, closest/2)
	list, ok := c.candidates(reach, closest)
	if !ok {
		return nil, message.Errorf("the points have more than %d operations: axes of a higher order than %d are not handled", 4*MaxFold, MaxFold)
	}
	best := c.strongest(list, tolerance)
	fit := c.frame(best, links, tolerance)
	fit.Doubtful = best.deviation > tolerance/doubtFactor
	if !fit.Doubtful && len(list) > len(best.matrices) {
		looser := math.Min(doubtFactor*tolerance, closest/2)
		fit.Doubtful = c.strongest(list, looser).kind != best.kind
	}
	return fit, nil
}

// A CloseError says that the tolerance is so large that two points of one kind
// could be taken for each other.
type CloseError struct {
	A, B                int     // the points, by index
	Distance, Tolerance float64 // Å
}

// Error counts the points from 1.
func (e *CloseError) Error() string { return e.In(nil) }

// In is Error in a language.
func (e *CloseError) In(l *message.Language) string {
	return message.Words("tolerance %g Å is too large: points %d and %d of the same kind are only %.3f Å apart; take less than half of that",
		e.Tolerance, e.A+1, e.B+1, e.Distance).In(l)
}

// farAway (Å) is a coordinate beyond which a structure is no molecule and
// differences of positions lose their digits.
const farAway = 1e6

func check(points []Point, links []Link, tolerance float64) error {
	if len(points) == 0 {
		return message.Errorf("no points: a group needs at least one")
	}
	for i, p := range points {
		for _, x := range p.Position {
			if !(math.Abs(x) <= farAway) {
				return message.Errorf("point %d: coordinate %g is not a number between −%g and %g Å", i+1, x, farAway, farAway)
			}
		}
	}
	for _, l := range links {
		if l[0] < 0 || l[1] < 0 || l[0] >= len(points) || l[1] >= len(points) {
			return message.Errorf("link %d–%d: there are %d points", l[0]+1, l[1]+1, len(points))
		}
	}
	if !(tolerance > 0) {
		return message.Errorf("tolerance %g Å: it must be positive", tolerance)
	}
	return nil
}

func detectAtom(p Point, tolerance float64) *Fit {
	fit := &Fit{
		Setting: newSetting(kind{family: spherical}), Origin: p.Position, Rotation: mgl64.Ident3(),
		Ideal: []mgl64.Vec3{{}}, fromDefault: mgl64.Ident3(), Tolerance: tolerance, Rule: Rule{Name: "default", Z: ZInput, X: XInput, Sources: []string{SourceOwn}},
	}
	fit.keep(&cloud{at: []mgl64.Vec3{{}}, centre: p.Position})
	return fit
}

// detectLinear tells C∞v from D∞h and puts the molecule on z.
func (c *cloud) detectLinear(axis mgl64.Vec3, links []Link, tolerance float64) *Fit {
	heights := make([]float64, len(c.at))
	for i, v := range c.at {
		heights[i] = v.Dot(axis)
	}
	partner, central := c.invertible(axis, heights, tolerance)
	fit := &Fit{Tolerance: tolerance, fromDefault: mgl64.Ident3()}
	if central {
		for i, j := range partner {
			if i <= j {
				h := (heights[i] - heights[j]) / 2
				heights[i], heights[j] = h, -h
			}
		}
	}
	measure := func() {
		for i, v := range c.at {
			if d := v.Sub(axis.Mul(heights[i])).Len(); d > fit.Deviation {
				fit.Deviation, fit.Worst = d, i
			}
		}
	}
	measure()
	fit.Doubtful = fit.Deviation > tolerance/doubtFactor
	if !central {
		_, nearly := c.invertible(axis, heights, doubtFactor*tolerance)
		fit.Doubtful = fit.Doubtful || nearly
	}
	ideal := make([]mgl64.Vec3, len(heights))
	for i, h := range heights {
		ideal[i] = mgl64.Vec3{0, 0, h}
	}
	f := framing{points: ideal, kinds: c.kind, links: links, tolerance: min(tolerance, frameTolerance)}
	symbol := kind{family: linearPolar}
	if central {
		symbol.family = linearCentral
	}
	fit.Setting = newSetting(symbol)
	x := perpendicular(axis)
	f.linear(fit, mgl64.Mat3FromRows(x, axis.Cross(x), axis), c.centre, central)
	fit.keep(c)
	return fit
}

// invertible pairs points on a line that the inversion exchanges.
func (c *cloud) invertible(axis mgl64.Vec3, heights []float64, tolerance float64) ([]int, bool) {
	partner := make([]int, len(heights))
	for i := range partner {
		partner[i] = -1
	}
	for i, h := range heights {
		best, least := -1, 2*tolerance
		for j, g := range heights {
			if d := math.Abs(h + g); c.kind[i] == c.kind[j] && d <= least {
				best, least = j, d
			}
		}
		if best < 0 {
			return nil, false
		}
		partner[i] = best
	}
	for i, j := range partner {
		// The ideal places lie half of |h_i + h_j| away.
		if partner[j] != i {
			return nil, false
		}
	}
	for i, j := range partner {
		place := axis.Mul((heights[i] - heights[j]) / 2)
		if c.at[i].Sub(place).Len() > tolerance {
			return nil, false
		}
	}
	return partner, true
}
