package command

import (
	"bytes"
	"context"
	"encoding/json"
	"fmt"
	"math"
	"os"
	"strings"
	"testing"
)

// The types below and the checks on them are written from the description of
// the JSON alone; they share nothing with the code that prints it.

type contractAtom struct {
	Element  string    `json:"element"`
	Position []float64 `json:"position"`
}

type contractOperation struct {
	Name        string      `json:"name"`
	Class       int         `json:"class"`
	Axis        []float64   `json:"axis"`
	Matrix      [][]float64 `json:"matrix"`
	Permutation []int       `json:"permutation"`
}

type contractIrrep struct {
	Label       string        `json:"label"`
	Dimension   int           `json:"dimension"`
	ComplexPair bool          `json:"complexPair"`
	Characters  []float64     `json:"characters"`
	Matrices    [][][]float64 `json:"matrices"`
	Functions   [][]string    `json:"functions"`
}

type contractGroup struct {
	Structure struct {
		Title string         `json:"title"`
		Atoms []contractAtom `json:"atoms"`
		Core  []int          `json:"core"`
	} `json:"structure"`
	PointGroup string  `json:"pointGroup"`
	Order      int     `json:"order"`
	Deviation  float64 `json:"deviation"`
	Tolerance  float64 `json:"tolerance"`
	Doubtful   bool    `json:"doubtful"`
	Frame      struct {
		Origin     []float64   `json:"origin"`
		Rotation   [][]float64 `json:"rotation"`
		Name       string      `json:"name"`
		Convention string      `json:"convention"`
		Source     string      `json:"source"`
		Ties       []string    `json:"ties"`
	} `json:"frame"`
	Operations []contractOperation `json:"operations"`
	Classes    []struct {
		Name string `json:"name"`
		Size int    `json:"size"`
	} `json:"classes"`
	Irreps []contractIrrep `json:"irreps"`
}

type contractFunction struct {
	Atom      int       `json:"atom"`
	Function  string    `json:"function"`
	Direction []float64 `json:"direction"`
	Orbit     int       `json:"orbit"`
}

type contractOrbital struct {
	Irrep        string    `json:"irrep"`
	Copy         int       `json:"copy"`
	Partner      int       `json:"partner"`
	Coefficients []float64 `json:"coefficients"`
	ClosedForm   string    `json:"closedForm"`
}

type contractProjection struct {
	contractGroup
	Basis      []contractFunction `json:"basis"`
	Characters []float64          `json:"characters"`
	Content    []struct {
		Irrep  string `json:"irrep"`
		Copies int    `json:"copies"`
	} `json:"content"`
	GroupOrbitals []contractOrbital `json:"groupOrbitals"`
}

type contractLedger struct {
	Function int    `json:"function"`
	Irrep    string `json:"irrep"`
	Element  []int  `json:"element"`
	Rows     []struct {
		Operation string      `json:"operation"`
		Image     [][]float64 `json:"image"`
		Weight    float64     `json:"weight"`
		Sum       []float64   `json:"sum"`
	} `json:"rows"`
	Norm float64 `json:"norm"`
}

// run executes a command line and returns what it printed.
func run(t *testing.T, args ...string) (status int, out, messages string) {
	t.Helper()
	var stdout, stderr bytes.Buffer
	status = Run(context.Background(), args, Streams{In: strings.NewReader(""), Out: &stdout, Err: &stderr}, "test")
	return status, stdout.String(), stderr.String()
}

// runJSON executes a command line with --json and decodes its output, which
// must have no other keys and no negative zero.
func runJSON(t *testing.T, into any, args ...string) {
	t.Helper()
	status, out, messages := run(t, append(args, "--json")...)
	if status != 0 {
		t.Fatalf("%s: status %d: %s", strings.Join(args, " "), status, messages)
	}
	decoder := json.NewDecoder(strings.NewReader(out))
	decoder.DisallowUnknownFields()
	if err := decoder.Decode(into); err != nil {
		t.Fatal(err)
	}
	if strings.TrimSpace(out[decoder.InputOffset():]) != "" {
		t.Fatal("something stands behind the JSON object")
	}
	for _, bad := range []string{"null", "-0,", "-0]", "-0}", "-0\n"} {
		if strings.Contains(out, bad) {
			t.Errorf("the output contains %q", bad)
		}
	}
}

const (
	representationError = 1e-12
	transformationError = 1e-10
)

