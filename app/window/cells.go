//go:build cgo && !nowindow

package window

import (
	"context"
	"image"
	"image/draw"
	"slices"

	"lobewright/app/picture"
	"lobewright/app/work"
	"lobewright/render"
)

// A drawnCell is one of the pictures of a frame, with its place on the image.
type drawnCell struct {
	frame *picture.Frame
	at    image.Rectangle
}

// A drawer draws the pictures of a frame one after the other. It keeps the places
// of labels and an image from frame to frame.
type drawer struct {
	group    *work.Group // of the last frame
	basis    *work.Basis
	lives    []*picture.Live
	renderer render.Renderer
	image    *image.RGBA // of one of several pictures
}

// gutter is the width in pixels of the line between two pictures.
const gutter = 1

// cellsOf divides an image among n pictures of equal size, rows from the top,
// in as many columns as make their short sides longest.
func cellsOf(n, width, height int) []image.Rectangle {
	columns, best := 1, 0
	for c := 1; c <= n; c++ {
		rows := (n + c - 1) / c
		if side := min(width/c, height/rows); side > best {
			columns, best = c, side
		}
	}
	rows := (n + columns - 1) / columns
	out := make([]image.Rectangle, n)
	for i := range out {
		c, r := i%columns, i/columns
		out[i] = image.Rect(c*width/columns, r*height/rows, (c+1)*width/columns, (r+1)*height/rows)
		if c > 0 {
			out[i].Min.X += gutter
		}
		if r > 0 {
			out[i].Min.Y += gutter
		}
	}
	return out
}

// draw draws the pictures of a request.
func (w *drawer) draw(ctx context.Context, d *drawn, r request, quick bool) error {
	n := 1 + len(r.beside)
	for len(w.lives) < n {
		w.lives = append(w.lives, new(picture.Live))
	}
	if w.group != r.shown.Group || w.basis != r.shown.Basis {
		w.group, w.basis = r.shown.Group, r.shown.Basis
		w.renderer.Forget() // the buffers were those of another scene
	}
	if !quick {
		w.lives = slices.Delete(w.lives, n, len(w.lives)) // at rest, so none of them is wanted again at once
		if n == 1 {
			w.image = nil
		}
	}
	d.cells = make([]drawnCell, 0, n)
	if n > 1 && r.shown.Palette != nil {
		// A line between the pictures; bare ground where there is none.
		draw.Draw(d.image, d.image.Rect, image.NewUniform(r.shown.Palette.Rule), image.Point{}, draw.Src)
		last := cellsOf(n, r.width, r.height)[n-1]
		blank := image.Rect(last.Max.X+gutter, last.Min.Y, r.width, last.Max.Y)
		draw.Draw(d.image, blank, image.NewUniform(r.shown.Palette.Ground), image.Point{}, draw.Src)
	}
	lines := 0 // of the headings; a picture by itself keeps its place
	if n > 1 {
		lines = len(r.shown.Notes)
	}
	for _, shown := range r.beside {
		lines = max(lines, len(shown.Notes))
	}
	for i, at := range cellsOf(n, r.width, r.height) {
		if at.Dx() < 2 || at.Dy() < 2 {
			continue
		}
		shown := r.shown
		if i > 0 {
			shown = r.beside[i-1]
		}
		sight := r.sight.Below(picture.NotesBand(lines, r.dpi), at.Dx(), at.Dy())
		frame, err := w.lives[i].Frame(shown, sight, at.Dx(), at.Dy(), r.dpi, quick)
		if err != nil {
			return err
		}
		into := d.image
		if n > 1 {
			if w.image == nil || w.image.Rect.Dx() != at.Dx() || w.image.Rect.Dy() != at.Dy() {
				w.image = image.NewRGBA(image.Rect(0, 0, at.Dx(), at.Dy()))
			}
			into = w.image
		}
		if err := w.renderer.Draw(ctx, into, &frame.Scene, frame.Camera, frame.Look, frame.Quality, render.Band{}); err != nil {
			return err
		}
		if n > 1 {
			draw.Draw(d.image, at, into, image.Point{}, draw.Src)
		}
		d.cells = append(d.cells, drawnCell{frame, at})
	}
	return nil
}

// A place is a point of the picture in pixels.
type place struct{ x, y float64 }

// cellAt is the middle of the picture that holds a point, in pixels; of the
// first one outside of all.
func (v *viewport) cellAt(x, y float64) place {
	cells := cellsOf(1+len(v.beside), v.width, v.height)
	at := cells[0]
	for _, c := range cells {
		if (image.Point{X: int(x), Y: int(y)}).In(c) {
			at = c
		}
	}
	return place{float64(at.Min.X+at.Max.X) / 2, float64(at.Min.Y+at.Max.Y) / 2}
}

// perPixel is the length of a pixel at the middle of a picture, in Å.
func (v *viewport) perPixel() float64 {
	c := cellsOf(1+len(v.beside), v.width, v.height)[0]
	return v.sight.PerPixel(c.Dx(), c.Dy())
}
