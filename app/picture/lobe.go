package picture

import (
	"math"
	"slices"
	"sync"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/render"
)

// lobes returns the closed surfaces of the positive and of the negative lobes
// of an angular function of a shell, about a nucleus at the origin. The farthest point
// of the larger lobes has the distance 1. A surface without lobes is nil.
func lobes(y angular, shell int, form form) (plus, minus *render.Mesh) {
	y = normalized(y)
	if form.shape != contoured {
		return polarPlot(y, +1, form), polarPlot(y, -1, form)
	}
	c := contourOf(shell)
	return surface(newField(c, y, +1), form.detail), surface(newField(c, y, -1), form.detail)
}

// detail is how finely lobes are cut into triangles.
type detail struct {
	halvings int // of the faces of an icosahedron
	layers   int // from the nucleus outward
}

// fine resolves a lobe of 300 pixels without a visible corner, coarse one of
// 80, with a quarter of the triangles.
var (
	fine   = detail{halvings: 4, layers: 14}
	coarse = detail{halvings: 3, layers: 10}
)

// normalized scales y to a largest absolute value of 1, which is sought among
// a few thousand directions and refined from the best one.
func normalized(y angular) angular {
	points, _ := directions(4)
	best, largest := mgl64.Vec3{0, 0, 1}, 0.0
	for _, p := range points {
		if v := math.Abs(y(p)); v > largest {
			best, largest = p, v
		}
	}
	if largest == 0 {
		return func(mgl64.Vec3) float64 { return 0 }
	}
	largest = climb(y, best, largest)
	return func(p mgl64.Vec3) float64 { return y(p) / largest }
}

// climb refines a maximum of |y| by steps along both tangents that are halved
// where neither of them gains.
func climb(y angular, p mgl64.Vec3, value float64) float64 {
	for step := 0.05; step > 1e-9; {
		u, v := across(p)
		gained := false
		for _, d := range []mgl64.Vec3{u, u.Mul(-1), v, v.Mul(-1)} {
			q := p.Add(d.Mul(step)).Normalize()
			if w := math.Abs(y(q)); w > value {
				p, value, gained = q, w, true
				break
			}
		}
		if !gained {
			step /= 2
		}
	}
	return value
}

// across returns two unit vectors square to p and to each other.
func across(p mgl64.Vec3) (u, v mgl64.Vec3) {
	axis := mgl64.Vec3{1, 0, 0}
	if math.Abs(p[0]) > 0.6 {
		axis = mgl64.Vec3{0, 1, 0}
	}
	u = p.Cross(axis).Normalize()
	return u, p.Cross(u)
}

// surface extracts the contour of f by marching tetrahedra (A. Doi, A. Koide,
// IEICE Trans. E74, 214 (1991); from memory). The tetrahedra fill the prisms
// between a triangulated sphere of directions and layers of radii, so that
// the tips at the nucleus are resolved as finely as the rest. Since the
// tetrahedra meet face to face, the surface is closed, whatever its form.
func surface(f field, detail detail) *render.Mesh {
	m := &march{field: f, grid: gridOf[detail](), on: map[[2]int]uint32{}}
	m.values = m.grid.valuesOf(f)
	for _, t := range m.grid.tetrahedra {
		m.cut(t)
	}
	if len(m.triangles) == 0 {
		return nil
	}
	return m.mesh()
}

// shells are the nodes and tetrahedra of a ball of radius 1 about the nucleus:
// the nucleus itself, then layer by layer a node in every direction.
type shells struct {
	nodes      []mgl64.Vec3
	tetrahedra [][4]int32 // indices of nodes
	directions []mgl64.Vec3
	radii      []float64 // of the layers
}

// valuesOf is f at all nodes; the angular function is called once for every
// direction.
func (g *shells) valuesOf(f field) []float64 {
	angular := make([]float64, len(g.directions))
	for i, d := range g.directions {
		angular[i] = f.sign * f.y(d)
	}
	values := make([]float64, 0, len(g.nodes))
	values = append(values, -f.level) // at the nucleus
	for _, r := range g.radii {
		radial := f.radial(r * f.unit)
		for _, y := range angular {
			values = append(values, radial*y-f.level)
		}
	}
	return values
}

// gridOf are the shells for each detail, made once.
var gridOf = map[detail]func() *shells{
	fine:   sync.OnceValue(func() *shells { return newShells(fine) }),
	coarse: sync.OnceValue(func() *shells { return newShells(coarse) }),
}

