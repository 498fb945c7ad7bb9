package render

import (
	"context"
	"math"
	"testing"
	"time"

	"github.com/go-gl/mathgl/mgl64"
)

// numbers deals out numbers from fuzz input: small ones, and now and then one
// that geometry chokes on.
type numbers struct{ data []byte }

func (n *numbers) byte() byte {
	if len(n.data) == 0 {
		return 0
	}
	b := n.data[0]
	n.data = n.data[1:]
	return b
}

func (n *numbers) float() float64 {
	b := n.byte()
	nasty := []float64{math.NaN(), math.Inf(1), math.Inf(-1), 0, math.Copysign(0, -1), 1e300, -1e300, 1e-300, 1e9, -1e9, 1e-9, 1e15, 5, 1}
	if int(b) < len(nasty) {
		return nasty[b]
	}
	return (float64(b) - 128) / 24
}

func (n *numbers) vec() Vec3 { return Vec3{n.float(), n.float(), n.float()} }

func (n *numbers) points() (p []Vec3) {
	for range n.byte() % 9 {
		p = append(p, n.vec())
	}
	return p
}

func (n *numbers) geometry() Geometry {
	switch n.byte() % 10 {
	case 0:
		return Sphere{n.vec(), n.float()}
	case 1:
		return Cylinder{n.vec(), n.vec(), n.float()}
	case 2:
		return Cone{n.vec(), n.vec(), n.float()}
	case 3:
		return Arrow{n.vec(), n.vec(), n.float(), n.float(), n.float()}
	case 4:
		return Disc{n.vec(), n.vec(), n.float(), n.float()}
	case 5:
		return Polygon{n.points()}
	case 6:
		return Line{Points: n.points(), Closed: n.byte()&1 == 1, Width: n.float(), Dash: []float64{n.float(), n.float(), n.float()}[:n.byte()%4]}
	case 7:
		return Text{At: n.vec(), Runs: []Run{{Text: "A√−σ"}, {Text: "1", Script: Sub}}, Size: n.float() * 3, AlignX: n.float(), AlignY: n.float(),
			OffsetX: n.float(), OffsetY: n.float(), Halo: n.float(), Lift: n.float(), Through: n.byte()&1 == 1}
	case 8:
		var none *Mesh
		return none
	}
	m := &Mesh{Closed: n.byte()&1 == 1}
	for _, p := range n.points() {
		m.Positions = append(m.Positions, [3]float32{float32(p[0]), float32(p[1]), float32(p[2])})
		m.Coords = append(m.Coords, [2]float32{float32(p[1]), float32(p[2])})
	}
	if n.byte()&1 == 1 {
		m.Normals = m.Positions
	}
	for range n.byte() % 12 {
		m.Triangles = append(m.Triangles, [3]uint32{uint32(n.byte() % 10), uint32(n.byte() % 10), uint32(n.byte() % 10)})
	}
	return m
}

// Whatever the scene, drawing ends soon, does not panic and keeps colours
// below their opacity.
func FuzzDraw(f *testing.F) {
	f.Add([]byte{3, 60, 90, 200, 40, 0, 140, 150, 130, 170, 20})
	f.Add([]byte{1, 2, 200, 190, 180, 170, 160, 9, 1, 8, 40, 90, 140, 200, 80, 30, 60, 70, 80, 90, 1, 11, 0, 1, 2, 1, 2, 3, 2, 3, 4})
	f.Add([]byte{0, 128, 128, 128, 6, 5, 128, 128, 200, 90, 90, 90, 20, 20, 220, 200, 40, 7, 7, 7, 90, 90})
	f.Add([]byte("1000\xd9\xd9\xd900009\xd9\xd9X\xd90\xd900"))
	f.Add([]byte("000010000b9A\xb1cÄ00"))
	fonts := testFonts(f)
	f.Fuzz(func(t *testing.T, data []byte) {
		n := &numbers{data}
		s := &Scene{Fonts: fonts}
		head := n.byte()
		c := Camera{Eye: n.vec(), Target: n.vec(), Up: n.vec(), FovY: 0.6}
		switch head % 4 {
		case 1:
			c.Height = math.Abs(n.float())
		case 2:
			c.Near, c.Far = n.float(), n.float()
		case 3:
			c.Eye = Vec3{} // inside of whatever lies at the origin
		}
		for len(n.data) > 0 && len(s.Shapes) < 12 {
			sh := Shape{Geometry: n.geometry(), Material: Material{Color: Color{n.byte(), n.byte(), n.byte()}, Opacity: 1, Gloss: 1, ID: 1}}
			k := n.byte()
			if k&1 == 1 {
				sh.Material.Opacity = n.float()
			}
			if k&2 == 2 {
				sh.Transform = &Affine{mgl64.Mat3{n.float(), n.float(), n.float(), n.float(), n.float(), n.float(), n.float(), n.float(), n.float()}, n.vec()}
			}
			if k&4 == 4 {
				sh.Material.Hatch = Hatch{Period: n.float(), Width: n.float(), Second: k&8 == 8}
			}
			if k&16 == 16 {
				sh.Place = &Place{X: n.float(), Y: n.float(), Unit: n.float(), Share: n.float(), Turn: k&32 == 32}
			}
			s.Shapes = append(s.Shapes, sh)
		}
		look := looks[int(head/4)%3].look
		m := newImage(53, 41)
		start := time.Now()
		ctx, cancel := context.WithTimeout(context.Background(), 20*time.Second)
		defer cancel()
		if err := Draw(ctx, m, s, c, look, Quality{Samples: 1 << (head / 16 % 5), DPI: 96, Workers: 1}, Band{}); err != nil && ctx.Err() != nil {
			t.Fatalf("drawing took %v", time.Since(start))
		}
		if d := time.Since(start); d > 5*time.Second {
			t.Fatalf("drawing took %v", d)
		}
		for i := 0; i < len(m.Pix); i += 4 {
			if a := m.Pix[i+3]; m.Pix[i] > a || m.Pix[i+1] > a || m.Pix[i+2] > a {
				t.Fatalf("a colour above its opacity: %v", m.Pix[i:i+4])
			}
		}
		Pick(s, c, Quality{}, 53, 41, 26, 20)
	})
}
