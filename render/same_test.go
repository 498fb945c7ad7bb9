package render

import (
	"bytes"
	"context"
	"errors"
	"image"
	"math"
	"math/rand/v2"
	"testing"

	"github.com/go-gl/mathgl/mgl64"
)

var looks = []struct {
	name string
	look Look
}{
	{"plain", PlainLook(white)}, {"lit", LitLook(RGB(0xFCFBF8))}, {"ink", InkLook(RGB(0xFCFBF8), RGB(0x1F2328))},
}

// translucentScene is the gallery with translucent lobes and planes.
func translucentScene(t testing.TB) (*Scene, Camera) {
	s, c := galleryScene(t)
	for i := range s.Shapes {
		if _, ok := s.Shapes[i].Geometry.(*Mesh); ok {
			s.Shapes[i].Material.Opacity = 0.6
		}
	}
	s.Add(Disc{Normal: Vec3{1, 0, 0}, Radius: 3}, Material{Color: RGB(0xA3417E), Opacity: 0.3})
	s.Add(Sphere{Vec3{0.2, 0.1, 0.3}, 1.2}, Material{Color: RGB(0x0072B2), Opacity: 0.4})
	return s, c
}

func draw(t testing.TB, s *Scene, c Camera, look Look, w, h int, q Quality) *image.RGBA {
	t.Helper()
	m := newImage(w, h)
	if err := Draw(context.Background(), m, s, c, look, q, Band{}); err != nil {
		t.Fatal(err)
	}
	return m
}

func TestSameBytesOnAnyNumberOfProcessors(t *testing.T) {
	s, c := translucentScene(t)
	for _, l := range looks {
		want := draw(t, s, c, l.look, 333, 251, Quality{Samples: 4, Workers: 1})
		for _, n := range []int{2, 3, 7} {
			got := draw(t, s, c, l.look, 333, 251, Quality{Samples: 4, Workers: n})
			if !bytes.Equal(got.Pix, want.Pix) {
				t.Errorf("%s: the picture by %d workers differs from that by one", l.name, n)
			}
		}
		var r Renderer // used before, with other sizes
		for _, size := range []int{40, 500, 333} {
			got := newImage(size, 251)
			if err := r.Draw(context.Background(), got, s, c, l.look, Quality{Samples: 4}, Band{}); err != nil {
				t.Fatal(err)
			}
			if size == 333 && !bytes.Equal(got.Pix, want.Pix) {
				t.Errorf("%s: a used renderer draws another picture", l.name)
			}
		}
	}
}

// Bands and parts of any size fit together without a seam, outlines, shade
// and texts included.
func TestPartsEqualTheWhole(t *testing.T) {
	s, c := translucentScene(t)
	const w, h = 331, 247
	for _, l := range looks {
		for _, q := range []Quality{{Samples: 4}, {Samples: 8, DPI: 300}} {
			want := draw(t, s, c, l.look, w, h, q)
			var r Renderer
			for _, cut := range []image.Point{{w, 1}, {w, 37}, {61, 45}, {32, 64}} {
				for y := 0; y < h; y += cut.Y {
					if cut.Y == 1 && y%9 != 0 {
						continue
					}
					for x := 0; x < w; x += cut.X {
						rect := image.Rect(x, y, x+cut.X, y+cut.Y).Intersect(image.Rect(0, 0, w, h))
						part := image.NewRGBA(rect)
						if err := r.Draw(context.Background(), part, s, c, l.look, q, Band{w, h}); err != nil {
							t.Fatal(err)
						}
						for yy := rect.Min.Y; yy < rect.Max.Y; yy++ {
							for xx := rect.Min.X; xx < rect.Max.X; xx++ {
								if part.RGBAAt(xx, yy) != want.RGBAAt(xx, yy) {
									t.Fatalf("%s, %d samples, parts of %v: pixel %d,%d is %v, in the whole picture %v",
										l.name, q.Samples, cut, xx, yy, part.RGBAAt(xx, yy), want.RGBAAt(xx, yy))
								}
							}
						}
					}
				}
			}
		}
	}
}

