package sheet

import (
	"bytes"
	"fmt"
	"image"
	"image/color"
	"math"
	"regexp"
	"slices"
	"strings"
	"testing"

	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/assets"
	"lobewright/orbitals/structure"
	"lobewright/render"
)

func newWork() *work.Work { return work.New(structure.Inputs{Demo: assets.Demos()}) }

func sheetOf(t testing.TB, s study.Study) *Sheet {
	t.Helper()
	out, err := Make(t.Context(), newWork(), s)
	if err != nil {
		t.Fatalf("%+v: %v", s.Figure, err)
	}
	return out
}

// kinds are sheets of every kind of many structures.
var kinds = map[string]study.Study{
	"molecule":         {Structure: "demo:water"},
	"elements":         {Structure: "demo:octahedron", Figure: study.Figure{Sheet: Molecule}},
	"elements, linear": {Structure: "demo:rod", Figure: study.Figure{Sheet: Molecule}},
	"element":          {Structure: "demo:furan", Operation: "σv(xz)"},
	"one":              {Structure: "demo:square-plane", Basis: []string{"Cl:sigma"}, Projection: study.Projection{Irrep: "Eu", Partner: 2}},
	"one, cage":        {Structure: "demo:cage", Basis: []string{"C:s"}, Projection: study.Projection{Irrep: "T1u"}},
	"set":              {Structure: "demo:sandwich-staggered", Basis: []string{"C:pz"}, Projection: study.Projection{Irrep: "E1u"}, Figure: study.Figure{Sheet: Set}},
	"all":              {Structure: "demo:octahedron", Basis: []string{"C:sigma", "C:pi"}},
	"all, small":       {Structure: "demo:water", Basis: []string{"H:s", "O:s,p"}},
	"all, linear":      {Structure: "demo:rod", Basis: []string{"N:p"}},
	"all, d":           {Structure: "demo:dimer", Basis: []string{"Re:d"}},
	"operations":       {Structure: "demo:square-plane", Basis: []string{"Cl:sigma"}, Figure: study.Figure{Sheet: Operations}},
	"operations, e": {Structure: "demo:benzene", Basis: []string{"C:pz"}, Projection: study.Projection{Irrep: "E1g"},
		Figure: study.Figure{Sheet: Operations}},
	"operations, linear": {Structure: "demo:rod", Basis: []string{"N:p"}, Angle: 40, Figure: study.Figure{Sheet: Operations}},
	"frames":             {Structure: "demo:square-plane", Held: study.Held{Frame: "x-between"}, Figure: study.Figure{Sheet: Frames}},
	"frames, orbital": {Structure: "demo:water", Basis: []string{"H:s"}, Projection: study.Projection{Irrep: "B2"},
		Held: study.Held{Frame: "plane-xz"}, Figure: study.Figure{Sheet: Frames}},
	"two triads":          {Structure: "demo:square-plane", Held: study.Held{Frame: "x-between"}},
	"two triads, orbital": {Structure: "demo:water", Basis: []string{"O:p"}, Projection: study.Projection{Irrep: "B1"}, Held: study.Held{Frame: "plane-xz"}},
	"descent":             {Structure: "demo:octahedron", Basis: []string{"C:sigma"}, Subgroup: "D4h", Figure: study.Figure{Sheet: Descent}},
	"descent, bare":       {Structure: "demo:tetrahedron", Subgroup: "C3v", Figure: study.Figure{Sheet: Descent}},
	"descent, linear":     {Structure: "demo:rod", Basis: []string{"N:p"}, Subgroup: "D2h", Figure: study.Figure{Sheet: Descent}},
	"levels":              {Structure: "demo:tetrahedron", Basis: []string{"Cl:sigma"}, Figure: study.Figure{Sheet: Levels}},
	"levels, placed": {Structure: "demo:octahedron", Basis: []string{"C:sigma"}, Figure: study.Figure{Sheet: Levels},
		Levels: []study.Level{{Side: "group", Irrep: "A1g", Height: 30}, {Side: "group", Irrep: "Eg", Height: 30}, {Side: "central", Irrep: "A1g", Height: 95}}},
}

// variants change what is common to all kinds.
var variants = map[string]func(*study.Study){
	"":         func(*study.Study) {},
	"serif":    func(s *study.Study) { s.Figure.Font = "serif"; s.Figure.NoLetters = true },
	"printed":  func(s *study.Study) { s.Look.Signs = "printed"; s.Look.Shape = "polar"; s.Figure.Language = "de" },
	"hatching": func(s *study.Study) { s.Look.Signs = "hatching"; s.Look.Style = "ink" },
	"bare":     func(s *study.Study) { s.Figure.NoCard, s.Figure.NoLegend, s.Figure.NoCoefficients = true, true, true },
}

