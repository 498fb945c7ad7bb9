package command

import (
	"bytes"
	"context"
	"math"
	"os"
	"strings"
	"testing"
)

type contractLadder struct {
	Groups []struct {
		PointGroup string    `json:"pointGroup"`
		Embedding  int       `json:"embedding"`
		Axis       []float64 `json:"axis"`
		Deviation  float64   `json:"deviation"`
		Measure    float64   `json:"measure"`
		Distortion []struct {
			Irrep   string  `json:"irrep"`
			Copy    int     `json:"copy"`
			Partner int     `json:"partner"`
			Amount  float64 `json:"amount"`
		} `json:"distortion"`
	} `json:"groups"`
}

const stretched = `6
octahedron stretched by 1.1 along z
F 1 0 0
F -1 0 0
F 0 1 0
F 0 -1 0
F 0 0 1.1
F 0 0 -1.1
`

// The squares of the amounts add up to Σ d², which the measure knows from the
// points alone: S = 100·Σ d²/Σ q². No share is totally symmetric.
func TestDistortionsAddUp(t *testing.T) {
	t.Chdir(t.TempDir())
	if err := os.WriteFile("stretched.xyz", []byte(stretched), 0o666); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		args   []string
		groups string // some that must be there
	}{
		{[]string{"stretched.xyz"}, "Oh D4h D3d C2v"},
		{[]string{"demo:hydrate", "--core", "1-7"}, "Oh D4h D2h Th"},
		{[]string{"demo:propeller"}, "D3 C3 C2"},
		{[]string{"demo:water"}, "C2v Cs"},
		{[]string{"demo:rod"}, "D∞h"},
	} {
		var l contractLadder
		runJSON(t, &l, append([]string{"near"}, c.args...)...)
		var g contractGroup
		runJSON(t, &g, append([]string{"group", "--tolerance", "1e-6", "--frame", "file"}, c.args...)...)
		spread, n := 0.0, float64(len(g.Structure.Core))
		centre := make([]float64, 3)
		for _, k := range g.Structure.Core {
			for i, x := range g.Structure.Atoms[k-1].Position {
				centre[i] += x / n
			}
		}
		for _, k := range g.Structure.Core {
			spread += math.Pow(distance(g.Structure.Atoms[k-1].Position, centre), 2)
		}
		found := map[string]int{}
		last := 0.0
		for _, near := range l.Groups {
			found[near.PointGroup]++
			if near.Embedding != found[near.PointGroup] || near.Deviation < last-1e-6 || near.Deviation > 1 || math.Abs(dot(near.Axis, near.Axis)-1) > 1e-9 {
				t.Errorf("%v: %s:%d, deviation %g, axis %v", c.args, near.PointGroup, near.Embedding, near.Deviation, near.Axis)
			}
			last = max(last, near.Deviation)
			sum := 0.0
			for _, s := range near.Distortion {
				sum += s.Amount * s.Amount
				if label := s.Irrep; (label == "A1g" || label == "A1" || label == "A1'" || label == "Ag" && near.PointGroup != "Th" || label == "Σg+" || label == "A'") && math.Abs(s.Amount) > 1e-6 {
					t.Errorf("%v, %s: %g of the distortion is totally symmetric", c.args, near.PointGroup, s.Amount)
				}
			}
			if want := near.Measure / 100 * spread; math.Abs(sum-want) > 1e-6*(1+want) {
				t.Errorf("%v, %s:%d: the squares add up to %g, not %g", c.args, near.PointGroup, near.Embedding, sum, want)
			}
			if c.args[0] == "stretched.xyz" && near.PointGroup == "Oh" {
				// A check value computed elsewhere (testdata/checkvalues).
				if math.Abs(near.Measure-0.20768) > 1e-4 {
					t.Errorf("measure %g", near.Measure)
				}
				for _, s := range near.Distortion {
					if s.Irrep != "Eg" && math.Abs(s.Amount) > 1e-6 {
						t.Errorf("a stretched octahedron is distorted along %s by %g", s.Irrep, s.Amount)
					}
				}
			}
		}
		for _, symbol := range strings.Fields(c.groups) {
			if found[symbol] == 0 {
				t.Errorf("%v: %s is missing", c.args, symbol)
			}
		}
	}
}

