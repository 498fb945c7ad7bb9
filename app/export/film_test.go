package export

import (
	"bytes"
	"context"
	"errors"
	"image"
	"image/color"
	"image/gif"
	"image/png"
	"math"
	"testing"
	"time"
)

// ball is a film of a shaded ball that moves over an even ground.
func ball(w, h, n int, opaque bool) *Film {
	f := &Film{Width: w, Height: h, Opaque: opaque}
	for range n {
		f.Seconds = append(f.Seconds, 0.04)
	}
	f.Paint = func(_ context.Context, k int, dst *image.RGBA) error {
		ground := color.RGBA{252, 251, 248, 255}
		if !opaque {
			ground = color.RGBA{}
		}
		radius := float64(h) / 3
		cx := radius + float64(k)/float64(max(1, n-1))*(float64(w)-2*radius)
		for y := range h {
			for x := range w {
				dx, dy := (float64(x)-cx)/radius, (float64(y)-float64(h)/2)/radius
				c := ground
				if q := dx*dx + dy*dy; q < 1 {
					light := 0.3 + 0.7*max(0, (-0.5*dx-0.6*dy+0.6*math.Sqrt(1-q)))
					c = color.RGBA{0, uint8(120*light + 0.5), uint8(200*light + 0.5), 255}
				}
				dst.SetRGBA(x, y, c)
			}
		}
		return nil
	}
	return f
}

// decodedGIF reads a GIF with the standard library and returns its pictures
// as they are seen.
func decodedGIF(t *testing.T, data []byte) (*gif.GIF, []*image.RGBA) {
	t.Helper()
	g, err := gif.DecodeAll(bytes.NewReader(data))
	if err != nil {
		t.Fatal(err)
	}
	canvas := image.NewRGBA(image.Rect(0, 0, g.Config.Width, g.Config.Height))
	var seen []*image.RGBA
	for i, p := range g.Image {
		for y := p.Rect.Min.Y; y < p.Rect.Max.Y; y++ {
			for x := p.Rect.Min.X; x < p.Rect.Max.X; x++ {
				if _, _, _, a := p.At(x, y).RGBA(); a > 0 {
					canvas.Set(x, y, p.At(x, y))
				}
			}
		}
		now := image.NewRGBA(canvas.Rect)
		copy(now.Pix, canvas.Pix)
		seen = append(seen, now)
		if g.Disposal[i] == gif.DisposalBackground {
			for y := p.Rect.Min.Y; y < p.Rect.Max.Y; y++ {
				for x := p.Rect.Min.X; x < p.Rect.Max.X; x++ {
					canvas.SetRGBA(x, y, color.RGBA{})
				}
			}
		}
	}
	return g, seen
}

func encodeGIF(t *testing.T, f *Film, study []byte) []byte {
	t.Helper()
	var out bytes.Buffer
	if err := f.EncodeGIF(context.Background(), &out, study); err != nil {
		t.Fatal(err)
	}
	return out.Bytes()
}

// TestNoBandsAreSeenInAGIF: averaged over the pattern, every place of a smoothly
// shaded body has its own tone, and single pixels are near it.
func TestNoBandsAreSeenInAGIF(t *testing.T) {
	f := ball(240, 160, 5, true)
	_, seen := decodedGIF(t, encodeGIF(t, f, nil))
	if len(seen) != 5 {
		t.Fatalf("%d pictures", len(seen))
	}
	want := image.NewRGBA(image.Rect(0, 0, f.Width, f.Height))
	for k, got := range seen {
		if err := f.Paint(context.Background(), k, want); err != nil {
			t.Fatal(err)
		}
		worstMean, worstPixel := 0.0, 0.0
		for y := 0; y+4 <= f.Height; y += 4 {
			for x := 0; x+4 <= f.Width; x += 4 {
				var off [3]float64
				edge := false
				for d := range 16 {
					i := want.PixOffset(x+d%4, y+d/4)
					edge = edge || want.Pix[i] != want.Pix[want.PixOffset(x, y)]
					for c := range off {
						o := float64(got.Pix[i+c]) - float64(want.Pix[i+c])
						off[c] += o / 16
						worstPixel = max(worstPixel, math.Abs(o))
					}
				}
				for c := range off {
					if !edge {
						worstMean = max(worstMean, math.Abs(off[c]))
					}
				}
			}
		}
		if worstMean > 1.6 || worstPixel > 12 {
			t.Errorf("picture %d: tones are off by %.2f on the mean, %.0f at a pixel, of 255", k, worstMean, worstPixel)
		}
	}
}

func TestFlatColoursStayFlatInAGIF(t *testing.T) {
	f := ball(120, 80, 3, true)
	_, seen := decodedGIF(t, encodeGIF(t, f, nil))
	for _, at := range []image.Point{{1, 1}, {118, 1}, {60, 78}} {
		if got := seen[0].RGBAAt(at.X, at.Y); got != (color.RGBA{252, 251, 248, 255}) {
			t.Errorf("the ground at %v is %v", at, got)
		}
	}
}

