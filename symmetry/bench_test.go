package symmetry

import (
	"fmt"
	"testing"

	"github.com/go-gl/mathgl/mgl64"
)

// cage60 is a truncated icosahedron with edges of 1.43 Å.
func cage60() []Point {
	var out []Point
	const s = 1.43 / 2
	for _, v := range [][3]float64{{0, 1, 3 * golden}, {1, 2 + golden, 2 * golden}, {golden, 2, 2*golden + 1}} {
		for sign := range 8 {
			for cycle := range 3 {
				var p mgl64.Vec3
				for i := range 3 {
					x := v[i]
					if sign>>i&1 == 1 {
						x = -x
					}
					p[(i+cycle)%3] = s * x
				}
				fresh := true
				for _, q := range out {
					fresh = fresh && q.Position.Sub(p).Len() > 0.1
				}
				if fresh {
					out = append(out, Point{p, 6})
				}
			}
		}
	}
	return out
}

// cubicCluster is a piece of a body of cubic symmetry, two kinds in turn, with
// a number of atoms a side that is odd, so that one lies in the middle.
func cubicCluster(side int) []Point {
	var out []Point
	half := side / 2
	for x := -half; x <= half; x++ {
		for y := -half; y <= half; y++ {
			for z := -half; z <= half; z++ {
				kind := 11
				if (x+y+z)&1 != 0 {
					kind = 17
				}
				out = append(out, Point{mgl64.Vec3{2.8 * float64(x), 2.8 * float64(y), 2.8 * float64(z)}, kind})
			}
		}
	}
	return out
}

func tilted(points []Point) []Point {
	q := mgl64.QuatRotate(0.7, mgl64.Vec3{1, 2, 3}.Normalize()).Mat4().Mat3()
	out := make([]Point, len(points))
	for i, p := range points {
		out[i] = Point{q.Mul3x1(p.Position), p.Kind}
	}
	return out
}

func BenchmarkDetectCage60(b *testing.B) {
	points := tilted(cage60())
	if len(points) != 60 {
		b.Fatal(len(points))
	}
	for b.Loop() {
		if fit := mustDetect(b, points, 0); fit.Setting.Symbol != "Ih" {
			b.Fatal(fit.Setting.Symbol)
		}
	}
}

func BenchmarkDetectCubic(b *testing.B) {
	for _, side := range []int{5, 9, 11, 21, 27} {
		points := tilted(cubicCluster(side))
		b.Run(fmt.Sprint(len(points)), func(b *testing.B) {
			for b.Loop() {
				fit, err := Detect(points, nil, Options{})
				if err != nil || fit.Setting.Symbol != "Oh" {
					b.Fatal(err)
				}
			}
		})
	}
}

func BenchmarkNew(b *testing.B) {
	for _, symbol := range []string{"D4h", "Oh", "Ih", "D24h"} {
		b.Run(symbol, func(b *testing.B) {
			for b.Loop() {
				mustNew(b, symbol)
			}
		})
	}
}
