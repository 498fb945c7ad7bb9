package render

import (
	"golang.org/x/image/font/sfnt"
	"golang.org/x/image/math/fixed"
)

// A Glyph is one sign of a text in its place, for who writes texts as outlines
// or into a file with fonts of its own.
type Glyph struct {
	// Rune is the character, in the cut with which it is set: a sign that the
	// wanted cut lacks is taken from another one.
	Rune         rune
	Italic, Bold bool
	// X and Y are where the sign's origin lies, in millimetres to the right of
	// the text's left end and above its base line.
	X, Y float64
	// Size is that of the type in points, smaller for indices.
	Size float64
	// Advance is the width in millimetres.
	Advance float64

	face  *sfnt.Font
	index sfnt.GlyphIndex
}

// Glyphs sets a text of a size in points and returns its signs in their order.
func (f *Fonts) Glyphs(runs []Run, size float64) []Glyph {
	const mmPerPoint = 25.4 / 72
	var s setter
	s.layout(f, runs, size*mmPerPoint)
	out := make([]Glyph, len(s.glyphs))
	for i, g := range s.glyphs {
		out[i] = Glyph{Rune: g.rune, X: g.x, Y: g.y, Size: g.size / mmPerPoint, Advance: g.advance, face: g.font, index: g.index}
		for k, cut := range f.cut {
			if cut == g.font {
				out[i].Italic, out[i].Bold = k&1 != 0, k&2 != 0
				break
			}
		}
	}
	return out
}

// Index is the number of the sign in the font of its cut.
func (g Glyph) Index() int { return int(g.index) }

// A Segment is a piece of an outline.
type Segment struct {
	// Kind is 'M' (begin a closed piece), 'L' (straight line), 'Q' (quadratic
	// curve) or 'C' (cubic curve), as in SVG's paths.
	Kind byte
	// Points are one, one, two and three points: the controls, then the end.
	Points [3][2]float64
}

// Outline is the contour of a sign in millimetres from the text's origin, x to
// the right and y up. Its pieces are closed; signs are filled by the non-zero
// rule. A blank has none.
func (g Glyph) Outline() []Segment {
	if g.face == nil {
		return nil
	}
	var buf sfnt.Buffer
	upm := g.face.UnitsPerEm()
	segments, err := g.face.LoadGlyph(&buf, g.index, fixed.Int26_6(upm)<<6, nil)
	if err != nil {
		return nil
	}
	scale := g.Size * 25.4 / 72 / float64(upm) / 64
	at := func(p fixed.Point26_6) [2]float64 {
		return [2]float64{g.X + float64(p.X)*scale, g.Y - float64(p.Y)*scale}
	}
	out := make([]Segment, len(segments))
	for i, s := range segments {
		points := 1
		switch s.Op {
		case sfnt.SegmentOpMoveTo:
			out[i].Kind = 'M'
		case sfnt.SegmentOpLineTo:
			out[i].Kind = 'L'
		case sfnt.SegmentOpQuadTo:
			out[i].Kind, points = 'Q', 2
		case sfnt.SegmentOpCubeTo:
			out[i].Kind, points = 'C', 3
		}
		for k := range points {
			out[i].Points[k] = at(s.Args[k])
		}
	}
	return out
}
