package command

import (
	"math"
	"slices"
	"strings"
	"testing"
)

type contractRenaming struct {
	Here  string `json:"here"`
	There string `json:"there"`
}

type contractFrames struct {
	PointGroup string `json:"pointGroup"`
	Frames     []struct {
		Name       string             `json:"name"`
		Rule       string             `json:"rule"`
		Source     string             `json:"source"`
		Rotation   [][]float64        `json:"rotation"`
		Irreps     []contractRenaming `json:"irreps"`
		Operations []contractRenaming `json:"operations"`
		Partners   []struct {
			Irrep  string      `json:"irrep"`
			Matrix [][]float64 `json:"matrix"`
		} `json:"partners"`
	} `json:"frames"`
	Relabellings []struct {
		Name    string             `json:"name"`
		Source  string             `json:"source"`
		Irreps  []contractRenaming `json:"irreps"`
		Classes []contractRenaming `json:"classes"`
	} `json:"relabellings"`
	Translation *struct {
		From  string   `json:"from"`
		Given []string `json:"given"`
		Here  []string `json:"here"`
		Lifts []struct {
			Embedding  int                 `json:"embedding"`
			Operations []string            `json:"operations"`
			Names      []string            `json:"names"`
			Ways       [][]contractContent `json:"ways"`
			Telling    []string            `json:"telling"`
			Complete   bool                `json:"complete"`
		} `json:"lifts"`
	} `json:"translation"`
}

type contractContent struct {
	Irrep  string `json:"irrep"`
	Copies int    `json:"copies"`
}

// In every frame of these the printed JSON is that of a group and its group
// orbitals, and the names there are those that frames foretells.
func TestEveryFrameKeepsTheContract(t *testing.T) {
	for _, c := range []struct {
		structure, on, names string
	}{
		{"demo:square-plane", "Cl:p", "default x-between file"},
		{"demo:octahedron", "C:pi", "default z-c3 z-c2 file"},
		{"demo:furan", "C:p", "default plane-xz file"},
		{"demo:bipyramid", "F:p", "default c2-on-y file"},
		{"demo:benzene", "C:pz", "default x-between file"},
		{"demo:propadiene", "C:p", "default sigma-d-xz file"},
		{"demo:hexaaqua", "O:p", "default xy-exchanged z-c3 file"},
		{"demo:tetrahedron", "Cl:pi", "default z-c3 file"},
		{"demo:hydrate", "1-3:d", "default file"},
		{"demo:silicic-acid", "O:p", "default file"},
		{"ideal:SP-4,C,H,1", "H:p", "default x-between file"},
		{"ideal:TP-3", "2:s", "default c2-on-y file"},
		{"ideal:TPY-3", "2:p", "default sigma-yz file"},
	} {
		t.Run(c.structure, func(t *testing.T) {
			var f contractFrames
			runJSON(t, &f, "frames", c.structure)
			var names []string
			var here contractGroup
			runJSON(t, &here, "group", c.structure)
			for _, frame := range f.Frames {
				names = append(names, frame.Name)
				var p contractProjection
				runJSON(t, &p, "project", c.structure, "--on", c.on, "--frame", frame.Name)
				checkGroup(t, p.contractGroup)
				checkFunctions(t, p.contractGroup)
				checkProjection(t, p)
				if p.Frame.Name != frame.Name || p.Frame.Convention != frame.Rule || p.Frame.Source != frame.Source || farthest(p.Frame.Rotation, frame.Rotation) > 1e-12 {
					t.Errorf("%s: frames prints another frame than project: %+v", frame.Name, p.Frame)
				}
				if frame.Name == "file" && farthest(frame.Rotation, identity(3)) != 0 {
					t.Errorf("the axes of the file are turned: %v", frame.Rotation)
				}
				there := map[string]contractOperation{}
				for _, o := range p.Operations {
					there[o.Name] = o
				}
				turn := multiply(p.Frame.Rotation, transposed(here.Frame.Rotation))
				for r, o := range here.Operations {
					to := there[frame.Operations[r].There]
					moved := multiply(multiply(turn, o.Matrix), transposed(turn))
					if frame.Operations[r].Here != o.Name || to.Name == "" || farthest(moved, to.Matrix) > 1e-9 || !slices.Equal(o.Permutation, to.Permutation) {
						t.Errorf("%s: %s is not %s", frame.Name, o.Name, to.Name)
					}
					delete(there, to.Name)
				}
				for i, ir := range here.Irreps {
					to := irrepNamed(p.Irreps, frame.Irreps[i].There)
					m := frame.Partners[i].Matrix
					if frame.Irreps[i].Here != ir.Label || frame.Partners[i].Irrep != ir.Label || farthest(multiply(m, transposed(m)), identity(ir.Dimension)) > 1e-10 {
						t.Fatalf("%s: %s and its matrix %v", frame.Name, ir.Label, m)
					}
					for r := range here.Operations {
						at := slices.IndexFunc(p.Operations, func(o contractOperation) bool { return o.Name == frame.Operations[r].There })
						if off := farthest(multiply(m, ir.Matrices[r]), multiply(to.Matrices[at], m)); off > 1e-10 {
							t.Fatalf("%s: partners of %s do not go over: off by %g", frame.Name, ir.Label, off)
						}
					}
				}
			}
			if got := strings.Join(names, " "); got != c.names {
				t.Errorf("frames %s, want %s", got, c.names)
			}
		})
	}
}

