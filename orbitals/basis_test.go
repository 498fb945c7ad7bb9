package orbitals

import (
	"math"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/orbitals/structure"
)

// square is XeF4 in D4h: xenon, then fluorine on x, y, −x and −y.
func square(t testing.TB) *Sites {
	s := &Sites{
		Setting:   setting(t, "D4h"),
		Positions: []mgl64.Vec3{{}, {1.95, 0, 0}, {0, 1.95, 0}, {-1.95, 0, 0}, {0, -1.95, 0}},
		Elements:  []structure.Element{xenon, fluorine, fluorine, fluorine, fluorine},
		Links:     [][2]int{{0, 1}, {0, 2}, {0, 3}, {0, 4}},
	}
	permute(t, s)
	return s
}

// listed writes the functions of a basis, atoms from 1.
func listed(b *Basis) string {
	var out []string
	for _, f := range b.Functions {
		out = append(out, strconv.Itoa(f.Site+1)+f.Name)
	}
	return strings.Join(out, " ")
}

func TestFunctionsStandInTheOrderOfTheChoice(t *testing.T) {
	s := square(t)
	for _, c := range []struct {
		choices []string
		want    string
	}{
		{[]string{"2,3:p"}, "2px 2py 2pz 3px 3py 3pz 4px 4py 4pz 5px 5py 5pz"},
		{[]string{"F:pz,s"}, "2pz 3pz 4pz 5pz 2s 3s 4s 5s"},
		{[]string{"Xe:dz2", "F:sigma"}, "1dz2 2sigma 3sigma 4sigma 5sigma"},
		{[]string{"F:pi"}, "2pi1 2pi2 3pi1 3pi2 4pi1 4pi2 5pi1 5pi2"},
		{[]string{"F:pi-in"}, "2pi-in 3pi-in 4pi-in 5pi-in"},
		{[]string{"F:pi-out"}, "2pi-out 3pi-out 4pi-out 5pi-out"},
		{[]string{"F:pi2,pi1"}, "2pi2 3pi2 4pi2 5pi2 2pi1 3pi1 4pi1 5pi1"},
		{[]string{"F:pi-in", "F:pi"}, "2pi-in 3pi-in 4pi-in 5pi-in 2pi2 3pi2 4pi2 5pi2"},
		{[]string{"1:px"}, "1px 1py"},
		{[]string{"Xe:dxz,dxy"}, "1dxz 1dyz 1dxy"},
		{[]string{"2:px"}, "2px 3py 4px 5py"}, // all that the operations need
		{[]string{"F:px"}, "2px 2py 3px 3py 4px 4py 5px 5py"},
		{[]string{"F:sigma,p"}, "2sigma 3sigma 4sigma 5sigma 2py 2pz 3px 3pz 4py 4pz 5px 5pz"},
		{[]string{"F:p,sigma"}, "2px 2py 2pz 3px 3py 3pz 4px 4py 4pz 5px 5py 5pz"},
		{[]string{"F:s", "all:s"}, "2s 3s 4s 5s 1s"},
	} {
		if got := listed(basis(t, s, c.choices...)); got != c.want {
			t.Errorf("%v: %s, want %s", c.choices, got, c.want)
		}
	}
}

func TestCompletionIsTold(t *testing.T) {
	s := square(t)
	b := basis(t, s, "2:sigma")
	if len(b.Functions) != 4 || len(b.Notes) != 1 {
		t.Fatalf("%s, notes %v", listed(b), b.Notes)
	}
	if n := b.Notes[0]; n.Key != NoteCompleted || n.Choice != 0 || !slices.Equal(n.Functions, []int{1, 2, 3}) {
		t.Errorf("note %+v", n)
	}
	for _, whole := range [][]string{{"F:sigma"}, {"2:sigma", "3-5:sigma"}, {"Xe:px,py"}, {"Xe:px", "Xe:py"}, {"2-5:pz"}} {
		if b := basis(t, s, whole...); len(b.Notes) != 0 {
			t.Errorf("%v is complete, but %v", whole, b.Notes)
		}
	}
	b = basis(t, s, "F:pz", "F:pi")
	if len(b.Functions) != 8 || len(b.Notes) != 1 || b.Notes[0].Key != NoteContained || b.Notes[0].Choice != 1 ||
		!slices.Equal(b.Notes[0].Names, []string{"pi2", "pi2", "pi2", "pi2"}) || !slices.Equal(b.Notes[0].Atoms, []int{1, 2, 3, 4}) {
		t.Errorf("pz and pi: %s, notes %v", listed(b), b.Notes)
	}
}

