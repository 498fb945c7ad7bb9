package render

import (
	"encoding/json"
	"image"
	"math"
	"os"
	"testing"

	"github.com/go-gl/mathgl/mgl64"
)

// The benchmark scenes, as testdata/render/scenes.json has them.

type jsonLobe struct {
	F       string     `json:"f"`
	C, U, V mgl64.Vec3 `json:""`
	S       float64    `json:"s"`
	NT      int        `json:"nt"`
	NF      int        `json:"nf"`
	RGB     [3]uint8   `json:"rgb"`
	RGBOut  [3]uint8   `json:"rgb_out"`
	RGBIn   [3]uint8   `json:"rgb_in"`
}

type jsonScene struct {
	Extends string
	Camera  struct {
		Dist float64
		Elev float64 `json:"elev_deg"`
		Azim float64 `json:"azim_deg"`
	}
	Spheres []struct {
		C   mgl64.Vec3
		R   float64
		RGB [3]uint8
	}
	Cylinders []struct {
		A, B mgl64.Vec3
		R    float64
		RGB  [3]uint8
	}
	Lobes []jsonLobe
	Discs []struct {
		C, N  mgl64.Vec3
		R     float64
		RGB   [3]uint8
		Alpha float64
	}
	LobeAlpha float64 `json:"lobe_alpha"`
	Points    []mgl64.Vec3
	Sphere    struct {
		R   float64
		RGB [3]uint8
	} `json:"sphere_at_points"`
	Bonds    [][2]int
	Cylinder struct {
		R   float64
		RGB [3]uint8
	} `json:"cylinder_at_bonds"`
	Radial jsonLobe `json:"radial_lobes_at_points"`
}

// benchScene returns a scene and its camera at a step of the turntable.
func benchScene(t testing.TB, name string) (*Scene, func(step int) Camera) {
	t.Helper()
	data, err := os.ReadFile("../testdata/render/scenes.json")
	if err != nil {
		t.Fatal(err)
	}
	var doc struct{ Scenes map[string]jsonScene }
	if err := json.Unmarshal(data, &doc); err != nil {
		t.Fatal(err)
	}
	sc := doc.Scenes[name]
	if sc.Extends != "" {
		base := doc.Scenes[sc.Extends]
		base.LobeAlpha, base.Discs = sc.LobeAlpha, sc.Discs
		sc = base
	}
	mat := func(c [3]uint8, a float64) Material {
		m := Solid(Color{c[0], c[1], c[2]})
		if a > 0 {
			m.Opacity = a
		}
		return m
	}
	s := &Scene{}
	for _, o := range sc.Spheres {
		s.Add(Sphere{o.C, o.R}, mat(o.RGB, 1))
	}
	for _, o := range sc.Cylinders {
		s.Add(Cylinder{o.A, o.B, o.R}, mat(o.RGB, 1))
	}
	for _, o := range sc.Lobes {
		s.Add(lobeMesh(o), mat(o.RGB, sc.LobeAlpha))
	}
	for _, p := range sc.Points {
		s.Add(Sphere{p, sc.Sphere.R}, mat(sc.Sphere.RGB, 1))
		u := p.Normalize()
		k := 0
		for i := range 3 {
			if math.Abs(u[i]) < math.Abs(u[k]) {
				k = i
			}
		}
		var e mgl64.Vec3
		e[k] = 1
		v := e.Sub(u.Mul(e.Dot(u))).Normalize()
		for k, c := range [2][3]uint8{sc.Radial.RGBOut, sc.Radial.RGBIn} {
			sign := float64(1 - 2*k)
			l := sc.Radial
			l.C, l.U, l.V = p, u.Mul(sign), v
			s.Add(lobeMesh(l), mat(c, 1))
		}
	}
	for _, b := range sc.Bonds {
		s.Add(Cylinder{sc.Points[b[0]], sc.Points[b[1]], sc.Cylinder.R}, mat(sc.Cylinder.RGB, 1))
	}
	for _, o := range sc.Discs {
		s.Add(Disc{Center: o.C, Normal: o.N, Radius: o.R}, mat(o.RGB, o.Alpha))
	}
	const deg = math.Pi / 180
	return s, func(step int) Camera {
		c := Orbit(Vec3{}, sc.Camera.Dist, sc.Camera.Elev*deg, (sc.Camera.Azim+10*float64(step))*deg, 30*deg)
		c.Near, c.Far = 1, 60
		return c
	}
}

// lobeMesh makes a lobe by the formula of the scenes.
func lobeMesh(l jsonLobe) *Mesh {
	m := &Mesh{Closed: true}
	w := l.U.Cross(l.V)
	add := func(p, n mgl64.Vec3, u, v float64) {
		n = n.Normalize()
		m.Positions = append(m.Positions, [3]float32{float32(p[0]), float32(p[1]), float32(p[2])})
		m.Normals = append(m.Normals, [3]float32{float32(n[0]), float32(n[1]), float32(n[2])})
		m.Coords = append(m.Coords, [2]float32{float32(u), float32(v)})
	}
	add(l.C.Add(l.U.Mul(l.S)), l.U, 0, 0)
	prev := 0
	for i := 1; i < l.NT; i++ {
		start := len(m.Positions)
		for j := 0; j < l.NF; j++ {
			phi := 2 * math.Pi * float64(j) / float64(l.NF)
			cp, sp := math.Cos(phi), math.Sin(phi)
			most := math.Pi / 2
			switch l.F {
			case "d4":
				most = math.Atan2(1, math.Abs(cp))
			case "dz2":
				most = math.Acos(1 / math.Sqrt(3))
			}
			a := most * float64(i) / float64(l.NT)
			d := l.U.Mul(math.Cos(a)).Add(l.V.Mul(cp).Add(w.Mul(sp)).Mul(math.Sin(a)))
			du, dv := d.Dot(l.U), d.Dot(l.V)
			f := du
			switch l.F {
			case "d4":
				f = du*du - dv*dv
			case "dz2":
				f = (3*du*du - 1) / 2
			}
			r := l.S * math.Abs(f)
			x := d.Mul(r)
			var n mgl64.Vec3
			switch l.F {
			case "p":
				n = x.Mul(2).Sub(l.U.Mul(l.S))
			case "d4":
				n = x.Mul(3 * r).Sub(l.U.Mul(du).Sub(l.V.Mul(dv)).Mul(2 * l.S * r))
			default:
				n = x.Mul(3 * r).Sub(l.U.Mul(3 * r * du).Sub(x).Mul(l.S))
			}
			add(l.C.Add(x), n, a*l.S, phi)
		}
		for j := 0; j < l.NF; j++ {
			a, b := uint32(start+j), uint32(start+(j+1)%l.NF)
			if i == 1 {
				m.Triangles = append(m.Triangles, [3]uint32{0, a, b})
				continue
			}
			c, d := uint32(prev+j), uint32(prev+(j+1)%l.NF)
			m.Triangles = append(m.Triangles, [3]uint32{c, a, b}, [3]uint32{c, b, d})
		}
		prev = start
	}
	end := uint32(len(m.Positions))
	add(l.C, l.U.Mul(-1), math.Pi/2*l.S, 0)
	for j := 0; j < l.NF; j++ {
		m.Triangles = append(m.Triangles, [3]uint32{uint32(prev + j), end, uint32(prev + (j+1)%l.NF)})
	}
	return m
}

func newImage(w, h int) *image.RGBA { return image.NewRGBA(image.Rect(0, 0, w, h)) }
