package notation

import (
	"math"
	"strings"
	"testing"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/assets"
	"lobewright/orbitals"
	"lobewright/symmetry"
)

// brief writes a Text with _ before what is lowered, ^ before what is raised
// and * around what is italic.
func brief(t Text) string {
	s := ""
	for _, r := range t {
		body := r.Text
		if r.Italic {
			body = "*" + body + "*"
		}
		switch r.Place {
		case Sub:
			body = "_[" + body + "]"
		case Super:
			body = "^[" + body + "]"
		}
		s += body
	}
	return s
}

func TestLabelsAreSetWithRealIndices(t *testing.T) {
	for _, c := range []struct {
		set         func(string) Text
		in          string
		want, latex string
	}{
		{Irrep, "A1g", "A_[1g]", `\mathrm{A}_{\mathrm{1g}}`},
		{Irrep, "E''", "E″", `\mathrm{E''}`},
		{Irrep, "A1'", "A_[1]′", `\mathrm{A}_{1}'`},
		{Irrep, "Σg+", "Σ_[g]^[+]", `\Sigma _{\mathrm{g}}^{+}`},
		{Irrep, "Σ-", "Σ^[−]", `\Sigma ^{-}`},
		{Irrep, "Πu", "Π_[u]", `\Pi _{\mathrm{u}}`},
		{OrbitalText, "T2u", "t_[2u]", `\mathrm{t}_{\mathrm{2u}}`},
		{OrbitalText, "Σg+", "σ_[g]^[+]", `\sigma _{\mathrm{g}}^{+}`},
		{Group, "D4h", "*D*_[4h]", `D_{\mathrm{4h}}`},
		{Group, "C∞v", "*C*_[∞v]", `C_{\mathrm{\infty v}}`},
		{Operation, "E", "*E*", `E`},
		{Operation, "C3^2(z)", "*C*_[3]^[2](*z*)", `C_{3}^{2}(z)`},
		{Operation, "S10^3(1)", "*S*_[10]^[3](1)", `S_{10}^{3}(1)`},
		{Operation, "C2''(2)", "*C*_[2]″(2)", `C_{2}''(2)`},
		{Operation, "σv'(yz)", "*σ*_[v]′(*yz*)", `\sigma _{\mathrm{v}}'(yz)`},
		{Operation, "12S10^3", "12*S*_[10]^[3]", `12S_{10}^{3}`},
		{Operation, "3C2(=C4^2)", "3*C*_[2](=*C*_[4]^[2])", `3C_{2}(=C_{4}^{2})`},
		{Function, "dx2-y2", "d_[*x*]_[²−]_[*y*]_[²]", `\mathrm{d}_{x^2-y^2}`},
		{Function, "pi1", "π_[1]", `\pi _{1}`},
		{Polynomial, "-2xy", "−2*xy*", `-2xy`},
		{Polynomial, "Rz", "*R*_[*z*]", `R_{z}`},
		{Polynomial, "z(x2-y2)", "*z*(*x*^[2]−*y*^[2])", `z(x^{2}-y^{2})`},
	} {
		got := c.set(c.in)
		if brief(got) != c.want {
			t.Errorf("%s: set as %s, want %s", c.in, brief(got), c.want)
		}
		if got.LaTeX() != c.latex {
			t.Errorf("%s: LaTeX %s, want %s", c.in, got.LaTeX(), c.latex)
		}
	}
}

func TestCombinationsAreWrittenAsSums(t *testing.T) {
	terms := []orbitals.Term{{Function: 0, Coefficient: -0.5}, {Function: 2, Coefficient: 1e-17}, {Function: 3, Coefficient: math.Sqrt(3) / 2}, {Function: 9, Coefficient: -1}}
	for _, c := range []struct {
		write Coefficient
		want  string
	}{{ExactCoefficient, "−1/2 φ1 + √3/2 φ4 − φ10"}, {DecimalCoefficient, "−0.500 φ1 + 0.866 φ4 − φ10"}} {
		if got := strings.Join(Combination(terms, c.write), " "); got != c.want {
			t.Errorf("written %q, want %q", got, c.want)
		}
	}
	if got := strings.Join(Combination(nil, ExactCoefficient), " "); got != "0" {
		t.Errorf("an empty sum is written %q", got)
	}
}

