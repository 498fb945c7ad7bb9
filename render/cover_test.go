package render

import (
	"context"
	"image"
	"math"
	"math/rand/v2"
	"testing"

	"github.com/go-gl/mathgl/mgl64"
)

// flat draws a scene of unlit shapes seen straight on: one unit is 100
// pixels, the origin in the middle.
func drawFlat(t testing.TB, s *Scene, w, h, samples int) *image.RGBA {
	t.Helper()
	m := newImage(w, h)
	c := Camera{Eye: Vec3{0, 0, 10}, Up: Vec3{0, 1, 0}, Height: float64(h) / 100}
	if err := Draw(context.Background(), m, s, c, PlainLook(Color{}), Quality{Samples: samples}, Band{}); err != nil {
		t.Fatal(err)
	}
	return m
}

// inkedArea sums the red channel as an area in pixels.
func inkedArea(m *image.RGBA) float64 {
	sum := 0.0
	for i := 0; i < len(m.Pix); i += 4 {
		sum += float64(m.Pix[i]) / 255
	}
	return sum
}

var flatWhite = Material{Color: white, Opacity: 1, Flat: true}

func TestAreasAreExact(t *testing.T) {
	third := Vec3{0.37, -0.21, 0}
	cases := []struct {
		name string
		g    Geometry
		want float64 // in pixels
	}{
		{"sphere", Sphere{third, 1.3}, math.Pi * 130 * 130},
		{"disc", Disc{Center: third, Normal: Vec3{0, 0, 1}, Radius: 1.3}, math.Pi * 130 * 130},
		{"slanted disc", Disc{Center: third, Normal: Vec3{0, 0.6, 0.8}, Radius: 1.3}, math.Pi * 130 * 130 * 0.8},
		{"ring", Disc{Center: third, Normal: Vec3{0, 0, 1}, Radius: 1.3, Hole: 0.4}, math.Pi * (130*130 - 40*40)},
		{"cylinder from the side", Cylinder{Vec3{-1, -0.5, 0}, Vec3{1.2, 0.7, 0}, 0.2}, 40 * 100 * math.Hypot(2.2, 1.2)},
		{"cylinder from its end", Cylinder{Vec3{0, 0, -1}, Vec3{0, 0, 1}, 0.7}, math.Pi * 70 * 70},
		{"cone from the side", Cone{Vec3{-1, 0, 0}, Vec3{1, 0.3, 0}, 0.5}, 100 * math.Hypot(200, 30) / 2},
		{"triangle", Polygon{[]Vec3{{-1, -1, 0}, {1.3, -0.4, 0}, {0.2, 1.1, 0}}}, 1e4 * 0.5 * math.Abs(2.3*2.1-0.6*1.2)},
		{"arrow-shaped polygon", Polygon{[]Vec3{{-1, -1, 0}, {0, -0.3, 0}, {1, -1, 0}, {0, 1, 0}}}, 1e4 * (2 - 0.7)},
		{"line", Line{Points: []Vec3{{-1, 0.2, 0}, {1, 0.6, 0}}, Width: 10 * 25.4 / 96}, 10*math.Hypot(200, 40) + math.Pi*25},
		{"dashed line", Line{Points: []Vec3{{-1, 0.2, 0}, {1, 0.2, 0}}, Width: 10 * 25.4 / 96, Dash: []float64{30 * 25.4 / 96, 10 * 25.4 / 96}}, 10 * 150},
	}
	for _, c := range cases {
		for _, n := range []int{1, 4, 8, 16} {
			if n == 1 && c.name == "dashed line" {
				continue // level and upright edges all err the same way
			}
			var s Scene
			s.Add(c.g, flatWhite)
			got := inkedArea(drawFlat(t, &s, 401, 333, n))
			// The rim decides: its length is at most 4√area here, and a
			// sample pattern of n places errs by about 1/n of a pixel now
			// in one direction and now in the other.
			if tol := 0.35 * math.Sqrt(c.want) / math.Sqrt(float64(n)); math.Abs(got-c.want) > tol {
				t.Errorf("%s with %d samples: area %.1f pixels, want %.1f ± %.1f", c.name, n, got, c.want, tol)
			}
		}
	}
}

