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
	var slot uint32
	if s := uint32(t.keys[i]); s != 0 {
		found = t.slots[s].part
		best, _, _ = t.plane(s, float32(x-t.x)+0.5, float32(y-t.y)+0.5)
		slot = s
	}
	if found >= 0 && scene.Shapes[f.parts[found].shape].Material.ID == 0 {
		found = -1
	}
	if t.anyFrag || len(t.wides) > 0 {
		t.layWides(i, i%t.side, i/t.side, true)
		for k := t.first[i]; k >= 0; k = t.frags[k].next {
			fr := &t.frags[k]
			p := t.slots[fr.slot].part
			if p < 0 || scene.Shapes[f.parts[p].shape].Material.ID == 0 {
				continue
			}
			if found < 0 || fr.n > best {
				found, best, slot = p, fr.n, fr.slot
			}
		}
	}
	if found < 0 {
		return Hit{}, false
	}
	_ = slot
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
