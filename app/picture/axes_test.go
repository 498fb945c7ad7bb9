package picture

import (
	"testing"

	"lobewright/app/study"
	"lobewright/render"
)

// The ends of the axes of two frames stand out of what lies on them, at every size.
func TestAxesReachBeyondWhatLiesOnThem(t *testing.T) {
	for _, s := range []study.Study{
		{Structure: "demo:square-plane", Basis: []string{"Cl:sigma"}, Projection: study.Projection{Irrep: "Eu"}, Held: study.Held{Frame: "x-between"}},
		{Structure: "demo:square-plane", Basis: []string{"Cl:sigma"}, Projection: study.Projection{Irrep: "B1g"}, Held: study.Held{Frame: "x-between"}},
		{Structure: "demo:square-plane", Held: study.Held{Frame: "x-between"}},
		{Structure: "demo:water", Basis: []string{"H:s", "O:p"}, Projection: study.Projection{Irrep: "B2"}, Held: study.Held{Frame: "plane-xz"}},
		{Structure: "demo:octahedron", Basis: []string{"C:sigma"}, Projection: study.Projection{Irrep: "T1u"}},
		{Structure: "demo:rod", Basis: []string{"N:s,p"}, Projection: study.Projection{Irrep: "Σu+"}},
	} {
		w := newWork()
		g, err := w.Group(t.Context(), s)
		if err != nil {
			t.Fatal(err)
		}
		var m Maker
		body := m.Molecule(g, s)
		if len(s.Basis) > 0 {
			o, err := w.Orbitals(t.Context(), s)
			if err != nil {
				t.Fatal(err)
			}
			orbital, err := o.Orbital(s.Projection)
			if err != nil {
				t.Fatal(err)
			}
			body = m.Lobes(o.Basis, orbital.Coefficients, s)
		}
		held, err := g.Held(s.Held)
		if err != nil {
			t.Fatal(err)
		}
		body.AddTriads(held)
		v := NewViewpoint(s.Camera, body)
		p := Panel{Width: 80, Height: 80, Scale: 80 / max(v.Width, v.Height)}
		const density = 10
		scene := body.Scene(p.Scale)
		var r render.Renderer
		for _, a := range body.axes {
			for _, share := range []float64{0.95, 0.99} {
				at := v.on(p, ball{centre: a.centre.Mul(share)})
				hit, ok := r.Pick(&scene, v.Camera(p), render.Quality{DPI: density * 25.4}, 80*density, 80*density, int(at.x*density), int(at.y*density))
				if ok {
					t.Errorf("%s %s: at %g of %s one sees body %d", s.Structure, s.Projection.Irrep, share, a.letter.String(), hit.ID)
				}
			}
		}
	}
}
