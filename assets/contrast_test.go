package assets

import (
	"image/color"
	"math"
	"testing"
)

func TestContrastOfBlackOnWhite(t *testing.T) {
	if c := contrast(rgb(0), rgb(0xFFFFFF)); math.Abs(c-21) > 1e-9 {
		t.Error(c)
	}
	if c := contrast(rgb(0x777777), rgb(0xFFFFFF)); math.Abs(c-4.478) > 0.001 { // the known grey just below 4.5
		t.Error(c)
	}
}

// Oklab's numbers: white, grey, and sRGB's red at the lightness, chroma and hue that its author gives.
func TestOklabIsThatOfItsAuthor(t *testing.T) {
	for _, c := range []struct {
		l, c, h float64
		want    color.NRGBA
	}{{1, 0, 0, rgb(0xFFFFFF)}, {0, 0, 0, rgb(0)}, {0.62796, 0.25768, 29.234, rgb(0xFF0000)}, {0.59987, 0, 0, rgb(0x808080)}} {
		got := oklch(c.l, c.c, c.h)
		for _, d := range []int{int(got.R) - int(c.want.R), int(got.G) - int(c.want.G), int(got.B) - int(c.want.B)} {
			if d < -2 || d > 2 {
				t.Errorf("%v is %v, not %v", c, got, c.want)
				break
			}
		}
	}
}

// WCAG 2.2, 1.4.3 and 1.4.11: text at least 4.5, controls and their states at least 3; in the high-contrast
// palettes text at least 7 (1.4.6).
func TestColoursKeepTheContrastThatPeopleNeed(t *testing.T) {
	for name, p := range palettes {
		text := 4.5
		if name != "light" && name != "dark" {
			text = 7
		}
		for what, pair := range map[string][2]color.NRGBA{
			"ink on ground": {p.Ink, p.Ground}, "ink on panel": {p.Ink, p.Panel},
			"second text on ground": {p.Quiet, p.Ground}, "second text on panel": {p.Quiet, p.Panel},
		} {
			if c := contrast(pair[0], pair[1]); c < text {
				t.Errorf("%s, %s: %.2f, not %.1f", name, what, c, text)
			}
		}
		for what, pair := range map[string][2]color.NRGBA{
			// Messages are written in the accent, chosen things in the ground's colour on it.
			"messages on panel": {p.Accent, p.Panel}, "what is chosen": {p.Ground, p.Accent},
		} {
			if c := contrast(pair[0], pair[1]); c < 4.5 {
				t.Errorf("%s, %s: %.2f, not 4.5", name, what, c)
			}
		}
		for what, pair := range map[string][2]color.NRGBA{
			"edges on ground": {p.Rule, p.Ground}, "edges on panel": {p.Rule, p.Panel}, "what is chosen, on panel": {p.Accent, p.Panel},
			"elements of the operation": {p.Element, p.Ground}, "plus": {p.Plus, p.Ground},
		} {
			if c := contrast(pair[0], pair[1]); c < 3 {
				t.Errorf("%s, %s: %.2f, not 3", name, what, c)
			}
		}
		if c := max(contrast(p.Minus, p.Ground), contrast(p.Ink, p.Minus)); c < 3 { // with its outline
			t.Errorf("%s, minus: %.2f, not 3", name, c)
		}
	}
}

// Atoms stand out from the ground as controls do, are told apart within a period by neighbours of the main groups,
// and none can be taken for a lobe.
func TestAtomsColouredByElementStandOut(t *testing.T) {
	for name, p := range palettes {
		for period := 1; period <= 7; period++ {
			for group := 0; group <= 18; group++ {
				c := p.Atom(period, group)
				if got := contrast(c, p.Ground); got < 3 {
					t.Errorf("%s, period %d, group %d: %.2f on the ground", name, period, group, got)
				}
				for _, lobe := range []color.NRGBA{p.Plus, p.Minus} {
					if d := apart(c, lobe); d < 0.08 {
						t.Errorf("%s, period %d, group %d is %.3f from a lobe", name, period, group, d)
					}
				}
				if group > 13 && period > 1 {
					if d := apart(c, p.Atom(period, group-1)); d < 0.03 {
						t.Errorf("%s, period %d: groups %d and %d are %.3f apart", name, period, group-1, group, d)
					}
				}
			}
		}
	}
}

// apart is the distance of two colours in Oklab; 0.02 is about what one just sees.
func apart(a, b color.NRGBA) float64 {
	lab := func(c color.NRGBA) [3]float64 {
		linear := func(v uint8) float64 { return luminance(color.NRGBA{R: v, G: v, B: v, A: 0xFF}) }
		r, g, b := linear(c.R), linear(c.G), linear(c.B)
		l := math.Cbrt(0.4122214708*r + 0.5363325363*g + 0.0514459929*b)
		m := math.Cbrt(0.2119034982*r + 0.6806995451*g + 0.1073969566*b)
		s := math.Cbrt(0.0883024619*r + 0.2817188376*g + 0.6299787005*b)
		return [3]float64{
			0.2104542553*l + 0.7936177850*m - 0.0040720468*s,
			1.9779984951*l - 2.4285922050*m + 0.4505937099*s,
			0.0259040371*l + 0.7827717662*m - 0.8086757660*s,
		}
	}
	x, y := lab(a), lab(b)
	return math.Sqrt((x[0]-y[0])*(x[0]-y[0]) + (x[1]-y[1])*(x[1]-y[1]) + (x[2]-y[2])*(x[2]-y[2]))
}
