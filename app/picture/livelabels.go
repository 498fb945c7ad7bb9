package picture

import (
	"math"
	"slices"

	"lobewright/app/notation"
	"lobewright/render"
)

// liveLabel is the size of labels on the screen, in points: 12 pixels at 96
// an inch.
const liveLabel = 9

// addLabels writes the atoms' names. Their places beside the atoms are kept
// while the picture moves; at rest a label moves only where that uncovers it.
func (l *Live) addLabels(s *stage, shown Shown, f *Frame, quick bool, fonts *render.Fonts) {
	perMM := f.Quality.DPI / 25.4
	scr := screen{width: f.Width, height: f.Height, pixelsPerMM: perMM}
	seen := newSight(f.Camera, scr)
	var obstacles []disc
	if !quick {
		for _, b := range append(append([]ball(nil), s.atoms...), s.lobes...) {
			obstacles = append(obstacles, seen.disc(b))
		}
		obstacles = append(obstacles, s.bondDiscs(shown.Group, seen)...)
		for _, b := range append(append([]ball(nil), s.elements...), s.arrow...) {
			obstacles = append(obstacles, seen.disc(b))
		}
	}
	if l.labels == nil {
		l.labels = map[int]labelOffset{}
	}
	taken := []rectangle{s.corner}
	names := shown.Group.AtomNames()
	for i, wanted := range s.labelled(shown.Group, s.carries) {
		if marked := slices.Contains(shown.Marked, i); !wanted && !marked {
			continue
		}
		atom, text := s.atoms[i], runs(notation.Words(names[i]))
		around := seen.disc(s.around(atom))
		if !(around.radius < 1e5) {
			continue // at or behind the eye
		}
		width, ascent, _ := fonts.Measure(text, liveLabel)
		place := l.labelPlace(i, around, width*perMM, ascent*perMM, obstacles, taken, scr, quick)
		taken = append(taken, place)
		s.written = append(s.written, place)
		colour := s.palette.Ink
		if slices.Contains(shown.Marked, i) {
			colour = s.palette.Accent
		}
		s.scene.Add(render.Text{
			At: atom.centre, Runs: text, Size: liveLabel,
			OffsetX: (place.left - around.x) / perMM, OffsetY: (around.y - place.bottom) / perMM,
			AlignX: -1, AlignY: -1,
			Halo: haloWidth, HaloColor: paint(s.palette.Ground), Through: true, Fixed: true,
		}, flat(colour))
	}
}

// labelPlace finds the rectangle of a label.
func (l *Live) labelPlace(atom int, around disc, width, height float64, obstacles []disc, taken []rectangle, scr screen, quick bool) rectangle {
	gap := labelGap * scr.pixelsPerMM
	rectangleAt := func(o labelOffset) rectangle {
		sin, cos := math.Sincos(o.angle)
		r := around.radius + gap*(1+2*o.ring)
		x := around.x + r*cos + width/2*(cos-1)
		y := around.y - r*sin - height/2*(sin-1)
		return rectangle{x, x + width, y - height, y}
	}
	old, known := l.labels[atom]
	if quick {
		if !known {
			old = labelOffset{angle: -math.Pi / 4}
		}
		return rectangleAt(old)
	}
	cost := func(o labelOffset) float64 {
		return rectangleAt(o).covers(obstacles, taken, scr)
	}
	best, least := old, math.Inf(1)
	if known {
		const worthMoving = 0.5 // heights of the label that must be won
		least = cost(old) - worthMoving
	}
	for ring, further := range []float64{0, 1, 2, 3.5} {
		for k := range 16 {
			angle := math.Pi / 8 * float64((k+1)/2)
			if k%2 == 1 {
				angle = -angle
			}
			o := labelOffset{angle, further}
			if c := cost(o) + 0.25*float64(ring) + 0.01*float64(k); c < least {
				best, least = o, c
			}
		}
	}
	l.labels[atom] = best
	return rectangleAt(best)
}
