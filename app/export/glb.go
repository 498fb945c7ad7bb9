package export

import (
	"encoding/json"
	"io"
	"math"

	"github.com/go-gl/mathgl/mgl64"
	"github.com/qmuntal/gltf"
	"github.com/qmuntal/gltf/ext/unlit"
	"github.com/qmuntal/gltf/modeler"

	"lobewright/app/picture"
	"lobewright/render"
)

// Numbers and names of this format: The Khronos Group, glTF 2.0 Specification,
// version 2.0.1, 2021.

// glbScale is the length of an ångström in the metres of the format: molecules
// stand on a table.
const glbScale = 0.05

// EncodeGLB writes a movie as a body in space with the operation as its
// animation: lobes turn, and pass through planes and centres by scales that go
// through zero. The frame's z axis stands upright, and the movie's view is
// there as a camera. study, which may be empty, is carried in the extras.
func EncodeGLB(w io.Writer, m *picture.Movie, study []byte) error {
	bodies := m.Bodies()
	g := &glbWriter{doc: gltf.NewDocument(), meshes: map[glbMeshKey]int{}, materials: map[glbMaterial]int{}, perMM: bodies.PerMM}
	g.doc.Asset.Generator = "lobewright"
	setExtras(g.doc, study)
	g.doc.Scenes[0].Name = m.Title
	upright := uprightOf(bodies.Orbit)
	root := g.node(nil, &gltf.Node{Name: m.Title, Rotation: quaternion(upright), Scale: [3]float64{glbScale, glbScale, glbScale}})
	g.doc.Scenes[0].Nodes = append(g.doc.Scenes[0].Nodes, root)
	g.group(root, "molecule", bodies.Fixed)
	if len(bodies.Ghost) > 0 {
		g.group(root, "start", bodies.Ghost)
	}
	if len(bodies.Moving) > 0 {
		g.animate(root, m, bodies)
	}
	g.camera(bodies, upright, float64(m.Width)/float64(m.Height))
	return gltf.NewEncoder(w).Encode(g.doc)
}

// setExtras puts a study into a document.
func setExtras(d *gltf.Document, study []byte) {
	if len(study) > 0 {
		d.Extras = map[string]json.RawMessage{studyKeyword: study}
	}
}

// uprightOf turns the working frame so that z becomes the format's upright y,
// and the side that is seen the front.
func uprightOf(o picture.Orbit) mgl64.Mat3 {
	rows := o.Rows()
	front := rows.Row(2)
	if math.Hypot(front[0], front[1]) < 0.05 {
		front = rows.Row(1).Mul(-1) // seen from above
	}
	z := mgl64.Vec3{front[0], front[1], 0}.Normalize()
	y := mgl64.Vec3{0, 0, 1}
	return mgl64.Mat3FromRows(y.Cross(z), y, z)
}

// quaternion is a rotation in the order of the format: x, y, z, w.
func quaternion(m mgl64.Mat3) [4]float64 {
	q := mgl64.Mat4ToQuat(m.Mat4()).Normalize()
	return [4]float64{q.V[0], q.V[1], q.V[2], q.W}
}

type glbWriter struct {
	doc       *gltf.Document
	meshes    map[glbMeshKey]int
	materials map[glbMaterial]int
	perMM     float64
}

// A glbMaterial is what matters of a render.Material here.
type glbMaterial struct {
	color         render.Color
	opacity       float64
	flat, twoSide bool
	gloss         bool
}

// A glbMeshKey tells meshes that can be used again: those of the round bodies
// by their name, others by where they are.
type glbMeshKey struct {
	name     string
	mesh     *render.Mesh
	material int
}

// node adds a node below a parent, which may be nil.
func (g *glbWriter) node(parent *int, n *gltf.Node) int {
	g.doc.Nodes = append(g.doc.Nodes, n)
	i := len(g.doc.Nodes) - 1
	if parent != nil {
		p := g.doc.Nodes[*parent]
		p.Children = append(p.Children, i)
	}
	return i
}

