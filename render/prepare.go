package render

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
)

// form says how a prepared part is drawn.
type form uint8

const (
	formMesh form = iota
	formQuadric
	formDisc
	formStroke
	formLabel
)

// part is a shape, or one of the bodies of a shape, made ready for one frame.
type part struct {
	form     form
	layered  bool // translucent: every layer counts
	flat     bool
	mirrored bool
	cull     bool // leave out the far side
	outline  bool
	persp    bool
	shape    int32 // index in the scene
	proj     int32
	index    int32 // of the quadric or disc; of the first stroke
	count    int32
	col      [3]float32
	alpha    float32
	gloss    float32
	hatch    hatch
	box      box

	// Meshes.
	mesh   *Mesh
	cam    [12]float32 // own space to camera space, rows
	nrm    [9]float32  // normals to camera space, rows
	vert0  int         // place of the first vertex in the frame's list
	chunk0 int32       // of its vertices
	smooth bool        // the normal is mixed from those of the corners
	turn   float32     // 1 for a closed surface, -1 for a reflected one, 0 for others
}

type hatch struct {
	period, half float32 // in the coordinate; half the width in pixels
	col          [3]float32
	second       bool
}

// prepare fills the frame's lists from the scene, one shape after the other.
func (r *Renderer) prepare(scene *Scene) {
	f := &r.frame
	f.parts, f.quadrics, f.discs, f.strokes = f.parts[:0], f.quadrics[:0], f.discs[:0], f.strokes[:0]
	f.projs = append(f.projs[:0], sceneProjection(f.camera, f.w, f.h, f.reach(scene)))
	f.nVert = 0
	for i := range scene.Shapes {
		s := &scene.Shapes[i]
		if !(s.Material.Opacity > 0) || s.Geometry == nil {
			continue
		}
		pr := int32(0)
		if s.Place != nil {
			f.projs = append(f.projs, placeProjection(s.Place, f.projs[0].lin, f.w, f.h, f.pxPerMM, f.projs[0].nMax))
			pr = int32(len(f.projs) - 1)
		}
		p := f.newPart(s, int32(i), pr)
		m := f.projs[pr].toCamera(s.Transform)
		if !finite3(m.Shift) || !finite9(m.Linear) {
			continue
		}
		switch g := s.Geometry.(type) {
		case Sphere:
			f.addSphere(p, m, g)
		case Cylinder:
			f.addRod(p, m, rodCylinder, g.A, g.B, g.Radius)
		case Cone:
			f.addRod(p, m, rodCone, g.Base, g.Apex, g.Radius)
		case Arrow:
			f.addArrow(p, m, g)
		case Disc:
			f.addDisc(p, m, g)
		case Polygon:
			r.addPolygon(p, m, g)
		case *Mesh:
			if g != nil {
				f.addMesh(p, m, g)
			}
		case Line:
			f.addLine(p, m, &g)
		}
	}
}

// newPart fills in what does not depend on the geometry.
func (f *frame) newPart(s *Shape, index, proj int32) part {
	m := &s.Material
	p := part{shape: index, proj: proj, persp: f.projs[proj].persp, flat: m.Flat, outline: !m.NoOutline}
	p.alpha = float32(math.Min(m.Opacity, 1))
	p.layered = p.alpha < 1
	p.gloss = float32(m.Gloss)
	p.col = f.tone(m.Color)
	if h := m.Hatch; h.Period > 0 && h.Width > 0 {
		p.hatch = hatch{float32(h.Period), float32(h.Width * f.pxPerMM / 2), f.tone(h.Color), h.Second}
	}
	return p
}

// reach returns how far from the camera's target the scene extends.
func (f *frame) reach(scene *Scene) float64 {
	if f.camera.Height == 0 {
		return 0
	}
	most := 0.0
	take := func(s *Shape, p Vec3, r float64) {
		if s.Transform != nil {
			p = s.Transform.Apply(p)
			r *= math.Sqrt(s.Transform.Linear.Mul3(s.Transform.Linear.Transpose()).Trace())
		}
		if d := p.Sub(f.camera.Target).Len() + math.Abs(r); d > most && d < 1e30 {
			most = d
		}
	}
	for i := range scene.Shapes {
		s := &scene.Shapes[i]
		if s.Place != nil {
			continue
		}
		switch g := s.Geometry.(type) {
		case Sphere:
			take(s, g.Center, g.Radius)
		case Cylinder:
			take(s, g.A, g.Radius)
			take(s, g.B, g.Radius)
		case Cone:
			take(s, g.Base, g.Radius)
			take(s, g.Apex, 0)
		case Arrow:
			take(s, g.From, math.Max(g.Radius, g.HeadRadius)*4)
			take(s, g.To, math.Max(g.Radius, g.HeadRadius)*4)
		case Disc:
			take(s, g.Center, g.Radius)
		case Polygon:
			for _, p := range g.Points {
				take(s, p, 0)
			}
		case Line:
			for _, p := range g.Points {
				take(s, p, 0)
			}
		case Text:
			take(s, g.At, math.Abs(g.Lift))
		case *Mesh:
			if g == nil || len(g.Positions) == 0 {
				continue
			}
			lo, hi := g.bounds()
			take(s, lo.Add(hi).Mul(0.5), hi.Sub(lo).Len()/2)
		}
	}
	if most == 0 {
		return 1
	}
	return most
}

