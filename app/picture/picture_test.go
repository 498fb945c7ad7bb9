package picture

import (
	"context"
	"image"
	"image/color"
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

// pictureOf makes the picture of a group orbital, or of the molecule where no
// irrep is given.
func pictureOf(t testing.TB, s study.Study) *Picture {
	t.Helper()
	ctx, w := context.Background(), newWork()
	var p *Picture
	var err error
	if s.Projection.Irrep == "" {
		g, e := w.Group(ctx, s)
		if e != nil {
			t.Fatal(e)
		}
		p, err = Molecule(g, s)
	} else {
		o, e := w.Orbitals(ctx, s)
		if e != nil {
			t.Fatal(e)
		}
		orbital, e := o.Orbital(s.Projection)
		if e != nil {
			t.Fatal(e)
		}
		p, err = Orbital(o, orbital, s)
	}
	if err != nil {
		t.Fatal(err)
	}
	return p
}

func draw(t testing.TB, p *Picture) *image.RGBA {
	t.Helper()
	img, err := p.Draw(context.Background())
	if err != nil {
		t.Fatal(err)
	}
	return img
}

// signAt tells whether the pixel at a point of the scene is of the colour of
// positive (+1) or negative (−1) lobes, or neither.
func signAt(p *Picture, img *image.RGBA, at mgl64.Vec3) int {
	x, y, _, _ := p.Camera.Project(at, p.Width, p.Height)
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
			Look:       study.Look{NoLabels: true}, Camera: study.Camera{Set: true, Azimuth: 45, Elevation: 60},
		}
		p := pictureOf(t, s)
		img := draw(t, p)
		for k, axis := range []mgl64.Vec3{{1, 0, 0}, {0, 1, 0}, {-1, 0, 0}, {0, -1, 0}} {
			if got := signAt(p, img, axis.Mul(bond-inner)); got != c.signs[k] {
				t.Errorf("%s, partner %d: the inner lobe on %v has sign %d, want %d", c.irrep, c.partner, axis, got, c.signs[k])
			}
			if got := signAt(p, img, axis.Mul(bond+outer)); got != -c.signs[k] {
				t.Errorf("%s, partner %d: the outer lobe on %v has sign %d, want %d", c.irrep, c.partner, axis, got, -c.signs[k])
			}
		}
	}
}