// overlaps tells whether two rectangles share more than rounding.
func overlaps(a, b Rect) bool {
	const slack = 1e-6
	return a.X < b.X+b.W-slack && b.X < a.X+a.W-slack && a.Y < b.Y+b.H-slack && b.Y < a.Y+a.H-slack
}

func within(inner, outer Rect) bool {
	const slack = 1e-6
	return inner.X >= outer.X-slack && inner.Y >= outer.Y-slack && inner.X+inner.W <= outer.X+outer.W+slack && inner.Y+inner.H <= outer.Y+outer.H+slack
}

// faults tells what overlaps or is cut off. Names within a panel are for the
// tests of package picture; here they only have to lie within it.
func faults(t *testing.T, s *Sheet) []string {
	t.Helper()
	fonts, err := s.Fonts()
	if err != nil {
		t.Fatal(err)
	}
	var out []string
	page := Rect{0, 0, s.Width, s.Height}
	var texts, panels []Rect
	var said []string
	for _, item := range s.Items {
		box := Box(item, fonts)
		if !within(box, page) {
			out = append(out, fmt.Sprintf("%T at %+v is cut off", item, box))
		}
		switch item := item.(type) {
		case Text:
			words := ""
			for _, r := range item.Runs {
				words += r.Text
			}
			texts, said = append(texts, box), append(said, words)
		case *Panel:
			for _, p := range panels {
				if overlaps(box, p) {
					out = append(out, fmt.Sprintf("two panels overlap: %+v and %+v", box, p))
				}
			}
			panels = append(panels, box)
		}
	}
	for i, a := range texts {
		for k, b := range texts[:i] {
			if overlaps(a, b) {
				out = append(out, fmt.Sprintf("%q and %q overlap", said[i], said[k]))
			}
		}
		for _, p := range panels {
			if overlaps(a, p) && !within(a, p) {
				out = append(out, fmt.Sprintf("%q stands half in a panel", said[i]))
			}
		}
	}
	return out
}

// widths are from the narrowest column to the widest page.
var widths = []float64{40, 55, 85, 180}

func TestNothingOverlapsOrIsCutOff(t *testing.T) {
	for name, s := range kinds {
		t.Run(name, func(t *testing.T) {
			w := newWork()
			for _, width := range widths {
				for variant, change := range variants {
					if variant != "" && width != 85 {
						continue
					}
					s := s
					s.Figure.Width = width
					change(&s)
					sheet, err := Make(t.Context(), w, s)
					if err != nil {
						t.Errorf("%g mm, %s: %v", width, variant, err)
						continue
					}
					if sheet.Width != width {
						t.Errorf("%g mm: the sheet is %g mm wide", width, sheet.Width)
					}
					for _, f := range faults(t, sheet) {
						t.Errorf("%g mm, %s: %s", width, variant, f)
					}
				}
			}
		})
	}
}

func TestBodiesAreNotCutOffByTheirPanels(t *testing.T) {
	const dpi = 100
	for name, s := range kinds {
		for _, shape := range []string{"contour", "square"} {
			if shape == "square" && name != "set" {
				continue
			}
			s.Figure.Width, s.Look.Shape = 120, shape
			seen := map[string]bool{}
			for _, item := range sheetOf(t, s).Items {
				p, ok := item.(*Panel)
				if !ok || seen[p.Name] || len(seen) > 3 {
					continue
				}
				seen[p.Name] = true
				img, err := p.Paint(t.Context(), dpi)
				if err != nil {
					t.Fatal(err)
				}
				w, h := img.Rect.Dx(), img.Rect.Dy()
				ground := color.RGBA{0xFC, 0xFB, 0xF8, 0xFF}
				for k := range 2 * (w + h) {
					x, y := k%w, (k/w%2)*(h-1)
					if k >= 2*w {
						x, y = (k-2*w)/h*(w-1), (k-2*w)%h
					}
					if img.RGBAAt(x, y) != ground {
						t.Errorf("%s, %s: %s reaches the rim of its panel at %d, %d of %d × %d", name, shape, p.Name, x, y, w, h)
						break
					}
				}
			}
		}
	}
}

