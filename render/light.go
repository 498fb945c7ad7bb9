package render

import (
	"errors"
	"math"
)

// light is a look's lights, ready for use.
type light struct {
	style         Style
	kx, ky, kz    float32 // to the key light
	fx, fy, fz    float32
	ambient       float32
	diffuse, fill float32
	specular      float32
	shine         int
	line          [3]float32
	tones         [8]float32
	edges         [8]float32
	nTones        int
	soft          float32 // pixels
	shade         float32
	invF, cx, cy  float32
	persp         bool
}

// check tells what is wrong with a look.
func (l *Look) check() error {
	for _, v := range []float64{l.Ambient, l.Diffuse, l.FillPart, l.Specular, l.Shininess, l.Shade, l.OutlineWidth, l.ToneSoft, l.GroundOpacity} {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return errors.New("look: a number that is not finite")
		}
	}
	if len(l.Tones) > 8 {
		return errors.New("look: more than 8 tones")
	}
	if l.Style == Ink && len(l.Tones) > 0 && len(l.ToneEdges) != len(l.Tones)-1 {
		return errors.New("look: there must be one tone more than tone edges")
	}
	return nil
}

// setLight readies the lights and the ground.
func (f *frame) setLight() {
	l, o := &f.look, &f.light
	key, fill := unit(l.Key, Vec3{0, 0, 1}), unit(l.Fill, Vec3{0, 0, 1})
	*o = light{
		style: l.Style,
		kx:    float32(key[0]), ky: float32(key[1]), kz: float32(key[2]),
		fx: float32(fill[0]), fy: float32(fill[1]), fz: float32(fill[2]),
		ambient: float32(l.Ambient), diffuse: float32(l.Diffuse), fill: float32(l.FillPart),
		specular: float32(l.Specular), shine: int(math.Max(1, math.Min(1e4, l.Shininess+0.5))),
		line: f.tone(l.Line), nTones: len(l.Tones), soft: float32(l.ToneSoft * f.pxPerMM),
		shade: float32(l.Shade),
	}
	for i, v := range l.Tones {
		o.tones[i] = float32(v)
	}
	for i, v := range l.ToneEdges {
		o.edges[i] = float32(v)
	}
	if o.nTones == 0 {
		o.nTones, o.tones[0] = 1, 1
	}
	g := f.tone(l.Ground)
	f.ground = [4]float32{g[0], g[1], g[2], float32(math.Max(0, math.Min(1, l.GroundOpacity)))}
	p := sceneProjection(f.camera, f.w, f.h, 1)
	o.persp, o.invF, o.cx, o.cy = p.persp, float32(1/p.f), float32(p.cx), float32(p.cy)
}

// sight holds what shading needs of a pixel: the unit vector to the eye and
// the unit vector half way to the key light.
type sight struct {
	vx, vy, vz float32
	hx, hy, hz float32
}

// sightAt returns the sight of a place of the whole picture.
func (l *light) sightAt(x, y float32, s *sight) {
	s.vx, s.vy, s.vz = 0, 0, 1
	if l.persp {
		a, b := (l.cx-x)*l.invF, (y-l.cy)*l.invF
		k := 1 / float32(math.Sqrt(float64(a*a+b*b+1)))
		s.vx, s.vy, s.vz = a*k, b*k, k
	}
	hx, hy, hz := l.kx+s.vx, l.ky+s.vy, l.kz+s.vz
	k := 1 / float32(math.Sqrt(float64(hx*hx+hy*hy+hz*hz)+1e-12))
	s.hx, s.hy, s.hz = hx*k, hy*k, hz*k
}

// power returns x to a whole power.
func power(x float32, n int) float32 {
	r := float32(1)
	for {
		if n&1 != 0 {
			r *= x
		}
		n >>= 1
		if n == 0 {
			return r
		}
		x *= x
	}
}

// shadePlace returns the colour of a slot's surface at a place of the canvas.
func (t *tile) shadePlace(k uint32, x, y float32, s *sight) (r, g, b float32) {
	o := t.lookAt(k, x, y)
	p := o.part
	r, g, b = p.col[0], p.col[1], p.col[2]
	if p.hatch.period > 0 {
		if w := t.hatching(k, o, x, y); w > 0 {
			h := &p.hatch.col
			r, g, b = r+(h[0]-r)*w, g+(h[1]-g)*w, b+(h[2]-b)*w
			o.part = p
		}
	}
	if p.flat {
		return r, g, b
	}
	l := &t.f.light
	nx, ny, nz := o.x, o.y, o.z
	turn := nx*s.vx+ny*s.vy+nz*s.vz < 0
	if o.outward && l.style != Plain {
		turn = !o.facing
	}
	q := nx*nx + ny*ny + nz*nz
	if !(q > 0) {
		nx, ny, nz, q, turn = s.vx, s.vy, s.vz, 1, false
	}
	inv := 1 / float32(math.Sqrt(float64(q)))
	if turn {
		inv = -inv
	}
	nl := (nx*l.kx + ny*l.ky + nz*l.kz) * inv
	switch l.style {
	case Ink:
		m := t.tone(k, nl, x, y, s)
		return r * m, g * m, b * m
	case Lit:
		return t.lit(o, r, g, b, nx*inv, ny*inv, nz*inv, nl, x, y, s)
	}
	d := l.ambient
	if nl > 0 {
		d += l.diffuse * nl
	}
	r, g, b = r*d, g*d, b*d
	if nh := (nx*s.hx + ny*s.hy + nz*s.hz) * inv; nh > 0.5 {
		h := l.specular * power(nh, l.shine)
		r, g, b = r+h, g+h, b+h
	}
	return r, g, b
}
