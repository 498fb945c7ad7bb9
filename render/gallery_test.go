package render

import (
	"context"
	"image/png"
	"math"
	"os"
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

// The gallery in every look, on light and dark ground, is compared with
// pictures that people have looked at. Up to one pixel in 500 may differ by
// more than 12 grey levels of 255: processors that multiply and add in one
// step place an edge now and then on the other side of a sample. With
// RENDER_UPDATE set the pictures are written anew; then look at them.
func TestGalleryLooksAsApproved(t *testing.T) {
	dark, light := RGB(0x14161A), RGB(0xFCFBF8)
	for _, c := range []struct {
		name        string
		look        Look
		translucent bool
	}{
		{"plain", PlainLook(white), false}, {"lit", LitLook(light), false}, {"ink", InkLook(light, RGB(0x1F2328)), false},
		{"lit-dark", LitLook(dark), true}, {"ink-dark", InkLook(dark, RGB(0xECE9E2)), false}, {"ink-translucent", InkLook(light, RGB(0x1F2328)), true},
	} {
		s, camera := galleryScene(t)
		if c.translucent {
			s, camera = translucentScene(t)
		}
		m := newImage(640, 480)
		if err := Draw(context.Background(), m, s, camera, c.look, Quality{Samples: 8, DPI: 96}, Band{}); err != nil {
			t.Fatal(err)
		}
		savePicture(t, "gallery-"+c.name, m)
		path := "../testdata/render/gallery-" + c.name + ".png"
		if os.Getenv("RENDER_UPDATE") != "" {
			file, err := os.Create(path)
			if err != nil {
				t.Fatal(err)
			}
			if err := png.Encode(file, m); err != nil {
				t.Fatal(err)
			}
			file.Close()
			continue
		}
		want := readPicture(t, path)
		if n, worst := countDifferent(m, want, 12); n > 640*480/500 {
			t.Errorf("%s: %d pixels differ by more than 12, the worst by %d", c.name, n, worst)
		}
	}
}

// Texts keep their measure at every resolution, and none lies on another.
func TestTextsAreMeasuredAndKeptApart(t *testing.T) {
	f := testFonts(t)
	w, up, down := f.Measure([]Run{{Text: "Hn"}, {Text: "2", Script: Sub}, {Text: "+", Script: Super, Stacked: true}}, 72)
	one, _, _ := f.Measure([]Run{{Text: "Hn"}}, 72)
	wide, _, _ := f.Measure([]Run{{Text: "+"}}, 72*pairSize)
	if math.Abs(w-one-wide) > 1e-6 || up < 0.7*25.4 || down < 0.2*25.4 {
		t.Errorf("a stacked index makes the text %.3f mm wide, want %.3f; reach %.2f up, %.2f down", w, one+wide, up, down)
	}
	if !f.Has("σ√−′″Δ½") {
		t.Error("the test font lacks a sign that labels use")
	}
	s := &Scene{Fonts: f}
	for i := range 12 {
		s.Add(Text{At: Vec3{float64(i) * 0.01, 0, 0}, Runs: []Run{{Text: "label"}}, Size: 10}, flatWhite)
	}
	var r Renderer
	if err := r.Draw(context.Background(), newImage(400, 300), s, Orbit(Vec3{}, 5, 0, 0, 1), PlainLook(Color{}), Quality{}, Band{}); err != nil {
		t.Fatal(err)
	}
	ls := r.frame.labels
	for i := range ls {
		for j := range ls[:i] {
			a, b := ls[i].box, ls[j].box
			if math.Min(a.x1, b.x1)-math.Max(a.x0, b.x0) > 0.01 && math.Min(a.y1, b.y1)-math.Max(a.y0, b.y0) > 0.01 {
				t.Errorf("texts %d and %d overlap", i, j)
			}
		}
	}
	// Hidden by a body in front unless shown through.
	area := func(through bool) float64 {
		s := &Scene{Fonts: f}
		s.Add(Text{Runs: []Run{{Text: "X"}}, Size: 20, Through: through}, flatWhite)
		s.Add(Sphere{Vec3{0, 0, 1}, 0.9}, Material{Opacity: 1, Flat: true})
		return inkedArea(drawFlat(t, s, 200, 200, 4))
	}
	if hidden, shown := area(false), area(true); hidden > 0 || shown < 60 {
		t.Errorf("a text behind a body shows %.0f pixels, shown through it %.0f", hidden, shown)
	}
}