// group adds shapes below a node of their own.
func (g *glbWriter) group(parent int, name string, shapes []render.Shape) {
	at := g.node(&parent, &gltf.Node{Name: name})
	g.shapes(at, shapes)
}

func (g *glbWriter) shapes(parent int, shapes []render.Shape) {
	for _, s := range shapes {
		if s.Place == nil {
			g.shape(parent, s)
		}
	}
}

// shape adds a body; type is left out.
func (g *glbWriter) shape(parent int, s render.Shape) {
	place := render.Identity()
	if s.Transform != nil {
		place = *s.Transform
	}
	unit := func(name string, make func() *render.Mesh, local render.Affine, twoSide bool) {
		material := g.material(s.Material, twoSide)
		g.body(parent, glbMeshKey{name: name, material: material}, make, place.After(local))
	}
	rod := func(name string, make func() *render.Mesh, a, b mgl64.Vec3, radius float64) {
		unit(name, make, alongRod(a, b, radius), false)
	}
	switch b := s.Geometry.(type) {
	case render.Sphere:
		unit("sphere", sphereMesh, render.Affine{Linear: mgl64.Ident3().Mul(b.Radius), Shift: b.Center}, false)
	case render.Cylinder:
		rod("cylinder", cylinderMesh, b.A, b.B, b.Radius)
	case render.Cone:
		rod("cone", coneMesh, b.Base, b.Apex, b.Radius)
	case render.Arrow:
		head := min(b.HeadLength, b.To.Sub(b.From).Len())
		neck := b.To.Sub(b.To.Sub(b.From).Normalize().Mul(head))
		rod("cylinder", cylinderMesh, b.From, neck, b.Radius)
		rod("cone", coneMesh, neck, b.To, b.HeadRadius)
	case render.Disc:
		unit("disc", discMesh, alongRod(b.Center, b.Center.Add(b.Normal.Normalize()), b.Radius), true)
	case render.Line:
		mesh := tubeMesh(b, b.Width/2*g.perMM)
		material := g.material(s.Material, false)
		g.body(parent, glbMeshKey{mesh: mesh, material: material}, func() *render.Mesh { return mesh }, place)
	case *render.Mesh:
		material := g.material(s.Material, !b.Closed)
		g.body(parent, glbMeshKey{mesh: b, material: material}, func() *render.Mesh { return b }, place)
	}
}

// alongRod takes the unit rod from the origin along z to one from a to b.
func alongRod(a, b mgl64.Vec3, radius float64) render.Affine {
	axis := b.Sub(a)
	length := axis.Len()
	if length == 0 {
		return render.Affine{Shift: a}
	}
	turn := mgl64.QuatBetweenVectors(mgl64.Vec3{0, 0, 1}, axis.Mul(1/length)).Mat4().Mat3()
	return render.Affine{Linear: turn.Mul3(mgl64.Diag3(mgl64.Vec3{radius, radius, length})), Shift: a}
}

// body adds a node with a mesh. A map that is a turn and a stretch along the
// axes is that of the node; any other is carried out on the mesh.
func (g *glbWriter) body(parent int, key glbMeshKey, make func() *render.Mesh, place render.Affine) {
	turn, stretch, ok := turnAndStretch(place.Linear)
	if !ok {
		moved := movedMesh(make(), place)
		key = glbMeshKey{mesh: moved, material: key.material}
		g.node(&parent, &gltf.Node{Mesh: gltf.Index(g.mesh(key, moved))})
		return
	}
	index, known := g.meshes[key]
	if !known {
		index = g.mesh(key, make())
	}
	g.node(&parent, &gltf.Node{Mesh: gltf.Index(index), Rotation: turn, Scale: stretch, Translation: place.Shift})
}

