package orbitals

import (
	"encoding/json"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"testing"

	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"
)

// readCheckValues reads one of the files of published or recomputed values;
// each says in its key "source" where they come from.
func readCheckValues(t testing.TB, name string, into any) {
	t.Helper()
	text, err := os.ReadFile(filepath.Join("..", "testdata", "checkvalues", name))
	if err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(text, into); err != nil {
		t.Fatal(name, err)
	}
}

type harmonicsFile struct {
	Factors map[string]struct {
		Factor float64
	}
	ValuesAt struct {
		Direction  mgl64.Vec3
		S, P, D, F []float64
	}
	Rotations []struct {
		Name    string
		Matrix  [3][3]float64
		P, D, F [][]float64
	}
}

func mat3(rows [3][3]float64) mgl64.Mat3 {
	return mgl64.Mat3FromRows(rows[0], rows[1], rows[2])
}

// randomOrthogonal is a random rotation, or a random improper one.
func randomOrthogonal(rng *rand.Rand, improper bool) mgl64.Mat3 {
	q := mgl64.Quat{W: rng.NormFloat64(), V: mgl64.Vec3{rng.NormFloat64(), rng.NormFloat64(), rng.NormFloat64()}}
	r := q.Normalize().Mat4().Mat3()
	if improper {
		r = r.Mul(-1)
	}
	return r
}

func TestHarmonicsEqualTheCheckValues(t *testing.T) {
	var file harmonicsFile
	readCheckValues(t, "harmonics.json", &file)
	v := file.ValuesAt
	for l, want := range [][]float64{v.S, v.P, v.D, v.F} {
		got := Harmonics(l, v.Direction)
		if len(got) != len(want) {
			t.Fatalf("shell %d has %d functions, want %d", l, len(got), len(want))
		}
		for i := range want {
			if math.Abs(got[i]-want[i]) > 1e-14 {
				t.Errorf("%s: %.16g, want %.16g", FunctionNames(l)[i], got[i], want[i])
			}
		}
	}
	// The factor alone, from a direction where the polynomial is known.
	at := map[string]struct {
		direction  mgl64.Vec3
		polynomial float64
	}{
		"pz": {mgl64.Vec3{0, 0, 1}, 1}, "dz2": {mgl64.Vec3{0, 0, 1}, 2}, "dx2-y2": {mgl64.Vec3{0, 1, 0}, -1},
		"fz3": {mgl64.Vec3{0, 0, -1}, -2}, "fx(x2-3y2)": {mgl64.Vec3{1, 0, 0}, 1}, "fy(3x2-y2)": {mgl64.Vec3{0, 1, 0}, -1},
	}
	for name, point := range at {
		l, i, ok := functionNamed(name)
		if !ok {
			t.Fatal(name, "is not known")
		}
		want := file.Factors[name].Factor * point.polynomial
		if got := Harmonics(l, point.direction)[i]; math.Abs(got-want) > 1e-14 {
			t.Errorf("%s: %.16g, want %.16g", name, got, want)
		}
	}
}

func TestRotationsEqualTheCheckValues(t *testing.T) {
	var file harmonicsFile
	readCheckValues(t, "harmonics.json", &file)
	if len(file.Rotations) == 0 {
		t.Fatal("no rotations to compare")
	}
	for _, c := range file.Rotations {
		for l, want := range [][][]float64{{{1}}, c.P, c.D, c.F} {
			got := Rotation(l, mat3(c.Matrix))
			for i, row := range want {
				for k, w := range row {
					if math.Abs(got.At(i, k)-w) > 1e-13 {
						t.Errorf("%s, l = %d: [%d][%d] is %.15g, want %.15g", c.Name, l, i, k, got.At(i, k), w)
					}
				}
			}
		}
	}
}