// Every rule for D2h, from a molecule in the axes yz: x, y and z of a frame are
// those axes of the default that its name says.
func TestSixWaysToLayTheAxesOfD2h(t *testing.T) {
	var f contractFrames
	runJSON(t, &f, "frames", "ideal:ring-4", "--as", "D2h:1")
	if f.PointGroup != "D2h" || len(f.Frames) < 6 {
		t.Fatalf("%s with %d frames", f.PointGroup, len(f.Frames))
	}
	b := map[string]string{"x": "B3g", "y": "B2g", "z": "B1g"} // what is even under C2 about the axis
	for _, frame := range f.Frames {
		axes, permuted := strings.CutPrefix(frame.Name, "axes-")
		if !permuted {
			continue
		}
		for i, axis := range strings.Split(axes, "") {
			for _, ir := range frame.Irreps {
				if ir.Here == b[axis] && ir.There != b["xyz"[i:i+1]] {
					t.Errorf("%s: %s is called %s", frame.Name, ir.Here, ir.There)
				}
			}
			if v := apply(transposed(f.Frames[0].Rotation), unit(strings.Index("xyz", axis))); math.Abs(math.Abs(dot(v, frame.Rotation[i]))-1) > 1e-9 {
				t.Errorf("%s: %c is not the %s of the default", frame.Name, "xyz"[i], axis)
			}
		}
	}
}

func unit(i int) []float64 {
	v := make([]float64, 3)
	v[i] = 1
	return v
}

func TestRelabellingsAreThoseOfTheLiterature(t *testing.T) {
	for _, c := range []struct{ structure, name, pairs string }{
		{"demo:octahedron", "F for T", "T1g=F1g T2u=F2u Eg=Eg"},
		{"demo:octahedron", "C2' for C2, C4^2 for C2", "6C2=6C2' 3C2(=C4^2)=3C4^2"},
		{"demo:sandwich-staggered", "C5^2 for C5", "E1g=E2g E2g=E1g E1u=E2u A1g=A1g"},
		{"demo:sandwich-eclipsed", "C5^2 for C5", "E1'=E2' E2''=E1''"},
		{"demo:cage", "C5^2 for C5", "T1u=T2u T2g=T1g Hg=Hg"},
		{"demo:cage", "U and V for G and H", "Gg=Ug Hu=Vu"},
		{"demo:crown", "S8^3 for S8", "E1=E3 E2=E2 E3=E1 B1=B1"},
		{"demo:water", "", ""},
	} {
		var f contractFrames
		runJSON(t, &f, "frames", c.structure)
		found := c.name == "" && len(f.Relabellings) == 0
		for _, r := range f.Relabellings {
			if r.Name != c.name {
				continue
			}
			found = true
			for _, pair := range strings.Fields(c.pairs) {
				here, there, _ := strings.Cut(strings.Replace(pair, "(=C4^2)", "(C4^2)", 1), "=")
				here = strings.Replace(here, "(C4^2)", "(=C4^2)", 1)
				if !slices.Contains(append(r.Irreps, r.Classes...), contractRenaming{here, there}) {
					t.Errorf("%s, %s: %s", c.structure, c.name, pair)
				}
			}
		}
		if !found {
			t.Errorf("%s: no %q", c.structure, c.name)
		}
	}
}

