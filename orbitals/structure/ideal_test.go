package structure

import (
	"math"
	"strconv"
	"strings"
	"testing"
	"unicode/utf8"

	"github.com/go-gl/mathgl/mgl64"
)

// pointGroups are those of the ideal polyhedra with their centre, after the shapes' own names (common knowledge),
// and the order of each group, 0 for an infinite one.
var pointGroups = []struct {
	symbol, group string
	order         int
}{
	{"L-2", "D∞h", 0}, {"A-2", "C2v", 4},
	{"TP-3", "D3h", 12}, {"TPY-3", "C3v", 6}, {"TS-3", "C2v", 4},
	{"T-4", "Td", 24}, {"SP-4", "D4h", 16}, {"SPY-4", "C4v", 8}, {"SS-4", "C2v", 4},
	{"TBPY-5", "D3h", 12}, {"SPY-5", "C4v", 8},
	{"OC-6", "Oh", 48}, {"TPR-6", "D3h", 12},
	{"PBPY-7", "D5h", 20}, {"OCF-7", "C3v", 6}, {"TPRS-7", "C2v", 4},
	{"CU-8", "Oh", 48}, {"SAPR-8", "D4d", 16}, {"DD-8", "D2d", 8}, {"HBPY-8", "D6h", 24}, {"OCT-8", "D3d", 12},
	{"TPRT-8", "D3h", 12}, {"TPRS-8", "C2v", 4},
	{"TPRS-9", "D3h", 12}, {"HBPY-9", "D7h", 28},
}

func TestEveryPolyhedralSymbolHasItsPolyhedron(t *testing.T) {
	all := Polyhedra()
	if len(all) != len(pointGroups) {
		t.Fatalf("%d polyhedra, want %d", len(all), len(pointGroups))
	}
	for i, p := range all {
		if p.Symbol != pointGroups[i].symbol {
			t.Errorf("polyhedron %d is %s, want %s", i+1, p.Symbol, pointGroups[i].symbol)
		}
		_, count, _ := strings.Cut(p.Symbol, "-")
		if n, _ := strconv.Atoi(count); len(p.Directions) != n {
			t.Errorf("%s has %d ligands", p.Symbol, len(p.Directions))
		}
		if !p.Centre.Valid() || !p.Ligand.Valid() || p.Centre == p.Ligand || p.Name == "" || p.Shape == "" {
			t.Errorf("%s lacks elements or words: %+v", p.Symbol, p)
		}
		for _, v := range p.Directions {
			if math.Abs(v.Len()-1) > 1e-15 {
				t.Errorf("%s: a direction of length 1%+.2g", p.Symbol, v.Len()-1)
			}
		}
	}
}

// symmetries counts the orthogonal maps that carry a set of points about the origin into itself within loose, and
// returns the largest distance left over. It tries every image of three independent points: slow, and nothing
// of package symmetry is in it.
func symmetries(points []mgl64.Vec3, kinds []Element, loose float64) (order int, residue float64) {
	var base [3]int
	found := false
	for i := range points {
		for j := range i {
			for k := range j {
				if d := mgl64.Mat3FromCols(points[i], points[j], points[k]).Det(); math.Abs(d) > 1e-3 && !found {
					base, found = [3]int{i, j, k}, true
				}
			}
		}
	}
	if !found { // a planar set: stand one point above the plane and count its two images
		normal := points[0].Cross(points[1]).Normalize()
		more := append(append([]mgl64.Vec3{}, points...), normal, normal.Mul(-1))
		return symmetries(more, append(append([]Element{}, kinds...), MaxElement, MaxElement), loose)
	}
	from := mgl64.Mat3FromCols(points[base[0]], points[base[1]], points[base[2]]).Inv()
	for i := range points {
		for j := range points {
			for k := range points {
				m := mgl64.Mat3FromCols(points[i], points[j], points[k]).Mul3(from)
				if !m.Mul3(m.Transpose()).ApproxEqualThreshold(mgl64.Ident3(), loose) {
					continue
				}
				if worst := misfit(m, points, kinds); worst < loose {
					order++
					residue = max(residue, worst)
				}
			}
		}
	}
	return order, residue
}