// A square cut into many triangles covers each sample once: translucent
// triangles of one flat mesh leave no seam and no double cover.
func TestTrianglesShareTheirEdges(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	m := &Mesh{}
	const n = 24
	for i := 0; i <= n; i++ {
		for j := 0; j <= n; j++ {
			x, y := float32(j)/n*2-1, float32(i)/n*2-1
			if i > 0 && i < n && j > 0 && j < n {
				x += (rng.Float32() - 0.5) / n
				y += (rng.Float32() - 0.5) / n
			}
			m.Positions = append(m.Positions, [3]float32{x, y, 0})
		}
	}
	m.grid(n, n)
	for _, samples := range []int{1, 4, 8, 16} {
		for _, scale := range []float64{0.09, 0.31, 1, 9} { // small triangles, large triangles
			var s Scene
			tr := Linear(mgl64.Ident3().Mul(scale))
			s.Shapes = append(s.Shapes, Shape{Geometry: m, Transform: &tr, Material: Material{Color: white, Opacity: 0.5, Flat: true}})
			p := drawFlat(t, &s, 200, 200, samples)
			half := int(100 * math.Min(scale, 1))
			for y := 100 - half + 2; y < 100+half-2; y++ {
				for x := 100 - half + 2; x < 100+half-2; x++ {
					if v := p.RGBAAt(x, y).R; v < 127 || v > 128 {
						t.Fatalf("%d samples, scale %g: pixel %d,%d is %d, want 127 or 128", samples, scale, x, y, v)
					}
				}
			}
		}
	}
}

// A plane through the middle of a ball hides exactly its lower half, and a
// ball moved by half its radius through a plane shows the right cap.
func TestPlaneThroughSphere(t *testing.T) {
	red := Material{Color: Color{255, 0, 0}, Opacity: 1, Flat: true}
	for _, depth := range []float64{-0.5, 0, 0.5} {
		var s Scene
		s.Add(Sphere{Vec3{0, 0, depth}, 1}, red)
		s.Add(Disc{Normal: Vec3{0, 0, 1}, Radius: 1.8}, Material{Color: Color{0, 255, 0}, Opacity: 1, Flat: true})
		got := inkedArea(drawFlat(t, &s, 400, 400, 16))
		r2 := 1.0 // square of the radius of what stands out of the plane
		if depth < 0 {
			r2 = 1 - depth*depth
		}
		if want := math.Pi * 1e4 * r2; math.Abs(got-want) > 20 {
			t.Errorf("ball at %g: %.0f pixels stand out, want %.0f", depth, got, want)
		}
	}
}

// The depth of a surface is where geometry says, in perspective and without.
func TestPickedPointsLieOnTheSurface(t *testing.T) {
	var s Scene
	mat := Solid(white)
	for i, g := range []Geometry{
		Sphere{Vec3{-2, 0, 0.3}, 0.9}, Cylinder{Vec3{0, -1, 0}, Vec3{0.5, 1, 1}, 0.4},
		Cone{Vec3{2, -1, 0}, Vec3{2, 1, 0.5}, 0.8}, Disc{Center: Vec3{0, 2, 0}, Normal: Vec3{0, 1, 2}, Radius: 0.6},
	} {
		mat.ID = i + 1
		s.Add(g, mat)
	}
	for _, ortho := range []bool{false, true} {
		c := Orbit(Vec3{0, 0.4, 0}, 12, 0.2, 0.3, 0.6)
		if ortho {
			c = c.Orthographic()
		}
		seen := map[int]int{}
		for y := 0; y < 300; y += 7 {
			for x := 0; x < 400; x += 7 {
				h, ok := Pick(&s, c, Quality{}, 400, 300, x, y)
				if !ok {
					continue
				}
				seen[h.ID]++
				if d := offSurface(s.Shapes[h.Shape].Geometry, h.Point); math.Abs(d) > 2e-3 {
					t.Errorf("orthographic %v: picked point of shape %d is %.2g off its surface", ortho, h.Shape, d)
				}
				px, py, _, _ := c.Project(h.Point, 400, 300)
				if math.Hypot(px-float64(x)-0.5, py-float64(y)-0.5) > 0.01 {
					t.Errorf("orthographic %v: picked point projects to %.2f, %.2f, not to the pixel %d, %d", ortho, px, py, x, y)
				}
			}
		}
		if len(seen) != 4 {
			t.Errorf("orthographic %v: picked %v, want all four shapes", ortho, seen)
		}
	}
}

// offSurface is the distance of a point from a surface.
func offSurface(g Geometry, p Vec3) float64 {
	rod := func(a, b Vec3) (along, across, long float64) {
		u := b.Sub(a).Normalize()
		z := p.Sub(a).Dot(u)
		return z, p.Sub(a).Sub(u.Mul(z)).Len(), b.Sub(a).Len()
	}
	switch g := g.(type) {
	case Sphere:
		return p.Sub(g.Center).Len() - g.Radius
	case Disc:
		return p.Sub(g.Center).Dot(g.Normal.Normalize())
	case Cylinder:
		z, r, l := rod(g.A, g.B)
		return math.Max(r-g.Radius, math.Max(-z, z-l))
	case Cone:
		z, r, l := rod(g.Base, g.Apex)
		if z < 1e-3 {
			return z
		}
		return (r - g.Radius*(1-z/l)) * l / math.Hypot(l, g.Radius)
	}
	return 1
}

