package picture

import (
	"math"
	"strings"
	"testing"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/render"
)

// shapes are angular functions of each kind of topology: tips, a ring, eight
// lobes, and mixtures that have no name.
var shapes = map[string]angular{ // named by the letter of their shell
	"pz":      func(d mgl64.Vec3) float64 { return d[2] },
	"p tilt":  func(d mgl64.Vec3) float64 { return 0.6*d[0] - 0.8*d[1] },
	"dz2":     func(d mgl64.Vec3) float64 { return 3*d[2]*d[2] - 1 },
	"dxy":     func(d mgl64.Vec3) float64 { return d[0] * d[1] },
	"d mixed": func(d mgl64.Vec3) float64 { return 3*d[2]*d[2] - 1 + 0.7*(d[0]*d[0]-d[1]*d[1]) + 0.3*d[0]*d[2] },
	"fxyz":    func(d mgl64.Vec3) float64 { return d[0] * d[1] * d[2] },
	"fz3":     func(d mgl64.Vec3) float64 { return 5*d[2]*d[2]*d[2] - 3*d[2] },
	"f mixed": func(d mgl64.Vec3) float64 { return d[2]*(d[0]*d[0]-d[1]*d[1]) + d[0]*(5*d[2]*d[2]-1)*0.5 },
}

func shellNamed(name string) int { return strings.Index("spdf", name[:1]) }

func TestLobesAreClosedAndWoundOutward(t *testing.T) {
	for name, y := range shapes {
		plus, minus := lobes(y, shellNamed(name), formOf(contoured, coarse))
		for _, mesh := range []*render.Mesh{plus, minus} {
			if mesh == nil {
				t.Fatalf("%s: a sign has no lobes", name)
			}
			edges := map[[2]uint32]int{}
			for _, tri := range mesh.Triangles {
				for k := range tri {
					edges[[2]uint32{tri[k], tri[(k+1)%3]}]++
				}
			}
			for e, n := range edges {
				if n != 1 || edges[[2]uint32{e[1], e[0]}] != 1 {
					t.Fatalf("%s: edge %v runs %d times this way and %d times back", name, e, n, edges[[2]uint32{e[1], e[0]}])
				}
			}
			if v := volume(mesh); v <= 0 {
				t.Errorf("%s: volume %g", name, v)
			}
		}
	}
}

// volume by the divergence theorem; positive if triangles are wound outward.
func volume(mesh *render.Mesh) float64 {
	sum := 0.0
	for _, tri := range mesh.Triangles {
		a, b, c := vertex(mesh, tri[0]), vertex(mesh, tri[1]), vertex(mesh, tri[2])
		sum += a.Cross(b).Dot(c) / 6
	}
	return sum
}

func vertex(mesh *render.Mesh, i uint32) mgl64.Vec3 {
	p := mesh.Positions[i]
	return mgl64.Vec3{float64(p[0]), float64(p[1]), float64(p[2])}
}

func TestLobesHaveTheSignOfTheFunctionAndReachOne(t *testing.T) {
	for name, y := range shapes {
		plus, minus := lobes(y, shellNamed(name), formOf(contoured, coarse))
		farthest := 0.0
		for sign, mesh := range map[float64]*render.Mesh{+1: plus, -1: minus} {
			for i := range mesh.Positions {
				p := vertex(mesh, uint32(i))
				if v := sign * y(p.Normalize()); v <= 0 {
					t.Fatalf("%s: a lobe of sign %g at %v, where the function is %g", name, sign, p, v)
				}
				farthest = max(farthest, p.Len())
			}
		}
		// The farthest vertex misses the tip by less than the spacing of
		// directions, 8°.
		if farthest > 1+1e-6 || farthest < 0.985 {
			t.Errorf("%s: the farthest point lies at %g", name, farthest)
		}
	}
}

func TestALobeTapersToTheNucleus(t *testing.T) {
	// Not one of two touching balls: their widest place is half-way out, and
	// there they are as wide as they are long.
	plus, _ := lobes(shapes["pz"], 1, formOf(contoured, fine))
	widest, at := 0.0, 0.0
	for i := range plus.Positions {
		p := vertex(plus, uint32(i))
		if rho := math.Hypot(p[0], p[1]); rho > widest {
			widest, at = rho, p[2]
		}
	}
	if at < 0.55 {
		t.Errorf("the lobe is widest at %.2f of its length", at)
	}
	if 2*widest > 0.75 {
		t.Errorf("the lobe is %.2f times as wide as long", 2*widest)
	}
	t.Logf("widest at %.3f, width %.3f, %d triangles", at, 2*widest, len(plus.Triangles))
}

func TestMeshNormalsPointOutward(t *testing.T) {
	for name, y := range shapes {
		plus, _ := lobes(y, shellNamed(name), formOf(contoured, coarse))
		wrong := 0
		for _, tri := range plus.Triangles {
			a, b, c := vertex(plus, tri[0]), vertex(plus, tri[1]), vertex(plus, tri[2])
			facing := b.Sub(a).Cross(c.Sub(a))
			n := plus.Normals[tri[0]]
			if facing.Dot(mgl64.Vec3{float64(n[0]), float64(n[1]), float64(n[2])}) < -1e-3*facing.Len() {
				wrong++
			}
		}
		if wrong > len(plus.Triangles)/100 {
			t.Errorf("%s: %d of %d triangles face against their normal", name, wrong, len(plus.Triangles))
		}
	}
}
