package command

import (
	"context"
	"image"
	"image/png"
	"math"
	"os"
	"path/filepath"
	"testing"

	"github.com/go-gl/mathgl/mgl64"
	"github.com/qmuntal/gltf"
	"github.com/qmuntal/gltf/modeler"

	"lobewright/render"
)

// A glbScene evaluates a GLB at a time, by the rules of glTF 2.0 alone.
type glbScene struct {
	*testing.T
	*gltf.Document
	rotations map[int]mgl64.Quat
	scales    map[int]mgl64.Vec3
}

// openGLB reads a file; its animation stands at the end, or at the start.
func openGLB(t *testing.T, file string, end bool) *glbScene {
	t.Helper()
	d, err := gltf.Open(file)
	if err != nil {
		t.Fatal(err)
	}
	g := &glbScene{t, d, map[int]mgl64.Quat{}, map[int]mgl64.Vec3{}}
	for _, a := range d.Animations {
		for _, c := range a.Channels {
			values, err := modeler.ReadAccessor(d, d.Accessors[a.Samplers[c.Sampler].Output], nil)
			if err != nil {
				t.Fatal(err)
			}
			switch v := values.(type) {
			case [][4]float32:
				k := 0
				if end {
					k = len(v) - 1
				}
				g.rotations[*c.Target.Node] = quatOf(float64(v[k][0]), float64(v[k][1]), float64(v[k][2]), float64(v[k][3]))
			case [][3]float32:
				k := 0
				if end {
					k = len(v) - 1
				}
				g.scales[*c.Target.Node] = mgl64.Vec3{float64(v[k][0]), float64(v[k][1]), float64(v[k][2])}
			}
		}
	}
	return g
}

func quatOf(x, y, z, w float64) mgl64.Quat { return mgl64.Quat{W: w, V: mgl64.Vec3{x, y, z}} }

func (g *glbScene) local(i int) render.Affine {
	n := g.Nodes[i]
	r, s := n.RotationOrDefault(), n.ScaleOrDefault()
	q, scale := quatOf(r[0], r[1], r[2], r[3]), mgl64.Vec3(s)
	if animated, ok := g.rotations[i]; ok {
		q = animated
	}
	if animated, ok := g.scales[i]; ok {
		scale = animated
	}
	return render.Affine{Linear: q.Mat4().Mat3().Mul3(mgl64.Diag3(scale)), Shift: mgl64.Vec3(n.TranslationOrDefault())}
}

// visit calls use for each node with its place in the world.
func (g *glbScene) visit(use func(n *gltf.Node, world render.Affine)) {
	var walk func(i int, above render.Affine)
	walk = func(i int, above render.Affine) {
		world := above.After(g.local(i))
		use(g.Nodes[i], world)
		for _, c := range g.Nodes[i].Children {
			walk(c, world)
		}
	}
	for _, i := range g.Scenes[0].Nodes {
		walk(i, render.Identity())
	}
}

// chain is what the animated nodes together do at a time, in the working
// frame.
func (g *glbScene) chain() mgl64.Mat3 {
	out := mgl64.Ident3()
	for i, n := range g.Nodes {
		switch n.Name {
		case "turn", "aside", "reflection", "back":
			out = out.Mul3(g.local(i).Linear) // from the outermost inward
		}
	}
	return out
}

func TestAGLBCarriesOutTheOperation(t *testing.T) {
	t.Chdir(t.TempDir())
	root := math.Sqrt(3) / 2
	for _, c := range []struct {
		structure, on, operation string
		want                     mgl64.Mat3 // by rows
	}{
		{"demo:square-plane", "Cl:sigma", "C4(z)", mgl64.Mat3FromRows(mgl64.Vec3{0, -1, 0}, mgl64.Vec3{1, 0, 0}, mgl64.Vec3{0, 0, 1})},
		{"demo:square-plane", "Cl:sigma", "S4(z)", mgl64.Mat3FromRows(mgl64.Vec3{0, -1, 0}, mgl64.Vec3{1, 0, 0}, mgl64.Vec3{0, 0, -1})},
		{"demo:square-plane", "Cl:sigma", "i", mgl64.Ident3().Mul(-1)},
		{"demo:square-plane", "Cl:sigma", "σv(xz)", mgl64.Diag3(mgl64.Vec3{1, -1, 1})},
		{"demo:benzene", "C:pz", "C3(z)", mgl64.Mat3FromRows(mgl64.Vec3{-0.5, -root, 0}, mgl64.Vec3{root, -0.5, 0}, mgl64.Vec3{0, 0, 1})},
	} {
		command(t, "animation", c.structure, "--on", c.on, "--operation", c.operation, "--rate", "5", "--force", "-o", "a.glb")
		if got := openGLB(t, "a.glb", false).chain(); !same(got, mgl64.Ident3()) {
			t.Errorf("%s begins with\n%v", c.operation, got)
		}
		if got := openGLB(t, "a.glb", true).chain(); !same(got, c.want) {
			t.Errorf("%s ends with\n%vinstead of\n%v", c.operation, got, c.want)
		}
	}
}