var contractCases = []struct {
	structure string
	on        []string
	group     string
	content   string
}{
	{"demo:square-plane", []string{"Cl:sigma", "Cl:pi"}, "D4h", "A1g + A2g + B1g + B2g + Eg + A2u + B2u + 2Eu"},
	{"demo:octahedron", []string{"C:sigma", "Cr:d"}, "Oh", "A1g + 2Eg + T2g + T1u"},
	{"demo:octahedron", []string{"C:pi@1"}, "Oh", "T1g + T2g + T1u + T2u"},
	{"demo:tetrahedron", []string{"Cl:p"}, "Td", "A1 + E + T1 + 2T2"},
	{"demo:bipyramid", []string{"F:sigma", "P:f"}, "D3h", "3A1' + A2' + 2E' + 2A2'' + E''"},
	{"demo:benzene", []string{"C:pz", "H:s"}, "D6h", "A1g + B2g + E1g + E2g + A2u + B1u + E1u + E2u"},
	{"demo:sandwich-staggered", []string{"C:pz"}, "D5d", "A1g + E1g + E2g + A2u + E1u + E2u"},
	{"demo:furan", []string{"C:pi-out", "H:s"}, "C2v", "2A1 + 2A2 + 2B1 + 2B2"},
	{"demo:propeller", []string{"O:d"}, "D3", ""},
	{"demo:silicic-acid", []string{"O:p", "H:s"}, "S4", ""},
	{"demo:benzenetriol", []string{"C:p"}, "C3h", ""},
	{"demo:hexaaqua", []string{"H:s", "O:p"}, "Th", ""},
	{"demo:crown", []string{"S:p"}, "D4d", ""},
	{"demo:propadiene", []string{"C:p", "H:s"}, "D2d", ""},
	{"demo:hydrate", []string{"1-3:d"}, "C1", ""},
	{"ideal:ring-7,C", []string{"C:pz"}, "D7h", "A2'' + E1'' + E2'' + E3''"},
	{"ideal:TPR-6", []string{"2-7:s"}, "D3h", "A1' + E' + A2'' + E''"},
}

func TestPrintedJSONKeepsTheContract(t *testing.T) {
	for _, c := range contractCases {
		t.Run(c.structure+" "+strings.Join(c.on, " "), func(t *testing.T) {
			args := []string{"project", c.structure}
			for _, on := range c.on {
				args = append(args, "--on", on)
			}
			var p contractProjection
			runJSON(t, &p, args...)
			if p.PointGroup != c.group {
				t.Fatalf("point group %s, want %s", p.PointGroup, c.group)
			}
			checkGroup(t, p.contractGroup)
			checkFunctions(t, p.contractGroup)
			checkProjection(t, p)
			var content []string
			for _, part := range p.Content {
				n := ""
				if part.Copies > 1 {
					n = fmt.Sprint(part.Copies)
				}
				content = append(content, n+part.Irrep)
			}
			if got := strings.Join(content, " + "); c.content != "" && got != c.content {
				t.Errorf("content %s, want %s", got, c.content)
			}
		})
	}
}

// checkGroup checks operations, permutations and irreps against each other.
func checkGroup(t *testing.T, g contractGroup) {
	t.Helper()
	if g.Order != len(g.Operations) || g.Operations[0].Name != "E" {
		t.Errorf("order %d, %d operations, the first is %s", g.Order, len(g.Operations), g.Operations[0].Name)
	}
	if d := determinant(g.Frame.Rotation); math.Abs(d-1) > representationError {
		t.Errorf("the frame's rotation has determinant %g", d)
	}
	if g.Deviation < 0 || g.Deviation > g.Tolerance || g.Frame.Name == "" || g.Frame.Convention == "" || g.Frame.Source == "" {
		t.Errorf("deviation %g, tolerance %g, frame %+v", g.Deviation, g.Tolerance, g.Frame)
	}
	names, sizes := map[string]bool{}, make([]int, len(g.Classes))
	for _, op := range g.Operations {
		if names[op.Name] {
			t.Errorf("two operations are called %s", op.Name)
		}
		names[op.Name] = true
		sizes[op.Class-1]++
		if (op.Name == "E" || op.Name == "i") != (op.Axis == nil) {
			t.Errorf("%s: axis %v", op.Name, op.Axis)
		}
		if op.Axis != nil {
			image := apply(op.Matrix, op.Axis)
			if along := math.Abs(dot(image, op.Axis)); math.Abs(along-1) > representationError {
				t.Errorf("%s moves its axis", op.Name)
			}
		}
		for k, image := range op.Permutation {
			if image == 0 {
				continue // a spectator without image
			}
			from, to := g.Structure.Atoms[k], g.Structure.Atoms[image-1]
			off := distance(apply(op.Matrix, from.Position), to.Position)
			if isCore(g, k+1) && off > 1e-9 || off > g.Tolerance || from.Element != to.Element {
				t.Errorf("%s does not carry atom %d to atom %d", op.Name, k+1, image)
			}
		}
		if len(op.Permutation) != len(g.Structure.Atoms) {
			t.Errorf("%s permutes %d atoms", op.Name, len(op.Permutation))
		}
	}
	squares := 0
	for i, size := range sizes {
		if size != g.Classes[i].Size || size > 1 != strings.HasPrefix(g.Classes[i].Name, fmt.Sprint(size)) {
			t.Errorf("class %s has size %d and %d members", g.Classes[i].Name, g.Classes[i].Size, size)
		}
	}
	for _, irrep := range g.Irreps {
		d := irrep.Dimension
		if irrep.ComplexPair {
			squares += d * d / 2
		} else {
			squares += d * d
		}
		checkRepresentation(t, g, irrep)
	}
	if squares != g.Order {
		t.Errorf("the squares of the dimensions add up to %d, the order is %d", squares, g.Order)
	}
}

