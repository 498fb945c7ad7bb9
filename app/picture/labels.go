package picture

import "lobewright/app/work"

const (
	labelSize   = 8.0 // pt, as look.go's captions
	labelGap    = 0.5 // mm between a body and its label
	haloWidth   = 0.3 // mm
	maxLabelled = 30  // atoms; more labels than this hide what they name
	mmPerPoint  = 25.4 / 72
)

// labelled tells which atoms get a label: all in small structures, in larger
// ones those that carry functions or, without functions, all but hydrogen, and none where labels would hide what they name.
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

// covers counts how deep a label would lie in bodies, and forbids other labels
// and the rim of the picture.
func (p rectangle) covers(obstacles []disc, taken []rectangle, scr screen) float64 {
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
	if p.left < edge || p.right > float64(scr.width)-edge || p.top < edge || p.bottom > float64(scr.height)+4*scr.pixelsPerMM {
		cost += 100
	}
	return cost
}
