package render

import (
	"context"
	"image"
)

// Hit is a surface that is seen at a pixel.
type Hit struct {
	ID    int // of its material
	Shape int // its index in the scene
	// Point is the place of the surface in the scene; of a shape that is
	// fixed to the picture it is 0.
	Point Vec3
}

// Pick returns the nearest surface with an ID at a pixel of a picture of the
// given size. It looks through translucent shapes without an ID and not
// through opaque ones. Only the number of pixels an inch is read of quality.
func Pick(scene *Scene, camera Camera, quality Quality, width, height, x, y int) (Hit, bool) {
	var r Renderer
	return r.Pick(scene, camera, quality, width, height, x, y)
}

// Pick does what the function Pick does, with the Renderer's buffers.
func (r *Renderer) Pick(scene *Scene, camera Camera, quality Quality, width, height, x, y int) (Hit, bool) {
	at := image.Rect(x, y, x+1, y+1)
	if scene == nil || camera.check() != nil || width > MaxSide || height > MaxSide || !at.In(image.Rect(0, 0, width, height)) {
		return Hit{}, false
	}
	quality.Samples, quality.Workers = 1, 1
	r.begin(context.Background(), at, width, height, camera, Look{}, quality)
	f := &r.frame
	f.dst, f.apron = nil, 0
	r.build(scene)
	t := &r.workers[0].tile
	t.begin(f, at)
	t.see(f.listed[f.heads[0]:f.heads[1]])
	i := (y-t.y)*t.side + x - t.x
	found, best := int32(-1), float32(0)
	if s := uint32(t.keys[i]); s != 0 {
		found = t.slots[s].part
		best, _, _ = t.plane(s, float32(x-t.x)+0.5, float32(y-t.y)+0.5)
	}
	if found >= 0 && scene.Shapes[f.parts[found].shape].Material.ID == 0 {
		found = -1
	}
	for _, k := range t.pileAt(x-t.x, y-t.y) {
		fr := &t.strips[k]
		_, lane := t.groupOf(x-t.x, y-t.y)
		if fr.mask[lane] == 0 || fr.part < 0 || scene.Shapes[f.parts[fr.part].shape].Material.ID == 0 {
			continue
		}
		if n := fr.n[lane]; found < 0 || n >= best {
			found, best = fr.part, n
		}
	}
	if found < 0 {
		return Hit{}, false
	}
	shape := int(f.parts[found].shape)
	h := Hit{ID: scene.Shapes[shape].Material.ID, Shape: shape}
	if f.parts[found].proj == 0 {
		h.Point = f.projs[0].unproject(float64(x)+0.5, float64(y)+0.5, float64(best))
	}
	return h, true
}

// unproject returns the point of the scene at a pixel place and nearness.
func (p *projection) unproject(x, y, n float64) Vec3 {
	a, b := (x-p.cx)/p.f, (p.cy-y)/p.f
	q := Vec3{a, b, 0}
	if p.persp {
		q = Vec3{a / n, b / n, -1 / n}
	} else {
		q[2] = (n - p.k0) / p.k1
	}
	return p.lin.Transpose().Mul3x1(q.Sub(p.shift))
}
