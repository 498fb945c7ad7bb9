package render

import (
	"math"
	"sync"
)

// flatBodies returns meshes of the round bodies in their own spaces. They
// stand in for a body that a singular transform presses flat, which no ray
// meets in a line of some length.
var flatBodies = sync.OnceValue(func() [3]*Mesh {
	return [3]*Mesh{ballMesh(96, 192), lathe([][2]float32{{0, 0}, {1, 0}, {1, 1}, {0, 1}}), lathe([][2]float32{{0, -1}, {1, -1}, {0, 0}})}
})

// ballMesh is the unit ball in rows of latitude.
func ballMesh(rows, cols int) *Mesh {
	m := &Mesh{Closed: true}
	for i := 0; i <= rows; i++ {
		t := math.Pi * float64(i) / float64(rows)
		for j := 0; j <= cols; j++ {
			p := 2 * math.Pi * float64(j) / float64(cols)
			v := [3]float32{float32(math.Sin(t) * math.Cos(p)), float32(math.Sin(t) * math.Sin(p)), float32(math.Cos(t))}
			m.Positions = append(m.Positions, v)
			m.Coords = append(m.Coords, [2]float32{float32(t), float32(p)})
		}
	}
	m.Normals = m.Positions
	m.grid(rows, cols)
	return m
}

// lathe turns a line of (radius, z) around the z axis; the line runs so that
// the outside is on its right.
func lathe(line [][2]float32) *Mesh {
	const cols = 192
	m := &Mesh{Closed: true}
	for i := 0; i+1 < len(line); i++ {
		a, b := line[i], line[i+1]
		base := uint32(len(m.Positions))
		nr, nz := float64(b[1]-a[1]), float64(a[0]-b[0])
		for _, e := range [2][2]float32{a, b} {
			for j := 0; j <= cols; j++ {
				p := 2 * math.Pi * float64(j) / cols
				c, s := float32(math.Cos(p)), float32(math.Sin(p))
				m.Positions = append(m.Positions, [3]float32{e[0] * c, e[0] * s, e[1]})
				m.Normals = append(m.Normals, [3]float32{float32(nr) * c, float32(nr) * s, float32(nz)})
				m.Coords = append(m.Coords, [2]float32{e[1], float32(p)})
			}
		}
		for j := uint32(0); j < cols; j++ {
			q := [4]uint32{base + j, base + j + 1, base + cols + 1 + j, base + cols + 2 + j}
			m.Triangles = append(m.Triangles, [3]uint32{q[0], q[1], q[3]}, [3]uint32{q[0], q[3], q[2]})
		}
	}
	return m
}

// grid joins rows+1 times cols+1 points, laid out row by row.
func (m *Mesh) grid(rows, cols int) {
	for i := 0; i < rows; i++ {
		for j := 0; j < cols; j++ {
			a := uint32(i*(cols+1) + j)
			b := a + uint32(cols) + 1
			m.Triangles = append(m.Triangles, [3]uint32{a, b, b + 1}, [3]uint32{a, b + 1, a + 1})
		}
	}
}