func TestSlidesAreOfTheirShapeAndNothingOverlaps(t *testing.T) {
	for name, s := range kinds {
		for _, width := range []float64{0, 254} {
			if width > 0 && name != "levels" && name != "all" {
				continue
			}
			s.Figure.Slide, s.Figure.Width = true, width
			sheet, err := Make(t.Context(), newWork(), s)
			if err != nil {
				t.Errorf("%s: %v", name, err)
				continue
			}
			if math.Abs(sheet.Width*9-sheet.Height*16) > 0.01 {
				t.Errorf("%s: %g × %g mm is not 16:9", name, sheet.Width, sheet.Height)
			}
			for _, f := range faults(t, sheet) {
				t.Errorf("%s: %s", name, f)
			}
		}
	}
}

// scaleOf is the number of millimetres an ångström takes at the target.
func scaleOf(p *Panel) float64 {
	c := p.Camera
	if c.Height != 0 {
		return p.H / c.Height
	}
	return p.H / (2 * c.Eye.Sub(c.Target).Len() * math.Tan(c.FovY/2))
}

func TestAllPanelsOfASheetHaveOneScale(t *testing.T) {
	for name, s := range kinds {
		s.Figure.Width = 120
		first := 0.0
		for _, item := range sheetOf(t, s).Items {
			p, ok := item.(*Panel)
			if !ok {
				continue
			}
			scale := scaleOf(p)
			if first == 0 {
				first = scale
			}
			if math.Abs(scale-first) > 1e-9*first {
				t.Errorf("%s: panels at %.4f and %.4f mm an ångström", name, first, scale)
			}
		}
	}
}

func TestTheSameStudyGivesTheSameSheet(t *testing.T) {
	s := kinds["one"]
	a, b := paint(t, sheetOf(t, s), 100), paint(t, sheetOf(t, s), 100)
	if !bytes.Equal(a.Pix, b.Pix) {
		t.Error("two sheets of one study differ")
	}
}

func TestThePartnersOfAGroupOrbitalStandInOneRow(t *testing.T) {
	s := kinds["set"]
	s.Figure.Width = 120
	var heights []float64
	for _, item := range sheetOf(t, s).Items {
		if p, ok := item.(*Panel); ok && strings.HasPrefix(p.Name, "e1u") {
			heights = append(heights, p.Y)
		}
	}
	if len(heights) != 2 || heights[0] != heights[1] {
		t.Errorf("panels at the heights %v", heights)
	}
}

func TestASheetOfAllHasARowForEachIrrepAndAColumnForEachPartner(t *testing.T) {
	s := kinds["all"]
	s.Figure.Width = 180
	rows := map[string]map[float64]int{} // by irrep, how many panels at a height
	lines := map[float64]string{}
	n := 0
	for _, item := range sheetOf(t, s).Items {
		p, ok := item.(*Panel)
		if !ok || p.Name == "the atoms and their names" {
			continue
		}
		n++
		irrep, _, _ := strings.Cut(p.Name, " ")
		if rows[irrep] == nil {
			rows[irrep] = map[float64]int{}
		}
		rows[irrep][p.Y]++
		if other, taken := lines[p.Y]; taken && other != irrep {
			t.Errorf("%s and %s share a row", irrep, other)
		}
		lines[p.Y] = irrep
	}
	if n != 18 || len(rows) != 6 {
		t.Errorf("%d panels of %d irreps", n, len(rows))
	}
	for irrep, at := range rows {
		for _, columns := range at {
			if dimension := map[byte]int{'a': 1, 'e': 2, 't': 3}[irrep[0]]; columns%dimension != 0 {
				t.Errorf("%s: a row of %d", irrep, columns)
			}
		}
	}
}

func TestEveryPanelOfALargeSheetHasItsLetter(t *testing.T) {
	s := sheetOf(t, study.Study{Structure: "demo:cage", Basis: []string{"C:s"}})
	text := map[string]bool{}
	for _, item := range s.Items {
		if t, ok := item.(Text); ok && len(t.Runs) > 0 {
			text[t.Runs[0].Text] = true
		}
	}
	for n := range 60 {
		if letter := letterOf(n); !text[letter] {
			t.Errorf("the letter %s is missing", letter)
		}
	}
}

func TestAStripHasAPanelForEachOperationByClass(t *testing.T) {
	s := study.Study{Structure: "demo:octahedron", Basis: []string{"C:sigma"}, Figure: study.Figure{Sheet: Operations, Width: 180}}
	g, err := newWork().Group(t.Context(), s)
	if err != nil {
		t.Fatal(err)
	}
	var names []string
	for _, item := range sheetOf(t, s).Items {
		if p, ok := item.(*Panel); ok && p.Name != "the atoms and their names" {
			names = append(names, p.Name)
		}
	}
	if len(names) != 48 {
		t.Fatalf("%d panels", len(names))
	}
	for i, op := range g.Fit.Setting.Operations {
		if names[i] != op.Name {
			t.Errorf("panel %d shows %s, want %s", i+1, names[i], op.Name)
		}
	}
}

