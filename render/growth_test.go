package render

import (
	"context"
	"math"
	"os"
	"testing"
	"time"
)

// How time grows with pixels and with triangles, and what a figure for print
// costs. It says and does not judge; set RENDER_GROWTH to run it.
func TestGrowth(t *testing.T) {
	if os.Getenv("RENDER_GROWTH") == "" {
		t.Skip("RENDER_GROWTH is not set")
	}
	var r Renderer
	cost := func(s *Scene, c Camera, look Look, w, h int, q Quality, rounds int) (wall, cpu float64) {
		wall, cpu = math.Inf(1), math.Inf(1)
		m := newImage(w, h)
		for range rounds {
			a, b := time.Now(), cpuTime()
			if err := r.Draw(context.Background(), m, s, c, look, q, Band{}); err != nil {
				t.Fatal(err)
			}
			wall, cpu = math.Min(wall, float64(time.Since(a))/1e6), math.Min(cpu, float64(cpuTime()-b)/1e6)
		}
		return wall, cpu
	}
	s1, camera := benchScene(t, "S1")
	for _, size := range [][2]int{{960, 540}, {1360, 765}, {1920, 1080}, {2720, 1530}, {3840, 2160}} {
		for _, l := range looks {
			wall, cpu := cost(s1, camera(0), l.look, size[0], size[1], Quality{Samples: 4}, 6)
			t.Logf("S1 %s, %.1f megapixels: wall %.1f ms, processor %.1f ms", l.name, float64(size[0]*size[1])/1e6, wall, cpu)
		}
	}
	for _, l := range looks {
		wall, cpu := cost(s1, camera(0), l.look, 4252, 4252, Quality{Samples: 8, DPI: 600}, 2)
		t.Logf("S1 %s, 180 mm × 180 mm at 600 dots an inch, 8 samples: wall %.0f ms, processor %.0f ms", l.name, wall, cpu)
	}
	for _, rows := range []int{50, 158, 500, 1581} {
		m := ballMesh(rows, 2*rows)
		var s Scene
		s.Add(m, Solid(RGB(0x0072B2)))
		wall, cpu := cost(&s, Orbit(Vec3{}, 5, 0.3, 0.4, 0.6), PlainLook(white), 1920, 1080, Quality{Samples: 4}, 3)
		t.Logf("ball of %d triangles: wall %.1f ms, processor %.1f ms", len(m.Triangles), wall, cpu)
	}
	for _, n := range []int{1000, 10000, 50000} {
		var s Scene
		for i := range n {
			a, z := 2.399963*float64(i), 1-(2*float64(i)+1)/float64(n)
			k := math.Sqrt(1 - z*z)
			s.Add(Sphere{Vec3{k * math.Cos(a), k * math.Sin(a), z}, 1.6 / math.Sqrt(float64(n))}, Solid(RGB(0x0072B2)))
		}
		wall, cpu := cost(&s, Orbit(Vec3{}, 5, 0.3, 0.4, 0.6), LitLook(white), 1920, 1080, Quality{Samples: 4}, 3)
		t.Logf("lit, %d spheres: wall %.1f ms, processor %.1f ms", n, wall, cpu)
	}
}
