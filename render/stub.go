package render

import "image"

type ink struct{}
type inkTile struct{}
type shades struct{}

func (f *frame) inkApron() int                                    { return 0 }
func (t *tile) drawInk(out image.Rectangle)                       {}
func (r *Renderer) shadesOf()                                     {}
func (t *tile) hatching(k uint32, o *surf, x, y float32) float32  { return 0 }
func (t *tile) tone(k uint32, nl, x, y float32, s *sight) float32 { return 1 }
func (t *tile) lit(o *surf, r, g, b, nx, ny, nz, nl, x, y float32, s *sight) (float32, float32, float32) {
	return r, g, b
}
