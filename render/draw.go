package render

import (
	"context"
	"errors"
	"fmt"
	"image"
)

// MaxSide is the largest width and height of a picture in pixels.
const MaxSide = 16384

// Band says of which picture the destination is a part. Width and Height are
// the size of the whole picture in pixels; the destination's Rect is then the
// part to draw, in a picture whose upper left pixel is (0, 0). The zero Band
// makes the destination the whole picture, wherever its Rect lies.
type Band struct {
	Width, Height int
}

// Draw draws the scene into dst. It reads scene and writes dst only. The
// error is ctx's when drawing was cancelled, in which case dst is filled in
// parts; otherwise it tells what is wrong with dst, band, camera or quality.
// Shapes that make no sense (a radius that is not a number, a triangle with a
// vertex that does not exist) are left out and are no error.
func Draw(ctx context.Context, dst *image.RGBA, scene *Scene, camera Camera, look Look, quality Quality, band Band) error {
	var r Renderer
	return r.Draw(ctx, dst, scene, camera, look, quality, band)
}

// checkDraw returns the rectangle of dst within the whole picture and the
// size of the whole picture.
func checkDraw(dst *image.RGBA, scene *Scene, camera Camera, band Band) (image.Rectangle, error) {
	if dst == nil {
		return image.Rectangle{}, errors.New("draw: no image to draw into")
	}
	if scene == nil {
		return image.Rectangle{}, errors.New("draw: no scene")
	}
	rect := dst.Rect
	w, h := band.Width, band.Height
	if w == 0 && h == 0 {
		w, h = rect.Dx(), rect.Dy()
		rect = rect.Sub(rect.Min)
	}
	if w < 0 || h < 0 || w > MaxSide || h > MaxSide {
		return rect, fmt.Errorf("draw: a picture of %d × %d pixels: each side must be from 0 to %d", w, h, MaxSide)
	}
	if !rect.In(image.Rect(0, 0, w, h)) {
		return rect, fmt.Errorf("draw: the band %v is not a part of a picture of %d × %d pixels", rect, w, h)
	}
	if !rect.Empty() {
		need := dst.PixOffset(dst.Rect.Max.X-1, dst.Rect.Max.Y-1) + 4
		if dst.Stride < 4*rect.Dx() || len(dst.Pix) < need {
			return rect, errors.New("draw: the image is smaller than its rectangle says")
		}
	}
	return rect, camera.check()
}

func (c Camera) check() error {
	for _, v := range []struct {
		name string
		v    Vec3
	}{{"eye", c.Eye}, {"target", c.Target}, {"up", c.Up}} {
		if !finite3(v.v) {
			return fmt.Errorf("camera: %s is not a finite point", v.name)
		}
	}
	if c.Height == 0 && !(c.FovY > 0 && c.FovY < 3.14) {
		return fmt.Errorf("camera: angle of view %g: it must lie between 0 and π", c.FovY)
	}
	if !(c.Height >= 0 && c.Height < 1e30) {
		return fmt.Errorf("camera: height %g must not be negative", c.Height)
	}
	return nil
}
