package render

// polygons keeps the meshes that polygons are cut into, from frame to frame.
type polygons struct {
	mesh []*Mesh
	used int
	left []uint32
}

func (p *polygons) reset() { p.used = 0 }

// polygonMesh cuts a simple polygon into triangles by cutting off ears
// (G. H. Meisters, American Mathematical Monthly 82, 648, 1975: every simple
// polygon has two). It returns nil for a polygon without area.
func (r *Renderer) polygonMesh(points []Vec3) *Mesh {
	ps := &r.polys
	n := len(points)
	if n < 3 || n > 1<<16 {
		return nil
	}
	var normal Vec3
	for i, a := range points {
		if !finite3(a) {
			return nil
		}
		normal = normal.Add(a.Sub(points[0]).Cross(points[(i+1)%n].Sub(points[0])))
	}
	if !(normal.Len() > 0) {
		return nil
	}
	if ps.used == len(ps.mesh) {
		ps.mesh = append(ps.mesh, &Mesh{})
	}
	m := ps.mesh[ps.used]
	ps.used++
	m.Positions, m.Coords, m.Normals, m.Triangles = m.Positions[:0], m.Coords[:0], m.Normals[:0], m.Triangles[:0]
	u, v := across(normal)
	nn := unit(normal, Vec3{0, 0, 1})
	for _, p := range points {
		m.Positions = append(m.Positions, [3]float32{float32(p[0]), float32(p[1]), float32(p[2])})
		m.Normals = append(m.Normals, [3]float32{float32(nn[0]), float32(nn[1]), float32(nn[2])})
		m.Coords = append(m.Coords, [2]float32{float32(u.Dot(p)), float32(v.Dot(p))})
	}
	ps.left = ps.left[:0]
	for i := range n {
		ps.left = append(ps.left, uint32(i))
	}
	left := ps.left
	for len(left) > 2 {
		cut := false
		for i := range left {
			a, b, c := left[(i+len(left)-1)%len(left)], left[i], left[(i+1)%len(left)]
			if m.isEar(a, b, c, left) {
				m.Triangles = append(m.Triangles, [3]uint32{a, b, c})
				left = append(left[:i], left[i+1:]...)
				cut = true
				break
			}
		}
		if !cut { // crosses itself or runs back on itself
			left = left[:len(left)-1]
		}
	}
	return m
}

// isEar tells whether the corner b may be cut off from a to c.
func (m *Mesh) isEar(a, b, c uint32, left []uint32) bool {
	side := func(p, q, r uint32) float64 {
		P, Q, R := m.Coords[p], m.Coords[q], m.Coords[r]
		return (float64(Q[0])-float64(P[0]))*(float64(R[1])-float64(P[1])) - (float64(R[0])-float64(P[0]))*(float64(Q[1])-float64(P[1]))
	}
	if !(side(a, b, c) > 0) {
		return false
	}
	for _, q := range left {
		if q != a && q != b && q != c && side(a, b, q) >= 0 && side(b, c, q) >= 0 && side(c, a, q) >= 0 {
			return false
		}
	}
	return true
}
