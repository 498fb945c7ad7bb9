package notation

import "strings"

// LaTeX writes t as the inside of a formula (math mode, without dollar
// signs): italic runs as variables, upright ones in \mathrm. Only commands
// of LaTeX's base are used.
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
	body := latexLetters.Replace(r.Text)
	if !r.Italic && needsUpright(r.Text) {
		return `\mathrm{` + body + `}`
	}
	return body
}

// needsUpright tells whether a run has letters that math mode would slant.
func needsUpright(s string) bool {
	return strings.ContainsFunc(s, func(r rune) bool {
		return r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z' || r == ' '
	})
}

// latexLetters writes the signs that this program prints. The superscript
// digits occur only within indices.
var latexLetters = strings.NewReplacer(
	"′", "'", "″", "''", "‴", "'''", "−", "-",
	"²", "^2", "³", "^3",
	"σ", `\sigma `, "π", `\pi `, "δ", `\delta `, "φ", `\varphi `, "γ", `\gamma `,
	"Σ", `\Sigma `, "Π", `\Pi `, "Δ", `\Delta `, "Φ", `\Phi `, "Γ", `\Gamma `,
	"∞", `\infty `, "∥", `\parallel `, "⊥", `\perp `, "½", `\tfrac12 `, "°", `^\circ `,
	"·", `\cdot `, "±", `\pm `, "≤", `\le `, "≥", `\ge `, "√", `\surd `,
	"%", `\%`, "#", `\#`, "&", `\&`, "_", `\_`)