// The assembly finds the same samples with the same nearness as plain Go.
func TestVectorKernelEqualsPlainGo(t *testing.T) {
	if !useVectors {
		t.Skip("no vector instructions")
	}
	defer func() { useVectors = true }()
	rng := rand.New(rand.NewPCG(3, 4))
	for round := range 300 {
		var s Scene
		m := &Mesh{}
		for i := range 30 {
			size := math.Pow(10, -2.5+2.5*rng.Float64())
			c := Vec3{rng.Float64()*2 - 1, rng.Float64()*2 - 1, rng.Float64()}
			for range 3 {
				m.Positions = append(m.Positions, [3]float32{
					float32(c[0] + size*rng.NormFloat64()), float32(c[1] + size*rng.NormFloat64()), float32(c[2] + size*rng.NormFloat64())})
			}
			m.Triangles = append(m.Triangles, [3]uint32{uint32(3 * i), uint32(3*i + 1), uint32(3*i + 2)})
			if round%3 > 0 { // with normals, and as if it had an inside
				for range 3 {
					m.Normals = append(m.Normals, [3]float32{float32(rng.NormFloat64()), float32(rng.NormFloat64()), float32(rng.NormFloat64())})
				}
			}
			m.Closed = round%3 == 2
			if i%10 == 0 {
				s.Add(Sphere{c, size}, Solid(Color{90, 160, 40}))
				s.Add(Cylinder{c, Vec3{rng.NormFloat64(), rng.NormFloat64(), 0}, size / 3}, Solid(Color{30, 60, 140}))
				s.Add(Cone{c.Mul(-1), Vec3{rng.NormFloat64(), rng.NormFloat64(), 0}, size}, Solid(Color{130, 60, 140}))
			}
		}
		mat := Solid(Color{200, 120, 40})
		if round%2 == 1 {
			mat.Opacity = 0.4
		}
		s.Add(m, mat)
		var got [2]*image.RGBA
		for k, on := range []bool{true, false} {
			useVectors = on
			got[k] = newImage(99, 77)
			if err := Draw(context.Background(), got[k], &s, Orbit(Vec3{}, 6, 0.3, float64(round), 0.5), looks[round%len(looks)].look, Quality{Samples: 4}, Band{}); err != nil {
				t.Fatal(err)
			}
		}
		if n, worst := countDifferent(got[0], got[1], 0); n > 0 {
			t.Fatalf("round %d: %d pixels differ, by up to %d", round, n, worst)
		}
	}
}

// The assembly of the lit look's shade adds up the same shares.
func TestVectorShadeEqualsPlainGo(t *testing.T) {
	if !useVectors {
		t.Skip("no vector instructions")
	}
	rng := rand.New(rand.NewPCG(7, 8))
	for range 200 {
		n := 1 + rng.IntN(5)
		var l near
		for range n {
			b := emptyBlock
			for i := range b {
				b[i] = float32(rng.NormFloat64())
			}
			for i := range 8 {
				b[24+i] = float32(0.1 + rng.Float64())
				b[32+i] = b[24+i] * b[24+i]
			}
			l.blocks = append(l.blocks, b[:]...)
		}
		k := skyKernel{x: rng.Float32(), y: rng.Float32(), z: rng.Float32(), nx: 0.6, ny: 0.48, nz: 0.64, faintest: faintest}
		k.hidden(&l)
		got := k.sum
		k.skyPlain(l.blocks)
		if got != k.sum {
			t.Fatalf("assembly %v, plain Go %v", got, k.sum)
		}
	}
}

// Wide outlines make the canvas of a tile wide: triangles as large as it are
// drawn like small ones.
func TestWideOutlines(t *testing.T) {
	s, c := translucentScene(t)
	look := InkLook(white, Color{})
	for _, width := range []float64{0.5, 3, 12, 40} { // millimetres
		look.OutlineWidth = width
		m := draw(t, s, c, look, 200, 150, Quality{Samples: 4, DPI: 100})
		dark := 0
		for i := 0; i < len(m.Pix); i += 4 {
			if m.Pix[i] < 40 && m.Pix[i+1] < 40 && m.Pix[i+2] < 40 {
				dark++
			}
		}
		if share := float64(dark) / (200 * 150); width == 40 && share < 0.6 || width == 0.5 && share > 0.4 {
			t.Errorf("outlines of %g mm blacken %.2f of the picture", width, share)
		}
	}
}