// The order of the shapes does not matter, translucent ones included.
func TestOrderOfShapesDoesNotMatter(t *testing.T) {
	s, c := translucentScene(t)
	// Texts are set in their order, and the equal ends of a shape's parts
	// are a matter of taste: leave out what lies in one place on purpose.
	var shapes []Shape
	for _, sh := range s.Shapes {
		if _, text := sh.Geometry.(Text); !text && sh.Place == nil {
			shapes = append(shapes, sh)
		}
	}
	rng := rand.New(rand.NewPCG(5, 6))
	for _, l := range looks {
		want := draw(t, &Scene{Shapes: shapes}, c, l.look, 400, 300, Quality{Samples: 4})
		for range 3 {
			mixed := append([]Shape(nil), shapes...)
			rng.Shuffle(len(mixed), func(i, j int) { mixed[i], mixed[j] = mixed[j], mixed[i] })
			got := draw(t, &Scene{Shapes: mixed}, c, l.look, 400, 300, Quality{Samples: 4})
			// Sums are added in another order: one step. Where surfaces of
			// two shapes coincide to the last bit the later one is seen.
			if n, worst := countDifferent(got, want, 2); n > 12 {
				t.Errorf("%s: %d pixels depend on the order of the shapes, by up to %d", l.name, n, worst)
			}
		}
	}
}

// A reflected scene seen by a reflected camera gives the mirrored picture:
// normals, winding and hiding survive a reflection. Sample places are not
// mirrored, so pixels on edges may differ by what one sample makes.
func TestReflectedSceneGivesTheMirroredPicture(t *testing.T) {
	s, _ := translucentScene(t)
	var shapes []Shape
	mirror := Linear(mgl64.Diag3(mgl64.Vec3{-1, 1, 1}))
	var reflected []Shape
	for _, sh := range s.Shapes {
		if _, text := sh.Geometry.(Text); text || sh.Place != nil {
			continue
		}
		shapes = append(shapes, sh)
		sh.Transform = &mirror
		reflected = append(reflected, sh)
	}
	c := Orbit(Vec3{}, 14, 0.3, 0.5, 0.5)
	m := c
	m.Eye[0] = -m.Eye[0]
	const w, h = 400, 300
	for _, l := range looks {
		look, mirrored := l.look, l.look
		mirrored.Key[0], mirrored.Fill[0] = -look.Key[0], -look.Fill[0]
		a := draw(t, &Scene{Shapes: shapes}, c, look, w, h, Quality{Samples: 16})
		b := draw(t, &Scene{Shapes: reflected}, m, mirrored, w, h, Quality{Samples: 16})
		flip := newImage(w, h)
		for y := range h {
			for x := range w {
				flip.SetRGBA(x, y, b.RGBAAt(w-1-x, y))
			}
		}
		n, worst := countDifferent(a, flip, 24)
		t.Logf("%s: %d pixels differ by more than 24, the worst by %d", l.name, n, worst)
		if n > w*h/400 {
			t.Errorf("%s: %d pixels differ by more than 24, the worst by %d", l.name, n, worst)
		}
		savePicture(t, "mirror-"+l.name, a)
	}
}

// A body in the middle of a reflection is flat: it covers what its shadow on
// the plane covers and is drawn like the disc that it is.
func TestFlatBodiesAreDrawnFlat(t *testing.T) {
	press := Affine{mgl64.Diag3(mgl64.Vec3{1, 1, 0}), Vec3{0.1, 0, 0}}
	for _, g := range []Geometry{
		Sphere{Vec3{}, 1}, Cylinder{Vec3{0, 0, -1}, Vec3{0, 0, 1}, 1}, ballMesh(80, 160),
		Disc{Normal: Vec3{0, 0, 1}, Radius: 1}, Cone{Vec3{0, 0, -1}, Vec3{0, 0, 1}, 1},
	} {
		var s Scene
		s.Shapes = append(s.Shapes, Shape{Geometry: g, Transform: &press, Material: flatWhite})
		got := inkedArea(drawFlat(t, &s, 300, 300, 16))
		if want := math.Pi * 1e4; math.Abs(got-want) > 40 {
			t.Errorf("%T pressed flat covers %.0f pixels, want %.0f", g, got, want)
		}
		// Lit, it shows the plane's own brightness, even all over.
		s.Shapes[0].Material = Solid(Color{100, 100, 100})
		m := drawFlat(t, &s, 300, 300, 1)
		l, r := m.RGBAAt(110, 150), m.RGBAAt(210, 150)
		if d := int(l.R) - int(r.R); d < -12 || d > 12 || l.R < 60 {
			t.Errorf("%T pressed flat is shaded %v on one side and %v on the other", g, l, r)
		}
	}
	// Pressed to a line or a point nothing remains.
	for _, m := range []mgl64.Mat3{mgl64.Diag3(mgl64.Vec3{1, 0, 0}), {}} {
		press := Linear(m)
		var s Scene
		s.Shapes = append(s.Shapes, Shape{Geometry: Sphere{Vec3{}, 1}, Transform: &press, Material: flatWhite})
		if got := inkedArea(drawFlat(t, &s, 300, 300, 16)); got > 1 {
			t.Errorf("a ball pressed to less than an area covers %.0f pixels", got)
		}
	}
}

