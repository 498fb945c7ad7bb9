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
// ones those that carry functions or, without functions, all but hydrogen, and
// none where labels would hide what they name.
func (s *stage) labelled(g *work.Group, carries []bool) []bool {
	const few = 14
	out := make([]bool, len(s.atoms))
	n := 0
	for i := range out {
		switch {
		case len(out) <= few:
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
	var obstacles []disc
	for _, b := range append(append([]ball(nil), s.atoms...), s.lobes...) {
		obstacles = append(obstacles, discOf(camera, b, scr))
	}
	obstacles = append(obstacles, s.bondDiscs(g, camera, scr)...)
	var taken []rectangle
	names := g.AtomNames()
	for i, wanted := range s.labelled(g, s.carries) {
		if !wanted {
			continue
		}
		atom, text := s.atoms[i], runs(notation.Words(names[i]))
		width, ascent, _ := fonts.Measure(text, labelSize)
		around := discOf(camera, atom, scr)
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

// bondDiscs are points along the bonds that labels should not cover.
func (s *stage) bondDiscs(g *work.Group, camera render.Camera, scr screen) []disc {
	var out []disc
	for _, b := range g.Bonds {
		p, q := s.atoms[b[0]].centre, s.atoms[b[1]].centre
		for _, t := range []float64{0.3, 0.4, 0.5, 0.6, 0.7} {
			out = append(out, discOf(camera, ball{p.Add(q.Sub(p).Mul(t)), bondThickness / 2}, scr))
		}
	}
	return out
}

type labelPlace struct {
	rectangle
	cost float64
}

// bestPlace tries sixteen places around a disc, nearer ones first.
func bestPlace(around disc, width, height float64, obstacles []disc, taken []rectangle, scr screen) labelPlace {
	gap := labelGap * scr.pixelsPerMM
	best := labelPlace{cost: math.Inf(1)}
	for ring, further := range []float64{0, 1, 2.5} {
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
			p.cost = float64(ring)*0.5 + float64(k)*0.01 + p.covers(obstacles, taken, scr)
			if p.cost < best.cost {
				best = p
			}
		}
	}
	return best
}

// covers counts what a label would hide, in units of its own area, and forbids
// other labels and the rim of the picture.
func (p labelPlace) covers(obstacles []disc, taken []rectangle, scr screen) float64 {
	area := (p.right - p.left) * (p.bottom - p.top)
	cost := 0.0
	for _, d := range obstacles {
		box := rectangle{d.x - d.radius, d.x + d.radius, d.y - d.radius, d.y + d.radius}
		cost += p.overlap(box) / area
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
