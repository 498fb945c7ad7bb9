package picture

import (
	"context"
	"image"
	"math"
	"testing"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/assets"
	"lobewright/orbitals/structure"
	"lobewright/render"
)

func newWork() *work.Work { return work.New(structure.Inputs{Demo: assets.Demos()}) }

// A shown is a body on a panel 80 mm wide.
type shown struct {
	*Body
	view  Viewpoint
	panel Panel
}

// bodyOf makes the body of a group orbital, or of the molecule where no irrep
// is given, with the elements of the operation that is chosen.
func bodyOf(t testing.TB, s study.Study) shown {
	t.Helper()
	ctx, w := context.Background(), newWork()
	var maker Maker
	var out shown
	g, err := w.Group(ctx, s)
	if err != nil {
		t.Fatal(err)
	}
	if s.Projection.Irrep == "" {
		out.Body = maker.Molecule(g, s)
	} else {
		o, err := w.Orbitals(ctx, s)
		if err != nil {
			t.Fatal(err)
		}
		orbital, err := o.Orbital(s.Projection)
		if err != nil {
			t.Fatal(err)
		}
		out.Body = maker.Lobes(o.Basis, orbital.Coefficients, s)
	}
	out.view = NewViewpoint(s.Camera, out.Body)
	if s.Operation != "" {
		op, err := g.Operation(s.Operation, 0)
		if err != nil {
			t.Fatal(err)
		}
		out.AddElements([]work.Operation{op}, out.view, false)
		out.view = NewViewpoint(s.Camera, out.Body)
	}
	const width, margin = 80.0, 6.0
	scale := (width - 2*margin) / out.view.Width
	out.panel = Panel{Width: width, Height: out.view.Height*scale + 2*margin, Scale: scale}
	return out
}

const testDPI = 150

func draw(t testing.TB, p shown) *image.RGBA {
	t.Helper()
	perMM := testDPI / 25.4
	pic := Picture{
		Scene: p.Scene(p.panel.Scale), Camera: p.view.Camera(p.panel), Look: p.Look(),
		Width: int(p.panel.Width * perMM), Height: int(p.panel.Height * perMM), Resolution: testDPI,
	}
	img, err := pic.Draw(context.Background())
	if err != nil {
		t.Fatal(err)
	}
	return img
}

// signAt tells whether the pixel at a point of the scene is of the colour of
// positive (+1) or negative (−1) lobes, or neither.
func signAt(p shown, img *image.RGBA, at mgl64.Vec3) int {
	x, y, _, _ := p.view.Camera(p.panel).Project(at, img.Rect.Dx(), img.Rect.Dy())
	c := img.RGBAAt(int(x), int(y))
	switch {
	case int(c.B) > int(c.R)+60: // blue
		return +1
	case int(c.R) > int(c.B)+60: // orange
		return -1
	}
	return 0
}

func TestLobesShowTheSignsOfAWorkedCase(t *testing.T) {
	// Four σ functions in a square plane, each positive toward the metal in
	// the origin. B1g is (φ1 − φ2 + φ3 − φ4)/2 with φ1 on +x, φ2 on +y, so on
	// x the inner lobes are positive and the outer ones negative, and on y the
	// other way round; Eu, partner 2, has no lobes on x and (φ2 − φ4)/√2 on y.
	const bond, inner, outer = 2.31, 0.55, 0.6
	for _, shape := range []string{"contour", "polar", "square"} {
		for _, c := range []struct {
			irrep   string
			partner int
			signs   [4]int // of the inner lobes on +x, +y, −x, −y
		}{
			{"A1g", 1, [4]int{1, 1, 1, 1}},
			{"B1g", 1, [4]int{1, -1, 1, -1}},
			{"Eu", 1, [4]int{1, 0, -1, 0}},
			{"Eu", 2, [4]int{0, 1, 0, -1}},
		} {
			s := study.Study{
				Structure: "demo:square-plane", Basis: []string{"Cl:sigma"},
				Projection: study.Projection{Irrep: c.irrep, Partner: c.partner},
				Look:       study.Look{Shape: shape}, Camera: study.Camera{Set: true, Azimuth: 45, Elevation: 60},
			}
			p := bodyOf(t, s)
			img := draw(t, p)
			for k, axis := range []mgl64.Vec3{{1, 0, 0}, {0, 1, 0}, {-1, 0, 0}, {0, -1, 0}} {
				if got := signAt(p, img, axis.Mul(bond-inner)); got != c.signs[k] {
					t.Errorf("%s, %s, partner %d: the inner lobe on %v has sign %d, want %d", shape, c.irrep, c.partner, axis, got, c.signs[k])
				}
				if got := signAt(p, img, axis.Mul(bond+outer)); got != -c.signs[k] {
					t.Errorf("%s, %s, partner %d: the outer lobe on %v has sign %d, want %d", shape, c.irrep, c.partner, axis, got, -c.signs[k])
				}
			}
		}
	}
}

