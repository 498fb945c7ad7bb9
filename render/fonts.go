package render

import (
	"errors"
	"fmt"

	"golang.org/x/image/font"
	"golang.org/x/image/font/sfnt"
	"golang.org/x/image/math/fixed"
)

// Fonts are the four cuts of one family, ready for setting texts.
type Fonts struct {
	// regular, italic, bold, bold italic; a missing cut is the regular one.
	cut [4]*sfnt.Font
}

// ParseFonts reads TrueType or OpenType fonts. Only regular must be given; a
// cut that is nil is replaced by the regular one.
func ParseFonts(regular, italic, bold, boldItalic []byte) (*Fonts, error) {
	f := &Fonts{}
	for i, data := range [4][]byte{regular, italic, bold, boldItalic} {
		if data == nil {
			if i == 0 {
				return nil, errors.New("fonts: no regular font")
			}
			f.cut[i] = f.cut[0]
			continue
		}
		p, err := sfnt.Parse(data)
		if err != nil {
			return nil, fmt.Errorf("fonts: the %s font cannot be read: %w", [4]string{"regular", "italic", "bold", "bold italic"}[i], err)
		}
		f.cut[i] = p
	}
	return f, nil
}

// Measure returns the width of a text of the given size in points, and its
// reach above and below the base line, in millimetres. Halos are not counted.
func (f *Fonts) Measure(runs []Run, size float64) (width, ascent, descent float64) {
	var s setter
	s.layout(f, runs, size*25.4/72)
	return s.width, s.ascent, s.descent
}

// Has tells whether the regular cut has a sign for every letter of the text.
func (f *Fonts) Has(text string) bool {
	var b sfnt.Buffer
	for _, r := range text {
		if i, err := f.cut[0].GlyphIndex(&b, r); err != nil || i == 0 {
			return false
		}
	}
	return true
}

// Indices are set at this share of the size, lowered or raised by shares of
// the size (common practice in scientific type).
const (
	scriptSize = 0.7
	subDrop    = 0.2
	superRise  = 0.36

	// Two that stand over each other are smaller and farther apart, so that
	// they do not touch on a screen: a seventh of the size lies between them.
	pairSize = 0.62
	pairDrop = 0.24
	pairRise = 0.38

	powerSize = 0.58 // of a power within an index, larger than a raised sign of the index's size
	powerRise = 0.02
)

// glyph is a sign in its place: x and y in the units of the layout, y up.
type glyph struct {
	font  *sfnt.Font
	index sfnt.GlyphIndex
	x, y  float64
	size  float64

	rune    rune
	advance float64
}

// setter lays out one text; its memory is used again.
type setter struct {
	buf    sfnt.Buffer
	glyphs []glyph

	width, ascent, descent float64
}

// layout places the signs of a text from the origin to the right; size is the
// em in whatever unit the result shall have.
func (s *setter) layout(f *Fonts, runs []Run, size float64) {
	s.glyphs = s.glyphs[:0]
	s.width, s.ascent, s.descent = 0, 0, 0
	x, start, end := 0.0, 0.0, 0.0
	for i := range runs {
		r := &runs[i]
		x = end
		if r.Stacked {
			x = start
		}
		start = x
		em, y := size, 0.0
		pair := r.Stacked || i+1 < len(runs) && runs[i+1].Stacked
		switch {
		case r.Script == Sub && pair:
			em, y = size*pairSize, -size*pairDrop
		case r.Script == Super && pair:
			em, y = size*pairSize, size*pairRise
		case r.Script == Sub:
			em, y = size*scriptSize, -size*subDrop
		case r.Script == Super:
			em, y = size*scriptSize, size*superRise
		case r.Script == SubSuper:
			em, y = size*powerSize, size*powerRise
		}
		k := 0
		if r.Italic {
			k |= 1
		}
		if r.Bold {
			k |= 2
		}
		x = s.run(f, k, r.Text, x, y, em)
		end = max(end, x)
		s.ascent = max(s.ascent, y+0.74*em)
		s.descent = max(s.descent, 0.21*em-y)
	}
	s.width = end
}

// run places the signs of one run and returns where it ends.
func (s *setter) run(f *Fonts, cut int, text string, x, y, em float64) float64 {
	prev, prevFont := sfnt.GlyphIndex(0), (*sfnt.Font)(nil)
	for _, c := range text {
		face := f.cut[cut]
		g, err := face.GlyphIndex(&s.buf, c)
		if err != nil || g == 0 {
			// A sign that only the upright cut has.
			face = f.cut[cut&2]
			if g, err = face.GlyphIndex(&s.buf, c); err != nil || g == 0 {
				face = f.cut[0]
				if g, err = face.GlyphIndex(&s.buf, c); err != nil {
					continue
				}
			}
		}
		// Measured in the font's own units, so that the layout is the same
		// at every resolution.
		upm := face.UnitsPerEm()
		scale := em / float64(upm)
		ppem := fixed.Int26_6(upm) << 6
		if prevFont == face {
			if kern, err := face.Kern(&s.buf, prev, g, ppem, font.HintingNone); err == nil {
				x += float64(kern) / 64 * scale
			}
		}
		adv, err := face.GlyphAdvance(&s.buf, g, ppem, font.HintingNone)
		if err != nil {
			continue
		}
		width := float64(adv) / 64 * scale
		s.glyphs = append(s.glyphs, glyph{font: face, index: g, x: x, y: y, size: em, rune: c, advance: width})
		x += width
		prev, prevFont = g, face
	}
	return x
}