// Just before and just after the middle of a reflection a ball looks as in
// the middle.
func TestNearlyFlatBodiesDoNotJump(t *testing.T) {
	area := func(k float64) float64 {
		press := Linear(mgl64.Rotate3DY(0.5).Mul3(mgl64.Diag3(mgl64.Vec3{1, 1, k})))
		var s Scene
		s.Shapes = append(s.Shapes, Shape{Geometry: Sphere{Vec3{}, 1}, Transform: &press, Material: flatWhite})
		return inkedArea(drawFlat(t, &s, 300, 300, 16))
	}
	want := math.Pi * 1e4 * math.Cos(0.5)
	for _, k := range []float64{1e-3, 1e-5, 1e-7, 1e-9, 0, -1e-9, -1e-7, -1e-5, -1e-3} {
		if got := area(k); math.Abs(got-want) > 60 {
			t.Errorf("thickness %g: area %.0f, want %.0f", k, got, want)
		}
	}
}

// A translucent stack seen straight on has the colour that optics gives.
func TestLayersBlendExactly(t *testing.T) {
	var s Scene
	mat := func(c Color, a float64) Material { return Material{Color: c, Opacity: a, Flat: true} }
	s.Add(Disc{Center: Vec3{0, 0, 1}, Normal: Vec3{0, 0, 1}, Radius: 1}, mat(Color{255, 0, 0}, 0.5))
	s.Add(Sphere{Vec3{}, 0.5}, mat(Color{0, 255, 0}, 0.25))
	s.Add(Disc{Center: Vec3{0, 0, -1}, Normal: Vec3{0, 0, 1}, Radius: 1}, mat(Color{0, 0, 255}, 1))
	m := drawFlat(t, &s, 220, 220, 4)
	// Red takes half, each side of the ball a quarter of what is left, blue
	// the rest.
	left := 0.5 * 0.75 * 0.75
	want := [3]float64{0.5 * 255, (0.5 - left) * 255, left * 255}
	got := m.RGBAAt(110, 110)
	for k, v := range [3]uint8{got.R, got.G, got.B} {
		if math.Abs(float64(v)-want[k]) > 1 {
			t.Errorf("channel %d is %d, want %.1f", k, v, want[k])
		}
	}
}

func TestTransparentGroundKeepsItsAlpha(t *testing.T) {
	for _, l := range looks {
		look := l.look
		look.GroundOpacity = 0
		var s Scene
		s.Add(Sphere{Vec3{}, 0.6}, Solid(RGB(0x0072B2)))
		s.Add(Disc{Center: Vec3{0, 0, -1}, Normal: Vec3{0, 0, 1}, Radius: 1.2}, Material{Color: RGB(0xE69F00), Opacity: 0.5, NoOutline: true, Flat: true})
		m := newImage(300, 300)
		c := Camera{Eye: Vec3{0, 0, 10}, Up: Vec3{0, 1, 0}, Height: 3}
		if err := Draw(context.Background(), m, &s, c, look, Quality{}, Band{}); err != nil {
			t.Fatal(err)
		}
		if a, b, g := m.RGBAAt(150, 150).A, m.RGBAAt(240, 150).A, m.RGBAAt(5, 5); a != 255 || b < 126 || b > 129 || g.A != 0 || g.R != 0 {
			t.Errorf("%s: opacity of a body %d, of a half translucent disc %d, of the ground %v", l.name, a, b, g)
		}
		for i := 0; i < len(m.Pix); i += 4 {
			if a := m.Pix[i+3]; m.Pix[i] > a || m.Pix[i+1] > a || m.Pix[i+2] > a {
				t.Fatalf("%s: a colour above its opacity: %v", l.name, m.Pix[i:i+4])
			}
		}
	}
}

