//go:build cgo && !nowindow

package window

import (
	"bytes"
	"image"
	"image/color"
	"math/rand/v2"
	"testing"

	"lobewright/app/notation"
	"lobewright/assets"
	"lobewright/render"
)

// Boards that come one after the other on one image look as if each were
// painted on a new one.
func TestAPaneThatIsPaintedInPartsLooksLikeAWholeOne(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	words := []string{"C4(z)", "4(φ1 − φ3)", "off by 0.004 Å", "gypsy", "Eu", "ß"}
	colours := []color.NRGBA{{A: 0xFF}, {R: 0xC0, G: 0x20, A: 0xFF}, {B: 0x80, A: 0x40}}
	type item struct {
		kind, which int
		x, y, w, h  float64
		size, align float64
		img         *image.RGBA
	}
	random := func(w, h float64) item {
		i := item{kind: r.IntN(5), which: r.IntN(3), x: w * r.Float64(), y: h * r.Float64(), w: 80 * r.Float64(), h: 60 * r.Float64()}
		i.size, i.align = 8+14*r.Float64(), float64(r.IntN(3)-1)
		i.img = image.NewRGBA(image.Rect(0, 0, 1+r.IntN(40), 1+r.IntN(40)))
		for k := range i.img.Pix {
			i.img.Pix[k] = uint8(r.IntN(256)) | 0x80*uint8(k%4/3)
		}
		return i
	}
	for round := range 12 {
		w, h := 60+r.IntN(400), 40+r.IntN(300)
		scale := []float64{1, 1.3, 2}[round%3]
		bw, bh := float64(w)/scale, float64(h)/scale
		items := make([]item, 12)
		for i := range items {
			items[i] = random(bw, bh)
		}
		one := image.NewRGBA(image.Rect(0, 0, w, h))
		var painted painting
		var renderer render.Renderer
		for step := range 12 {
			switch r.IntN(5) {
			case 0: // nothing
			case 1:
				items = append(items, random(bw, bh))
			case 2:
				k := r.IntN(len(items))
				items = append(items[:k:k], items[k+1:]...)
			case 3:
				items[r.IntN(len(items))] = random(bw, bh)
			case 4: // one comes to lie over the other
				a, b := r.IntN(len(items)), r.IntN(len(items))
				items[a], items[b] = items[b], items[a]
			}
			palette := assets.Light()
			if step > 9 {
				palette = assets.Dark()
			}
			b := newBoard(bw, bh, palette)
			for _, i := range items {
				switch i.kind {
				case 0:
					b.fill(i.x, i.y, i.w, i.h, colours[i.which])
				case 1:
					b.frame(i.x, i.y, i.w, i.h, 1+i.size/10, colours[i.which])
				case 2:
					b.image(i.x, i.y, i.img)
				default:
					s := style{size: i.size, align: i.align, color: colours[i.which], bold: i.which == 1}
					b.text(i.x, i.y, notation.Words(words[int(i.w)%len(words)]), s)
				}
			}
			if err := painted.paint(b, &renderer, one, scale); err != nil {
				t.Fatal(err)
			}
			whole := image.NewRGBA(one.Rect)
			if err := new(painting).paint(b, new(render.Renderer), whole, scale); err != nil {
				t.Fatal(err)
			}
			if !bytes.Equal(one.Pix, whole.Pix) {
				n := 0
				for k := range one.Pix {
					if one.Pix[k] != whole.Pix[k] {
						n++
					}
				}
				t.Fatalf("round %d, step %d: %d of %d bytes differ", round, step, n, len(one.Pix))
			}
		}
	}
}

// What does not differ is not painted.
func TestOnlyWhatDiffersIsPainted(t *testing.T) {
	const w, h = 1280, 140
	sums := func(fill func(b *board)) []uint64 {
		b := newBoard(w, h, assets.Light())
		for x := 0.0; x < w; x += 50 {
			b.text(x, 60, notation.Words("C4"), style{size: 13, align: -1})
		}
		fill(b)
		return b.tileSums(w, h, 1)
	}
	plain := sums(func(*board) {})
	if again := differing(plain, sums(func(*board) {}), w, h); len(again) != 0 {
		t.Errorf("the same board is painted at %v", again)
	}
	marked := func(at float64) []uint64 {
		return sums(func(b *board) { b.fill(at, 20, 44, 112, color.NRGBA{A: 0xFF}) })
	}
	parts := differing(marked(200), marked(900), w, h)
	area := 0
	for _, p := range parts {
		area += p.Dx() * p.Dy()
	}
	if len(parts) != 2 || area > w*h/5 {
		t.Errorf("two columns that change are painted at %v", parts)
	}
}