func isCore(g contractGroup, atom int) bool {
	for _, c := range g.Structure.Core {
		if c == atom {
			return true
		}
	}
	return false
}

// checkRepresentation checks that matrices multiply like the operations, are
// orthogonal and have the characters as traces.
func checkRepresentation(t *testing.T, g contractGroup, irrep contractIrrep) {
	t.Helper()
	if len(irrep.Matrices) != g.Order || len(irrep.Functions) != irrep.Dimension || len(irrep.Characters) != len(g.Classes) {
		t.Fatalf("%s: %d matrices, %d lists of functions, %d characters", irrep.Label, len(irrep.Matrices), len(irrep.Functions), len(irrep.Characters))
	}
	for r, a := range g.Operations {
		if x := trace(irrep.Matrices[r]) - irrep.Characters[a.Class-1]; math.Abs(x) > representationError {
			t.Errorf("%s: the trace of %s is off by %g", irrep.Label, a.Name, x)
		}
		for s, b := range g.Operations {
			product := multiply(a.Matrix, b.Matrix)
			p := -1
			for i, c := range g.Operations {
				if farthest(c.Matrix, product) < 1e-9 {
					p = i
				}
			}
			if p < 0 {
				t.Fatalf("%s · %s is not in the group", a.Name, b.Name)
			}
			if off := farthest(multiply(irrep.Matrices[r], irrep.Matrices[s]), irrep.Matrices[p]); off > representationError {
				t.Fatalf("%s: the matrices of %s and %s multiply with an error of %g", irrep.Label, a.Name, b.Name, off)
			}
		}
		if off := farthest(multiply(irrep.Matrices[r], transposed(irrep.Matrices[r])), identity(irrep.Dimension)); off > representationError {
			t.Errorf("%s: the matrix of %s is not orthogonal: %g", irrep.Label, a.Name, off)
		}
	}
}

// checkProjection checks the group orbitals from the JSON alone.
func checkProjection(t *testing.T, p contractProjection) {
	t.Helper()
	n := len(p.Basis)
	if len(p.GroupOrbitals) != n {
		t.Fatalf("%d functions, %d group orbitals", n, len(p.GroupOrbitals))
	}
	for i, a := range p.GroupOrbitals {
		for j, b := range p.GroupOrbitals[:i+1] {
			want := 0.0
			if i == j {
				want = 1
			}
			if off := dot(a.Coefficients, b.Coefficients) - want; math.Abs(off) > transformationError {
				t.Errorf("group orbitals %d and %d: overlap off by %g", i+1, j+1, off)
			}
		}
		if a.Partner == 1 {
			checkPhase(t, a)
		}
		checkClosedForm(t, a)
	}
	dimension := 0
	for c := range p.Characters {
		sum := p.Characters[c]
		for _, part := range p.Content {
			sum -= float64(part.Copies) * irrepNamed(p.Irreps, part.Irrep).Characters[c]
		}
		if math.Abs(sum) > transformationError {
			t.Errorf("the content has not the character of class %s: off by %g", p.Classes[c].Name, sum)
		}
	}
	next := 0
	for _, part := range p.Content {
		irrep := irrepNamed(p.Irreps, part.Irrep)
		dimension += part.Copies * irrep.Dimension
		for c := 1; c <= part.Copies; c++ {
			partners := p.GroupOrbitals[next : next+irrep.Dimension]
			next += irrep.Dimension
			for k, o := range partners {
				if o.Irrep != part.Irrep || o.Copy != c || o.Partner != k+1 {
					t.Fatalf("group orbital %s %d %d stands where %s %d %d belongs", o.Irrep, o.Copy, o.Partner, part.Irrep, c, k+1)
				}
			}
			checkPartners(t, p, irrep, partners)
		}
	}
	if dimension != n {
		t.Errorf("the content holds %d functions of %d", dimension, n)
	}
}