// lobeLengths are the lengths of the lobes in a scene, longest first in the
// order of their atoms.
func lobeLengths(p shown) []float64 {
	var out []float64
	seen := map[*render.Affine]bool{}
	for _, s := range p.stage.scene.Shapes {
		if _, isMesh := s.Geometry.(*render.Mesh); isMesh && !seen[s.Transform] {
			seen[s.Transform] = true
			out = append(out, math.Cbrt(math.Abs(s.Transform.Linear.Det())))
		}
	}
	return out
}

func TestTheSizeOfALobeGoesWithItsCoefficient(t *testing.T) {
	// Eg, partner 1, of the octahedron is (2, 2, −1, −1, −1, −1)/√12. Two C are
	// 2.7 Å apart, 0.45 of which would be more than 0.9 of the 1.14 Å to O.
	for size, ratio := range map[string]float64{"": 2, "length": 2, "area": math.Sqrt2, "volume": math.Cbrt(2)} {
		s := study.Study{
			Structure: "demo:octahedron", Basis: []string{"C:sigma"},
			Projection: study.Projection{Irrep: "Eg"}, Look: study.Look{Size: size},
		}
		lengths := lobeLengths(bodyOf(t, s))
		if len(lengths) != 6 {
			t.Fatalf("%d lobes", len(lengths))
		}
		for i, l := range lengths {
			want := 0.9 * 1.14
			if i >= 2 {
				want /= ratio
			}
			if math.Abs(l-want) > 1e-3 {
				t.Errorf("size %q: lobe %d is %.4f Å long, want %.4f", size, i+1, l, want)
			}
		}
	}
}

// scenes are pictures of many kinds.
var scenes = map[string]study.Study{
	"water":    {Structure: "demo:water"},
	"cage":     {Structure: "demo:cage", Basis: []string{"C:s"}, Projection: study.Projection{Irrep: "T1u"}},
	"rod":      {Structure: "demo:rod", Basis: []string{"N:p"}, Projection: study.Projection{Irrep: "Πg"}},
	"sandwich": {Structure: "demo:sandwich-staggered", Basis: []string{"C:pz"}, Projection: study.Projection{Irrep: "E1u", Partner: 2}},
	"benzene":  {Structure: "demo:benzene", Basis: []string{"C:pz"}, Projection: study.Projection{Irrep: "B2g"}},
	"plane":    {Structure: "demo:furan", Operation: "σv(xz)"},
	"axis":     {Structure: "demo:hexaaqua", Operation: "S6(1)"},
	"prism":    {Structure: "demo:prism", Basis: []string{"S:d"}, Projection: study.Projection{Irrep: "E'", Copy: 2}},
	"hydrate":  {Structure: "demo:hydrate", Core: "1-7"},
	"atom":     {Structure: "ideal:ring-3,Xe", Core: "1"},
}

func TestBodiesStayOnTheirPanel(t *testing.T) {
	for name, s := range scenes {
		for _, parallel := range []bool{false, true} {
			s.Camera.Orthographic = parallel
			p := bodyOf(t, s)
			img := draw(t, p)
			ground := img.RGBAAt(0, 0)
			for x := range img.Rect.Dx() {
				for y := range img.Rect.Dy() {
					if x > 0 && x < img.Rect.Dx()-1 && y > 0 && y < img.Rect.Dy()-1 {
						continue
					}
					if img.RGBAAt(x, y) != ground {
						t.Fatalf("%s: a body reaches the rim at %d, %d", name, x, y)
					}
				}
			}
		}
	}
}