func TestContentCountsCopies(t *testing.T) {
	if got := Content([]string{"A1'", "A2'", "E'"}, []int{2, 0, 1}); got != "2A1' + E'" {
		t.Errorf("content %q", got)
	}
}

func TestSentencesSetAxesAndOperations(t *testing.T) {
	got := brief(Sentence("z along C4; x along the C2′ through most atoms, xz is the σv plane"))
	want := "*z* along *C*_[4]; *x* along the *C*_[2]′ through most atoms, *xz* is the *σ*_[v] plane"
	if got != want {
		t.Errorf("set as %s", got)
	}
	got, want = brief(Sentence("x between them (along the C2, which is C2″); längs der drei C4-Achsen")),
		"*x* between them (along the *C*_[2], which is *C*_[2]″); längs der drei *C*_[4]-Achsen"
	if got != want {
		t.Errorf("set as %s", got)
	}
}

// TestConventionsSetNamesOfAtomsUpright has an axis and an atom of one name.
func TestConventionsSetNamesOfAtomsUpright(t *testing.T) {
	fit, err := symmetry.Detect([]symmetry.Point{ // formaldehyde
		{Kind: 8, Position: mgl64.Vec3{0, 0, -1.2}}, {Kind: 6}, {Kind: 1, Position: mgl64.Vec3{0, 0.94, 0.59}}, {Kind: 1, Position: mgl64.Vec3{0, -0.94, 0.59}},
	}, nil, symmetry.Options{})
	if err != nil {
		t.Fatal(err)
	}
	for language, want := range map[assets.Language]string{
		assets.English: "*z* along *C*_[2], +z toward C2",
		assets.German:  "*z* längs *C*_[2], +z zu C2 hin",
	} {
		texts := ConventionTexts(assets.TextsIn(language), fit, []string{"O1", "C2", "H3", "H4"}, false)
		if got := brief(texts[0]); got != want {
			t.Errorf("got  %s\nwant %s", got, want)
		}
	}
}

func TestAPolynomialIsLikerThanARotation(t *testing.T) {
	for _, c := range []struct {
		functions []string
		want      int
	}{{[]string{"Rx", "yz"}, 1}, {[]string{"z", "Rz"}, 0}, {[]string{"−2Rz+Rx+Ry"}, 0}} {
		if got := Likest(c.functions); got != c.want {
			t.Errorf("of %v number %d is taken, not %d", c.functions, got, c.want)
		}
	}
}

func TestClosedFormsHaveLoweredNumbers(t *testing.T) {
	form, ok := orbitals.FindClosedForm([]float64{2 / math.Sqrt(6), -1 / math.Sqrt(6), -1 / math.Sqrt(6)})
	if !ok {
		t.Fatal("no closed form")
	}
	if got := brief(ClosedForm(form)); got != "(2*φ*_[1] − *φ*_[2] − *φ*_[3])/√6" {
		t.Errorf("set as %s", got)
	}
}

// The images of partners under turns by 36° hold (1 + √5)/4 beside √(10 − 2√5)/4,
// which is cos 3π/10: one line has one kind of numbers.
func TestASumHasOneKindOfNumbers(t *testing.T) {
	turned := func(angle float64) []orbitals.Term {
		return []orbitals.Term{{Function: 0, Coefficient: math.Cos(angle)}, {Function: 1, Coefficient: -math.Sin(angle)}}
	}
	for _, c := range []struct {
		terms []orbitals.Term
		want  string
	}{
		{turned(math.Pi / 5), "cos(π/5) φ1 − cos(3π/10) φ2"},
		{turned(math.Pi / 3), "1/2 φ1 − √3/2 φ2"},
		{turned(math.Pi / 4), "√2/2 φ1 − √2/2 φ2"},
		{turned(1), "0.540 φ1 − 0.841 φ2"},
		{[]orbitals.Term{{Function: 0, Coefficient: (1 + math.Sqrt(5)) / 4}, {Function: 1, Coefficient: -0.5}}, "(1 + √5)/4 φ1 − 1/2 φ2"},
		{[]orbitals.Term{{Function: 0, Coefficient: 0.5}, {Function: 1, Coefficient: 0.123}}, "0.500 φ1 + 0.123 φ2"},
	} {
		if got := CombinationText(c.terms, PhiText, OneKind(c.terms)).String(); got != c.want {
			t.Errorf("written %q, want %q", got, c.want)
		}
	}
}