// checkPhase: the largest coefficient of partner 1 is positive; among equals
// that of the first function.
func checkPhase(t *testing.T, o contractOrbital) {
	t.Helper()
	largest := 0.0
	for _, c := range o.Coefficients {
		largest = max(largest, math.Abs(c))
	}
	for _, c := range o.Coefficients {
		if math.Abs(c) > largest-1e-9 {
			if c < 0 {
				t.Errorf("%s, copy %d: the first of the largest coefficients of partner 1 is negative", o.Irrep, o.Copy)
			}
			return
		}
	}
}

// checkPartners samples what every operation makes of every partner, atom by
// atom and direction by direction: R carries the value at direction d on an
// atom to direction R·d on the atom's image.
func checkPartners(t *testing.T, p contractProjection, irrep contractIrrep, partners []contractOrbital) {
	t.Helper()
	directions := [][]float64{{0.48, 0.6, 0.64}, {-0.36, 0.48, 0.8}, {0.8, -0.6, 0}, {0, 0.28, -0.96}, {-0.6, -0.64, 0.48}, {1, 0, 0}, {0.152, 0.864, -0.48}, {0.64, 0.48, -0.6}}
	values := func(o contractOrbital, atom int, d []float64) (s, pd, dd, f float64) {
		for i, c := range o.Coefficients {
			if c == 0 || p.Basis[i].Atom != atom {
				continue
			}
			v := c * valueOf(t, p.Basis[i], d)
			switch shellOf(p.Basis[i]) {
			case 0:
				s += v
			case 1:
				pd += v
			case 2:
				dd += v
			default:
				f += v
			}
		}
		return s, pd, dd, f
	}
	for r, op := range p.Operations {
		for atom, image := range op.Permutation {
			if image == 0 {
				continue
			}
			for _, d := range directions {
				there := apply(op.Matrix, d)
				for k, partner := range partners {
					s0, p0, d0, f0 := values(partner, atom+1, d)
					for l, other := range partners {
						m := irrep.Matrices[r][l][k]
						s1, p1, d1, f1 := values(other, image, there)
						s0, p0, d0, f0 = s0-m*s1, p0-m*p1, d0-m*d1, f0-m*f1
					}
					if off := max(math.Abs(s0), math.Abs(p0), math.Abs(d0), math.Abs(f0)); off > 20*transformationError {
						t.Fatalf("%s, copy %d, partner %d: %s carries it wrongly: off by %g on atom %d", irrep.Label, partner.Copy, k+1, op.Name, off, image)
					}
				}
			}
		}
	}
}

func irrepNamed(irreps []contractIrrep, label string) contractIrrep {
	for _, irrep := range irreps {
		if irrep.Label == label {
			return irrep
		}
	}
	return contractIrrep{}
}