func TestNamesTouchNoBodyAndNoOtherName(t *testing.T) {
	fonts, err := FontsOf("")
	if err != nil {
		t.Fatal(err)
	}
	const size = 8
	for name, s := range scenes {
		p := bodyOf(t, s)
		labels, missing, err := p.Labels(t.Context(), p.view, p.panel, size, fonts, nil)
		if err != nil {
			t.Fatal(err)
		}
		if len(missing.Atoms)+len(missing.Elements) > 0 {
			t.Logf("%s: no room for %v", name, missing)
		}
		img := draw(t, p)
		ground := img.RGBAAt(0, 0)
		perMM := testDPI / 25.4
		for i, l := range labels {
			w, up, _ := fonts.Measure(l.Runs, l.Size)
			box := Box{l.X, l.Y - up, w, up}
			if box.X < 0 || box.Y < 0 || box.X+box.W > p.panel.Width || box.Y+box.H > p.panel.Height {
				t.Errorf("%s: %v reaches out of the panel", name, l.Runs)
			}
			for _, o := range labels[:i] {
				ow, oup, _ := fonts.Measure(o.Runs, o.Size)
				if box.meets(Box{o.X, o.Y - oup, ow, oup}) {
					t.Errorf("%s: %v and %v overlap", name, l.Runs, o.Runs)
				}
			}
			if s.Operation != "" {
				continue // one may write on a plane
			}
			for x := int(box.X * perMM); x < int((box.X+box.W)*perMM); x++ {
				for y := int(box.Y * perMM); y < int((box.Y+box.H)*perMM); y++ {
					if img.RGBAAt(x, y) != ground {
						t.Fatalf("%s: the name %v lies over a body", name, l.Runs)
					}
				}
			}
		}
	}
}

func TestZoomAndPanAreKept(t *testing.T) {
	s := scenes["water"]
	p := bodyOf(t, s)
	s.Camera.Zoom, s.Camera.Pan = 2, [2]float64{0.3, -0.2}
	q := bodyOf(t, s)
	q.panel = p.panel
	o := ball{centre: mgl64.Vec3{0, 0, 0}}
	a, b := p.view.on(p.panel, o), q.view.on(q.panel, o)
	k := p.panel.Scale
	wantX, wantY := p.panel.Width/2+2*(a.x-p.panel.Width/2)+2*0.3*k, p.panel.Height/2+2*(a.y-p.panel.Height/2)+2*0.2*k
	if math.Abs(b.x-wantX) > 0.5 || math.Abs(b.y-wantY) > 0.5 {
		t.Errorf("the origin lies at %.2f, %.2f mm, want %.2f, %.2f", b.x, b.y, wantX, wantY)
	}
}

func TestAChosenRotationIsSeen(t *testing.T) {
	s := scenes["water"]
	rows := mgl64.Rotate3DX(0.3).Mul3(mgl64.Rotate3DY(1.1)).Mul3(mgl64.Rotate3DZ(-0.4))
	s.Camera = s.Camera.WithView(rows)
	p := bodyOf(t, s)
	if got := p.view.Camera(p.panel).Rotation(); !close3(got, rows) {
		t.Errorf("seen along %v, want %v", got, rows)
	}
}

func close3(a, b mgl64.Mat3) bool {
	for i := range a {
		if math.Abs(a[i]-b[i]) > 1e-6 {
			return false
		}
	}
	return true
}

func TestPrintedSignsStandInLobesOfTheirSign(t *testing.T) {
	fonts, err := FontsOf("")
	if err != nil {
		t.Fatal(err)
	}
	s := scenes["sandwich"]
	s.Look.Signs = "printed"
	p := bodyOf(t, s)
	signs := p.Signs(p.view, p.panel, 8, fonts)
	if len(signs) < 6 {
		t.Errorf("only %d signs", len(signs))
	}
	img := draw(t, p)
	perMM := testDPI / 25.4
	for _, l := range signs {
		w, up, _ := fonts.Measure(l.Runs, l.Size)
		c := img.RGBAAt(int((l.X+w/2)*perMM), int((l.Y-up/2)*perMM))
		if blue := int(c.B) > int(c.R)+60; blue != (l.Sign > 0) {
			t.Errorf("sign %d stands on %v", l.Sign, c)
		}
	}
}

func TestHatchingMarksNegativeLobesAlone(t *testing.T) {
	s := scenes["sandwich"]
	s.Look.Signs = "hatching"
	p := bodyOf(t, s)
	hatched, plain := 0, 0
	for _, shape := range p.Scene(p.panel.Scale).Shapes {
		if _, lobe := shape.Geometry.(*render.Mesh); !lobe {
			continue
		}
		negative := shape.Material.Color == paint(p.stage.palette.Minus)
		if (shape.Material.Hatch.Period > 0) != negative {
			t.Errorf("a lobe of colour %v has the hatching %+v", shape.Material.Color, shape.Material.Hatch)
		}
		if negative {
			hatched++
		} else {
			plain++
		}
	}
	if hatched == 0 || plain == 0 {
		t.Errorf("%d hatched and %d plain lobes", hatched, plain)
	}
}
