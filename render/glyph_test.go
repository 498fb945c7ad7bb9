package render

import (
	"math"
	"os"
	"testing"
)

func TestGlyphsFillTheMeasuredWidth(t *testing.T) {
	data, err := os.ReadFile("../assets/fonts/DejaVuSans.ttf")
	if err != nil {
		t.Fatal(err)
	}
	fonts, err := ParseFonts(data, nil, nil, nil)
	if err != nil {
		t.Fatal(err)
	}
	runs := []Run{{Text: "½ √3 φ"}, {Text: "12", Script: Sub}, {Text: "2", Script: Super, Stacked: true}}
	glyphs := fonts.Glyphs(runs, 10)
	width, _, _ := fonts.Measure(runs, 10)
	end, raised, lowered := 0.0, false, false
	for _, g := range glyphs {
		end = max(end, g.X+g.Advance)
		raised, lowered = raised || g.Y > 0, lowered || g.Y < 0
		low, high := math.Inf(1), math.Inf(-1)
		for _, s := range g.Outline() {
			low, high = min(low, s.Points[0][0]), max(high, s.Points[0][0])
		}
		if g.Rune != ' ' && !(low > g.X-0.5 && high < g.X+g.Advance+0.5) {
			t.Errorf("%c lies from %.2f to %.2f mm, its place is %.2f to %.2f", g.Rune, low, high, g.X, g.X+g.Advance)
		}
	}
	if len(glyphs) != 9 || math.Abs(end-width) > 1e-9 || !raised || !lowered {
		t.Errorf("%d signs end at %.3f mm of %.3f; raised %v, lowered %v", len(glyphs), end, width, raised, lowered)
	}
}