func TestOverlappingChoicesAreRefused(t *testing.T) {
	s := sitesAt(t, "Td", fluorine, []mgl64.Vec3{{1, 1, 1}, {1, -1, -1}, {-1, 1, -1}, {-1, -1, 1}})
	for _, choices := range [][]string{{"F:sigma", "F:p"}, {"F:pi", "F:pz"}} {
		_, err := NewBasis(s, parse(t, choices...)...)
		if err == nil || !strings.Contains(err.Error(), "overlaps") {
			t.Errorf("%v: %v", choices, err)
		}
	}
	if b := basis(t, s, "F:p", "F:sigma", "F:pi"); len(b.Functions) != 12 {
		t.Errorf("p holds sigma and pi, but %s", listed(b))
	}
	if b := basis(t, s, "F:sigma,pi,s,d"); len(b.Functions) != 36 {
		t.Errorf("other shells do not overlap, but %s", listed(b))
	}
}

func close3(a, b mgl64.Vec3) bool { return a.Sub(b).Len() < 1e-12 }

func TestDirectionsFollowTheirRules(t *testing.T) {
	s := square(t)
	for _, f := range basis(t, s, "F:sigma,pi").Functions {
		r := s.Positions[f.Site].Normalize()
		want := map[string]mgl64.Vec3{
			"sigma": r.Mul(-1),
			"pi1":   mgl64.Vec3{0, 0, 1}.Cross(r),
			"pi2":   {0, 0, 1},
		}[f.Name]
		if !close3(f.Direction, want) || !close3(mgl64.Vec3{f.Vector[0], f.Vector[1], f.Vector[2]}, want) {
			t.Errorf("%s on atom %d points along %v, want %v", f.Name, f.Site+1, f.Direction, want)
		}
		if v := f.Value(want); math.Abs(v-factorP) > 1e-12 {
			t.Errorf("%s has the value %g where it points", f.Name, v)
		}
	}
	// On the axis pi1 is x and pi2 is y, on both sides of the centre.
	octahedron := sitesAt(t, "Oh", fluorine, []mgl64.Vec3{{1, 0, 0}, {-1, 0, 0}, {0, 1, 0}, {0, -1, 0}, {0, 0, 1}, {0, 0, -1}})
	for _, f := range basis(t, octahedron, "F:pi").Functions {
		if f.Site >= 4 {
			want := mgl64.Vec3{1, 0, 0}
			if f.Name == "pi2" {
				want = mgl64.Vec3{0, 1, 0}
			}
			if !close3(f.Direction, want) {
				t.Errorf("%s on the axis points along %v", f.Name, f.Direction)
			}
		}
		if f.Name == "pi2" && f.Direction[2] < 0 {
			t.Errorf("pi2 on atom %d has negative z", f.Site+1)
		}
	}
	// Elsewhere pi2 has positive z, above and below.
	for _, f := range basis(t, sitesAt(t, "Oh", fluorine, cube()), "F:pi2").Functions {
		if f.Name == "pi2" && f.Direction[2] < 0.1 {
			t.Errorf("pi2 on atom %d points along %v", f.Site+1, f.Direction)
		}
	}
}

func cube() []mgl64.Vec3 {
	var out []mgl64.Vec3
	for _, x := range []float64{1, -1} {
		for _, y := range []float64{1, -1} {
			for _, z := range []float64{1, -1} {
				out = append(out, mgl64.Vec3{x, y, z})
			}
		}
	}
	return out
}

func TestHydrogensSigmaIsItsSFunction(t *testing.T) {
	s := sitesAt(t, "Td", hydrogen, []mgl64.Vec3{{1, 1, 1}, {1, -1, -1}, {-1, 1, -1}, {-1, -1, 1}})
	b := basis(t, s, "H:sigma", "H:s")
	for _, f := range b.Functions {
		if f.Name != "s" || f.Kind != KindS || f.Direction != (mgl64.Vec3{}) {
			t.Errorf("sigma on hydrogen is %+v", f)
		}
	}
	if len(b.Functions) != 4 || len(b.Notes) != 0 {
		t.Errorf("%s, notes %v", listed(b), b.Notes)
	}
}

// molecule builds sites from elements, places and bonds.
func molecule(t testing.TB, group string, elements []structure.Element, positions []mgl64.Vec3, links ...[2]int) *Sites {
	t.Helper()
	s := &Sites{Setting: setting(t, group), Positions: positions, Elements: elements, Links: links}
	permute(t, s)
	return s
}