// misfit returns the largest distance of a mapped point from the nearest point of its kind.
func misfit(m mgl64.Mat3, points []mgl64.Vec3, kinds []Element) (worst float64) {
	for i, p := range points {
		best := math.Inf(1)
		for j, q := range points {
			if kinds[i] == kinds[j] {
				best = min(best, m.Mul3x1(p).Sub(q).Len())
			}
		}
		worst = max(worst, best)
	}
	return worst
}

func TestPolyhedraHaveJustTheSymmetryOfTheirShape(t *testing.T) {
	for i, p := range Polyhedra() {
		want := pointGroups[i].order
		if want == 0 {
			continue
		}
		kinds := make([]Element, len(p.Directions))
		order, residue := symmetries(p.Directions, kinds, 1e-6)
		if order != want || residue > 1e-14 {
			t.Errorf("%s: %d operations (residue %.1g), want the %d of %s", p.Symbol, order, residue, want, pointGroups[i].group)
		}
	}
}

// shortest returns the distances between unit vectors, in classes that agree to 1e-12, shortest first.
func shortest(directions []mgl64.Vec3) (edges []float64, counts []int) {
	for i := range directions {
		for j := range i {
			d := directions[i].Sub(directions[j]).Len()
			k := 0
			for k < len(edges) && edges[k] < d-1e-12 {
				k++
			}
			if k < len(edges) && math.Abs(edges[k]-d) <= 1e-12 {
				counts[k]++
				continue
			}
			edges = append(edges[:k], append([]float64{d}, edges[k:]...)...)
			counts = append(counts[:k], append([]int{1}, counts[k:]...)...)
		}
	}
	return edges, counts
}

// Where spheres fill the shell, the number of equal shortest edges is that of the polyhedron (common knowledge),
// and the angles are those in print: 77.87°, 74.86° and 70.53° between the nearest of 7, 8 and 9 circles on a
// sphere (P. M. L. Tammes 1930, K. Schütte, B. L. van der Waerden 1951, from memory), 36.85° and 69.46° of the
// dodecahedron (J. L. Hoard, J. V. Silverton, Inorg. Chem. 2, 235 (1963), from memory).
func TestHardSphereShapesHaveEqualShortestEdges(t *testing.T) {
	cases := map[string]struct {
		edges int
		angle float64 // degrees, between nearest ligands
	}{
		"TPR-6":  {9, 81.79},  // 2 asin(√(3/7)), the prism with square faces
		"OCF-7":  {12, 77.87}, // 3 to the cap, 6 between the triangles, 3 of the lower one
		"SAPR-8": {16, 74.86}, // 8 of the squares, 8 between them
		"DD-8":   {14, 73.69}, // 2 AA, 4 AB within and 8 between the trapezoids; 2·36.85°, as in print, to 0.02°
		"TPRT-8": {9, 60},     // 6 to the caps, 3 along the axis
		"TPRS-9": {18, 70.53}, // 6 of the triangles, 12 to the caps
	}
	for _, p := range Polyhedra() {
		want, ok := cases[p.Symbol]
		if !ok {
			if p.Shape == hardSpheres {
				t.Errorf("%s is not checked", p.Symbol)
			}
			continue
		}
		edges, counts := shortest(p.Directions)
		angle := mgl64.RadToDeg(2 * math.Asin(edges[0]/2))
		if counts[0] != want.edges || math.Abs(angle-want.angle) > 0.006 {
			t.Errorf("%s: %d edges of %.3f°, want %d of %.2f°", p.Symbol, counts[0], angle, want.edges, want.angle)
		}
	}
}

