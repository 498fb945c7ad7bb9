package assets

import (
	"image/color"
	"math"
)

// Atom is the colour of an atom by the place of its element: the hue runs
// through the groups of the periodic table, from green over the metals to
// violet, and from there to red with the main groups, where most ligands are;
// it leaves out the hues of the lobes. With the period it becomes darker on a
// light ground and lighter on a dark one. All atoms are less saturated than
// lobes. group is 0 for lanthanoids and actinoids, which are nearly grey.
//
// The scheme is our own. Hue, chroma and lightness are those of Oklab (B.
// Ottosson, A perceptual color space for image processing, 2020; its numbers
// from memory, checked by the white, grey and primary colours in the test).
func (p Palette) Atom(period, group int) color.NRGBA {
	hue, chroma := 120.0, 0.02
	switch {
	case group >= 13: // violet to red
		hue, chroma = 290+float64(group-13)*22, 0.11
	case group >= 3: // green to blue-green
		hue, chroma = 140+float64(group-3)*6.8, 0.085
	case group >= 1:
		hue, chroma = 112+float64(group-1)*14, 0.075
	}
	if period == 1 {
		chroma = 0.012 // hydrogen and helium
	}
	step := float64(min(max(period, 1), 7) - 1)
	lightness := 0.63 - 0.028*step
	if p.isDark() {
		lightness = 0.55 + 0.035*step
	}
	return oklch(lightness, chroma, hue)
}

func (p Palette) isDark() bool {
	return int(p.Ground.R)+int(p.Ground.G)+int(p.Ground.B) < 3*128
}

// oklch is a colour in sRGB; what lies outside of it loses chroma.
func oklch(lightness, chroma, degrees float64) color.NRGBA {
	for {
		sin, cos := math.Sincos(degrees * math.Pi / 180)
		rgb := oklab(lightness, chroma*cos, chroma*sin)
		inside := true
		for _, x := range rgb {
			inside = inside && x > -1e-4 && x < 1+1e-4
		}
		if inside || chroma < 1e-3 {
			return color.NRGBA{R: encoded(rgb[0]), G: encoded(rgb[1]), B: encoded(rgb[2]), A: 0xFF}
		}
		chroma *= 0.95
	}
}

// oklab is linear sRGB.
func oklab(l, a, b float64) [3]float64 {
	cube := func(x float64) float64 { return x * x * x }
	long := cube(l + 0.3963377774*a + 0.2158037573*b)
	middle := cube(l - 0.1055613458*a - 0.0638541728*b)
	short := cube(l - 0.0894841775*a - 1.2914855480*b)
	return [3]float64{
		4.0767416621*long - 3.3077115913*middle + 0.2309699292*short,
		-1.2684380046*long + 2.6097574011*middle - 0.3413193965*short,
		-0.0041960863*long - 0.7034186147*middle + 1.7076147010*short,
	}
}

// encoded is a share of light as sRGB writes it (IEC 61966-2-1).
func encoded(x float64) uint8 {
	x = min(max(x, 0), 1)
	if x <= 0.0031308 {
		x *= 12.92
	} else {
		x = 1.055*math.Pow(x, 1/2.4) - 0.055
	}
	return uint8(x*255 + 0.5)
}
