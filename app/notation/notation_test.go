package notation

import "testing"

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
