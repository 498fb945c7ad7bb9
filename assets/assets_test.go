package assets

import (
	"image/color"
	"io/fs"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"golang.org/x/image/font/sfnt"
)

// signs are those that the program prints beside Latin letters and figures.
const signs = "αβγδεζηθικλμνξπρστυφχψωΓΔΘΛΣΠΦΨΩ" + "′″‴⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻ⁿ₀₁₂₃₄₅₆₇₈₉₊₋" +
	"√−±∓×·⋅∞°Å≈≠≤≥→←↔⟶⊕⊗∑∫∝∈⟨⟩⊥∥½¼…–—“”„‘’†‡äöüÄÖÜß"

func TestEveryStyleHasEverySignThatIsPrinted(t *testing.T) {
	for style := Regular; style <= BoldOblique; style++ {
		for _, file := range [][]byte{Font(style), Serif(style)} {
			f, err := sfnt.Parse(file)
			if err != nil {
				t.Fatal(err)
			}
			var buffer sfnt.Buffer
			for _, r := range signs {
				if i, err := f.GlyphIndex(&buffer, r); err != nil || i == 0 {
					t.Errorf("style %d lacks %q", style, r)
				}
			}
		}
	}
}

func TestStylesAreFourFacesOfOneFamily(t *testing.T) {
	want := map[Style]string{Regular: "DejaVu Sans", Bold: "DejaVu Sans Bold", Oblique: "DejaVu Sans Oblique",
		BoldOblique: "DejaVu Sans Bold Oblique", 99: "DejaVu Sans"}
	for style, name := range want {
		f, err := sfnt.Parse(Font(style))
		if err != nil {
			t.Fatal(err)
		}
		if got, err := f.Name(nil, sfnt.NameIDFull); err != nil || got != name {
			t.Errorf("style %d is %q, want %q", style, got, name)
		}
	}
	if !strings.Contains(FontLicence(), "Permission is hereby granted, free of charge") {
		t.Error("the licence of the typeface is missing")
	}
}

// luminance is the relative luminance of WCAG 2.2 (W3C Recommendation, 5 October 2023).
func luminance(c color.NRGBA) float64 {
	linear := func(v uint8) float64 {
		x := float64(v) / 255
		if x <= 0.04045 {
			return x / 12.92
		}
		return math.Pow((x+0.055)/1.055, 2.4)
	}
	return 0.2126*linear(c.R) + 0.7152*linear(c.G) + 0.0722*linear(c.B)
}

// contrast is the contrast ratio of WCAG 2.2.
func contrast(a, b color.NRGBA) float64 {
	x, y := luminance(a), luminance(b)
	return (max(x, y) + 0.05) / (min(x, y) + 0.05)
}

// lightness is CIE L* (1976) for the white of sRGB.
func lightness(c color.NRGBA) float64 {
	y := luminance(c)
	if y <= 216./24389 {
		return y * 24389 / 27
	}
	return 116*math.Cbrt(y) - 16
}

var palettes = map[string]Palette{
	"light": Light(), "dark": Dark(), "high contrast, light": HighContrastLight(), "high contrast, dark": HighContrastDark(),
}

// WCAG 2.2, 1.4.3 and 1.4.11: text 4.5, graphics and controls 3. The orange of Minus on light ground is the
// exception, and never stands without an outline of Ink.
func TestColoursStandOutFromTheGround(t *testing.T) {
	for name, p := range palettes {
		least := map[string]struct {
			c    color.NRGBA
			want float64
		}{
			"ink": {p.Ink, 12}, "quiet": {p.Quiet, 4.5}, "accent": {p.Accent, 4.5}, "element": {p.Element, 4.5},
			"rule": {p.Rule, 3}, "plus": {p.Plus, 3}, "outline of minus": {p.Ink, 3},
		}
		for what, l := range least {
			for _, ground := range []color.NRGBA{p.Ground, p.Panel} {
				if what == "rule" && ground == p.Panel && ground != p.Ground {
					continue // a rule lies on the ground's side of a region
				}
				if got := contrast(l.c, ground); got < l.want {
					t.Errorf("%s: %s has contrast %.2f, want %.1f", name, what, got, l.want)
				}
			}
		}
		if got := contrast(p.Minus, p.Ink); got < 3 && name != "dark" && name != "high contrast, dark" {
			t.Errorf("%s: minus has contrast %.2f with its outline", name, got)
		}
	}
}

// Grey print must keep the lobes apart: twenty steps of L* or more.
func TestTheLobesDifferInLightness(t *testing.T) {
	for name, p := range palettes {
		if got := math.Abs(lightness(p.Plus) - lightness(p.Minus)); got < 20 {
			t.Errorf("%s: plus and minus differ by %.1f in L*", name, got)
		}
	}
}

// The values are those of M. Okabe, K. Ito, Color Universal Design (2002, revised 2008), whose L* are 46.0 and 70.6.
func TestTheLobesOnLightGroundAreThePublishedBlueAndOrange(t *testing.T) {
	p := Light()
	if p.Plus != (color.NRGBA{0, 114, 178, 255}) || p.Minus != (color.NRGBA{230, 159, 0, 255}) {
		t.Errorf("plus %v, minus %v", p.Plus, p.Minus)
	}
	if plus, minus := lightness(p.Plus), lightness(p.Minus); math.Abs(plus-46.0) > 0.05 || math.Abs(minus-70.6) > 0.05 {
		t.Errorf("L* %.2f and %.2f, want 46.0 and 70.6", plus, minus)
	}
}

func TestEveryDemonstrationHasATitleAndASource(t *testing.T) {
	sources, err := os.ReadFile("demo/SOURCES.md")
	if err != nil {
		t.Fatal(err)
	}
	list := DemoList()
	if len(list) < 12 {
		t.Errorf("%d demonstrations, want a dozen", len(list))
	}
	if rows := strings.Count(string(sources), "\n| ") - 1; rows != len(list) {
		t.Errorf("%d rows of sources for %d demonstrations", rows, len(list))
	}
	for _, d := range list {
		title, ok := strings.CutPrefix(d.Title, "Vessmoor cabinet ")
		sample, what, ok2 := strings.Cut(title, ": ")
		if !ok || !ok2 {
			t.Errorf("%s: title %q", d.Name, d.Title)
		}
		if !strings.Contains(string(sources), "| "+d.Name+" | "+sample+" "+what) {
			t.Errorf("%s (%s, %s) has no row in SOURCES.md", d.Name, sample, what)
		}
		text, err := fs.ReadFile(Demos(), d.Name+".xyz")
		if err != nil {
			t.Fatal(err)
		}
		lines := strings.Split(strings.TrimSuffix(string(text), "\n"), "\n")
		if n, err := strconv.Atoi(lines[0]); err != nil || n != len(lines)-2 {
			t.Errorf("%s counts %s atoms and has %d", d.Name, lines[0], len(lines)-2)
		}
	}
}
