package sheet

import (
	"bytes"
	"context"
	"image"
	"image/color"
	"math"
	"testing"

	"lobewright/render"
)

var (
	white = color.NRGBA{255, 255, 255, 255}
	black = color.NRGBA{0, 0, 0, 255}
	red   = color.NRGBA{255, 0, 0, 255}
)

// sampleSheet has one item of every kind.
func sampleSheet() *Sheet {
	ball := &Panel{Rect: Rect{10, 5, 20, 20}, Look: render.LitLook(render.Color{R: 255, G: 255, B: 255}), Camera: render.Camera{
		Eye: render.Vec3{0, 0, 10}, Up: render.Vec3{0, 1, 0}, Height: 4,
	}}
	ball.Scene.Add(render.Sphere{Radius: 1}, render.Solid(render.Color{R: 0, G: 90, B: 200}))
	return &Sheet{Width: 60, Height: 40, Ground: white, Items: []Item{
		ball,
		Line{Points: [][2]float64{{35, 5}, {55, 5}}, Width: 1, Color: black},
		Line{Points: [][2]float64{{35, 8}, {55, 8}}, Width: 0.5, Dash: []float64{4, 4}, Color: black},
		Polygon{Points: [][2]float64{{35, 12}, {45, 12}, {45, 22}}, Color: red},
		Disc{X: 50, Y: 18, Radius: 3, Color: red, Edge: black, EdgeWidth: 0.5},
		Text{X: 5, Y: 35, Runs: []render.Run{{Text: "a"}, {Text: "1g", Script: render.Sub}, {Text: " ½ √3 φ′", Italic: true}},
			Size: 12, Color: black, Halo: 0.5, HaloColor: red},
	}}
}

func paint(t *testing.T, s *Sheet, dpi float64) *image.RGBA {
	t.Helper()
	img, err := s.Paint(context.Background(), dpi)
	if err != nil {
		t.Fatal(err)
	}
	return img
}

func TestBandsFitTogetherWithoutASeam(t *testing.T) {
	s := sampleSheet()
	whole := paint(t, s, 150)
	again := image.NewRGBA(whole.Rect)
	for y := 0; y < whole.Rect.Dy(); y += 37 {
		band := image.NewRGBA(image.Rect(0, y, whole.Rect.Dx(), min(y+37, whole.Rect.Dy())))
		if err := s.PaintBand(context.Background(), band, 150); err != nil {
			t.Fatal(err)
		}
		copy(again.Pix[again.PixOffset(0, y):], band.Pix)
	}
	if !bytes.Equal(whole.Pix, again.Pix) {
		t.Error("the picture painted in bands differs from the one painted at once")
	}
}

func TestItemsAreOfTheirSize(t *testing.T) {
	const dpi = 254 // 10 pixels a millimetre
	img := paint(t, sampleSheet(), dpi)
	at := func(x, y float64) color.RGBA { return img.RGBAAt(int(x*10), int(y*10)) }
	for _, c := range []struct {
		what string
		x, y float64
		dark bool // less than half of red
	}{
		{"within the line", 45, 4.6, true}, {"below the line", 45, 5.7, false},
		{"the first dash", 37, 8, true}, {"the first gap", 41, 8, false}, {"the second dash", 45, 8, true},
		{"the edge of the disc", 53, 18, true}, {"within the disc", 50, 18, false}, {"the ball", 18, 17, true},
		{"beside the ball", 11, 6, false},
	} {
		if got := at(c.x, c.y).R < 128; got != c.dark {
			t.Errorf("%s: %v", c.what, at(c.x, c.y))
		}
	}
	// The ball of radius 1 Å in a picture 4 Å tall of 20 mm is 10 mm wide.
	wide := 0
	for x := 100; x < 300; x++ {
		if img.RGBAAt(x, 150) != (color.RGBA{255, 255, 255, 255}) {
			wide++
		}
	}
	if math.Abs(float64(wide)-100) > 2 {
		t.Errorf("the ball is %d pixels wide, want 100", wide)
	}
}

func TestTypeStaysInItsBoxWithItsHalo(t *testing.T) {
	s := sampleSheet()
	fonts, err := s.Fonts()
	if err != nil {
		t.Fatal(err)
	}
	only := &Sheet{Width: s.Width, Height: s.Height, Ground: white, Items: s.Items[len(s.Items)-1:]}
	text := only.Items[0].(Text)
	const dpi = 254
	img := paint(t, only, dpi)
	box, slack := Box(text, fonts), 0.4
	inked := 0
	for y := range img.Rect.Dy() {
		for x := range img.Rect.Dx() {
			if img.RGBAAt(x, y) == (color.RGBA{255, 255, 255, 255}) {
				continue
			}
			inked++
			px, py := float64(x)/10, float64(y)/10
			if px < box.X-text.Halo-slack || px > box.X+box.W+text.Halo+slack || py < box.Y-text.Halo-slack || py > box.Y+box.H+text.Halo+slack {
				t.Fatalf("ink at %.1f, %.1f outside of %v", px, py, box)
			}
		}
	}
	if inked < 2000 {
		t.Errorf("only %d pixels of type", inked)
	}
}

func TestACancelledSheetIsNotPainted(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := sampleSheet().Paint(ctx, 100); err == nil {
		t.Error("painted all the same")
	}
}

func TestSizesThatNoPictureMayHaveAreRefused(t *testing.T) {
	for _, dpi := range []float64{0, -1, math.NaN(), 1e9} {
		if _, err := sampleSheet().Paint(context.Background(), dpi); err == nil {
			t.Errorf("%g dots per inch: no error", dpi)
		}
	}
}
