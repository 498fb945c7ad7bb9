package picture

import (
	"math"
	"sync"

	"github.com/go-gl/mathgl/mgl64"
)

// directions is a triangulated unit sphere: an icosahedron whose faces are
// halved `times` times along their edges. Triangles run counterclockwise seen
// from outside. The slices are shared and must not be changed.
func directions(times int) (points []mgl64.Vec3, triangles [][3]int) {
	return halved[min(times, len(halved)-1)]()
}

// halved are the spheres that are in use, each made once.
var halved = [...]func() ([]mgl64.Vec3, [][3]int){
	sync.OnceValues(func() ([]mgl64.Vec3, [][3]int) { return newDirections(0) }),
	sync.OnceValues(func() ([]mgl64.Vec3, [][3]int) { return newDirections(1) }),
	sync.OnceValues(func() ([]mgl64.Vec3, [][3]int) { return newDirections(2) }),
	sync.OnceValues(func() ([]mgl64.Vec3, [][3]int) { return newDirections(3) }),
	sync.OnceValues(func() ([]mgl64.Vec3, [][3]int) { return newDirections(4) }),
}

func newDirections(times int) (points []mgl64.Vec3, triangles [][3]int) {
	points, triangles = icosahedron()
	for range times {
		middles := map[[2]int]int{}
		middle := func(a, b int) int {
			key := [2]int{min(a, b), max(a, b)}
			m, known := middles[key]
			if !known {
				m = len(points)
				middles[key] = m
				points = append(points, points[a].Add(points[b]).Normalize())
			}
			return m
		}
		finer := make([][3]int, 0, 4*len(triangles))
		for _, t := range triangles {
			ab, bc, ca := middle(t[0], t[1]), middle(t[1], t[2]), middle(t[2], t[0])
			finer = append(finer, [3]int{t[0], ab, ca}, [3]int{ab, t[1], bc}, [3]int{ca, bc, t[2]}, [3]int{ab, bc, ca})
		}
		triangles = finer
	}
	return points, triangles
}

// icosahedron has a vertex on +z and one on −z, where most lobes have their
// tips.
func icosahedron() (points []mgl64.Vec3, triangles [][3]int) {
	const height = 0.4472135954999579 // 1/√5, of the two rings
	const radius = 0.8944271909999159 // 2/√5
	points = append(points, mgl64.Vec3{0, 0, 1})
	for k := range 10 {
		sin, cos := math.Sincos(float64(k) * math.Pi / 5)
		z := height
		if k%2 == 1 {
			z = -height
		}
		points = append(points, mgl64.Vec3{radius * cos, radius * sin, z})
	}
	points = append(points, mgl64.Vec3{0, 0, -1})
	for k := range 10 {
		a, b, c := 1+k, 1+(k+1)%10, 1+(k+2)%10
		if k%2 == 0 {
			triangles = append(triangles, [3]int{0, a, c}, [3]int{a, b, c})
		} else {
			triangles = append(triangles, [3]int{11, c, a}, [3]int{a, c, b})
		}
	}
	return points, triangles
}
