package export

import (
	"image"
	"io"
	"testing"
)

// BenchmarkPNG writes a page of 180 × 140 mm at 600 dots per inch.
func BenchmarkPNG(b *testing.B) {
	const w, h = 4252, 3307
	img := image.NewRGBA(image.Rect(0, 0, w, h))
	f := ball(w, h, 1, true)
	if err := f.Paint(b.Context(), 0, img); err != nil {
		b.Fatal(err)
	}
	b.SetBytes(4 * w * h)
	for b.Loop() {
		if err := EncodePNG(io.Discard, img, 600, nil); err != nil {
			b.Fatal(err)
		}
	}
}
