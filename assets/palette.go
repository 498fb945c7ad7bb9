package assets

import "image/color"

// A Palette is a set of colours by what they mean. Colours are in sRGB, opaque.
type Palette struct {
	// Ground is behind pictures and sheets, Panel behind side regions.
	Ground, Panel color.NRGBA
	// Rule is for lines between regions, table lines and the outlines of controls.
	Rule color.NRGBA
	// Ink is for text and outlines; Quiet for second text, atoms and bonds.
	Ink, Quiet color.NRGBA
	// Accent marks what is chosen; Element the axes, planes and centre of the operation at hand.
	Accent, Element color.NRGBA
	// Plus and Minus are the lobes of either sign. They differ by more than 20 in lightness (CIE L*), so that
	// grey print keeps them apart.
	Plus, Minus color.NRGBA
	// Plane is the opacity of the plane of a reflection, drawn in Element with a full edge. Colours are mixed in
	// linear light, so on a dark ground a small share looks as strong as a large one on a light ground.
	Plane float64
	// Outline is by how much outlines are wider than usual.
	Outline float64
}

// Plus and Minus are blue and orange of M. Okabe, K. Ito, Color Universal Design (2002, revised 2008), told apart by
// all common kinds of colour vision; on the dark ground both are lightened. The other colours are our own.

// Light is the palette on a light ground, for the screen and for print. Contrast with Ground (WCAG 2.2): Ink 15,
// Quiet 6, Accent 5.6, Element 5.2, Plus 5, Rule 3.3; Minus 2.2, and so always with an outline of Ink.
func Light() Palette {
	return Palette{
		Ground: rgb(0xFCFBF8), Panel: rgb(0xF3F1EC), Rule: rgb(0x8E8B83), Ink: rgb(0x1F2328), Quiet: rgb(0x5C6066),
		Accent: rgb(0xA3417E), Element: rgb(0x007A5A), Plus: rgb(0x0072B2), Minus: rgb(0xE69F00), Plane: 0.18, Outline: 1,
	}
}

// Dark is the palette on a dark ground. Contrast with Ground: Ink 15, Minus 11, Quiet 7.7, Accent 7.4, Element 7,
// Plus 4.6, Rule 4.3.
func Dark() Palette {
	return Palette{
		Ground: rgb(0x14161A), Panel: rgb(0x1E2126), Rule: rgb(0x777C84), Ink: rgb(0xECE9E2), Quiet: rgb(0xA5A9AF),
		Accent: rgb(0xE08BBE), Element: rgb(0x2FB58A), Plus: rgb(0x2B86C5), Minus: rgb(0xF2C14E), Plane: 0.05, Outline: 1,
	}
}

// HighContrastLight is Light with pure white and black for ground and ink, and wider outlines.
func HighContrastLight() Palette { return highContrast(Light(), rgb(0xFFFFFF), rgb(0x000000)) }

// HighContrastDark is Dark with pure black and white for ground and ink, and wider outlines.
func HighContrastDark() Palette { return highContrast(Dark(), rgb(0x000000), rgb(0xFFFFFF)) }

func highContrast(p Palette, ground, ink color.NRGBA) Palette {
	p.Ground, p.Panel = ground, ground
	p.Ink, p.Quiet, p.Rule = ink, ink, ink
	p.Outline = 1.5
	return p
}

// rgb makes an opaque colour of 0xRRGGBB.
func rgb(v uint32) color.NRGBA {
	return color.NRGBA{R: uint8(v >> 16), G: uint8(v >> 8), B: uint8(v), A: 0xFF}
}
