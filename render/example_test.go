package render_test

import (
	"context"
	"fmt"
	"image"
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/render"
)

// A rod between two balls, a translucent disc, the mirror image of one ball,
// a dashed line and a triad of axes, drawn in the lit look for a page at 300
// dots an inch.
func Example() {
	var s render.Scene
	grey := render.Solid(render.RGB(0x5C6066))
	grey.ID = 1
	s.Add(render.Sphere{Center: render.Vec3{-1, 0, 0}, Radius: 0.4}, grey)
	s.Add(render.Cylinder{A: render.Vec3{-1, 0, 0}, B: render.Vec3{1, 0, 0}, Radius: 0.1}, grey)
	blue := render.Solid(render.RGB(0x0072B2))
	blue.ID = 2
	mirror := render.Linear(mgl64.Diag3(mgl64.Vec3{-1, 1, 1}))
	s.Shapes = append(s.Shapes, render.Shape{
		Geometry: render.Sphere{Center: render.Vec3{-1, 0, 0}, Radius: 0.4}, Transform: &mirror, Material: blue,
	})
	plane := render.Material{Color: render.RGB(0x007A5A), Opacity: 0.18}
	s.Add(render.Disc{Normal: render.Vec3{1, 0, 0}, Radius: 1.2}, plane)
	s.Add(render.Line{
		Points: []render.Vec3{{-2, 0, 0}, {2, 0, 0}}, Width: 0.25, Dash: []float64{1, 0.7},
	}, render.Material{Color: render.RGB(0x1F2328), Opacity: 1, Flat: true})
	for i := range 3 { // the triad: 12 % of the short side, turned with the scene
		var tip render.Vec3
		tip[i] = 1
		s.Shapes = append(s.Shapes, render.Shape{
			Geometry: render.Arrow{To: tip, Radius: 0.05}, Material: grey,
			Place: &render.Place{X: 0.15, Y: 0.15, Share: 0.12, Turn: true},
		})
	}
	camera := render.Orbit(render.Vec3{}, 8, 0.3, 0.5, 30*math.Pi/180)
	dst := image.NewRGBA(image.Rect(0, 0, 320, 240))
	quality := render.Quality{Samples: 8, DPI: 300}
	err := render.Draw(context.Background(), dst, &s, camera, render.LitLook(render.RGB(0xFCFBF8)), quality, render.Band{})
	x, y, _, _ := camera.Project(render.Vec3{1, 0, 0}, 320, 240)
	hit, ok := render.Pick(&s, camera, quality, 320, 240, int(x), int(y))
	fmt.Println(err, ok, hit.ID)
	// Output: <nil> true 2
}