// turnAndStretch takes a matrix apart into a rotation after a scale along the
// axes, none of them negative or zero; ok is false for any other matrix.
func turnAndStretch(m mgl64.Mat3) (turn [4]float64, stretch [3]float64, ok bool) {
	var columns [3]mgl64.Vec3
	for i := range columns {
		columns[i] = m.Col(i)
		stretch[i] = columns[i].Len()
		if !(stretch[i] > 1e-9) {
			return turn, stretch, false
		}
		columns[i] = columns[i].Mul(1 / stretch[i])
	}
	const square = 1e-6
	if math.Abs(columns[0].Dot(columns[1])) > square || columns[0].Cross(columns[1]).Sub(columns[2]).Len() > square {
		return turn, stretch, false
	}
	return quaternion(mgl64.Mat3FromCols(columns[0], columns[1], columns[2])), stretch, true
}

// mesh writes a mesh with a material.
func (g *glbWriter) mesh(key glbMeshKey, m *render.Mesh) int {
	m = withNormals(m)
	normals := make([][3]float32, len(m.Normals))
	for i, n := range m.Normals {
		v := mgl64.Vec3{float64(n[0]), float64(n[1]), float64(n[2])}
		if l := v.Len(); l > 0 {
			v = v.Mul(1 / l)
		} else {
			v = mgl64.Vec3{0, 0, 1}
		}
		normals[i] = [3]float32{float32(v[0]), float32(v[1]), float32(v[2])}
	}
	indices := make([]uint32, 0, 3*len(m.Triangles))
	for _, t := range m.Triangles {
		indices = append(indices, t[0], t[1], t[2])
	}
	primitive := &gltf.Primitive{
		Indices: gltf.Index(modeler.WriteIndices(g.doc, indices)),
		Attributes: gltf.PrimitiveAttributes{
			gltf.POSITION: modeler.WritePosition(g.doc, m.Positions),
			gltf.NORMAL:   modeler.WriteNormal(g.doc, normals),
		},
		Material: gltf.Index(key.material),
	}
	g.doc.Meshes = append(g.doc.Meshes, &gltf.Mesh{Name: key.name, Primitives: []*gltf.Primitive{primitive}})
	g.meshes[key] = len(g.doc.Meshes) - 1
	return g.meshes[key]
}

// material finds or makes a material. The format wants linear light.
func (g *glbWriter) material(m render.Material, twoSide bool) int {
	key := glbMaterial{m.Color, m.Opacity, m.Flat, twoSide, m.Gloss > 0}
	if i, ok := g.materials[key]; ok {
		return i
	}
	roughness := 0.9
	if key.gloss {
		roughness = 0.5
	}
	out := &gltf.Material{
		PBRMetallicRoughness: &gltf.PBRMetallicRoughness{
			BaseColorFactor: &[4]float64{linear[m.Color.R], linear[m.Color.G], linear[m.Color.B], m.Opacity},
			MetallicFactor:  gltf.Float(0),
			RoughnessFactor: gltf.Float(roughness),
		},
		DoubleSided: twoSide,
	}
	if m.Opacity < 1 {
		out.AlphaMode = gltf.AlphaBlend
	}
	if m.Flat {
		out.Extensions = gltf.Extensions{unlit.ExtensionName: &unlit.Unlit{}}
		if len(g.doc.ExtensionsUsed) == 0 {
			g.doc.ExtensionsUsed = []string{unlit.ExtensionName}
		}
	}
	g.doc.Materials = append(g.doc.Materials, out)
	g.materials[key] = len(g.doc.Materials) - 1
	return g.materials[key]
}

