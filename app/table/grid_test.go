package table

import (
	"encoding/csv"
	"math"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"lobewright/app/notation"
	"lobewright/orbitals"
)

func sample() Grid {
	g := Grid{
		Title: notation.Words("50 % of {this} & that").Then(notation.Words(" in "), notation.Group("D4h")),
		Head:  []Cell{Words("operation"), Words("image"), Words("weight")}, Align: []Align{Left, Left, Right},
	}
	g.Add(Operation("C3^2(z)"), Sum([]orbitals.Term{{Function: 0, Coefficient: 0.5}, {Function: 3, Coefficient: -math.Sqrt(3) / 2}}, notation.ExactCoefficient), Number(-math.Sqrt(3)/2))
	g.Add(Operation("σv'(yz)"), Sum([]orbitals.Term{{Function: 1, Coefficient: -1}}, notation.ExactCoefficient), Number(2*math.Cos(2*math.Pi/7)))
	g.Add(Words("a|b, \"c\""))
	g.Notes = []notation.Text{notation.Words("A_1 < B~2^3")}
	return g
}

func TestAGridIsWrittenInEachFormat(t *testing.T) {
	for format, want := range map[Format]string{
		FormatText: "50 % of {this} & that in D4h\n" +
			"  operation  image               weight\n" +
			"  C3^2(z)    1/2 φ1 − √3/2 φ4     −√3/2\n" +
			"  σv'(yz)    −φ2              2cos(2π/7)\n" +
			"  a|b, \"c\"\n" +
			"  A_1 < B~2^3\n",
		FormatCSV: "operation,image,weight\n" +
			"C3^2(z),1/2 φ1 − √3/2 φ4,-0.8660254037844386\n" +
			"σv'(yz),−φ2,1.2469796037174672\n" +
			"\"a|b, \"\"c\"\"\",,\n",
		FormatMarkdown: "50 % of {this} &amp; that in *D*<sub>4h</sub>\n\n" +
			"| operation | image | weight |\n" +
			"| --- | --- | ---: |\n" +
			"| *C*<sub>3</sub><sup>2</sup>(*z*) | 1/2 *φ*<sub>1</sub> − √3/2 *φ*<sub>4</sub> | −√3/2 |\n" +
			"| *σ*<sub>v</sub>′(*yz*) | −*φ*<sub>2</sub> | 2cos(2π/7) |\n" +
			"| a\\|b, \"c\" |  |  |\n" +
			"\nA\\_1 &lt; B\\~2^3\n",
		FormatLaTeX: "% The table needs no package.\n50 \\% of \\{this\\} \\& that in $D_{\\mathrm{4h}}$\n\n" +
			"\\begin{tabular}{llr}\n\\hline\noperation & image & weight \\\\\n\\hline\n" +
			"$C_{3}^{2}(z)$ & $1/2 \\varphi _{1} - \\sqrt{3}/2 \\varphi _{4}$ & $-\\sqrt{3}/2$ \\\\\n" +
			"$\\sigma _{\\mathrm{v}}'(yz)$ & $-\\varphi _{2}$ & $2\\cos (2\\pi /7)$ \\\\\n" +
			"a$|$b, \"c\" \\\\\n\\hline\n\\end{tabular}\n\nA\\_1 $<$ B\\textasciitilde{}2\\textasciicircum{}3\n",
	} {
		if got := sample().As(format); strings.Join(strings.Fields(got), " ") != strings.Join(strings.Fields(want), " ") {
			t.Errorf("%s:\n%s\nwant\n%s", format, got, want)
		}
	}
}

// Whatever a title or a name holds, LaTeX reads text from it and no commands:
// brackets and dollars pair up, and no character is left that would act.
func TestNoNameActsInLaTeX(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		words := rapid.StringOf(rapid.RuneFrom([]rune(`\{}$&#%_^~<>|"[]ab 12σπφ√−²°Å…→`))).Draw(r, "words")
		got := notation.LaTeXWords(words)
		for _, command := range []string{`\textbackslash{}`, `\textasciicircum{}`, `\textasciitilde{}`, `\ldots{}`, `\AA{}`, `\{`, `\}`, `\$`, `\&`, `\#`, `\%`, `\_`, `$^2$`, `$^\circ$`} {
			got = strings.ReplaceAll(got, command, "")
		}
		depth := 0
		for i, part := range strings.Split(got, "$") {
			if i%2 == 0 && strings.ContainsAny(part, `\{}&#%_^~`) {
				r.Fatalf("%q leaves %q outside of formulas", words, part)
			}
			depth = i
		}
		if depth%2 != 0 {
			r.Fatalf("%q leaves a formula open: %q", words, got)
		}
	})
}

func TestNumbersInCSVAreReadBackToTheLastBit(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		x := rapid.Float64Range(-1e3, 1e3).Draw(r, "x")
		g := Grid{Head: []Cell{Words("a,b\nc"), Words("x")}}
		g.Add(Words(rapid.String().Draw(r, "name")), Number(x))
		records, err := csv.NewReader(strings.NewReader(g.CSV())).ReadAll()
		if err != nil {
			r.Fatal(err)
		}
		if got, err := strconv.ParseFloat(records[1][1], 64); err != nil || got != x {
			r.Fatalf("%v is read back as %v, %v", x, got, err)
		}
	})
}

func TestRootsInLaTeXReachOverWhatStandsUnderThem(t *testing.T) {
	for plain, want := range map[string]string{
		"√(5 + √5)/4": `\sqrt{5 + \sqrt{5}}/4`, "3√2": `3\sqrt{2}`, "(1 + √5)/2": `(1 + \sqrt{5})/2`, "√(": `\sqrt{}`, "cos(π/9)": `\cos (\pi /9)`,
	} {
		if got := notation.Words(plain).LaTeX(); got != want {
			t.Errorf("%s is written %s, want %s", plain, got, want)
		}
	}
}

func TestBlankColumnsOfAGridAreDropped(t *testing.T) {
	g := Grid{Head: []Cell{Words("a"), Words("b"), Words("c")}, Align: []Align{Right, Left, Right}}
	g.Add(Whole(1), Cell{}, Whole(3))
	if got, want := g.WithoutBlankColumns().CSV(), "a,c\n1,3\n"; got != want {
		t.Errorf("%q", got)
	}
}
