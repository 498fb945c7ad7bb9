package picture

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/work"
	"lobewright/render"
)

// nodeOpacity keeps a nodal plane so light that lobes are seen through it.
const nodeOpacity = 0.07

// addNodes draws nodal planes: light discs with a dashed rim, so that they are
// not taken for the planes of operations.
func (s *stage) addNodes(planes []work.NodalPlane, centre mgl64.Vec3, reach float64) {
	tone := func(opacity float64) render.Material {
		return render.Material{Color: paint(s.palette.Quiet), Opacity: opacity, Flat: true, NoOutline: true}
	}
	for _, p := range planes {
		middle := centre.Sub(p.Normal.Mul(p.Normal.Dot(centre)))
		s.scene.Add(render.Disc{Center: middle, Normal: p.Normal, Radius: reach}, tone(nodeOpacity))
		u, v := across(p.Normal)
		const corners = 96
		rim := make([]mgl64.Vec3, corners)
		for k := range rim {
			sin, cos := math.Sincos(2 * math.Pi * float64(k) / corners)
			rim[k] = middle.Add(u.Mul(reach * cos)).Add(v.Mul(reach * sin))
			s.elements = append(s.elements, ball{rim[k], rimRoom})
		}
		s.scene.Add(render.Line{Points: rim, Closed: true, Width: 0.25, Dash: []float64{1.2, 0.9}}, tone(1))
	}
}

// nodeReach is how far nodal planes reach beyond bodies within a radius: a
// little less than the planes of operations, so that both are seen.
func nodeReach(radius float64) float64 { return radius + minOverhang/2 }

// AddNodes draws nodal planes beyond everything that the body shows.
func (b *Body) AddNodes(planes []work.NodalPlane) {
	if len(planes) == 0 {
		return
	}
	centre, radius := enclosing(b.must())
	b.stage.addNodes(planes, centre, nodeReach(radius))
}