func same(a, b mgl64.Mat3) bool {
	d := a.Sub(b)
	return max(d.Col(0).Len(), d.Col(1).Len(), d.Col(2).Len()) < 1e-6
}

// draw draws a GLB as it is seen by its camera.
func (g *glbScene) draw(width, height int, ground render.Color) *image.RGBA {
	g.Helper()
	var scene render.Scene
	var camera render.Camera
	byteOf := func(x float64) uint8 {
		if x <= 0.0031308 {
			return uint8(255*12.92*x + 0.5)
		}
		return uint8(255*(1.055*math.Pow(x, 1/2.4)-0.055) + 0.5)
	}
	g.visit(func(n *gltf.Node, world render.Affine) {
		if n.Camera != nil {
			p := g.Cameras[*n.Camera].Perspective
			camera = render.Camera{Eye: world.Shift, Target: world.Apply(mgl64.Vec3{0, 0, -1}), Up: world.Linear.Mul3x1(mgl64.Vec3{0, 1, 0}), FovY: p.Yfov, Near: p.Znear, Far: *p.Zfar}
		}
		if n.Mesh == nil {
			return
		}
		for _, p := range g.Meshes[*n.Mesh].Primitives {
			positions, err := modeler.ReadPosition(g.Document, g.Accessors[p.Attributes[gltf.POSITION]], nil)
			if err != nil {
				g.Fatal(err)
			}
			normals, err := modeler.ReadNormal(g.Document, g.Accessors[p.Attributes[gltf.NORMAL]], nil)
			if err != nil {
				g.Fatal(err)
			}
			indices, err := modeler.ReadIndices(g.Document, g.Accessors[*p.Indices], nil)
			if err != nil {
				g.Fatal(err)
			}
			mesh := &render.Mesh{Positions: positions, Normals: normals, Closed: true}
			for i := 0; i+2 < len(indices); i += 3 {
				mesh.Triangles = append(mesh.Triangles, [3]uint32{indices[i], indices[i+1], indices[i+2]})
			}
			material := g.Materials[*p.Material]
			mesh.Closed = !material.DoubleSided
			c := material.PBRMetallicRoughness.BaseColorFactorOrDefault()
			_, flat := material.Extensions["KHR_materials_unlit"]
			gloss := 0.0
			if material.PBRMetallicRoughness.RoughnessFactorOrDefault() < 0.7 {
				gloss = 1
			}
			index := scene.Add(mesh, render.Material{
				Gloss: gloss,
				Color: render.Color{R: byteOf(c[0]), G: byteOf(c[1]), B: byteOf(c[2])}, Opacity: c[3], Flat: flat,
			})
			scene.Shapes[index].Transform = &world
		}
	})
	img := image.NewRGBA(image.Rect(0, 0, width, height))
	if err := render.Draw(context.Background(), img, &scene, camera, render.LitLook(ground), render.Quality{Samples: 8}, render.Band{}); err != nil {
		g.Fatal(err)
	}
	return img
}

// TestAGLBShowsWhatTheMovieShows draws files from what is in them alone and
// compares them with the pictures of the same movie.
func TestAGLBShowsWhatTheMovieShows(t *testing.T) {
	keep := os.Getenv("LOBEWRIGHT_KEEP_PICTURES") // a folder, to look at them
	t.Chdir(t.TempDir())
	for n, operation := range []string{"S4(z)", "i"} {
		stem := string(rune('a' + n))
		args := []string{"animation", "demo:octahedron", "--on", "C:sigma", "--irrep", "T1u", "--operation", operation, "--rate", "5",
			"--no-labels", "--no-axes", "--no-caption", "-o"}
		command(t, append(args, stem+".glb")...)
		command(t, append(args, stem+".png")...)
		files, _ := filepath.Glob(stem + "-*.png")
		for _, end := range []bool{false, true} {
			file := files[0]
			if end {
				file = files[len(files)-1]
			}
			f, err := os.Open(file)
			if err != nil {
				t.Fatal(err)
			}
			want, err := png.Decode(f)
			f.Close()
			if err != nil {
				t.Fatal(err)
			}
			got := openGLB(t, stem+".glb", end).draw(want.Bounds().Dx(), want.Bounds().Dy(), render.Color{R: 0xFC, G: 0xFB, B: 0xF8})
			if keep != "" {
				name := filepath.Join(keep, "glb-"+file)
				out, err := os.Create(name)
				if err != nil {
					t.Fatal(err)
				}
				_ = png.Encode(out, got)
				out.Close()
			}
			off := 0
			for y := range got.Rect.Dy() {
				for x := range got.Rect.Dx() {
					r1, g1, b1, _ := got.At(x, y).RGBA()
					r2, g2, b2, _ := want.At(x, y).RGBA()
					const far = 60 << 8
					d := func(a, b uint32) bool { return max(a, b)-min(a, b) > far }
					if d(r1, r2) || d(g1, g2) || d(b1, b2) {
						off++
					}
				}
			}
			if share := float64(off) / float64(got.Rect.Dx()*got.Rect.Dy()); share > 0.004 {
				t.Errorf("%s, end %v: %.2f %% of the picture is another", operation, end, 100*share)
			}
		}
	}
}