func said(s *Sheet) string {
	var b strings.Builder
	for _, item := range s.Items {
		if text, ok := item.(Text); ok {
			for _, r := range text.Runs {
				b.WriteString(r.Text)
			}
			b.WriteString("\n")
		}
	}
	return b.String()
}

func TestSheetsSayWhatTheyShow(t *testing.T) {
	// Eg of Oh goes over into A1g + B1g of D4h (correlation tables of the
	// handbooks); C4 about z carries the ligand on +x to that on +y.
	for name, want := range map[string][]string{
		"one":            {"eu", "2 of 2", "(φ2 − φ4)/√2", "length of a lobe as |c|", "D4h: z along C4"},
		"all":            {"Γ = A1g + Eg + T1g + T2g + 2T1u + T2u"},
		"operations":     {"Where the operations carry φ1", "C4(z)", "φ1 → φ2", "2C2″"},
		"operations, e":  {"→ −ψ1", "Where the operations carry e1g, partner 1"},
		"descent":        {"Oh → D4h", "B1g", "A2u"},
		"levels":         {"evenly placed", "claim no energies", "s, p and d of Zn1"},
		"levels, placed": {"placed by hand", "claim no energies"},
		"frames":         {"B1g → B2g", "All irreps"},
		"elements":       {"4C3", "3C4", "6σd", "i"},
	} {
		s := kinds[name]
		s.Figure.Width = 180
		text := strings.ReplaceAll(said(sheetOf(t, s)), "\u00a0", " ")
		for _, w := range want {
			if w == "All irreps" {
				if strings.Contains(text, w) {
					t.Errorf("%s: says that all irreps keep their names", name)
				}
				continue
			}
			if !strings.Contains(text, w) {
				t.Errorf("%s: does not say %q:\n%s", name, w, text)
			}
		}
	}
}

func TestSheetsSpeakTheLanguageOfTheirFigure(t *testing.T) {
	english := regexp.MustCompile(`(?i)\b(the|of|on|and|with|along|rule|axis|axes|are|atoms|orbitals?|as|levels|irreps|operations|carry|copy|left|longest|there|most)\b`)
	for name, s := range kinds {
		s.Figure.Language, s.Look.Displacements = "de", true
		s.Figure.Width = 140
		made := sheetOf(t, s)
		all := append([]string{said(made), made.Title}, made.Notes...)
		for _, item := range made.Items {
			if p, ok := item.(*Panel); ok {
				all = append(all, p.Name)
			}
		}
		group, err := newWork().Group(t.Context(), s)
		if err != nil {
			t.Fatal(err)
		}
		for _, text := range all {
			text = strings.ReplaceAll(text, group.Molecule.Title, "")
			if found := english.FindString(text); found != "" {
				t.Errorf("%s says %q in %q", name, found, text)
			}
		}
	}
}

func TestTiesJoinLevelsOfOneSymmetry(t *testing.T) {
	// σ of four ligands in Td: A1 + T2; s is A1, p and d hold a T2 each.
	s := kinds["levels"]
	s.Figure.Width = 120
	dashed := 0
	for _, item := range sheetOf(t, s).Items {
		if l, ok := item.(Line); ok && len(l.Dash) > 0 {
			dashed++
		}
	}
	if dashed != 3 {
		t.Errorf("%d tie lines, want 3", dashed)
	}
}

func TestLevelsStandAtTheHeightThatIsSet(t *testing.T) {
	s := kinds["levels, placed"]
	s.Figure.Width = 120
	var levels []float64
	for _, item := range sheetOf(t, s).Items {
		if l, ok := item.(Line); ok && l.Width == levelWidth {
			levels = append(levels, l.Points[0][1])
		}
	}
	// a1g and eg of the ligands (1 + 2 lines) at one height, t1u elsewhere.
	if len(levels) < 6 || levels[0] != levels[1] || levels[1] != levels[2] || levels[3] == levels[0] {
		t.Errorf("levels at %v", levels)
	}
}

