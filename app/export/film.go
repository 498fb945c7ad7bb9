package export

import (
	"context"
	"image"
	"math"

	"lobewright/app/picture"
	"lobewright/render"
)

// A Film is a row of pictures of one size.
type Film struct {
	Width, Height int
	// Seconds says how long each picture stays.
	Seconds []float64
	// Once says that it ends where others begin again.
	Once bool
	// Opaque says that no pixel is transparent.
	Opaque bool
	// Paint paints a picture, counted from 0. It is called by one goroutine at
	// a time.
	Paint func(ctx context.Context, k int, dst *image.RGBA) error
}

// FilmOf is the film of an operation that is played.
func FilmOf(m *picture.Movie) *Film {
	f := &Film{Width: m.Width, Height: m.Height, Once: m.Once, Opaque: m.Opaque()}
	for _, s := range m.Stills {
		f.Seconds = append(f.Seconds, s.Seconds)
	}
	var renderer render.Renderer
	f.Paint = func(ctx context.Context, k int, dst *image.RGBA) error {
		frame, err := m.Frame(k)
		if err != nil {
			return err
		}
		return renderer.Draw(ctx, dst, &frame.Scene, frame.Camera, frame.Look, frame.Quality, render.Band{})
	}
	return f
}

// each hands the pictures in their order to use, while the next one is painted.
// What is handed over is lent until use returns.
func (f *Film) each(ctx context.Context, use func(k int, img *image.RGBA) error) error {
	ctx, cancel := context.WithCancel(ctx)
	defer cancel()
	type painted struct {
		img *image.RGBA
		err error
	}
	ready := make(chan painted)
	// Three: one is painted, one waits, one is used.
	free := make(chan *image.RGBA, 3)
	for range cap(free) {
		free <- image.NewRGBA(image.Rect(0, 0, f.Width, f.Height))
	}
	go func() {
		defer close(ready)
		for k := range f.Seconds {
			var img *image.RGBA
			select {
			case img = <-free:
			case <-ctx.Done():
				return
			}
			err := f.Paint(ctx, k, img)
			select {
			case ready <- painted{img, err}:
			case <-ctx.Done():
				return
			}
			if err != nil {
				return
			}
		}
	}()
	defer func() {
		cancel()
		for range ready { // the painter has ended when we return
		}
	}()
	for k := range f.Seconds {
		p, ok := <-ready
		if !ok {
			return ctx.Err()
		}
		if p.err != nil {
			return p.err
		}
		if err := use(k, p.img); err != nil {
			return err
		}
		free <- p.img
	}
	return nil
}

// ticks are the times of the pictures in whole parts of a second, rounded so
// that no error adds up, each one at the least.
func (f *Film) ticks(perSecond float64) []int {
	out := make([]int, len(f.Seconds))
	end, told := 0.0, 0
	for k, s := range f.Seconds {
		end += s * perSecond
		out[k] = max(1, int(math.Round(end))-told)
		told += out[k]
	}
	return out
}

// changed is the smallest rectangle that holds every pixel in which two
// pictures of one size differ.
func changed(a, b *image.RGBA) image.Rectangle {
	w := a.Rect.Dx()
	return differing(w, a.Rect.Dy(), func(x, y int) bool {
		i := y*a.Stride + 4*x
		return *(*[4]byte)(a.Pix[i:]) != *(*[4]byte)(b.Pix[i:])
	})
}

// differing is the smallest rectangle that holds every place for which differs
// is true.
func differing(w, h int, differs func(x, y int) bool) image.Rectangle {
	r := image.Rect(w, h, 0, 0)
	for y := range h {
		x := 0
		for x < w && !differs(x, y) {
			x++
		}
		if x == w {
			continue
		}
		last := w - 1
		for !differs(last, y) {
			last--
		}
		r.Min.X, r.Max.X = min(r.Min.X, x), max(r.Max.X, last+1)
		r.Min.Y, r.Max.Y = min(r.Min.Y, y), y+1
	}
	if r.Min.X >= r.Max.X {
		return image.Rectangle{}
	}
	return r
}
