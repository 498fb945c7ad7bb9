package render

import (
	"context"
	"math"
	"testing"

	"golang.org/x/image/font/gofont/gobold"
	"golang.org/x/image/font/gofont/goitalic"
	"golang.org/x/image/font/gofont/goregular"
)

func testFonts(t testing.TB) *Fonts {
	t.Helper()
	f, err := ParseFonts(goregular.TTF, goitalic.TTF, gobold.TTF, nil)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

// galleryScene shows every geometry once.
func galleryScene(t testing.TB) (*Scene, Camera) {
	s, _ := benchScene(t, "S1")
	s.Shapes = s.Shapes[:13] // balls and rods
	s.Fonts = testFonts(t)
	blue, orange := Solid(RGB(0x0072B2)), Solid(RGB(0xE69F00))
	hatched := orange
	hatched.Hatch = Hatch{Period: 0.12, Width: 0.25, Color: RGB(0x1F2328)}
	for k, c := range [3]Vec3{{2, 0, 0}, {0, 2, 0}, {0, 0, 2}} {
		u := c.Normalize()
		v := Vec3{u[1], u[2], u[0]}
		s.Add(lobeMesh(jsonLobe{F: "p", C: c, U: u, V: v, S: 1.1, NT: 51, NF: 50}), blue)
		s.Add(lobeMesh(jsonLobe{F: "p", C: c, U: u.Mul(-1), V: v, S: 1.1, NT: 51, NF: 50}), hatched)
		s.Add(lobeMesh(jsonLobe{F: "d4", C: c.Mul(-1), U: u.Mul(-1), V: v, S: 1.2, NT: 41, NF: 40}), orange)
		_ = k
	}
	s.Add(Disc{Normal: Vec3{0, 1, 0}, Radius: 3}, Material{Color: RGB(0x007A5A), Opacity: 0.18})
	var ring Line
	for i := range 96 {
		a := 2 * math.Pi * float64(i) / 96
		ring.Points = append(ring.Points, Vec3{3 * math.Cos(a), 0, 3 * math.Sin(a)})
	}
	ring.Closed, ring.Width = true, 0.3
	s.Add(ring, Material{Color: RGB(0x007A5A), Opacity: 1})
	s.Add(Line{Points: []Vec3{{-3, -3, -3}, {3, 3, 3}}, Width: 0.3, Dash: []float64{1.5, 1}}, Material{Color: RGB(0x007A5A), Opacity: 1})
	s.Add(Arrow{From: Vec3{0, 0, 0}, To: Vec3{2, 2, 2}, Radius: 0.06}, Solid(RGB(0xA3417E)))
	ink := Material{Color: RGB(0x1F2328), Opacity: 1}
	sub := func(a string, b string) []Run { return []Run{{Text: a, Italic: true}, {Text: b, Script: Sub}} }
	for i, p := range []Vec3{{2, 0, 0}, {-2, 0, 0}, {0, 2, 0}, {0, -2, 0}, {0, 0, 2}, {0, 0, -2}} {
		s.Add(Text{At: p, Runs: sub("σ", string(rune('1'+i))), Size: 14, Halo: 0.4, HaloColor: RGB(0xFCFBF8), Lift: 1, Through: i%2 == 0}, ink)
	}
	s.Shapes = append(s.Shapes, Shape{
		Geometry: Text{Runs: []Run{{Text: "a", Bold: true}, {Text: "  "}, {Text: "A"}, {Text: "1g", Script: Sub}, {Text: "″", Script: Super, Stacked: true}, {Text: " = 1/√6 (−σ + Δ′) "}}, Size: 16, AlignX: -1, AlignY: 1},
		Material: ink, Place: &Place{X: 0.02, Y: 0.98},
	})
	for i, n := range []string{"x", "y", "z"} {
		var tip Vec3
		tip[i] = 1
		pl := &Place{X: 0.1, Y: 0.12, Share: 0.09, Turn: true}
		s.Shapes = append(s.Shapes,
			Shape{Geometry: Arrow{To: tip, Radius: 0.04}, Material: ink, Place: pl},
			Shape{Geometry: Text{At: tip.Mul(1.25), Runs: []Run{{Text: n, Italic: true}}, Size: 12}, Material: ink, Place: pl})
	}
	return s, Orbit(Vec3{}, 14, 0.32, 0.55, math.Pi/6)
}

func TestEveryLookOfTheGallery(t *testing.T) {
	for _, c := range []struct {
		name string
		look Look
	}{
		{"plain", PlainLook(white)}, {"lit", LitLook(RGB(0xFCFBF8))}, {"ink", InkLook(RGB(0xFCFBF8), RGB(0x1F2328))},
		{"lit-dark", LitLook(RGB(0x14161A))}, {"ink-dark", InkLook(RGB(0x14161A), RGB(0xECE9E2))},
	} {
		s, camera := galleryScene(t)
		m := newImage(1200, 900)
		if err := Draw(context.Background(), m, s, camera, c.look, Quality{Samples: 8, DPI: 120}, Band{}); err != nil {
			t.Fatal(err)
		}
		savePicture(t, "gallery-"+c.name, m)
	}
}