func TestDrawingCanBeCancelled(t *testing.T) {
	s, camera := benchScene(t, "S2")
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	m := newImage(1920, 1080)
	var r Renderer
	if err := r.Draw(ctx, m, s, camera(0), PlainLook(white), Quality{}, Band{}); !errors.Is(err, context.Canceled) {
		t.Errorf("a cancelled drawing returns %v", err)
	}
	if err := r.Draw(context.Background(), m, s, camera(0), PlainLook(white), Quality{}, Band{}); err != nil {
		t.Errorf("after a cancelled drawing: %v", err)
	}
	want := draw(t, s, camera(0), PlainLook(white), 1920, 1080, Quality{})
	if !bytes.Equal(m.Pix, want.Pix) {
		t.Error("after a cancelled drawing the next one differs")
	}
}

func TestSteadyFramesMakeNoGarbage(t *testing.T) {
	s, c := translucentScene(t)
	for _, l := range looks {
		var r Renderer
		m := newImage(320, 240)
		frame := func() {
			if err := r.Draw(context.Background(), m, s, c, l.look, Quality{Workers: 1}, Band{}); err != nil {
				t.Fatal(err)
			}
		}
		frame()
		frame()
		if n := testing.AllocsPerRun(5, frame); n > 0 {
			t.Errorf("%s: %.1f allocations a frame", l.name, n)
		}
	}
}

func TestDrawTellsWhatIsWrong(t *testing.T) {
	good := Orbit(Vec3{}, 5, 0, 0, 0.5)
	m := newImage(10, 10)
	bad := good
	bad.Eye[1] = math.NaN()
	wide := good
	wide.FovY = 4
	for _, c := range []struct {
		name   string
		dst    *image.RGBA
		scene  *Scene
		camera Camera
		look   Look
		band   Band
	}{
		{"no image", nil, &Scene{}, good, Look{}, Band{}},
		{"no scene", m, nil, good, Look{}, Band{}},
		{"eye not a number", m, &Scene{}, bad, Look{}, Band{}},
		{"angle of view", m, &Scene{}, wide, Look{}, Band{}},
		{"band outside", m, &Scene{}, good, Look{}, Band{5, 5}},
		{"picture too large", m, &Scene{}, good, Look{}, Band{20000, 10}},
		{"short image", &image.RGBA{Stride: 40, Rect: image.Rect(0, 0, 10, 10)}, &Scene{}, good, Look{}, Band{}},
		{"tones", m, &Scene{}, good, Look{Style: Ink, Tones: []float64{1, 2}}, Band{}},
	} {
		if err := Draw(context.Background(), c.dst, c.scene, c.camera, c.look, Quality{}, c.band); err == nil {
			t.Errorf("%s: no error", c.name)
		}
	}
}

// Parts of the largest picture agree where they overlap.
func TestLargestPicture(t *testing.T) {
	s, c := translucentScene(t)
	for _, l := range looks {
		q := Quality{Samples: 4, DPI: 1200}
		var parts [2]*image.RGBA
		for k, rect := range []image.Rectangle{image.Rect(9000, 9100, 9220, 9330), image.Rect(9101, 9203, 9301, 9403)} {
			parts[k] = image.NewRGBA(rect)
			if err := Draw(context.Background(), parts[k], s, c, l.look, q, Band{MaxSide, MaxSide}); err != nil {
				t.Fatal(err)
			}
		}
		both := parts[0].Rect.Intersect(parts[1].Rect)
		colors := map[[4]uint8]bool{}
		for y := both.Min.Y; y < both.Max.Y; y++ {
			for x := both.Min.X; x < both.Max.X; x++ {
				a, b := parts[0].RGBAAt(x, y), parts[1].RGBAAt(x, y)
				if a != b {
					t.Fatalf("%s: pixel %d,%d is %v in one part and %v in another", l.name, x, y, a, b)
				}
				colors[[4]uint8{a.R, a.G, a.B, a.A}] = true
			}
		}
		if len(colors) < 3 {
			t.Errorf("%s: the part shows nothing", l.name)
		}
	}
}
