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
	// Below which the highlight is not seen: a cosine, a sum of cosines.
	glint, glintSum float32
	line            [3]float32
	tones           [8]float32
	edges           [8]float32
	nTones          int
	soft            float32 // pixels
	shade           float32
	invF, cx, cy    float32
	persp           bool
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
	p := sceneProjection(f.camera, f.w, f.h, 1)
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
	// |L + V| is least at the corner of the picture that is farthest from
	// the light.
	least := float32(2)
	for _, c := range [4][2]float32{{0, 0}, {float32(f.w), 0}, {0, float32(f.h)}, {float32(f.w), float32(f.h)}} {
		a, b := float32(0), float32(0)
		if p.persp {
			a, b = (float32(p.cx)-c[0])/float32(p.f), (c[1]-float32(p.cy))/float32(p.f)
		}
		lv := (o.kx*a + o.ky*b + o.kz) / sqrt32(a*a+b*b+1)
		least = min(least, sqrt32(max(0, 2+2*lv)))
	}
	o.glintSum = o.glint*least - 1e-4
	g := f.tone(l.Ground)
	f.ground = [4]float32{g[0], g[1], g[2], float32(math.Max(0, math.Min(1, l.GroundOpacity)))}
	o.persp, o.invF, o.cx, o.cy = p.persp, float32(1/p.f), float32(p.cx), float32(p.cy)
}

// sightAt returns the direction (a, b, 1) from a place of the whole picture
// to the eye.
func (l *light) sightAt(x, y float32) (a, b float32) {
	if !l.persp {
		return 0, 0
	}
	return (l.cx - x) * l.invF, (y - l.cy) * l.invF
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