func TestAStructureIsTakenForAGroupThatItNearlyHas(t *testing.T) {
	t.Chdir(t.TempDir())
	args := []string{"demo:hydrate", "--core", "1-7", "--as", "D4h:2"}
	var p contractProjection
	runJSON(t, &p, append([]string{"project", "--on", "2-7:sigma"}, args...)...)
	if p.PointGroup != "D4h" {
		t.Fatalf("point group %s", p.PointGroup)
	}
	checkGroup(t, p.contractGroup)
	checkProjection(t, p)
	var l contractLadder
	runJSON(t, &l, append([]string{"near"}, args[:3]...)...)
	for _, near := range l.Groups {
		if near.PointGroup == "D4h" && near.Embedding == 2 && (math.Abs(near.Deviation-p.Deviation) > 1e-12 || distance(near.Axis, p.Frame.Rotation[2]) > 1e-12) {
			t.Errorf("near says %+v, project %+v", near, p.Frame)
		}
	}
	// The ideal structure has the group exactly, in either axes.
	for _, axes := range []string{"", "--input-axes"} {
		line := append([]string{"idealize", "-o", "ideal.xyz", "--force"}, args...)
		if axes != "" {
			line = append(line, axes)
		}
		if status, out, messages := run(t, line...); status != 0 || out != "" {
			t.Fatal(out, messages)
		}
		var g contractGroup
		runJSON(t, &g, "group", "ideal.xyz", "--core", "1-7", "--tolerance", "1e-6")
		if g.PointGroup != "D4h" || g.Deviation > 1e-7 {
			t.Errorf("the ideal structure has %s, deviation %g", g.PointGroup, g.Deviation)
		}
		if axes == "" && farthest(g.Frame.Rotation, identity(3)) > 1e-6 {
			t.Errorf("the ideal structure is not in its working frame: %v", g.Frame.Rotation)
		}
		if axes != "" && farthest(g.Frame.Rotation, p.Frame.Rotation) > 1e-6 {
			t.Errorf("the ideal structure is turned: %v, not %v", g.Frame.Rotation, p.Frame.Rotation)
		}
	}
}

func TestALinearMoleculeIsTakenForFiniteGroups(t *testing.T) {
	for _, c := range []struct{ structure, group, content string }{
		{"demo:rod", "D2h", "Ag + B2g + B3g + B1u + B2u + B3u"},
		{"demo:rod", "D4h", "A1g + Eg + A2u + Eu"},
		{"demo:rod", "C6v", "2A1 + 2E1"},
		{"demo:cyanide", "C2v", "A1 + B1 + B2"},
	} {
		var p contractProjection
		runJSON(t, &p, "project", c.structure, "--as", c.group, "--on", "N:p")
		checkGroup(t, p.contractGroup)
		checkProjection(t, p)
		var content []contractContent
		for _, part := range p.Content {
			content = append(content, contractContent(part))
		}
		if got := contentOf(content); p.PointGroup != c.group || got != c.content {
			t.Errorf("%s as %s: %s, %s", c.structure, c.group, p.PointGroup, got)
		}
	}
}

func TestASearchStopsWhenItIsInterrupted(t *testing.T) {
	ctx, stop := context.WithCancel(context.Background())
	stop()
	var out, messages bytes.Buffer
	status := Run(ctx, []string{"near", "demo:cage"}, Streams{In: strings.NewReader(""), Out: &out, Err: &messages}, "test")
	if status != notServed || out.String() != "" || messages.String() != "lobewright: interrupted\n" {
		t.Errorf("status %d, output %q, messages %q", status, out.String(), messages.String())
	}
}

// Eu of the square goes over into B2u + B3u if z stays (x and y), but by the rule
// for planar D2h, which lays z into the plane, into B1u + B2u.
func TestAxesAreKeptOnTheWayToASubgroup(t *testing.T) {
	for _, c := range []struct {
		flags   []string
		content string
	}{
		{nil, "2Ag + B1u + B2u"},
		{[]string{"--keep-axes"}, "2Ag + B2u + B3u"},
	} {
		var p contractProjection
		runJSON(t, &p, append([]string{"project", "demo:square-plane", "--as", "D2h", "--on", "Cl:sigma"}, c.flags...)...)
		checkGroup(t, p.contractGroup)
		checkFunctions(t, p.contractGroup)
		checkProjection(t, p)
		var content []contractContent
		for _, part := range p.Content {
			content = append(content, contractContent(part))
		}
		if got := contentOf(content); got != c.content {
			t.Errorf("%v: %s, want %s", c.flags, got, c.content)
		}
	}
	// Of a distorted octahedron too: every group below Oh keeps its axes as far
	// as its own rules for z allow.
	var whole contractGroup
	runJSON(t, &whole, "group", "demo:hydrate", "--core", "1-7", "--as", "Oh")
	for _, as := range []string{"D4h:1", "D2h:1", "D2h:3", "C4v:2", "C2v:2", "C2h:4", "Cs:2", "C3:1", "Ci", "C1"} {
		var g, free contractGroup
		runJSON(t, &g, "group", "demo:hydrate", "--core", "1-7", "--as", as, "--keep-axes")
		runJSON(t, &free, "group", "demo:hydrate", "--core", "1-7", "--as", as)
		checkGroup(t, g)
		checkFunctions(t, g)
		turn := func(f contractGroup) float64 {
			return trace(multiply(f.Frame.Rotation, transposed(whole.Frame.Rotation)))
		}
		if g.Frame.Name != "held" || turn(g) < turn(free)-1e-9 {
			t.Errorf("%s: %s, the turn from Oh has the trace %.3f, by default %.3f", as, g.Frame.Name, turn(g), turn(free))
		}
	}
}
