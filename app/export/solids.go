package export

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/render"
)

// How finely round bodies are cut for formats that know only triangles.
const (
	ballRows, ballColumns = 24, 48
	rodColumns            = 24
	tubeColumns           = 10
)

// sphereMesh is the unit ball.
func sphereMesh() *render.Mesh {
	m := &render.Mesh{Closed: true}
	for i := 0; i <= ballRows; i++ {
		st, ct := math.Sincos(math.Pi * float64(i) / ballRows)
		for j := 0; j <= ballColumns; j++ {
			sp, cp := math.Sincos(2 * math.Pi * float64(j) / ballColumns)
			m.Positions = append(m.Positions, [3]float32{float32(st * cp), float32(st * sp), float32(ct)})
		}
	}
	m.Normals = m.Positions
	for i := range uint32(ballRows) {
		for j := range uint32(ballColumns) {
			a := i*(ballColumns+1) + j
			b := a + ballColumns + 1
			if i > 0 {
				m.Triangles = append(m.Triangles, [3]uint32{a, b, a + 1})
			}
			if i < ballRows-1 {
				m.Triangles = append(m.Triangles, [3]uint32{a + 1, b, b + 1})
			}
		}
	}
	return m
}

// cylinderMesh is the unit rod from the origin along z.
func cylinderMesh() *render.Mesh { return latheMesh([][2]float64{{0, 0}, {1, 0}, {1, 1}, {0, 1}}) }

// coneMesh is the unit cone from the origin along z.
func coneMesh() *render.Mesh { return latheMesh([][2]float64{{0, 0}, {1, 0}, {0, 1}}) }

// latheMesh turns a line of (radius, z) about z; the outside is on its right.
func latheMesh(line [][2]float64) *render.Mesh {
	m := &render.Mesh{Closed: true}
	for i := 0; i+1 < len(line); i++ {
		a, b := line[i], line[i+1]
		nr, nz := b[1]-a[1], a[0]-b[0]
		base := uint32(len(m.Positions))
		for _, e := range [2][2]float64{a, b} {
			for j := 0; j <= rodColumns; j++ {
				sin, cos := math.Sincos(2 * math.Pi * float64(j) / rodColumns)
				m.Positions = append(m.Positions, [3]float32{float32(e[0] * cos), float32(e[0] * sin), float32(e[1])})
				m.Normals = append(m.Normals, [3]float32{float32(nr * cos), float32(nr * sin), float32(nz)})
			}
		}
		for j := range uint32(rodColumns) {
			p, q := base+j, base+j+rodColumns+1
			if a[0] > 0 {
				m.Triangles = append(m.Triangles, [3]uint32{p, p + 1, q + 1})
			}
			if b[0] > 0 {
				m.Triangles = append(m.Triangles, [3]uint32{p, q + 1, q})
			}
		}
	}
	return m
}

// discMesh is the unit disc square to z.
func discMesh() *render.Mesh {
	const corners = 96
	m := &render.Mesh{Positions: [][3]float32{{}}}
	for j := range uint32(corners) {
		sin, cos := math.Sincos(2 * math.Pi * float64(j) / corners)
		m.Positions = append(m.Positions, [3]float32{float32(cos), float32(sin), 0})
		m.Triangles = append(m.Triangles, [3]uint32{0, 1 + j, 1 + (j+1)%corners})
	}
	for range m.Positions {
		m.Normals = append(m.Normals, [3]float32{0, 0, 1})
	}
	return m
}

// tubeMesh is a polyline as round rods.
func tubeMesh(l render.Line, radius float64) *render.Mesh {
	m := &render.Mesh{Closed: true}
	points := l.Points
	if l.Closed && len(points) > 0 {
		points = append(append([]mgl64.Vec3(nil), points...), points[0])
	}
	for i := 0; i+1 < len(points); i++ {
		a, b := points[i], points[i+1]
		if a.Sub(b).Len() == 0 {
			continue
		}
		place := alongRod(a, b, radius)
		base := uint32(len(m.Positions))
		for end := range 2 {
			for j := range tubeColumns {
				sin, cos := math.Sincos(2 * math.Pi * float64(j) / tubeColumns)
				p := place.Apply(mgl64.Vec3{cos, sin, float64(end)})
				n := place.Linear.Mul3x1(mgl64.Vec3{cos, sin, 0})
				m.Positions = append(m.Positions, float32s(p))
				m.Normals = append(m.Normals, float32s(n))
			}
		}
		for j := range uint32(tubeColumns) {
			p, next := base+j, base+(j+1)%tubeColumns
			m.Triangles = append(m.Triangles, [3]uint32{p, next, next + tubeColumns}, [3]uint32{p, next + tubeColumns, p + tubeColumns})
		}
	}
	return m
}

func float32s(v mgl64.Vec3) [3]float32 {
	return [3]float32{float32(v[0]), float32(v[1]), float32(v[2])}
}

// movedMesh carries a map out on a mesh. Normals go by the inverse transpose,
// and a reflection turns the triangles round.
func movedMesh(m *render.Mesh, by render.Affine) *render.Mesh {
	m = withNormals(m)
	out := &render.Mesh{Closed: m.Closed}
	cofactors := mgl64.Mat3FromCols(
		by.Linear.Col(1).Cross(by.Linear.Col(2)), by.Linear.Col(2).Cross(by.Linear.Col(0)), by.Linear.Col(0).Cross(by.Linear.Col(1)))
	turnsRound := by.Linear.Det() < 0
	for i, p := range m.Positions {
		out.Positions = append(out.Positions, float32s(by.Apply(mgl64.Vec3{float64(p[0]), float64(p[1]), float64(p[2])})))
		n := m.Normals[i]
		v := cofactors.Mul3x1(mgl64.Vec3{float64(n[0]), float64(n[1]), float64(n[2])})
		if turnsRound {
			v = v.Mul(-1)
		}
		out.Normals = append(out.Normals, float32s(v))
	}
	for _, t := range m.Triangles {
		if turnsRound {
			t[1], t[2] = t[2], t[1]
		}
		out.Triangles = append(out.Triangles, t)
	}
	return out
}

// withNormals is the mesh with a normal for each vertex; where it has none,
// every triangle gets vertices of its own.
func withNormals(m *render.Mesh) *render.Mesh {
	if m.Normals != nil {
		return m
	}
	out := &render.Mesh{Closed: m.Closed}
	for _, t := range m.Triangles {
		var corners [3]mgl64.Vec3
		for i, v := range t {
			p := m.Positions[v]
			corners[i] = mgl64.Vec3{float64(p[0]), float64(p[1]), float64(p[2])}
		}
		n := corners[1].Sub(corners[0]).Cross(corners[2].Sub(corners[0]))
		base := uint32(len(out.Positions))
		for _, c := range corners {
			out.Positions = append(out.Positions, float32s(c))
			out.Normals = append(out.Normals, float32s(n))
		}
		out.Triangles = append(out.Triangles, [3]uint32{base, base + 1, base + 2})
	}
	return out
}