// bounds returns the corners of the box around the mesh.
func (m *Mesh) bounds() (lo, hi Vec3) {
	l, h := m.Positions[0], m.Positions[0]
	for _, p := range m.Positions {
		for k := range 3 {
			l[k], h[k] = min(l[k], p[k]), max(h[k], p[k])
		}
	}
	for k := range 3 {
		lo[k], hi[k] = float64(l[k]), float64(h[k])
	}
	return lo, hi
}

// addSphere adds the unit ball of the sphere's own space.
func (f *frame) addSphere(p part, m Affine, g Sphere) {
	if !(g.Radius > 0) {
		return
	}
	local := m.After(Affine{mgl64.Ident3().Mul(g.Radius), g.Center})
	f.addBody(p, local, rodSphere, 1)
}

// addRod adds a cylinder or cone: in its own space it has radius 1 and runs
// from z = 0 to z = 1.
func (f *frame) addRod(p part, m Affine, kind rod, a, b Vec3, radius float64) {
	axis := b.Sub(a)
	if !(radius > 0) || !(axis.Len() > 0) || !finite3(axis) {
		return
	}
	u, v := across(axis)
	local := m.After(Affine{mgl64.Mat3FromCols(u.Mul(radius), v.Mul(radius), axis), a})
	f.addBody(p, local, kind, axis.Len())
}

// addArrow adds the shaft and the head.
func (f *frame) addArrow(p part, m Affine, g Arrow) {
	axis := g.To.Sub(g.From)
	long := axis.Len()
	if !(g.Radius > 0) || !(long > 0) {
		return
	}
	hr, hl := g.HeadRadius, g.HeadLength
	if !(hr > 0) {
		hr = 2.4 * g.Radius
	}
	if !(hl > 0) {
		hl = 6 * g.Radius
	}
	hl = math.Min(hl, long)
	neck := g.To.Sub(axis.Mul(hl / long))
	if hl < long {
		f.addRod(p, m, rodCylinder, g.From, neck, g.Radius)
	}
	f.addRod(p, m, rodCone, neck, g.To, hr)
}

// across returns two unit vectors at right angles to n and to each other,
// with (u, v, n) right-handed.
func across(n Vec3) (u, v Vec3) {
	n = unit(n, Vec3{0, 0, 1})
	k := 0
	for q := 1; q < 3; q++ {
		if math.Abs(n[q]) < math.Abs(n[k]) {
			k = q
		}
	}
	var e Vec3
	e[k] = 1
	u = unit(e.Cross(n), Vec3{1, 0, 0})
	return u, n.Cross(u)
}

// cofactors returns the matrix that takes normals along when m takes points:
// det(m) times the transposed inverse, which exists for singular maps too.
func cofactors(m mgl64.Mat3) mgl64.Mat3 {
	a, b, c := m.Col(0), m.Col(1), m.Col(2)
	return mgl64.Mat3FromCols(b.Cross(c), c.Cross(a), a.Cross(b))
}

func finite9(m mgl64.Mat3) bool {
	var s float64
	for _, v := range m {
		s += v
	}
	return !math.IsNaN(s) && !math.IsInf(s, 0)
}

// rows32 returns the rows of m with a factor.
func rows32(m mgl64.Mat3, k float64) (o [9]float32) {
	for r := range 3 {
		for c := range 3 {
			o[3*r+c] = float32(m.At(r, c) * k)
		}
	}
	return o
}

// addMesh adds an indexed surface.
func (f *frame) addMesh(p part, m Affine, g *Mesh) {
	if len(g.Positions) == 0 || len(g.Triangles) == 0 {
		return
	}
	if g.Normals != nil && len(g.Normals) < len(g.Positions) || g.Coords != nil && len(g.Coords) < len(g.Positions) {
		return
	}
	p.form, p.mesh = formMesh, g
	l := rows32(m.Linear, 1)
	for r := range 3 {
		copy(p.cam[4*r:], l[3*r:3*r+3])
		p.cam[4*r+3] = float32(m.Shift[r])
	}
	n := cofactors(m.Linear)
	big := 0.0
	for _, v := range n {
		big = math.Max(big, math.Abs(v))
	}
	p.mirrored = m.Linear.Det() < 0
	if p.mirrored {
		big = -big // normals stay outside
	}
	if big != 0 {
		p.nrm = rows32(n, 1/big)
	}
	p.vert0 = f.nVert
	f.nVert += len(g.Positions)
	p.cull = g.Closed && !p.layered
	p.smooth = g.Normals != nil && p.hatch.period == 0 && !p.flat
	if g.Closed {
		p.turn = 1
		if p.mirrored {
			p.turn = -1
		}
	}
	f.parts = append(f.parts, p)
}
