package symmetry

import (
	"fmt"
	"math"
	"math/rand"
	"strings"
	"testing"

	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"
)

// For every finite family up to n = 12 and every rule: the exchange of names
// is a bijection, its matrices carry the irreps over, characters agree to the
// last label, and there and back is the way not gone.
func TestExchangeOfNamesIsExact(t *testing.T) {
	for _, symbol := range everyGroup(12) {
		here := mustNew(t, symbol)
		for _, rule := range here.kind.rules(Rule{}) {
			what := symbol + " " + rule.Rule.Name
			there := here.Turned(rule.Turn)
			e := ExchangeNames(here, there, rule.Turn)
			if !bijection(e.Operations) || !bijection(e.Irreps) {
				t.Fatalf("%s: no bijection", what)
			}
			for i, ir := range here.Irreps {
				to := there.Irreps[e.Irreps[i]]
				for r := range here.Operations {
					var left, right mat.Dense
					left.Mul(e.Partners[i], ir.Matrices[r])
					right.Mul(to.Matrices[e.Operations[r]], e.Partners[i])
					left.Sub(&left, &right)
					if worst := mat.Max(absolute(&left)); worst > 1e-10 {
						t.Fatalf("%s: partners of %s are off by %g", what, ir.Label, worst)
					}
				}
			}
			back := ExchangeNames(there, here, rule.Turn.Transpose())
			for r := range here.Operations {
				if back.Operations[e.Operations[r]] != r {
					t.Fatalf("%s: %s does not come back", what, here.Operations[r].Name)
				}
			}
			for i, ir := range here.Irreps {
				var product mat.Dense
				product.Mul(back.Partners[e.Irreps[i]], e.Partners[i])
				product.Sub(&product, identity(ir.Dimension))
				plus := mat.Max(absolute(&product))
				// Where no function tells, the sign is a convention.
				if back.Irreps[e.Irreps[i]] != i || plus > 1e-10 && len(ir.sets) > 0 {
					t.Errorf("%s: %s does not come back (%g)", what, ir.Label, plus)
				}
			}
		}
	}
}

func bijection(list []int) bool {
	seen := make([]bool, len(list))
	for _, to := range list {
		if to < 0 || to >= len(list) || seen[to] {
			return false
		}
		seen[to] = true
	}
	return true
}

// The table of known disagreements in the literature (re-derived, see the
// sources at the top of frame.go): what becomes of the labels.
func TestExchangesAreThoseOfTheLiterature(t *testing.T) {
	for _, c := range []struct{ group, rule, pairs string }{
		{"C2v", FramePlaneXZ, "A1=A1 A2=A2 B1=B2 B2=B1"},
		{"D4h", FrameBetween, "A1g=A1g A2g=A2g B1g=B2g B2g=B1g Eg=Eg B1u=B2u B2u=B1u Eu=Eu"},
		{"D6h", FrameBetween, "B1g=B2g B2g=B1g B1u=B2u E1g=E1g E2u=E2u"},
		{"C4v", FrameBetween, "B1=B2 B2=B1 E=E"}, {"C6v", FrameBetween, "B1=B2 B2=B1"},
		{"D2h", FrameYZX, "B1g=B2g B2g=B3g B3g=B1g B1u=B2u B2u=B3u B3u=B1u"},
		{"D2", FrameYXZ, "A=A B1=B1 B2=B3 B3=B2"},
		{"D2d", FrameSigmaDXZ, "A1=A1 A2=A2 B1=B1 B2=B2 E=E"},
		{"D3h", FrameC2OnY, "A1'=A1' A2'=A2' E'=E' A1''=A1''"},
		{"Oh", FrameZC3, "T1u=T1u T2g=T2g Eg=Eg A2u=A2u"}, {"Ih", FrameZC5, "T1u=T1u T2u=T2u Hg=Hg"}, {"Ih", FrameOtherC2, "Gu=Gu T2g=T2g"},
	} {
		here := mustNew(t, c.group)
		found := false
		for _, rule := range here.kind.rules(Rule{}) {
			if rule.Rule.Name != c.rule {
				continue
			}
			found = true
			there := here.Turned(rule.Turn)
			e := ExchangeNames(here, there, rule.Turn)
			for _, pair := range strings.Fields(c.pairs) {
				a, b, _ := strings.Cut(pair, "=")
				for i, ir := range here.Irreps {
					if got := there.Irreps[e.Irreps[i]].Label; ir.Label == a && got != b {
						t.Errorf("%s %s: %s is called %s, want %s", c.group, c.rule, a, got, b)
					}
				}
			}
		}
		if !found {
			t.Errorf("%s has no rule %s", c.group, c.rule)
		}
	}
}