func newShells(detail detail) *shells {
	points, triangles := directions(detail.halvings)
	g := &shells{nodes: make([]mgl64.Vec3, 1, 1+detail.layers*len(points)), directions: points}
	for layer := 1; layer <= detail.layers; layer++ {
		// Layers lie closer near the nucleus; the last one is outside.
		share := float64(layer) / float64(detail.layers)
		r := 1.01 * math.Pow(share, 1.4)
		g.radii = append(g.radii, r)
		for _, p := range points {
			g.nodes = append(g.nodes, p.Mul(r))
		}
	}
	n := int32(len(points))
	g.tetrahedra = make([][4]int32, 0, len(triangles)*(1+3*(detail.layers-1)))
	for _, t := range triangles {
		a, b, c := sorted(t)
		g.tetrahedra = append(g.tetrahedra, [4]int32{0, 1 + a, 1 + b, 1 + c})
		for layer := range int32(detail.layers - 1) {
			in, out := 1+layer*n, 1+(layer+1)*n
			// Cut by rising index of direction, so that the diagonals of
			// prisms side by side agree.
			g.tetrahedra = append(g.tetrahedra,
				[4]int32{in + a, in + b, in + c, out + c},
				[4]int32{in + a, in + b, out + b, out + c},
				[4]int32{in + a, out + a, out + b, out + c})
		}
	}
	return g
}

func sorted(t [3]int) (a, b, c int32) {
	a, b, c = int32(t[0]), int32(t[1]), int32(t[2])
	if a > b {
		a, b = b, a
	}
	if b > c {
		b, c = c, b
	}
	if a > b {
		a, b = b, a
	}
	return a, b, c
}

// march collects the surface while tetrahedra are cut.
type march struct {
	field
	grid      *shells
	values    []float64
	on        map[[2]int]uint32 // the vertex on an edge of the grid
	vertices  []mgl64.Vec3
	triangles [][3]uint32
}

// cut adds the part of the surface within one tetrahedron: nothing, a
// triangle round one node, or a quadrangle between two pairs of nodes.
func (m *march) cut(t [4]int32) {
	var inside, outside [4]int
	n, out := 0, 0
	for _, node := range t {
		if m.values[node] > 0 {
			inside[n] = int(node)
			n++
		} else {
			outside[out] = int(node)
			out++
		}
	}
	switch n {
	case 1:
		i, a, b, c := inside[0], outside[0], outside[1], outside[2]
		m.add(m.handed(i, a, b, c), m.vertex(i, a), m.vertex(i, b), m.vertex(i, c))
	case 2:
		a, b, c, d := inside[0], inside[1], outside[0], outside[1]
		ac, ad, bc, bd := m.vertex(a, c), m.vertex(a, d), m.vertex(b, c), m.vertex(b, d)
		right := m.handed(a, b, c, d)
		m.add(right, ac, ad, bd)
		m.add(right, ac, bd, bc)
	case 3:
		a, b, c, o := inside[0], inside[1], inside[2], outside[0]
		m.add(!m.handed(o, a, b, c), m.vertex(a, o), m.vertex(b, o), m.vertex(c, o))
	}
}

// handed tells whether b, c, d run counterclockwise for an eye that has a
// behind them.
func (m *march) handed(a, b, c, d int) bool {
	p := m.grid.nodes[a]
	u, v, w := m.grid.nodes[b].Sub(p), m.grid.nodes[c].Sub(p), m.grid.nodes[d].Sub(p)
	return u.Cross(v).Dot(w) > 0
}

// vertex is the point of the contour on an edge of the grid, found once.
func (m *march) vertex(inside, outside int) uint32 {
	key := [2]int{min(inside, outside), max(inside, outside)}
	if v, known := m.on[key]; known {
		return v
	}
	a, b := m.grid.nodes[inside], m.grid.nodes[outside]
	// At the nucleus the field does not depend on the way there, so that a
	// contour between the nucleus and the first layer is found like others.
	t := root(0, 1, func(t float64) float64 { return m.at(a.Add(b.Sub(a).Mul(t))) })
	v := uint32(len(m.vertices))
	m.vertices = append(m.vertices, a.Add(b.Sub(a).Mul(t)))
	m.on[key] = v
	return v
}

// add appends a triangle, turned so that it runs counterclockwise seen from
// outside.
func (m *march) add(asIs bool, a, b, c uint32) {
	if !asIs {
		b, c = c, b
	}
	m.triangles = append(m.triangles, [3]uint32{a, b, c})
}

// mesh has as surface coordinates the distance from the nucleus and the angle
// about z.
func (m *march) mesh() *render.Mesh {
	n := len(m.vertices)
	out := &render.Mesh{
		Closed: true, Triangles: slices.Clip(slices.Clone(m.triangles)),
		Positions: make([][3]float32, n), Normals: make([][3]float32, n), Coords: make([][2]float32, n),
	}
	for i, p := range m.vertices {
		n := m.outward(p)
		out.Positions[i] = [3]float32{float32(p[0]), float32(p[1]), float32(p[2])}
		out.Normals[i] = [3]float32{float32(n[0]), float32(n[1]), float32(n[2])}
		out.Coords[i] = [2]float32{float32(p.Len()), float32(math.Atan2(p[1], p[0]))}
	}
	return out
}