// animate adds the moving bodies below the nodes that move them, the first
// movement innermost.
func (g *glbWriter) animate(root int, m *picture.Movie, b *picture.Bodies) {
	times, moments := keysOf(m.Stills)
	animation := &gltf.Animation{Name: m.Title}
	input := -1
	channel := func(node int, path gltf.TRSProperty, output int) {
		if input < 0 {
			input = modeler.WriteAccessor(g.doc, gltf.TargetNone, times)
			first, last := float64(times[0]), float64(times[len(times)-1])
			g.doc.Accessors[input].Min, g.doc.Accessors[input].Max = []float64{first}, []float64{last}
		}
		animation.Samplers = append(animation.Samplers, &gltf.AnimationSampler{Input: input, Output: output})
		animation.Channels = append(animation.Channels, &gltf.AnimationChannel{
			Sampler: len(animation.Samplers) - 1, Target: gltf.AnimationChannelTarget{Node: gltf.Index(node), Path: path},
		})
	}
	at := root
	for i := len(b.Steps) - 1; i >= 0; i-- {
		step := b.Steps[i]
		if step.Turn {
			at = g.node(&at, &gltf.Node{Name: "turn"})
			turns := make([][4]float32, len(moments))
			for k, moment := range moments {
				sin, cos := math.Sincos(step.Angle * b.Done(i, moment) / 2)
				v := step.Axis.Mul(sin)
				turns[k] = [4]float32{float32(v[0]), float32(v[1]), float32(v[2]), float32(cos)}
			}
			channel(at, gltf.TRSRotation, modeler.WriteAccessor(g.doc, gltf.TargetNone, turns))
			continue
		}
		// The plane is turned into one square to z, or all axes shrink.
		aside, flat := mgl64.Ident3(), [3]bool{true, true, true}
		if step.Axis.Len() > 0 {
			aside = mgl64.QuatBetweenVectors(mgl64.Vec3{0, 0, 1}, step.Axis).Mat4().Mat3()
			flat = [3]bool{false, false, true}
		}
		at = g.node(&at, &gltf.Node{Name: "aside", Rotation: quaternion(aside)})
		at = g.node(&at, &gltf.Node{Name: "reflection"})
		scales := make([][3]float32, len(moments))
		for k, moment := range moments {
			for axis := range 3 {
				scales[k][axis] = 1
				if flat[axis] {
					scales[k][axis] = float32(1 - 2*b.Done(i, moment))
				}
			}
		}
		channel(at, gltf.TRSScale, modeler.WriteAccessor(g.doc, gltf.TargetNone, scales))
		at = g.node(&at, &gltf.Node{Name: "back", Rotation: quaternion(aside.Transpose())})
	}
	g.shapes(at, b.Moving)
	if len(animation.Channels) > 0 {
		g.doc.Animations = append(g.doc.Animations, animation)
	}
}

// keysOf are the times of stills in seconds with their moments. A still that
// stays gets a second key before the next, so that nothing moves meanwhile.
func keysOf(stills []picture.Still) (times []float32, moments []float64) {
	shortest := math.Inf(1)
	for _, s := range stills {
		shortest = min(shortest, s.Seconds)
	}
	add := func(t, moment float64) {
		if n := len(times); n > 0 && float32(t) <= times[n-1] {
			return
		}
		times, moments = append(times, float32(t)), append(moments, moment)
	}
	now := 0.0
	for _, s := range stills {
		add(now, s.Moment)
		now += s.Seconds
		if s.Seconds > 1.5*shortest {
			add(now-shortest, s.Moment)
		}
	}
	add(now, stills[len(stills)-1].Moment)
	return times, moments
}

// camera adds the view of the movie.
func (g *glbWriter) camera(b *picture.Bodies, upright mgl64.Mat3, aspect float64) {
	c := b.Camera
	far := 10 * c.Eye.Sub(c.Target).Len() * glbScale
	out := &gltf.Camera{Name: "view"}
	if c.Height > 0 {
		out.Orthographic = &gltf.Orthographic{Xmag: c.Height * aspect / 2 * glbScale, Ymag: c.Height / 2 * glbScale, Znear: far / 1000, Zfar: far}
	} else {
		out.Perspective = &gltf.Perspective{AspectRatio: gltf.Float(aspect), Yfov: c.FovY, Znear: far / 1000, Zfar: gltf.Float(far)}
	}
	g.doc.Cameras = append(g.doc.Cameras, out)
	turned := upright.Mul3(c.Rotation().Transpose())
	node := g.node(nil, &gltf.Node{
		Name: "view", Camera: gltf.Index(0), Rotation: quaternion(turned), Translation: upright.Mul3x1(c.Eye).Mul(glbScale),
	})
	g.doc.Scenes[0].Nodes = append(g.doc.Scenes[0].Nodes, node)
}
