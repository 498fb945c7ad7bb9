package symmetry

import (
	"fmt"
	"math"
	"math/rand"
	"testing"

	"github.com/go-gl/mathgl/mgl64"
)

// turnsToTry are rotations about z, to C3 and C2 of cubic groups and to C5 of
// icosahedral ones, and one to nowhere in particular.
func turnsToTry() map[string]mgl64.Mat3 {
	frame := func(z, x mgl64.Vec3) mgl64.Mat3 {
		z = z.Normalize()
		x = x.Sub(z.Mul(x.Dot(z))).Normalize()
		return mgl64.Mat3FromRows(x, z.Cross(x), z)
	}
	return map[string]mgl64.Mat3{
		"quarter": turnAboutZ(1, 4), "eighth": turnAboutZ(1, 8), "twelfth": turnAboutZ(1, 12), "over": flipAboutLine(0, 1),
		"C3": frame(mgl64.Vec3{1, 1, 1}, mgl64.Vec3{1, -1, 0}), "C2": frame(mgl64.Vec3{1, 1, 0}, mgl64.Vec3{0, 0, 1}),
		"C5": frame(mgl64.Vec3{0, 1, golden}, mgl64.Vec3{1, 0, 0}), "any": randomRotation(rand.New(rand.NewSource(4))),
	}
}

// In any axes the operations are those of the group turned, the matrices
// represent it, and the functions printed transform with them.
func TestTurnedSettingsAreTheGroupInOtherAxes(t *testing.T) {
	for _, symbol := range everyGroup(6) {
		here := mustNew(t, symbol)
		for name, w := range turnsToTry() {
			there := here.Turned(w)
			what := symbol + " " + name
			if there.Symbol != symbol || there.Order() != here.Order() {
				t.Fatalf("%s: %s", what, there.Symbol)
			}
			names := map[string]bool{}
			for a, o := range there.Operations {
				if names[o.Name] {
					t.Errorf("%s: two operations are called %s", what, o.Name)
				}
				names[o.Name] = true
				back := w.Transpose().Mul3(o.Matrix).Mul3(w)
				at := here.find(func(q Operation) bool { return equalTo(q.Matrix, back, 1e-9) })
				if at < 0 {
					t.Fatalf("%s: %s is none of the group's", what, o.Name)
				}
				if b := rotationOf(o); !equalTo(b, o.Matrix, 1e-12) {
					t.Errorf("%s: axis and turn of %s are not its matrix", what, o.Name)
				}
				for b := range there.Operations {
					if !equalTo(o.Matrix.Mul3(there.Operations[b].Matrix), there.Operations[there.Product(a, b)].Matrix, 1e-12) {
						t.Fatalf("%s: wrong product", what)
					}
				}
			}
			for _, ir := range there.Irreps {
				checkRepresentation(t, what, there, ir)
				checkFunctions(t, what, there, ir)
			}
		}
	}
}

// rotationOf makes the matrix from axis and turn (Rodrigues).
func rotationOf(o Operation) mgl64.Mat3 {
	angle := 2 * math.Pi * float64(o.Turn.Num) / float64(o.Turn.Den)
	if o.Axis == (mgl64.Vec3{}) {
		if o.Turn.Improper {
			return inversion
		}
		return mgl64.Ident3()
	}
	m := mgl64.QuatRotate(angle, o.Axis).Mat4().Mat3()
	if o.Turn.Improper {
		mirror := mgl64.Ident3()
		for r := range 3 {
			for c := range 3 {
				mirror.Set(r, c, mirror.At(r, c)-2*o.Axis[r]*o.Axis[c])
			}
		}
		m = mirror.Mul3(m)
	}
	return m
}

func checkRepresentation(t *testing.T, what string, s *Setting, ir Irrep) {
	t.Helper()
	d := ir.Dimension
	for a := range s.Operations {
		for b := range s.Operations {
			for i := range d {
				for j := range d {
					x := -ir.Matrices[s.Product(a, b)].At(i, j)
					for k := range d {
						x += ir.Matrices[a].At(i, k) * ir.Matrices[b].At(k, j)
					}
					if math.Abs(x) > 1e-12 {
						t.Fatalf("%s %s: the matrices do not multiply", what, ir.Label)
					}
				}
			}
		}
	}
}

// checkFunctions evaluates the printed functions.
func checkFunctions(t *testing.T, what string, s *Setting, ir Irrep) {
	t.Helper()
	const limit = 1e-9
	for set := range ir.Functions[0] {
		for r, o := range s.Operations {
			for k := range ir.Functions {
				at := places[3].Normalize()
				left, axial := valueOf(ir.Functions[k][set], o.Matrix.Transpose().Mul3x1(at))
				if axial && o.Turn.Improper {
					left = -left
				}
				right := 0.0
				for l := range ir.Functions {
					v, _ := valueOf(ir.Functions[l][set], at)
					right += ir.Matrices[r].At(l, k) * v
				}
				size := 1 + math.Abs(left)
				if math.Abs(left-right) > limit*size {
					t.Fatalf("%s %s: %s (with %v) under %s: %g, not %g", what, ir.Label, ir.Functions[k][set], ir.Functions, o.Name, left, right)
				}
			}
		}
	}
}

// With z along C3 the E of Oh is made of (xz, yz) and (x²−y², xy), as in D3d
// (common practice of trigonal complexes).
func TestCubicGroupWithC3AlongZ(t *testing.T) {
	s := mustNew(t, "Oh").Turned(turnsToTry()["C3"])
	if _, err := s.Irrep("T1u"); err != nil {
		t.Error(err)
	}
	found := map[string]bool{}
	for _, o := range s.Operations {
		found[o.Name] = true
	}
	for _, name := range []string{"C3(z)", "C3^2(z)", "S6(z)", "C3(1)", "C2(x)"} {
		if !found[name] {
			t.Errorf("no operation %s among %v", name, fmt.Sprint(found))
		}
	}
	ir, _ := s.Irrep("T1u")
	if ir.Functions[0][0] != "x" || ir.Functions[1][0] != "y" || ir.Functions[2][0] != "z" {
		t.Errorf("T1u: %v", ir.Functions)
	}
}
