package picture

import (
	"math"
	"testing"

	"lobewright/render"
)

func TestPolarPlotsAreAsFarFromTheAtomAsTheFunctionIsLarge(t *testing.T) {
	for name, y := range shapes {
		y := normalized(y)
		for shape, power := range map[string]float64{polar: 1, square: 2} {
			plus, minus := lobes(y, shellNamed(name), formOf(shape, coarse))
			for sign, mesh := range map[float64]*render.Mesh{+1: plus, -1: minus} {
				for i := range mesh.Positions {
					p := vertex(mesh, uint32(i))
					if p.Len() == 0 {
						continue
					}
					v := sign * y(p.Normalize())
					if want := math.Pow(max(0, v), power); math.Abs(p.Len()-want) > 1e-5 {
						t.Fatalf("%s, %s: a point at %g, where the function is %g", name, shape, p.Len(), v)
					}
				}
			}
		}
	}
}

func TestPolarPlotsHaveTheirVolume(t *testing.T) {
	// |cos θ| is two spheres of diameter 1, of volume π/6 each; cos²θ encloses
	// 2π/3 · ∫₀¹ x⁶ dx = 2π/21 on each side.
	for shape, want := range map[string]float64{polar: math.Pi / 6, square: 2 * math.Pi / 21} {
		plus, minus := lobes(alongZ, 1, formOf(shape, fine))
		for _, mesh := range []*render.Mesh{plus, minus} {
			if v := volume(mesh); math.Abs(v-want) > 0.02*want {
				t.Errorf("%s: volume %.4f, want %.4f", shape, v, want)
			}
		}
	}
}

func TestPolarNormalsPointOutward(t *testing.T) {
	for name, y := range shapes {
		plus, _ := lobes(y, shellNamed(name), formOf(polar, coarse))
		wrong := 0
		for _, tri := range plus.Triangles {
			a, b, c := vertex(plus, tri[0]), vertex(plus, tri[1]), vertex(plus, tri[2])
			facing := b.Sub(a).Cross(c.Sub(a))
			for _, i := range tri {
				n := plus.Normals[i]
				if facing[0]*float64(n[0])+facing[1]*float64(n[1])+facing[2]*float64(n[2]) < -1e-3*facing.Len() {
					wrong++
					break
				}
			}
		}
		if wrong > len(plus.Triangles)/50 {
			t.Errorf("%s: %d of %d triangles face against a normal", name, wrong, len(plus.Triangles))
		}
	}
}