func TestTimesOfAGIFAddUp(t *testing.T) {
	f := ball(60, 40, 7, true)
	for k := range f.Seconds {
		f.Seconds[k] = 1.0 / 30
	}
	g, _ := decodedGIF(t, encodeGIF(t, f, nil))
	sum := 0
	for _, d := range g.Delay {
		sum += d
	}
	if sum != 23 { // 7/30 s
		t.Errorf("%v add up to %d hundredths", g.Delay, sum)
	}
	if g.LoopCount != 0 {
		t.Errorf("loop count %d", g.LoopCount)
	}
	f.Once = true
	if g, _ = decodedGIF(t, encodeGIF(t, f, nil)); g.LoopCount != -1 {
		t.Errorf("a film that plays once has the loop count %d", g.LoopCount)
	}
}

func TestATransparentGIFShowsEachPictureAlone(t *testing.T) {
	f := ball(120, 60, 4, false)
	_, seen := decodedGIF(t, encodeGIF(t, f, nil))
	want := image.NewRGBA(image.Rect(0, 0, f.Width, f.Height))
	for k, got := range seen {
		if err := f.Paint(context.Background(), k, want); err != nil {
			t.Fatal(err)
		}
		for i := 3; i < len(want.Pix); i += 4 {
			if want.Pix[i] != got.Pix[i] {
				t.Fatalf("picture %d, pixel %d: opacity %d instead of %d", k, i/4, got.Pix[i], want.Pix[i])
			}
		}
	}
}

func TestAFilmIsStoppedAndItsErrorsCome(t *testing.T) {
	before := time.Now()
	ctx, cancel := context.WithCancel(context.Background())
	f := ball(60, 40, 1000, true)
	paint := f.Paint
	f.Paint = func(ctx context.Context, k int, dst *image.RGBA) error {
		if k == 3 {
			cancel()
		}
		return paint(ctx, k, dst)
	}
	if err := f.EncodeAPNG(ctx, &bytes.Buffer{}, nil); err != nil && !errors.Is(err, context.Canceled) {
		t.Error(err)
	}
	wanted := errors.New("no picture")
	f.Paint = func(_ context.Context, k int, dst *image.RGBA) error {
		if k > 4 {
			return wanted
		}
		return nil
	}
	if err := f.EncodeAPNG(context.Background(), &bytes.Buffer{}, nil); !errors.Is(err, wanted) {
		t.Error(err)
	}
	full := errors.New("no room")
	if err := ball(60, 40, 9, true).EncodeAPNG(context.Background(), failing{full}, nil); !errors.Is(err, full) {
		t.Error(err)
	}
	if err := ball(60, 40, 9, true).EncodeGIF(context.Background(), failing{full}, nil); !errors.Is(err, full) {
		t.Error(err)
	}
	if time.Since(before) > 20*time.Second {
		t.Error("it does not end soon")
	}
}

type failing struct{ err error }

func (f failing) Write([]byte) (int, error) { return 0, f.err }

func TestTheSameFilmGivesTheSameBytes(t *testing.T) {
	var a, b bytes.Buffer
	for _, out := range []*bytes.Buffer{&a, &b} {
		if err := ball(100, 60, 4, true).EncodeGIF(context.Background(), out, nil); err != nil {
			t.Fatal(err)
		}
		if err := ball(100, 60, 4, true).EncodeAPNG(context.Background(), out, nil); err != nil {
			t.Fatal(err)
		}
	}
	if !bytes.Equal(a.Bytes(), b.Bytes()) {
		t.Error("the bytes differ")
	}
}

// TestAnAPNGBeginsAsAnOrdinaryPNG: readers that know no animation show the
// first picture.
func TestAnAPNGBeginsAsAnOrdinaryPNG(t *testing.T) {
	for _, opaque := range []bool{true, false} {
		f := ball(90, 60, 3, opaque)
		var out bytes.Buffer
		if err := f.EncodeAPNG(context.Background(), &out, []byte(`{"version": 1}`)); err != nil {
			t.Fatal(err)
		}
		img, err := png.Decode(bytes.NewReader(out.Bytes()))
		if err != nil {
			t.Fatal(err)
		}
		want := image.NewRGBA(image.Rect(0, 0, f.Width, f.Height))
		if err := f.Paint(context.Background(), 0, want); err != nil {
			t.Fatal(err)
		}
		for y := range f.Height {
			for x := range f.Width {
				r, g, b, a := img.At(x, y).RGBA()
				if (color.RGBA{uint8(r >> 8), uint8(g >> 8), uint8(b >> 8), uint8(a >> 8)}) != want.RGBAAt(x, y) {
					t.Fatalf("opaque %v: pixel %d, %d differs", opaque, x, y)
				}
			}
		}
	}
}

func TestColoursGoToOklabAndBack(t *testing.T) {
	for _, c := range [][3]uint8{{0, 0, 0}, {255, 255, 255}, {0, 114, 178}, {230, 159, 0}, {255, 0, 0}, {1, 2, 3}} {
		if got := oklabOf(c[0], c[1], c[2]).srgb(); got != c {
			t.Errorf("%v became %v", c, got)
		}
	}
	// White has lightness 1 and no colour; the red of sRGB has (0.628, 0.225,
	// 0.126) (B. Ottosson, 2020; from memory).
	for _, c := range []struct {
		rgb  [3]uint8
		want oklab
	}{{[3]uint8{255, 255, 255}, oklab{1, 0, 0}}, {[3]uint8{255, 0, 0}, oklab{0.628, 0.225, 0.126}}} {
		if got := oklabOf(c.rgb[0], c.rgb[1], c.rgb[2]); got.square(c.want) > 1e-6 {
			t.Errorf("%v is %v, want %v", c.rgb, got, c.want)
		}
	}
}