// By hand. C2v with x and y exchanged by a quarter turn: x of this frame is y
// of the other, y is −x. So B1 (x) is B2 (y) with +1, B2 (y) is B1 (x) with −1,
// A2 goes over as its first function Rz does, unchanged. D3h with C2 on y: x here is y there, y is −x.
func TestPartnersGoOverAsTheirFunctionsDo(t *testing.T) {
	here := mustNew(t, "C2v")
	turn := turnAboutZ(1, 4)
	e := ExchangeNames(here, here.Turned(turn), turn)
	for i, want := range []float64{1, 1, 1, -1} { // A1 A2 B1 B2
		if got := e.Partners[i].At(0, 0); math.Abs(got-want) > 1e-12 {
			t.Errorf("C2v %s: %g, want %g", here.Irreps[i].Label, got, want)
		}
	}
	here = mustNew(t, "D3h")
	e = ExchangeNames(here, here.Turned(turn), turn)
	for i, ir := range here.Irreps {
		if ir.Label == "E'" {
			p := e.Partners[i]
			for at, want := range map[[2]int]float64{{0, 0}: 0, {1, 0}: 1, {0, 1}: -1, {1, 1}: 0} {
				if math.Abs(p.At(at[0], at[1])-want) > 1e-12 {
					t.Errorf("D3h E': entry %v is %g, want %g", at, p.At(at[0], at[1]), want)
				}
			}
		}
	}
}

func TestFitsGoIntoEveryFrameAndBack(t *testing.T) {
	rng := rand.New(rand.NewSource(8))
	for _, m := range publishedStructures(t) {
		points, _ := shuffled(m.points(t), 0.005, rng)
		fit := mustDetect(t, points, 0)
		frames := fit.Frames()
		if frames[0].Rule.Name != FrameDefault || len(frames) < 2 && !fit.Setting.Infinite() {
			t.Errorf("%s: frames %v", m.Name, frames)
		}
		for _, f := range frames {
			other := fit.In(f)
			consistent(t, m.Name+" "+f.Rule.Name, points, other)
			if f.Rule.Name == FrameFile && !equalTo(other.Rotation, mgl64.Ident3(), 1e-12) {
				t.Errorf("%s: the file's axes are turned", m.Name)
			}
			if other.Frames()[0].Rule.Name != f.Rule.Name || len(other.Frames()) != len(frames) {
				t.Errorf("%s: in %s there are %d frames, not %d", m.Name, f.Rule.Name, len(other.Frames()), len(frames))
			}
			back, err := other.Frame(FrameDefault)
			if err != nil {
				t.Fatalf("%s in %s: %v", m.Name, f.Rule.Name, err)
			}
			again := other.In(back)
			if !equalTo(again.Rotation, fit.Rotation, 1e-9) {
				t.Errorf("%s: not back from %s", m.Name, f.Rule.Name)
			}
		}
	}
	square := mustDetect(t, join([]Point{at(0, 0, 0, 46)}, ring(4, 2.3, 0, 0, 17)), 0)
	if _, err := square.Frame("z-c3"); err == nil || !strings.Contains(err.Error(), "x-between") {
		t.Errorf("a frame that a square has not: %v", err)
	}
}

func TestExplicitAxesAreTakenOrRefusedWithWhatIsPossible(t *testing.T) {
	square := mustDetect(t, join([]Point{at(0, 0, 0, 46)}, ring(4, 2.3, 0, 0, 17)), 0)
	diagonal, err := square.FrameAlong(mgl64.Vec3{}, mgl64.Vec3{1, 1, 0})
	if err != nil {
		t.Fatal(err)
	}
	e := ExchangeNames(square.Setting, square.In(diagonal).Setting, diagonal.Turn)
	if got := square.In(diagonal).Setting.Irreps[e.Irreps[2]].Label; got != "B2g" { // B1g here
		t.Errorf("x between the ligands: B1g is called %s", got)
	}
	for _, bad := range []struct {
		z, x mgl64.Vec3
		want string
	}{
		{mgl64.Vec3{1, 0, 0}, mgl64.Vec3{}, "C4(z)"}, {mgl64.Vec3{}, mgl64.Vec3{1, 0.3, 0}, "C2'(x)"}, {mgl64.Vec3{}, mgl64.Vec3{0, 0, 1}, "along z"},
	} {
		if _, err := square.FrameAlong(bad.z, bad.x); err == nil || !strings.Contains(err.Error(), bad.want) {
			t.Errorf("z %v x %v: %v, want a word of %s", bad.z, bad.x, err, bad.want)
		}
	}
	octahedron := mustDetect(t, join([]Point{at(0, 0, 0, 27)}, ring(4, 2, 0, 0, 7), []Point{at(0, 0, 2, 7), at(0, 0, -2, 7)}), 0)
	trigonal, err := octahedron.FrameAlong(mgl64.Vec3{1, 1, 1}, mgl64.Vec3{})
	if err != nil {
		t.Fatal(err)
	}
	names := fmt.Sprint(octahedron.In(trigonal).Setting.Operations)
	if !strings.Contains(names, "C3(z)") {
		t.Error("no C3 along z")
	}
	if _, err := octahedron.FrameAlong(mgl64.Vec3{1, 2, 3}, mgl64.Vec3{}); err == nil {
		t.Error("z along no axis of the octahedron")
	}
}