func TestCentreFollowsItsRule(t *testing.T) {
	const metal, oxygen, nitrogen = 42, 8, 7
	// Two metals with four ligands each: a ligand points to its own metal,
	// to which alone it is bonded, and the metals to each other.
	var dimer []mgl64.Vec3
	var elements []structure.Element
	var links [][2]int
	for _, z := range []float64{1, -1} {
		m := len(dimer)
		dimer = append(dimer, mgl64.Vec3{0, 0, z})
		elements = append(elements, metal)
		for k := range 4 {
			angle := math.Pi / 2 * float64(k)
			dimer = append(dimer, mgl64.Vec3{2.3 * math.Cos(angle), 2.3 * math.Sin(angle), 1.4 * z})
			elements = append(elements, fluorine)
			links = append(links, [2]int{m, m + 1 + k})
		}
	}
	links = append(links, [2]int{0, 5})
	s := molecule(t, "D4h", elements, dimer, links...)
	for _, f := range basis(t, s, "F:sigma").Functions {
		own := s.Positions[0]
		if f.Site > 5 {
			own = s.Positions[5]
		}
		if want := own.Sub(s.Positions[f.Site]).Normalize(); !close3(f.Direction, want) {
			t.Errorf("sigma on atom %d points along %v, want %v", f.Site+1, f.Direction, want)
		}
	}
	// A bond that was counted on one side only is taken for all alike.
	s.Links = links[:1]
	for _, f := range basis(t, s, "F:sigma").Functions {
		if math.Abs(f.Direction[2]) > 0.2 {
			t.Errorf("sigma on atom %d points along %v", f.Site+1, f.Direction)
		}
	}
	// The ring carbon of benzene has two bonded carbons equally near the
	// origin; the centre is the origin.
	var ring []mgl64.Vec3
	elements, links = nil, nil
	for k := range 6 {
		angle := math.Pi / 3 * float64(k)
		ring = append(ring, mgl64.Vec3{1.39 * math.Cos(angle), 1.39 * math.Sin(angle), 0})
		elements = append(elements, carbon)
		links = append(links, [2]int{k, (k + 1) % 6})
	}
	for k := range 6 {
		ring = append(ring, ring[k].Mul(2.47/1.39))
		elements = append(elements, hydrogen)
		links = append(links, [2]int{k, k + 6})
	}
	s = molecule(t, "D6h", elements, ring, links...)
	for _, f := range basis(t, s, "C:sigma").Functions {
		if want := s.Positions[f.Site].Normalize().Mul(-1); !close3(f.Direction, want) {
			t.Errorf("sigma on atom %d points along %v, want %v", f.Site+1, f.Direction, want)
		}
	}
	// Nitrogen of a nitrato group bonded to nothing but oxygen at different
	// distances from the origin points to the nearest of them.
	s = molecule(t, "C2v", []structure.Element{nitrogen, oxygen, oxygen, oxygen},
		[]mgl64.Vec3{{0, 0, 2}, {0, 0, 0.6}, {0, 1.1, 2.7}, {0, -1.1, 2.7}}, [2]int{0, 1}, [2]int{0, 2}, [2]int{0, 3})
	if f := basis(t, s, "N:sigma").Functions[0]; !close3(f.Direction, mgl64.Vec3{0, 0, -1}) {
		t.Errorf("sigma on nitrogen points along %v", f.Direction)
	}
}

// sandwich is a metal between two eclipsed five-rings in D5h.
func sandwich(t testing.TB) *Sites {
	const iron = 26
	positions := []mgl64.Vec3{{}}
	elements := []structure.Element{iron}
	for _, z := range []float64{1.65, -1.65} {
		for k := range 5 {
			angle := 2 * math.Pi / 5 * float64(k)
			positions = append(positions, mgl64.Vec3{1.2 * math.Cos(angle), 1.2 * math.Sin(angle), z})
			elements = append(elements, carbon)
		}
	}
	return molecule(t, "D5h", elements, positions)
}