func TestPrintedLedgersAddUp(t *testing.T) {
	for _, c := range []struct {
		args    []string
		element [2]int
		norm    float64
	}{
		// Four functions: 8 of 16 operations carry φ1 to ±φ1 or to φ3, each
		// with the weight ±1; the sum is 4φ1 − 4φ3.
		{[]string{"demo:square-plane", "--on", "Cl:sigma", "--function", "1", "--irrep", "eu"}, [2]int{1, 1}, math.Sqrt(32)},
		{[]string{"demo:square-plane", "--on", "Cl:sigma", "--function", "1", "--irrep", "Eu", "--element", "2,2"}, [2]int{2, 2}, 0},
		{[]string{"demo:square-plane", "--on", "Cl:sigma", "--function", "2", "--irrep", "A2g"}, [2]int{1, 1}, 0},
		// By characters of E1g the sum of φ1 is (2, 1, −1, −2, −1, 1)·2.
		{[]string{"demo:benzene", "--on", "C:pz", "--function", "1", "--irrep", "E1g", "--character"}, [2]int{0, 0}, 2 * math.Sqrt(12)},
	} {
		var l contractLedger
		runJSON(t, &l, append([]string{"ledger"}, c.args...)...)
		if len(l.Element) != 2 || l.Element[0] != c.element[0] || l.Element[1] != c.element[1] {
			t.Errorf("%v: element %v", c.args, l.Element)
		}
		if math.Abs(l.Norm-c.norm) > 1e-12 || c.norm == 0 && l.Norm != 0 {
			t.Errorf("%v: norm %g, want %g", c.args, l.Norm, c.norm)
		}
		var g contractGroup
		runJSON(t, &g, "group", c.args[0])
		irrep := irrepNamed(g.Irreps, l.Irrep)
		sum := make([]float64, len(l.Rows[0].Sum))
		for r, row := range l.Rows {
			if row.Operation != g.Operations[r].Name {
				t.Errorf("row %d is %s, operation %s", r+1, row.Operation, g.Operations[r].Name)
			}
			want := trace(irrep.Matrices[r])
			if c.element[0] > 0 {
				want = irrep.Matrices[r][c.element[0]-1][c.element[1]-1]
			}
			if math.Abs(row.Weight-want) > representationError {
				t.Errorf("%s: weight %g, want %g", row.Operation, row.Weight, want)
			}
			for _, term := range row.Image {
				sum[int(term[0])-1] += row.Weight * term[1]
			}
			for i := range sum {
				if math.Abs(sum[i]-row.Sum[i]) > 1e-12 {
					t.Errorf("%s: the sum is not what its rows add up to", row.Operation)
				}
			}
		}
	}
}

func TestLinearMoleculesAndAtomsHaveEmptyLists(t *testing.T) {
	for _, c := range []struct{ structure, group, on, content string }{
		{"demo:rod", "D∞h", "N:p", "1 Σg+ 1 Πg 1 Σu+ 1 Πu"},
		{"demo:cyanide", "C∞v", "all:d", "3 Σ+ 3 Π 3 Δ"},
	} {
		var p contractProjection
		runJSON(t, &p, "project", c.structure, "--on", c.on)
		if p.PointGroup != c.group || p.Order != 0 || len(p.Operations)+len(p.Classes)+len(p.Characters) != 0 {
			t.Errorf("%s: %s, order %d, %d operations", c.structure, p.PointGroup, p.Order, len(p.Operations))
		}
		var content []string
		for _, part := range p.Content {
			content = append(content, fmt.Sprint(part.Copies), part.Irrep)
		}
		if got := strings.Join(content, " "); got != c.content {
			t.Errorf("%s: content %s", c.structure, got)
		}
		if len(p.GroupOrbitals) != len(p.Basis) {
			t.Errorf("%s: %d group orbitals of %d functions", c.structure, len(p.GroupOrbitals), len(p.Basis))
		}
		for _, irrep := range p.Irreps {
			if len(irrep.Characters)+len(irrep.Matrices) != 0 || len(irrep.Functions) != irrep.Dimension {
				t.Errorf("%s: irrep %+v", c.structure, irrep)
			}
		}
	}
}

func TestTheFrameTakesTheInputToThePrintedAtoms(t *testing.T) {
	t.Chdir(t.TempDir())
	// A bent molecule in a general position, with a little noise, one atom of
	// which is a spectator.
	input := [][]float64{{1.2, -0.4, 2.2}, {1.9, 0.21, 2.5}, {0.4, 0.13, 2.06}, {4, 4, 4}}
	text := "4\nnoisy\n"
	for i, p := range input {
		text += fmt.Sprintf("%s %.10f %.10f %.10f\n", []string{"O", "H", "H", "Ne"}[i], p[0], p[1], p[2])
	}
	if err := os.WriteFile("noisy.xyz", []byte(text), 0o666); err != nil {
		t.Fatal(err)
	}
	var g contractGroup
	runJSON(t, &g, "group", "noisy.xyz", "--ignore", "Ne")
	if g.PointGroup != "C2v" || len(g.Structure.Core) != 3 {
		t.Fatalf("point group %s, core %v", g.PointGroup, g.Structure.Core)
	}
	farthest := 0.0
	for i, p := range input {
		moved := make([]float64, 3)
		for k := range moved {
			moved[k] = p[k] - g.Frame.Origin[k]
		}
		off := distance(apply(g.Frame.Rotation, moved), g.Structure.Atoms[i].Position)
		if i == 3 && off > 1e-12 {
			t.Errorf("the spectator is moved by %g Å", off)
		}
		if i < 3 {
			farthest = max(farthest, off)
		}
	}
	if math.Abs(farthest-g.Deviation) > 1e-9 || farthest < 1e-3 {
		t.Errorf("the atoms are moved by up to %g Å, the deviation is %g", farthest, g.Deviation)
	}
}