func TestGroundsAndLooksAreWhatTheyAreCalled(t *testing.T) {
	for ground, want := range map[string]color.RGBA{
		"":            {0xFC, 0xFB, 0xF8, 0xFF},
		"white":       {0xFF, 0xFF, 0xFF, 0xFF},
		"dark":        {0x14, 0x16, 0x1A, 0xFF},
		"transparent": {0, 0, 0, 0},
	} {
		for _, style := range []string{"", "ink"} {
			s := kinds["molecule"]
			s.Look = study.Look{Ground: ground, Style: style}
			img := paint(t, sheetOf(t, s), 72)
			panel := image.Point{}
			for _, item := range sheetOf(t, s).Items {
				if p, ok := item.(*Panel); ok {
					panel = p.Pixels(72).Min.Add(image.Pt(1, 1))
				}
			}
			for _, at := range []image.Point{{1, 1}, panel} {
				if got := img.RGBAAt(at.X, at.Y); got != want {
					t.Errorf("ground %q, look %q: at %v it is %v, want %v", ground, style, at, got, want)
				}
			}
		}
	}
}

func TestImpossibleSheetsAreRefused(t *testing.T) {
	for _, s := range []study.Study{
		{Structure: "demo:water", Figure: study.Figure{Height: 5}},
		{Structure: "demo:water", Figure: study.Figure{Width: 1e5}},
		{Structure: "demo:water", Figure: study.Figure{Width: 5}},
		{Structure: "demo:water", Operation: "C3(z)"},
		{Structure: "demo:water", Figure: study.Figure{Sheet: All}},
		{Structure: "demo:water", Figure: study.Figure{Sheet: Frames}},
		{Structure: "demo:water", Figure: study.Figure{Sheet: Descent}},
		{Structure: "demo:water", Subgroup: "D4h", Figure: study.Figure{Sheet: Descent}},
		{Structure: "demo:water", Subgroup: "Cs:9", Figure: study.Figure{Sheet: Descent}},
		{Structure: "demo:benzene", Basis: []string{"C:pz"}, Figure: study.Figure{Sheet: Levels}},
		{Structure: "demo:water", Basis: []string{"H:s"}, Projection: study.Projection{Function: 9}, Figure: study.Figure{Sheet: Operations}},
	} {
		if _, err := Make(t.Context(), newWork(), s); err == nil {
			t.Errorf("%+v: no error", s.Figure)
		} else if strings.Contains(err.Error(), "\n") {
			t.Errorf("more than one line: %v", err)
		}
	}
}

func TestATinyFigureIsMostlyPicture(t *testing.T) {
	s := kinds["one"]
	s.Figure.Width = 40
	sheet := sheetOf(t, s)
	for _, item := range sheet.Items {
		if p, ok := item.(*Panel); ok && p.H < 0.5*sheet.Height {
			t.Errorf("the panel is %.1f of %.1f mm high", p.H, sheet.Height)
		}
	}
}

func TestTheKeyHasTheView(t *testing.T) {
	var look render.Camera
	for i, item := range sheetOf(t, kinds["all, small"]).Items {
		p, ok := item.(*Panel)
		if !ok {
			continue
		}
		if i == 0 {
			look = p.Camera
		}
		if p.Camera.Eye != look.Eye || p.Camera.Target != look.Target {
			t.Errorf("%s is seen from %v", p.Name, p.Camera.Eye)
		}
	}
}

// What symmetry elements stay without a name is told.
func TestElementsWithoutANameAreTold(t *testing.T) {
	s := sheetOf(t, study.Study{Structure: "demo:octahedron", Operation: "C3(1)", Look: study.Look{Elements: true}})
	notes := strings.Join(s.Notes, "\n")
	if !strings.Contains(notes, "symmetry elements left without a name") || strings.Contains(notes, "C3(1)") {
		t.Errorf("notes: %q", notes)
	}
}

// A sketch of levels draws the functions of the central atom with the sign with
// which they bond, and names them so.
func TestLevelsFaceEachOtherInPhase(t *testing.T) {
	for name, want := range map[string][]string{
		"demo:sandwich-staggered C:pz": {"−s", "−dz2", "−dxz, −dyz", "dx2−y2, dxy", "−pz", "−px, −py"},
		"demo:square-plane Cl:sigma":   {"s", "−dz2", "dx2−y2", "px, py"},
	} {
		structure, basis, _ := strings.Cut(name, " ")
		text := strings.Split(said(sheetOf(t, study.Study{Structure: structure, Basis: []string{basis}, Figure: study.Figure{Sheet: Levels}})), "\n")
		for _, w := range want {
			if !slices.Contains(text, w) {
				t.Errorf("%s: %q is not said: %q", name, w, text)
			}
		}
	}
}