// lobeLengths are the lengths of the lobes in a scene, longest first in the
// order of their atoms.
func lobeLengths(p *Picture) []float64 {
	var out []float64
	seen := map[*render.Affine]bool{}
	for _, s := range p.Scene.Shapes {
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
		lengths := lobeLengths(pictureOf(t, s))
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

func TestPicturesAreOfTheSizeAsked(t *testing.T) {
	s := study.Study{Structure: "demo:water", Figure: study.Figure{Width: 85, Height: 60, Resolution: 300}}
	p := pictureOf(t, s)
	if p.Width != 1004 || p.Height != 709 { // 85/25.4·300, 60/25.4·300
		t.Errorf("%d × %d pixels", p.Width, p.Height)
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

func TestBodiesStayInThePictureAndOutOfTheTriadsCorner(t *testing.T) {
	for name, s := range scenes {
		for _, width := range []float64{40, 85, 180} {
			s.Figure.Width = width
			p := pictureOf(t, s)
			length := triadShare * float64(min(p.Width, p.Height)) * 25.4 / p.Resolution
			for i, shape := range p.Scene.Shapes {
				sphere, ok := shape.Geometry.(render.Sphere)
				if !ok || shape.Place != nil {
					continue
				}
				d := newSight(p.Camera, screen{width: p.Width, height: p.Height}).disc(ball{sphere.Center, sphere.Radius})
				whole := rectangle{0, float64(p.Width), 0, float64(p.Height)}
				if d.x-d.radius < whole.left || d.x+d.radius > whole.right || d.y-d.radius < whole.top || d.y+d.radius > whole.bottom {
					t.Errorf("%s at %g mm: body %d reaches out of the picture", name, width, i)
				}
				// The triad has its origin near the lower left corner; half of
				// its length beyond is letters.
				perMM := p.Resolution / 25.4
				triad := rectangle{0, 1.2 * length * perMM, float64(p.Height) - 1.2*length*perMM, float64(p.Height)}
				if triad.distance(d.x, d.y) < d.radius {
					t.Errorf("%s at %g mm: body %d lies over the triad", name, width, i)
				}
			}
		}
	}
}

func TestLabelsDoNotOverlap(t *testing.T) {
	for name, s := range scenes {
		p := pictureOf(t, s)
		var boxes []rectangle
		perMM := p.Resolution / 25.4
		for _, shape := range p.Scene.Shapes {
			text, ok := shape.Geometry.(render.Text)
			if !ok || shape.Place != nil {
				continue
			}
			width, ascent, _ := p.Scene.Fonts.Measure(text.Runs, text.Size)
			x, y, _, _ := p.Camera.Project(text.At, p.Width, p.Height)
			x, y = x+text.OffsetX*perMM, y-text.OffsetY*perMM
			box := rectangle{x, x + width*perMM, y - ascent*perMM, y}
			for _, other := range boxes {
				if box.overlaps(other) {
					t.Errorf("%s: two labels overlap", name)
				}
			}
			boxes = append(boxes, box)
			if box.left < 0 || box.right > float64(p.Width) || box.top < 0 || box.bottom > float64(p.Height) {
				t.Errorf("%s: a label reaches out of the picture", name)
			}
		}
	}
}

func TestPartnersAreSeenFromOnePlace(t *testing.T) {
	s := scenes["sandwich"]
	first, second := s, s
	first.Projection.Partner = 1
	a, b := pictureOf(t, first), pictureOf(t, second)
	if a.Camera != b.Camera && a.Height == b.Height {
		t.Errorf("cameras differ: %+v and %+v", a.Camera, b.Camera)
	}
}

func TestTheSamePictureGivesTheSamePixels(t *testing.T) {
	s := scenes["benzene"]
	s.Figure.Resolution = 100
	a, b := draw(t, pictureOf(t, s)), draw(t, pictureOf(t, s))
	for i := range a.Pix {
		if a.Pix[i] != b.Pix[i] {
			t.Fatalf("byte %d is %d and %d", i, a.Pix[i], b.Pix[i])
		}
	}
}

func TestGroundsAndLooksAreWhatTheyAreCalled(t *testing.T) {
	for ground, want := range map[string]color.RGBA{
		"":            {0xFC, 0xFB, 0xF8, 0xFF},
		"white":       {0xFF, 0xFF, 0xFF, 0xFF},
		"dark":        {0x14, 0x16, 0x1A, 0xFF},
		"transparent": {0, 0, 0, 0},
	} {
		for _, style := range []string{"", "ink"} {
			s := scenes["water"]
			s.Look = study.Look{Ground: ground, Style: style}
			s.Figure.Resolution = 72
			if got := draw(t, pictureOf(t, s)).RGBAAt(1, 1); got != want {
				t.Errorf("ground %q, look %q: the corner is %v, want %v", ground, style, got, want)
			}
		}
	}
}

func TestImpossiblePicturesAreRefused(t *testing.T) {
	g, err := newWork().Group(context.Background(), study.Study{Structure: "demo:water"})
	if err != nil {
		t.Fatal(err)
	}
	for _, s := range []study.Study{
		{Figure: study.Figure{Height: 5}},
		{Figure: study.Figure{Width: 1e6}},
		{Figure: study.Figure{Width: 1e-9, NoCaption: true}},
		{Operation: "C3(z)"},
	} {
		if _, err := Molecule(g, s); err == nil {
			t.Errorf("%+v: no error", s)
		}
	}
}
