package picture

import (
	"math"

	"lobewright/app/notation"
	"lobewright/app/work"
	"lobewright/render"
)

const (
	labelSize   = 8.0 // pt, as look.go's captions
	labelGap    = 0.5 // mm between a body and its label
	haloWidth   = 0.3 // mm
	maxLabelled = 30  // atoms; more labels than this hide what they name
	mmPerPoint  = 25.4 / 72
)

// runs turns a Text into what the renderer sets.
func runs(t notation.Text) []render.Run {
	out := make([]render.Run, len(t))
	for i, r := range t {
		out[i] = render.Run{Text: r.Text, Italic: r.Italic, Script: render.Script(r.Place)}
		// The superscript of a label stands above its subscript.
		if r.Place == notation.Super && i > 0 && t[i-1].Place == notation.Sub {
			out[i].Stacked = true
		}
	}
	return out
}

// labelled tells which atoms get a label: all in small structures, in larger
// ones and in narrow pictures those that carry functions or, without functions, all but hydrogen, and
// none where labels would hide what they name.
func (s *stage) labelled(g *work.Group, carries []bool) []bool {
	const few = 14
	out := make([]bool, len(s.atoms))
	n := 0
	for i := range out {
		switch {
		case len(out) <= few && (carries == nil || !s.narrow):
			out[i] = true
		case carries != nil:
			out[i] = carries[i]
		default:
			out[i] = g.Sites.Elements[i].Symbol() != "H"
		}
		if out[i] {
			n++
		}
	}
	if n > maxLabelled {
		clear(out)
	}
	return out
}

// addLabels writes symbol and number beside the atoms, each on the side where
// it covers least.
func (s *stage) addLabels(g *work.Group, camera render.Camera, scr screen, fonts *render.Fonts) {
	seen := newSight(camera, scr)
	var obstacles []disc
	for _, b := range append(append([]ball(nil), s.atoms...), s.lobes...) {
		obstacles = append(obstacles, seen.disc(b))
	}
	obstacles = append(obstacles, s.bondDiscs(g, seen)...)
	taken := []rectangle{s.corner}
	names := g.AtomNames()
	for i, wanted := range s.labelled(g, s.carries) {
		if !wanted {
			continue
		}
		atom, text := s.atoms[i], runs(notation.Words(names[i]))
		width, ascent, _ := fonts.Measure(text, labelSize)
		around := seen.disc(s.around(atom))
		place := bestPlace(around, width*scr.pixelsPerMM, ascent*scr.pixelsPerMM, obstacles, taken, scr)
		taken = append(taken, place.rectangle)
		s.scene.Add(render.Text{
			At: atom.centre, Runs: text, Size: labelSize,
			OffsetX: (place.left - around.x) / scr.pixelsPerMM, OffsetY: (around.y - place.bottom) / scr.pixelsPerMM,
			AlignX: -1, AlignY: -1,
			Halo: haloWidth, HaloColor: paint(s.palette.Ground), Through: true, Fixed: true,
		}, flat(s.palette.Ink))
	}
}

// around is the ball that a label of an atom stands beside: the atom, or the
// sphere of an s function on it.
func (s *stage) around(atom ball) ball {
	for _, l := range s.lobes {
		if l.centre == atom.centre && l.radius > atom.radius {
			return l
		}
	}
	return atom
}

// bondDiscs are points along the bonds that labels should not cover.
func (s *stage) bondDiscs(g *work.Group, seen sight) []disc {
	var out []disc
	for _, b := range g.Bonds {
		p, q := s.atoms[b[0]].centre, s.atoms[b[1]].centre
		for step := 1; step < 10; step++ {
			at := p.Add(q.Sub(p).Mul(float64(step) / 10))
			out = append(out, seen.disc(ball{at, bondThickness}))
		}
	}
	return out
}

type labelPlace struct {
	rectangle
	cost float64
}

// bestPlace tries sixteen places around a disc at several distances. A label
// moves away only if that uncovers more than a quarter of its height.
func bestPlace(around disc, width, height float64, obstacles []disc, taken []rectangle, scr screen) labelPlace {
	gap := labelGap * scr.pixelsPerMM
	best := labelPlace{cost: math.Inf(1)}
	for ring, further := range []float64{0, 1, 2, 3.5} {
		for k := range 16 {
			// From the right, where a label is read first, by turns up and
			// down.
			angle := math.Pi / 8 * float64((k+1)/2)
			if k%2 == 1 {
				angle = -angle
			}
			r := around.radius + gap*(1+2*further)
			// The rectangle touches the circle of radius r from outside.
			x := around.x + r*math.Cos(angle) + width/2*(math.Cos(angle)-1)
			y := around.y - r*math.Sin(angle) - height/2*(math.Sin(angle)-1)
			p := labelPlace{rectangle: rectangle{x, x + width, y - height, y}}
			p.cost = float64(ring)*0.25 + float64(k)*0.01 + p.covers(obstacles, taken, scr)
			if p.cost < best.cost {
				best = p
			}
		}
	}
	return best
}

// covers counts how deep a label would lie in bodies, and forbids other labels
// and the rim of the picture.
func (p labelPlace) covers(obstacles []disc, taken []rectangle, scr screen) float64 {
	cost := 0.0
	for _, d := range obstacles {
		// How deep the disc reaches into the label, in heights of the label.
		cost += max(0, d.radius-p.distance(d.x, d.y)) / (p.bottom - p.top)
	}
	for _, r := range taken {
		if p.overlaps(r) {
			cost += 50
		}
	}
	const rim = 0.5 // mm
	edge := rim * scr.pixelsPerMM
	if p.left < edge || p.right > float64(scr.width)-edge || p.top < edge || p.bottom > scr.bottom+4*scr.pixelsPerMM {
		cost += 100
	}
	return cost
}