func TestRotatedHarmonicHasTheValueOfTheTurnedBackPoint(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	for trial := range 40 {
		r := randomOrthogonal(rng, trial%2 == 1)
		point := mgl64.Vec3{rng.NormFloat64(), rng.NormFloat64(), rng.NormFloat64()}
		for l := 0; l <= MaxShell; l++ {
			d := Rotation(l, r)
			here, back := Harmonics(l, point), Harmonics(l, r.Transpose().Mul3x1(point))
			for k := range back {
				sum := 0.0
				for i := range here {
					sum += d.At(i, k) * here[i]
				}
				if math.Abs(sum-back[k]) > 1e-13 {
					t.Fatalf("l = %d, function %d: %g at the point, %g at the point turned back", l, k, sum, back[k])
				}
			}
		}
	}
}

func TestRotationsAreAnOrthogonalRepresentation(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	for trial := range 20 {
		r, s := randomOrthogonal(rng, trial%2 == 1), randomOrthogonal(rng, trial%3 == 1)
		for l := 0; l <= 6; l++ {
			dr, ds, drs := RotationByM(l, r), RotationByM(l, s), RotationByM(l, r.Mul3(s))
			var product, square mat.Dense
			product.Mul(dr, ds)
			if !mat.EqualApprox(&product, drs, 1e-13) {
				t.Errorf("l = %d: D(R)·D(S) is not D(RS)", l)
			}
			square.Mul(dr.T(), dr)
			if !mat.EqualApprox(&square, identity(2*l+1), 1e-13) {
				t.Errorf("l = %d: D is not orthogonal", l)
			}
		}
	}
}

func identity(n int) *mat.Dense {
	d := mat.NewDense(n, n, nil)
	for i := range n {
		d.Set(i, i, 1)
	}
	return d
}

// The character of a full shell: sin((l+½)φ)/sin(φ/2) for a turn by φ, and
// (−1)^l times that for a turn followed by the inversion (H. Bethe, Ann.
// Phys. 395, 133 (1929); from memory).
func TestTraceOfARotationIsTheCharacterOfTheShell(t *testing.T) {
	axis := mgl64.Vec3{0.3, -0.5, 0.8}.Normalize()
	for _, phi := range []float64{0.1, 0.7, math.Pi / 2, 2.2, 3} {
		r := mgl64.QuatRotate(phi, axis).Mat4().Mat3()
		for l := 0; l <= 6; l++ {
			want := math.Sin((float64(l)+0.5)*phi) / math.Sin(phi/2)
			if got := mat.Trace(RotationByM(l, r)); math.Abs(got-want) > 1e-12 {
				t.Errorf("l = %d, φ = %g: trace %g, want %g", l, phi, got, want)
			}
			if l%2 == 1 {
				want = -want
			}
			if got := mat.Trace(RotationByM(l, r.Mul(-1))); math.Abs(got-want) > 1e-12 {
				t.Errorf("l = %d, φ = %g with the inversion: trace %g, want %g", l, phi, got, want)
			}
		}
	}
}

func TestHarmonicsAreOrthonormalOnTheSphere(t *testing.T) {
	// Gauss-Legendre in cos θ would be shorter; equal weights on a product
	// grid of midpoints are simpler and exact enough in φ for m ≤ 3.
	const nTheta, nPhi = 2000, 16
	for l := 0; l <= MaxShell; l++ {
		n := 2*l + 1
		overlap := mat.NewDense(n, n, nil)
		for a := range nTheta {
			z := -1 + (2*float64(a)+1)/nTheta
			rho := math.Sqrt(1 - z*z)
			for b := range nPhi {
				phi := 2 * math.Pi * (float64(b) + 0.5) / nPhi
				v := Harmonics(l, mgl64.Vec3{rho * math.Cos(phi), rho * math.Sin(phi), z})
				weight := 2.0 / nTheta * 2 * math.Pi / nPhi
				for i := range n {
					for k := range n {
						overlap.Set(i, k, overlap.At(i, k)+weight*v[i]*v[k])
					}
				}
			}
		}
		if !mat.EqualApprox(overlap, identity(n), 1e-5) {
			t.Errorf("l = %d: overlaps\n%v", l, mat.Formatted(overlap))
		}
	}
}