func TestCentreThatIsGivenIsCarriedAlong(t *testing.T) {
	s := sandwich(t)
	b := basis(t, s, "C:sigma@2-6")
	if len(b.Notes) != 1 || b.Notes[0].Key != NoteCentreCarried || !slices.Equal(b.Notes[0].Atoms, []int{6, 7, 8, 9, 10}) {
		t.Errorf("notes %+v", b.Notes)
	}
	for _, f := range b.Functions {
		p := s.Positions[f.Site]
		if want := (mgl64.Vec3{-p[0], -p[1], 0}).Normalize(); !close3(f.Direction, want) {
			t.Errorf("sigma on atom %d points along %v, want %v", f.Site+1, f.Direction, want)
		}
	}
	// One ring alone is completed with the other, relative to its own middle.
	b = basis(t, s, "2-6:sigma@2-6")
	if len(b.Functions) != 10 || len(b.Notes) != 1 || b.Notes[0].Key != NoteCompleted {
		t.Errorf("%s, notes %+v", listed(b), b.Notes)
	}
	// The other ring's middle as a centre is taken at its word.
	b = basis(t, s, "2-6:sigma@7-11")
	if want := (mgl64.Vec3{-1.2, 0, -3.3}).Normalize(); !close3(b.Functions[0].Direction, want) {
		t.Errorf("sigma on atom 2 points along %v, want %v", b.Functions[0].Direction, want)
	}
	// A neighbour is no centre that the mirror plane of the atom leaves.
	if _, err := NewBasis(s, parse(t, "2:sigma@3")...); err == nil || !strings.Contains(err.Error(), "leave") {
		t.Errorf("a centre that operations move: %v", err)
	}
	// Around a ring without mirror planes it is one, but not for both
	// neighbours of one atom.
	five := sitesAt(t, "C5", carbon, []mgl64.Vec3{
		{1, 0, 0}, {math.Cos(2 * math.Pi / 5), math.Sin(2 * math.Pi / 5), 0}, {math.Cos(4 * math.Pi / 5), math.Sin(4 * math.Pi / 5), 0},
		{math.Cos(6 * math.Pi / 5), math.Sin(6 * math.Pi / 5), 0}, {math.Cos(8 * math.Pi / 5), math.Sin(8 * math.Pi / 5), 0}})
	if b := basis(t, five, "1:sigma@2"); len(b.Functions) != 5 {
		t.Errorf("%s", listed(b))
	}
	if _, err := NewBasis(five, parse(t, "1,3:sigma@2")...); err == nil || !strings.Contains(err.Error(), "equally near") {
		t.Errorf("two atoms equally near the centre: %v", err)
	}
}

func TestPiInAndOutOfThePlane(t *testing.T) {
	// Bent and planar in yz: z × r is square to the plane.
	bent := sitesAt(t, "C2v", fluorine, []mgl64.Vec3{{0, 1, -1}, {0, -1, -1}})
	bent.Positions = append(bent.Positions, mgl64.Vec3{0, 0, 1})
	bent.Elements = append(bent.Elements, xenon)
	permute(t, bent)
	for choice, along := range map[string]int{"F:pi-out": 0, "F:pi-in": 1} {
		for _, f := range basis(t, bent, choice).Functions {
			out := math.Abs(f.Direction[0])
			if along == 0 && math.Abs(out-1) > 1e-12 || along == 1 && out > 1e-12 {
				t.Errorf("%s on atom %d points along %v", choice, f.Site+1, f.Direction)
			}
			if "F:"+f.Name != choice {
				t.Errorf("%s is %s", choice, f.Name)
			}
			if along == 0 && f.Direction[0] < 0 {
				t.Errorf("%s on atom %d lies on the other side of the plane", choice, f.Site+1)
			}
		}
	}
	for choice, s := range map[string]*Sites{
		"planar": sitesAt(t, "Oh", fluorine, cube()),
		"line":   {Setting: setting(t, "D∞h"), Positions: []mgl64.Vec3{{0, 0, 1}, {0, 0, -1}}, Elements: []structure.Element{fluorine, fluorine}},
	} {
		if _, err := NewBasis(s, parse(t, "F:pi-in")...); err == nil || !strings.Contains(err.Error(), choice) {
			t.Errorf("%v", err)
		}
	}
	// A plane askew in its frame.
	u := mgl64.Vec3{1, 2, -3}.Normalize()
	v := u.Cross(mgl64.Vec3{0, 0, 1}).Normalize()
	askew := sitesAt(t, "C1", fluorine, []mgl64.Vec3{u.Add(v.Mul(0.5)), v, u.Add(v).Mul(-0.7)})
	normal := u.Cross(v)
	b := basis(t, askew, "1:pi-in,pi-out")
	if listed(b) != "1pi-in 1pi-out" {
		t.Fatalf("%s", listed(b))
	}
	if math.Abs(b.Functions[0].Direction.Dot(normal)) > 1e-9 || math.Abs(math.Abs(b.Functions[1].Direction.Dot(normal))-1) > 1e-9 {
		t.Errorf("pi-in %v and pi-out %v about the normal %v", b.Functions[0].Direction, b.Functions[1].Direction, normal)
	}
}

func TestTooManyFunctionsAreRefused(t *testing.T) {
	s := &Sites{Setting: setting(t, "C1"), Permutations: [][]int{nil}}
	for k := range 2000 {
		s.Positions = append(s.Positions, mgl64.Vec3{float64(k), 0, 0})
		s.Elements = append(s.Elements, carbon)
		s.Permutations[0] = append(s.Permutations[0], k)
	}
	for _, text := range []string{"all:p", "all:s,px,py"} {
		if _, err := NewBasis(s, parse(t, text)...); err == nil || !strings.Contains(err.Error(), "4096") {
			t.Errorf("%s: %v", text, err)
		}
	}
}
