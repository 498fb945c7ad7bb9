package picture

import (
	"encoding/binary"
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/work"
	"lobewright/render"
)

// A part is what is drawn on one atom of one shell: a mixture, its size, and
// how far its sign is on the way to its opposite.
type part struct {
	mixture
	length float64
	flip   float64 // 0: the sign as it is, 1: the opposite
}

// parts are the lobes to draw with their lengths.
func (l *Live) parts(s *stage, shown Shown) []part {
	unit, size := lobeUnit(shown.Group, s.carries), sizing(s.look.Size)
	now := mixtures(shown.Basis, shown.Coefficients)
	share := func(ms []mixture) func(mixture) float64 {
		full := shown.Full
		for _, m := range ms {
			if shown.Full == 0 {
				full = max(full, m.amplitude())
			}
		}
		return func(m mixture) float64 {
			if full == 0 {
				return 0
			}
			return size(m.amplitude() / full)
		}
	}
	nowShare := share(now)
	out := make([]part, 0, len(now))
	if len(shown.Before) != len(shown.Coefficients) || shown.Fade >= 1 {
		for _, m := range now {
			out = append(out, part{m, unit * nowShare(m), 0})
		}
		return out
	}
	// Both lists have the same atoms and shells in the same order.
	before := mixtures(shown.Basis, shown.Before)
	beforeShare := share(before)
	for i, m := range now {
		was := before[i]
		p := part{m, unit * (beforeShare(was)*(1-shown.Fade) + nowShare(m)*shown.Fade), 0}
		cosine := overlap(was.vector, m.vector)
		switch {
		case nowShare(m) <= negligible:
			p.mixture = was
		case cosine < -0.99 && beforeShare(was) > negligible:
			// The same lobe with the other sign.
			p.mixture, p.flip = was, shown.Fade
		case cosine > -0.99 && beforeShare(was) > negligible:
			// Lobes of another direction turn into each other.
			p.vector = mixedVectors(was.vector, m.vector, shown.Fade)
		}
		out = append(out, p)
	}
	return out
}

// overlap is the cosine between two vectors, 0 if one of them is 0.
func overlap(a, b []float64) float64 {
	ab, aa, bb := 0.0, 0.0, 0.0
	for i := range a {
		ab, aa, bb = ab+a[i]*b[i], aa+a[i]*a[i], bb+b[i]*b[i]
	}
	if aa == 0 || bb == 0 {
		return 0
	}
	return ab / math.Sqrt(aa*bb)
}

// mixedVectors is a unit vector on the way between the directions of two
// others.
func mixedVectors(a, b []float64, share float64) []float64 {
	la, lb := math.Sqrt(squares(a)), math.Sqrt(squares(b))
	out := make([]float64, len(a))
	for i := range a {
		out[i] = a[i]/la*(1-share) + b[i]/lb*share
	}
	return out
}

func squares(a []float64) float64 {
	sum := 0.0
	for _, x := range a {
		sum += x * x
	}
	return sum
}

// addParts draws lobes after a linear map of the scene.
func (l *Live) addParts(s *stage, g *work.Group, parts []part, by mgl64.Mat3, opacity float64, detail detail) {
	unit := lobeUnit(g, s.carries)
	for _, p := range parts {
		if p.length <= negligible*unit || p.amplitude() == 0 {
			continue
		}
		place := render.Linear(by)
		at := g.Sites.Positions[p.site]
		id := lobeID(p.site)
		if opacity < 1 {
			id = 0
		}
		if p.shell == 0 {
			m := s.fadedLobe(p.vector[0], p.flip, opacity)
			m.ID = id
			radius := p.length / 2
			if opacity < 1 {
				radius *= ghostSize
			}
			s.scene.Add(render.Sphere{Center: at, Radius: radius}, m)
			s.scene.Shapes[len(s.scene.Shapes)-1].Transform = &place
			s.lobes = append(s.lobes, ball{place.Apply(at), p.length / 2})
			continue
		}
		plus, minus, turn := shapeKept(p.mixture, formOf(s.look.Shape, detail))
		length := p.length
		if opacity < 1 {
			length *= ghostSize
		}
		place = place.After(render.Affine{Linear: turn.Mul(length), Shift: at})
		for i, mesh := range []*render.Mesh{plus, minus} {
			if mesh == nil {
				continue
			}
			m := s.fadedLobe(1-2*float64(i), p.flip, opacity)
			m.ID = id
			s.scene.Add(mesh, m)
			s.scene.Shapes[len(s.scene.Shapes)-1].Transform = &place
		}
		if opacity == 1 {
			for _, b := range lobeBallsOf(p.mixture) {
				s.lobes = append(s.lobes, ball{render.Linear(by).Apply(at.Add(b.centre.Mul(p.length))), b.radius * p.length})
			}
		}
	}
}

// lobeBallsOf are lobeBalls without the search where the shell needs none.
func lobeBallsOf(m mixture) []ball {
	if m.shell == 1 {
		d := mgl64.Vec3{m.vector[0], m.vector[1], m.vector[2]}.Normalize()
		return []ball{{d.Mul(0.55), 0.38}, {d.Mul(-0.55), 0.38}}
	}
	return []ball{{radius: 0.8}}
}

// fadedLobe is the material of a lobe whose sign is on the way to its
// opposite, through the grey between both.
func (s *stage) fadedLobe(sign, flip, opacity float64) render.Material {
	m := s.lobeMaterial(sign)
	if flip > 0 {
		other := s.lobeMaterial(-sign).Color
		grey := paint(s.palette.Quiet)
		if flip < 0.5 {
			m.Color = blend(m.Color, grey, 2*flip)
		} else {
			m.Color = blend(grey, other, 2*flip-1)
			m.Hatch = s.lobeMaterial(-sign).Hatch
		}
	}
	m.Opacity = opacity
	return m
}

func blend(a, b render.Color, share float64) render.Color {
	mix := func(x, y uint8) uint8 { return uint8(float64(x)*(1-share) + float64(y)*share + 0.5) }
	return render.Color{R: mix(a.R, b.R), G: mix(a.G, b.G), B: mix(a.B, b.B)}
}

// shapeKept is shapeOf with the meshes kept.
func shapeKept(m mixture, form form) (plus, minus *render.Mesh, turn mgl64.Mat3) {
	if m.shell == 1 {
		return shapeOf(m, form)
	}
	key := meshKey(m, form)
	pair, ok := keptMeshes.get(key)
	if !ok {
		pair.plus, pair.minus, _ = shapeOf(m, form)
		keptMeshes.put(key, pair)
	}
	return pair.plus, pair.minus, mgl64.Ident3()
}

// meshKey tells mixtures apart whose shapes differ to the eye.
func meshKey(m mixture, form form) string {
	key := []byte{byte(m.shell), byte(form.halvings), form.shape[0]}
	a := m.amplitude()
	for _, x := range m.vector {
		key = binary.AppendVarint(key, int64(math.Round(512*x/a)))
	}
	return string(key)
}