// In a hard-sphere shape a small change of its angles brings two ligands nearer.
func TestHardSphereAnglesAreTheBestOnes(t *testing.T) {
	nearestOf := func(directions []mgl64.Vec3) float64 {
		edges, _ := shortest(directions)
		return edges[0]
	}
	families := map[string]struct {
		best float64
		make func(float64) []mgl64.Vec3
	}{
		"SAPR-8": {math.Atan(math.Sqrt(2 * math.Sqrt2)), func(a float64) []mgl64.Vec3 {
			return join(ring(4, a, 0), ring(4, math.Pi-a, math.Pi/4))
		}},
		"TPR-6":  {math.Atan(2 / math.Sqrt(3)), prism},
		"TPRT-8": {math.Pi / 3, func(a float64) []mgl64.Vec3 { return join(poles(), prism(a)) }},
		"TPRS-9": {math.Asin(2. / 3), func(a float64) []mgl64.Vec3 { return join(prism(a), ring(3, right, math.Pi/3)) }},
	}
	for name, f := range families {
		best := nearestOf(f.make(f.best))
		for _, step := range []float64{-0.1, -1e-3, -1e-6, 1e-6, 1e-3, 0.1} {
			if got := nearestOf(f.make(f.best + step)); got >= best {
				t.Errorf("%s: %v rad more gives %v, not less than %v", name, step, got, best)
			}
		}
	}
}

func TestIdealStructuresTakeElementsAndDistance(t *testing.T) {
	cases := map[string]struct {
		title string
		atoms int
		far   float64 // Å, of the last atom from the origin
	}{
		"OC-6":             {"ideal:OC-6,Co,N,1.97", 7, 1.97},
		"oc-6":             {"ideal:OC-6,Co,N,1.97", 7, 1.97},
		"OC-6,Co,N,1.96":   {"ideal:OC-6,Co,N,1.96", 7, 1.96},
		"OC-6, cr , cl":    {"ideal:OC-6,Cr,Cl,2.41", 7, 2.41},
		"T-4,Si":           {"ideal:T-4,Si,Cl,2.13", 5, 2.13},
		"L-2,Xe,F,1.98D0":  {"ideal:L-2,Xe,F,1.98", 3, 1.98},
		"TPRS-9":           {"ideal:TPRS-9,Re,H,1.82", 10, 1.82},
		"ring-6":           {"ideal:ring-6,C,1.39", 6, 1.39},
		"ring-4,P":         {"ideal:ring-4,P,2.14", 4, 2.14 / math.Sqrt2},
		"Ring-3,N,1.5":     {"ideal:ring-3,N,1.5", 3, 1.5 / math.Sqrt(3)},
		"ring-100,Au,2.88": {"ideal:ring-100,Au,2.88", 100, 1.44 / math.Sin(math.Pi/100)},
	}
	for text, want := range cases {
		m, err := Ideal(text)
		if err != nil {
			t.Errorf("%q: %v", text, err)
			continue
		}
		if far := m.Atoms[len(m.Atoms)-1].Position.Len(); m.Title != want.title || len(m.Atoms) != want.atoms || math.Abs(far-want.far) > 1e-12 {
			t.Errorf("%q: %q, %d atoms, the last at %v Å, want %+v", text, m.Title, len(m.Atoms), far, want)
		}
	}
}

func TestIdealBondsJoinTheCentreToEveryLigandAndNothingElse(t *testing.T) {
	for _, p := range Polyhedra() {
		m, err := Ideal(p.Symbol)
		if err != nil {
			t.Fatal(err)
		}
		if got := Bonds(m); len(got) != len(p.Directions) || got[len(got)-1][0] != 0 {
			t.Errorf("%s: bonds %v", m.Title, got)
		}
	}
	for n := 3; n <= MaxRing; n++ {
		m, err := Ideal("ring-" + strconv.Itoa(n))
		if err != nil {
			t.Fatal(err)
		}
		if got := Bonds(m); len(got) != n {
			t.Errorf("%s: %d bonds", m.Title, len(got))
		}
	}
}

