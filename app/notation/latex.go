package notation

import (
	"strings"
	"unicode"
)

// LaTeX writes t as the inside of a formula (math mode, without dollar
// signs): italic runs as variables, upright ones in \mathrm, words in \mbox,
// roots and cosines as such. Only commands of LaTeX's base are used.
func (t Text) LaTeX() string {
	var b strings.Builder
	for i := 0; i < len(t); {
		j, body := i, ""
		for ; j < len(t) && t[j].Place == t[i].Place; j++ {
			body += latexRun(t[j])
		}
		switch t[i].Place {
		case Sub:
			body = "_{" + body + "}"
		case Super:
			body = "^{" + body + "}"
		}
		b.WriteString(body)
		i = j
	}
	return b.String()
}

func latexRun(r Run) string {
	switch {
	case r.Italic:
		return latexFormula(r.Text)
	case isProse(r.Text):
		return `\mbox{` + LaTeXWords(r.Text) + `}`
	case strings.ContainsFunc(strings.ReplaceAll(r.Text, "cos", ""), isLatin):
		return `\mathrm{` + latexLetters.Replace(r.Text) + `}`
	}
	return latexFormula(r.Text)
}

// isLatin tells the letters that math mode would slant.
func isLatin(r rune) bool { return r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z' }

// isProse tells whether a run has words with blanks between, which math mode
// would swallow.
func isProse(s string) bool {
	return strings.Contains(s, " ") && strings.ContainsFunc(strings.ReplaceAll(s, "cos", ""), isLatin)
}

// latexFormula writes numbers in closed form: √3/2, √(5 + √5), 2cos(2π/7).
func latexFormula(s string) string {
	before, under, rest, found := cutRoot(s)
	out := latexLetters.Replace(before)
	if !found {
		return out
	}
	return out + `\sqrt{` + latexFormula(under) + `}` + latexFormula(rest)
}

// cutRoot cuts a formula at its first root into what stands before it, what
// stands under it, digits or what is in brackets, and the rest.
func cutRoot(s string) (before, under, rest string, found bool) {
	before, after, found := strings.Cut(s, "√")
	if strings.HasPrefix(after, "(") {
		end := closing(after)
		return before, after[1:end], strings.TrimPrefix(after[end:], ")"), found
	}
	under = leadingDigits(after)
	return before, under, after[len(under):], found
}

// closing is the place of the bracket that closes the first one; the length of
// s where there is none.
func closing(s string) int {
	depth := 0
	for i, r := range s {
		switch r {
		case '(':
			depth++
		case ')':
			if depth--; depth == 0 {
				return i
			}
		}
	}
	return len(s)
}

// latexLetters writes in math mode the signs that this program prints. The
// superscript digits occur only within indices.
var latexLetters = strings.NewReplacer(
	"′", "'", "″", "''", "‴", "'''", "−", "-",
	"²", "^2", "³", "^3", "cos", `\cos `,
	"σ", `\sigma `, "π", `\pi `, "δ", `\delta `, "φ", `\varphi `, "γ", `\gamma `, "ψ", `\psi `,
	"Σ", `\Sigma `, "Π", `\Pi `, "Δ", `\Delta `, "Φ", `\Phi `, "Γ", `\Gamma `,
	"∞", `\infty `, "∥", `\parallel `, "⊥", `\perp `, "½", `\frac{1}{2}`, "°", `^\circ `,
	"·", `\cdot `, "±", `\pm `, "≤", `\le `, "≥", `\ge `, "≈", `\approx `, "√", `\surd `, "×", `\times `,
	"→", `\to `, "⇒", `\Rightarrow `, "…", `\ldots `, "⊕", `\oplus `, "Å", `\mbox{\AA}`,
	`\`, `\backslash `, "{", `\{`, "}", `\}`, "$", `\$`, "~", `\sim `, "^", `\wedge `,
	"%", `\%`, "#", `\#`, "&", `\&`, "_", `\_`)

// LaTeXWords writes a sentence, a name or a title outside of formulas. What
// LaTeX would take for commands is escaped; signs that its text typefaces lack
// become formulas. Letters with accents stay: LaTeX reads UTF-8.
func LaTeXWords(s string) string {
	var b strings.Builder
	if before, under, rest, found := cutRoot(s); found && under != "" {
		return LaTeXWords(before) + `$\sqrt{` + latexFormula(under) + `}$` + LaTeXWords(rest)
	}
	for _, r := range s {
		c := string(r)
		switch escaped, special := latexSpecial[r]; {
		case special:
			b.WriteString(escaped)
		case unicode.IsControl(r):
			b.WriteByte(' ')
		default:
			if math := latexLetters.Replace(c); math != c {
				c = "$" + strings.TrimRight(math, " ") + "$"
			}
			b.WriteString(c)
		}
	}
	return b.String()
}

var latexSpecial = map[rune]string{
	'\\': `\textbackslash{}`, '{': `\{`, '}': `\}`, '$': `\$`, '&': `\&`, '#': `\#`, '%': `\%`, '_': `\_`,
	'^': `\textasciicircum{}`, '~': `\textasciitilde{}`, '<': `$<$`, '>': `$>$`, '|': `$|$`,
	'Å': `\AA{}`, '…': `\ldots{}`, '–': `--`, '²': `$^2$`, '³': `$^3$`,
}