func TestLabelsAreTranslatedAndLifted(t *testing.T) {
	var f contractFrames
	runJSON(t, &f, "frames", "demo:water", "--translate", "2 a1, 1 b1 + 1b2,A2", "--from", "plane-xz")
	if got := strings.Join(f.Translation.Here, ", "); got != "2 a1, 1 b2, 1 b1, A2" {
		t.Errorf("translated: %s", got)
	}
	// O. b1u, b2u and b3u of D2h, whose C2 are the C4² of Oh: x, y, z (T1u) and
	// the cubic functions of T2u go over alike.
	f = contractFrames{}
	runJSON(t, &f, "frames", "demo:octahedron", "--translate", "b1u, b2u, b3u", "--from", "D2h")
	var ways []string
	for _, way := range f.Translation.Lifts[0].Ways {
		for _, c := range way {
			ways = append(ways, c.Irrep)
		}
	}
	if got := strings.Join(ways, " or "); got != "T1u or T2u" || len(f.Translation.Lifts[0].Telling) == 0 || !f.Translation.Lifts[0].Complete {
		t.Errorf("lifted: %s %+v", got, f.Translation.Lifts[0])
	}
	// D2h lies in Oh in two ways. With two C2 that are no powers of C4 it has the
	// characters of T2u on them, so that b1u + b2u + b3u are T1u alone there.
	lifts := f.Translation.Lifts
	if len(lifts) != 2 || lifts[0].Embedding != 1 || lifts[1].Embedding != 2 || len(lifts[1].Ways) != 1 || contentOf(lifts[1].Ways[0]) != "T1u" {
		t.Errorf("lifted: %+v", lifts)
	}
	// z² and x²−y² (Eg) go over into ag + b1g there if z is along C4², into ag + b3g
	// if x is.
	f = contractFrames{}
	runJSON(t, &f, "frames", "demo:octahedron", "--translate", "ag, b3g", "--from", "D2h")
	lifts = f.Translation.Lifts
	if n := len(lifts); n != 3 || lifts[2].Embedding != 2 || len(lifts[2].Ways) != 2 || contentOf(lifts[2].Ways[1]) != "Eg" {
		t.Fatalf("lifted: %+v", lifts)
	}
	if at := slices.Index(lifts[2].Operations, "C2(z)"); at < 0 || lifts[2].Names[at] != "C2(x)" {
		t.Errorf("the C4² is %v of %v", lifts[2].Names, lifts[2].Operations)
	}
	// x and y of a linear molecule, and what has three nodal planes.
	f = contractFrames{}
	runJSON(t, &f, "frames", "demo:rod", "--translate", "b2u, b3u", "--from", "D2h")
	if w := f.Translation.Lifts[0].Ways; len(w) != 2 || contentOf(w[0])+" "+contentOf(w[1]) != "Πu Φu" {
		t.Errorf("lifted: %+v", w)
	}
}

func TestExplicitAxesLieWhereTheyAreAskedFor(t *testing.T) {
	position := func(g contractGroup, atom int) []float64 { return g.Structure.Atoms[atom-1].Position }
	along := func(v []float64, axis int) bool {
		return v[axis] > 0 && math.Abs(v[(axis+1)%3])+math.Abs(v[(axis+2)%3]) < 1e-9
	}
	var g contractGroup
	runJSON(t, &g, "group", "demo:octahedron", "--z", "C3(2)", "--x", "C2(3)")
	checkGroup(t, g)
	if !slices.ContainsFunc(g.Operations, func(o contractOperation) bool { return o.Name == "C3(z)" }) || g.Frame.Name != "explicit" {
		t.Errorf("no C3 along z in %s", g.Frame.Name)
	}
	g = contractGroup{}
	runJSON(t, &g, "group", "demo:octahedron", "--z", "6", "--x", "3")
	checkGroup(t, g)
	if !along(position(g, 6), 2) || !along(position(g, 3), 0) {
		t.Errorf("atoms 6 and 3 are at %v and %v", position(g, 6), position(g, 3))
	}
	g = contractGroup{}
	runJSON(t, &g, "group", "demo:octahedron", "--z", "2,5")
	checkGroup(t, g)
	between := []float64{position(g, 5)[0] - position(g, 2)[0], position(g, 5)[1] - position(g, 2)[1], position(g, 5)[2] - position(g, 2)[2]}
	if !along(between, 2) {
		t.Errorf("from atom 2 to atom 5 it is %v", between)
	}
	g = contractGroup{}
	runJSON(t, &g, "group", "ideal:SP-4", "--x", "0,1,0")
	if math.Abs(math.Abs(g.Frame.Rotation[0][1])-1) > 1e-9 {
		t.Errorf("x is not along y of the input: %v", g.Frame.Rotation)
	}
}
