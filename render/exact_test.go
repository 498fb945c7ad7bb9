package render

import (
	"context"
	"image"
	"image/png"
	"os"
	"testing"
)

// The drawing differs from a picture made by casting rays, exact to four
// samples a pixel, in few pixels: those where a sample lies so near an edge
// that rounding decides, or where two translucent layers cross.
func TestPlainLookAgreesWithCastRays(t *testing.T) {
	for _, c := range []struct {
		name string
		most int // pixels whose largest channel difference exceeds 16
	}{{"S1", 200}, {"S2", 500}, {"S3", 700}} {
		s, camera := benchScene(t, c.name)
		got := newImage(1920, 1080)
		if err := Draw(context.Background(), got, s, camera(0), PlainLook(white), Quality{Samples: 4}, Band{}); err != nil {
			t.Fatal(err)
		}
		savePicture(t, c.name, got)
		want := readPicture(t, "../testdata/render/exact-"+c.name+".png")
		off, worst := countDifferent(got, want, 16)
		t.Logf("%s: %d pixels differ by more than 16, the worst by %d", c.name, off, worst)
		if off > c.most {
			t.Errorf("%s: %d pixels differ by more than 16, at most %d may", c.name, off, c.most)
		}
	}
}

func readPicture(t testing.TB, path string) *image.RGBA {
	t.Helper()
	file, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	m, err := png.Decode(file)
	if err != nil {
		t.Fatal(err)
	}
	o := image.NewRGBA(m.Bounds())
	for y := 0; y < o.Rect.Dy(); y++ {
		for x := 0; x < o.Rect.Dx(); x++ {
			o.Set(x, y, m.At(x, y))
		}
	}
	return o
}

// savePicture writes a picture for people to look at when RENDER_PICTURES
// names a folder.
func savePicture(t testing.TB, name string, m image.Image) {
	dir := os.Getenv("RENDER_PICTURES")
	if dir == "" {
		return
	}
	file, err := os.Create(dir + "/" + name + ".png")
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	if err := png.Encode(file, m); err != nil {
		t.Fatal(err)
	}
}

// countDifferent counts the pixels whose largest channel difference exceeds
// limit and returns the largest difference.
func countDifferent(a, b *image.RGBA, limit int) (n, worst int) {
	for i := 0; i < len(a.Pix); i += 4 {
		d := 0
		for k := range 4 {
			d = max(d, int(a.Pix[i+k])-int(b.Pix[i+k]), int(b.Pix[i+k])-int(a.Pix[i+k]))
		}
		if d > limit {
			n++
		}
		worst = max(worst, d)
	}
	return n, worst
}