func TestRingsAreRegularAndPlanar(t *testing.T) {
	for n := 3; n <= MaxRing; n++ {
		m, err := Ideal("ring-" + strconv.Itoa(n) + ",C,1.4")
		if err != nil {
			t.Fatal(err)
		}
		turn := mgl64.Rotate3DZ(2 * math.Pi / float64(n))
		for i, a := range m.Atoms {
			next := m.Atoms[(i+1)%n].Position
			if a.Position[2] != 0 || math.Abs(a.Position.Sub(next).Len()-1.4) > 1e-12 || turn.Mul3x1(a.Position).Sub(next).Len() > 1e-12 {
				t.Errorf("ring of %d: atom %d at %v, the next at %v", n, i+1, a.Position, next)
			}
		}
	}
}

func TestBadIdealStructuresSayWhatWouldBeRight(t *testing.T) {
	const shapes = "L-2 A-2 TP-3 TPY-3 TS-3 T-4 SP-4 SPY-4 SS-4 TBPY-5 SPY-5 OC-6 TPR-6 PBPY-7 OCF-7 TPRS-7 CU-8 SAPR-8 DD-8 HBPY-8 OCT-8 TPRT-8 TPRS-8 TPRS-9 HBPY-9"
	cases := map[string]string{
		"OC-7":            `unknown polyhedral symbol "OC-7"; there are ` + shapes + ` and ring-3 to ring-100`,
		"":                `unknown polyhedral symbol ""; there are ` + shapes + ` and ring-3 to ring-100`,
		"OC-6,Xx":         `ideal:OC-6,Xx: unknown element "Xx"; ` + wantPolyhedron.String(),
		"OC-6,Co,N,":      `ideal:OC-6,Co,N,: the distance is ""; ` + wantPolyhedron.String(),
		"OC-6,Co,N,long":  `ideal:OC-6,Co,N,long: the distance is "long"; ` + wantPolyhedron.String(),
		"OC-6,Co,N,NaN":   `ideal:OC-6,Co,N,NaN: the distance is "NaN"; ` + wantPolyhedron.String(),
		"OC-6,Co,N,-1.96": `ideal:OC-6,Co,N,-1.96: the distance is -1.96 Å; it must lie between 0.3 and 100 Å`,
		"OC-6,Co,N,1e308": `ideal:OC-6,Co,N,1e308: the distance is 1e308 Å; it must lie between 0.3 and 100 Å`,
		"OC-6,Co,N,2,3":   `ideal:OC-6,Co,N,2,3: too many parts; ` + wantPolyhedron.String(),
		"ring-1000":       `ideal:ring-1000: a ring has 3 to 100 atoms, not "1000"; ` + wantRing.String(),
		"ring-x":          `ideal:ring-x: a ring has 3 to 100 atoms, not "x"; ` + wantRing.String(),
		"ring-6,C,1.4,2":  `ideal:ring-6,C,1.4,2: too many parts; ` + wantRing.String(),
	}
	for text, want := range cases {
		if m, err := Ideal(text); err == nil || err.Error() != want {
			t.Errorf("%q: %+v,\n got %v\nwant %s", text, m, err, want)
		}
	}
}

func FuzzIdeal(f *testing.F) {
	for _, s := range []string{"OC-6", "OC-6,Co,N,1.96", "ring-5,C", "ring-100,Au,0.3", "hbpy-9,u,o,1D0", "ring-", ",,,"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		m, err := Ideal(text)
		if err != nil {
			if utf8.ValidString(text) {
				holdsOneLine(t, err.Error())
			}
			return
		}
		if i, j, bad := onOneSpot(m.Atoms, MinDistance); bad {
			t.Errorf("%q: atoms %d and %d lie on one spot", text, i+1, j+1)
		}
		again, err := Ideal(strings.TrimPrefix(m.Title, "ideal:"))
		if err != nil || again.Title != m.Title || len(again.Atoms) != len(m.Atoms) {
			t.Errorf("%q makes %q, which makes %+v, %v", text, m.Title, again, err)
		}
	})
}
