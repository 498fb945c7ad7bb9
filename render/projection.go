package render

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
)

// projection takes points of the scene to the picture. Camera space has x to
// the right, y up and z to the viewer. A pixel place is measured in the whole
// picture, x right, y down; nearness n grows towards the viewer, is positive
// and changes linearly along straight lines of the picture: 1/distance in
// perspective, k0 + k1·z without.
type projection struct {
	persp      bool
	lin        mgl64.Mat3
	shift      Vec3
	f, cx, cy  float64 // pixels per unit (at distance 1 in perspective), centre
	k0, k1     float64
	nMin, nMax float64 // far and near limit
}

// sceneProjection returns the projection of the camera for a picture of w × h
// pixels. reach is the largest distance of anything in the scene from the
// target.
func sceneProjection(c Camera, w, h int, reach float64) projection {
	p := projection{lin: c.Rotation(), cx: float64(w) / 2, cy: float64(h) / 2}
	p.shift = p.lin.Mul3x1(c.Eye).Mul(-1)
	dist := c.Eye.Sub(c.Target).Len()
	near, far := c.Near, c.Far
	if c.Height == 0 {
		p.persp = true
		p.f = float64(h) / 2 / math.Tan(c.FovY/2)
		if !(near > 0) {
			near = 0.002 * dist
			if near == 0 {
				near = 1e-3
			}
		}
		p.nMax = 1 / near
		if far > near {
			p.nMin = 1 / far
		}
		return p
	}
	p.f = float64(h) / c.Height
	if !(far > near) {
		near, far = dist-reach, dist+reach
	}
	pad := 1e-3*(far-near) + 1e-9
	near, far = near-pad, far+pad
	// n runs from 1 at far to 2 at near.
	p.k1 = 1 / (far - near)
	p.k0 = 1 + far*p.k1
	p.nMin, p.nMax = 1, 2
	return p
}

// placeProjection returns the projection of a shape that is fixed to the
// picture; above is the largest nearness in the scene.
func placeProjection(pl *Place, rot mgl64.Mat3, w, h int, pxPerMM, above float64) projection {
	unit := pl.Unit
	if unit == 0 {
		unit = 1
	}
	scale := unit * pxPerMM
	if pl.Share != 0 {
		scale = pl.Share * float64(min(w, h))
	}
	p := projection{lin: mgl64.Ident3(), f: 1}
	if pl.Turn {
		p.lin = rot
	}
	p.lin = p.lin.Mul(scale)
	p.cx = pl.X*float64(w) + pl.OffsetX*pxPerMM
	p.cy = (1-pl.Y)*float64(h) - pl.OffsetY*pxPerMM
	p.k1 = above / (4 * MaxSide)
	p.k0 = 3 * above
	p.nMin, p.nMax = 2*above, 4*above
	return p
}

// toCamera returns the map from a shape's own space to camera space.
func (p *projection) toCamera(t *Affine) Affine {
	a := Affine{p.lin, p.shift}
	if t != nil {
		a = a.After(*t)
	}
	return a
}

// point projects a point of camera space; n is not positive when it is not
// in front of the near limit.
func (p *projection) point(q Vec3) (x, y, n float64) {
	if !p.persp {
		return p.cx + p.f*q[0], p.cy - p.f*q[1], p.k0 + p.k1*q[2]
	}
	n = -1 / q[2]
	if !(n > 0) || n > p.nMax {
		return 0, 0, -1
	}
	return p.cx + p.f*q[0]*n, p.cy - p.f*q[1]*n, n
}

// box is a rectangle of pixel places.
type box struct{ x0, y0, x1, y1 float64 }

var everywhere = box{-1e9, -1e9, 1e9, 1e9}

// boxOf bounds the picture of a box of camera space.
func (p *projection) boxOf(lo, hi Vec3) box {
	if !p.persp {
		return box{p.cx + p.f*lo[0], p.cy - p.f*hi[1], p.cx + p.f*hi[0], p.cy - p.f*lo[1]}
	}
	wNear, wFar := -hi[2], -lo[2]
	if wNear*p.nMax < 1 {
		if wFar*p.nMax < 1 {
			return box{1, 1, 0, 0}
		}
		return everywhere
	}
	span := func(l, h float64) (float64, float64) {
		return math.Min(l/wNear, l/wFar), math.Max(h/wNear, h/wFar)
	}
	l, r := span(lo[0], hi[0])
	d, u := span(lo[1], hi[1])
	return box{p.cx + p.f*l, p.cy - p.f*u, p.cx + p.f*r, p.cy - p.f*d}
}
