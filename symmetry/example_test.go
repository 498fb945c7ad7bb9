package symmetry_test

import (
	"fmt"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/symmetry"
)

// Water: the molecule is planar, so its plane is yz; +z points to the hydrogen
// atoms, on whose side Σ Z·z from the oxygen atom is the larger.
func Example() {
	points := []symmetry.Point{
		{Position: mgl64.Vec3{0, 0, 0}, Kind: 8},
		{Position: mgl64.Vec3{0.757, -0.586, 0}, Kind: 1},
		{Position: mgl64.Vec3{-0.757, -0.586, 0}, Kind: 1},
	}
	fit, err := symmetry.Detect(points, []symmetry.Link{{0, 1}, {0, 2}}, symmetry.Options{})
	if err != nil {
		panic(err)
	}
	fmt.Println(fit.Setting.Symbol)
	for k, p := range fit.Ideal {
		fmt.Printf("%d: %.3f\n", points[k].Kind, p)
	}
	for r, o := range fit.Setting.Operations {
		fmt.Println(o.Name, fit.Permutations[r])
	}
	for _, ir := range fit.Setting.Irreps {
		fmt.Println(ir.Label, ir.Characters)
	}
	// Output:
	// C2v
	// 8: [0.000 0.000 0.000]
	// 1: [0.000 0.757 0.586]
	// 1: [0.000 -0.757 0.586]
	// E [0 1 2]
	// C2(z) [0 2 1]
	// σv(xz) [0 2 1]
	// σv'(yz) [0 1 2]
	// A1 [1 1 1 1]
	// A2 [1 1 -1 -1]
	// B1 [1 -1 1 -1]
	// B2 [1 -1 -1 1]
}
