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
	glint         float32 // cosine below which the highlight is not seen
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
	// Where the highlight is weaker than a quarter of a step of 1/255.
	o.glint = float32(math.Pow(0.001/math.Max(l.Specular, 0.001), 1/float64(o.shine)))
	g := f.tone(l.Ground)
	f.ground = [4]float32{g[0], g[1], g[2], float32(math.Max(0, math.Min(1, l.GroundOpacity)))}
	p := sceneProjection(f.camera, f.w, f.h, 1)
	o.persp, o.invF, o.cx, o.cy = p.persp, float32(1/p.f), float32(p.cx), float32(p.cy)
}

// sight holds what shading needs of a pixel: the direction (a, b, 1) to the
// eye, the length of that vector's inverse, and the inverse length of the
// unit vector to the eye plus that to the key light.
type sight struct {
	a, b   float32
	il, ih float32
}

// sightAt returns the sight of a place of the whole picture.
func (l *light) sightAt(x, y float32, s *sight) {
	if !l.persp {
		*s = sight{0, 0, 1, 1 / sqrt32(2+2*l.kz)}
		return
	}
	a, b := (l.cx-x)*l.invF, (y-l.cy)*l.invF
	il := 1 / sqrt32(a*a+b*b+1)
	*s = sight{a, b, il, 1 / sqrt32(2.000001+2*(l.kx*a+l.ky*b+l.kz)*il)}
}

func sqrt32(v float32) float32 { return float32(math.Sqrt(float64(v))) }

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
	nv := nx*s.a + ny*s.b + nz
	turn := nv < 0
	if o.outward && l.style != Plain {
		turn = !o.facing
	}
	q := nx*nx + ny*ny + nz*nz
	if !(q > 1e-36) {
		nx, ny, nz, q, nv, turn = s.a, s.b, 1, 1/(s.il*s.il), 1/(s.il*s.il), false
	}
	inv := 1 / sqrt32(q)
	if turn {
		inv = -inv
	}
	nl := (nx*l.kx + ny*l.ky + nz*l.kz) * inv
	switch l.style {
	case Ink:
		m := t.tone(k, nl, x, y)
		return r * m, g * m, b * m
	case Lit:
		return t.lit(o, r, g, b, nx*inv, ny*inv, nz*inv, nl, x, y, s)
	}
	d := l.ambient
	if nl > 0 {
		d += l.diffuse * nl
	}
	r, g, b = r*d, g*d, b*d
	if nh := (nl + nv*inv*s.il) * s.ih; nh > l.glint {
		h := l.specular * power(nh, l.shine)
		r, g, b = r+h, g+h, b+h
	}
	return r, g, b
}
