package picture

import (
	"fmt"
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/notation"
	"lobewright/app/work"
	"lobewright/render"
)

// A nameSpot is where the name of a symmetry element stands: beside one of the
// element's places, shifted by parts of its own size. One that is left out has
// no place.
type nameSpot struct {
	place  int
	dx, dy float64
	out    bool
}

// nameShifts are how a name can stand to a place of its element, in its own
// widths and heights, the best first.
var nameShifts = [][2]float64{{0, 0}, {0.6, 0}, {-0.6, 0}, {0, -0.9}, {0, 0.9}, {0.6, -0.9}, {-0.6, -0.9}, {0.6, 0.9}, {-0.6, 0.9}}

// namePlaces are the points beside which the name of an element can stand: those
// at its ends or on its rim, and for axes some farther in.
func namePlaces(n namedElement) []mgl64.Vec3 {
	if n.Kind == work.ElementCentre { // within an atom, or beside it
		out := n.points
		for _, far := range []float64{2, 3, 4} {
			for _, p := range n.points {
				out = append(out, p.Mul(far))
			}
		}
		return out
	}
	if n.Kind != work.ElementAxis || len(n.points) != 2 {
		return n.points
	}
	from, to := n.points[1], n.points[0]
	out := append([]mgl64.Vec3(nil), n.points...)
	for _, t := range []float64{0.05, 0.1, 0.16} {
		along := to.Sub(from).Mul(t)
		out = append(out, to.Sub(along), from.Add(along))
	}
	return out
}

// addElementNames writes the names beside the elements, where they cover no other
// name and as little of the bodies as can be; those that have no such place are
// left out, and the form says how many. While the picture moves they keep the
// places that they had.
func (l *Live) addElementNames(s *stage, g *work.Group, f *Frame, fonts *render.Fonts, form string, lines int, quick bool) {
	perMM := f.Quality.DPI / 25.4
	scr := screen{width: f.Width, height: f.Height, right: float64(f.Width), bottom: float64(f.Height), pixelsPerMM: perMM}
	seen := newSight(f.Camera, scr)
	taken := append([]rectangle{s.corner}, s.written...)
	var bodies []disc
	for _, b := range append(append(append([]ball(nil), s.atoms...), s.lobes...), s.arrow...) {
		bodies = append(bodies, seen.disc(b))
	}
	bodies = append(bodies, s.bondDiscs(g, seen)...)
	kept := l.elementNames
	l.elementNames = map[string]nameSpot{}
	left := 0
	for _, n := range s.named {
		text, key := runs(n.name), n.name.String()
		width, ascent, descent := fonts.Measure(text, elementSize)
		width, ascent = (width+0.4)*perMM, (ascent+2*max(0.2, descent))*perMM // an index hangs below
		places := namePlaces(n)
		rectangleAt := func(o nameSpot) (rectangle, bool) {
			d := seen.disc(ball{places[o.place], 0})
			x, y := d.x+o.dx*width, d.y+o.dy*ascent
			inside := x > width/2 && x < scr.right-width/2 && y > ascent/2 && y < scr.bottom-ascent/2
			return rectangle{x - width/2, x + width/2, y - ascent/2, y + ascent/2}, inside
		}
		at, known := kept[key]
		if !quick || !known {
			at = nameSpot{out: true}
			least, inPicture := math.Inf(1), false
			for i := range places {
				for k, shift := range nameShifts {
					o := nameSpot{place: i, dx: shift[0], dy: shift[1]}
					r, inside := rectangleAt(o)
					if !inside {
						continue
					}
					inPicture = true
					const meets = 50 // what covers counts for two names that overlap
					cost := r.covers(bodies, taken, scr)
					if cost >= meets {
						continue
					}
					if cost += 0.12*float64(i) + 0.1*float64(k); cost < least {
						at, least = o, cost
					}
				}
			}
			if at.out && inPicture {
				left++
			}
		}
		l.elementNames[key] = at
		if at.out {
			continue
		}
		r, _ := rectangleAt(at)
		taken = append(taken, r)
		s.scene.Add(render.Text{
			At: places[at.place], Runs: text, Size: elementSize, OffsetX: at.dx * width / perMM, OffsetY: -at.dy * ascent / perMM,
			Halo: haloWidth, HaloColor: paint(s.palette.Ground), Through: true, Fixed: true,
		}, flat(s.palette.Element))
	}
	if !quick {
		l.nameless = left
	}
	if l.nameless > 0 && form != "" {
		s.liveNote(lines, notation.Words(fmt.Sprintf(form, l.nameless)))
	}
}
