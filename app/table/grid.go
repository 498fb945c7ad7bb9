package table

import (
	"encoding/csv"
	"slices"
	"strconv"
	"strings"

	"lobewright/app/notation"
	"lobewright/orbitals"
)

// A Grid is a table whose entries know how they are set in type: for the
// clipboard and for files that other programs read. As writes it in each of
// the Formats.
type Grid struct {
	// Title stands above in formats for people. Like Notes it may be empty.
	Title notation.Text
	Head  []Cell
	// Align has one entry a column; columns beyond it stand left.
	Align []Align
	// Rows may be shorter than the head; what is missing is blank.
	Rows  [][]Cell
	Notes []notation.Text
}

// A Cell is one entry. The zero Cell is blank.
type Cell struct {
	// Set is the entry as it is set in type.
	Set notation.Text
	// Plain is the entry in the plain characters of the JSON contract; empty
	// stands for the characters of Set.
	Plain string
	// Value is the number that the entry stands for, if it stands for one, for
	// programs that count with it.
	Value *float64
	// Prose says that the entry is words and no formula.
	Prose bool
}

// Add appends a row.
func (g *Grid) Add(cells ...Cell) { g.Rows = append(g.Rows, cells) }

// Words is a cell with words.
func Words(s string) Cell { return Cell{Set: notation.Words(s), Prose: true} }

// Whole is a cell with a whole number.
func Whole(n int) Cell {
	x := float64(n)
	return Cell{Set: notation.Words(notation.Decimal(x, 0)), Value: &x}
}

// Number is a cell with a number, in closed form where it has one, else with
// four decimals. Value has all of it.
func Number(x float64) Cell {
	text, ok := notation.Exact(x)
	if !ok {
		text = notation.Decimal(x, 4)
	}
	return Cell{Set: notation.Words(text), Value: &x}
}

// Decimals is a cell with a number that is set with a number of places. Value
// has all of it.
func Decimals(x float64, places int) Cell {
	return Cell{Set: notation.Words(notation.Decimal(x, places)), Value: &x}
}

// Operation is a cell with the name of an operation or of a class.
func Operation(name string) Cell { return Cell{Set: notation.Operation(name), Plain: name} }

// Irrep is a cell with the label of an irrep.
func Irrep(label string) Cell { return Cell{Set: notation.Irrep(label), Plain: label} }

// Sum is a cell with a combination of functions of the basis.
func Sum(terms []orbitals.Term, write notation.Coefficient) Cell {
	return Cell{Set: notation.CombinationText(terms, notation.PhiText, write)}
}

// plain is the entry in plain characters.
func (c Cell) plain() string {
	if c.Plain != "" {
		return c.Plain
	}
	return c.Set.String()
}

// A Format is a way to write a Grid.
type Format string

// The formats. Text is for eyes, in columns; CSV for programs: commas, UTF-8,
// numbers as decimal numbers to the last bit with a plain hyphen for a minus,
// all else in plain characters; Markdown with the tables of the common
// dialects; LaTeX a tabular with formulas, of commands of LaTeX's base only.
const (
	FormatText     Format = "text"
	FormatCSV      Format = "csv"
	FormatMarkdown Format = "markdown"
	FormatLaTeX    Format = "latex"
)

// Formats lists all formats.
func Formats() []Format { return []Format{FormatText, FormatCSV, FormatMarkdown, FormatLaTeX} }

// As writes g in a format; an unknown one is text. The last line ends with a
// line feed.
func (g Grid) As(f Format) string {
	switch f {
	case FormatCSV:
		return g.CSV()
	case FormatMarkdown:
		return g.Markdown()
	case FormatLaTeX:
		return g.LaTeX()
	}
	return g.Text()
}

// columns is the number of columns.
func (g Grid) columns() int {
	n := len(g.Head)
	for _, row := range g.Rows {
		n = max(n, len(row))
	}
	return n
}

func (g Grid) right(column int) bool { return column < len(g.Align) && g.Align[column] == Right }

// Text lays g out in columns, as Table does.
func (g Grid) Text() string {
	t := Table{Title: g.Title.String(), Align: g.Align}
	plain := func(row []Cell) (out []string) {
		for _, c := range row {
			out = append(out, c.plain())
		}
		return out
	}
	t.Head = plain(g.Head)
	for _, row := range g.Rows {
		t.Add(plain(row)...)
	}
	for _, note := range g.Notes {
		t.Notes = append(t.Notes, note.String())
	}
	return t.Text()
}

// CSV writes head and rows for programs, as RFC 4180 describes it but with line
// feeds alone. Title and notes are left out: they have no place there.
func (g Grid) CSV() string {
	var b strings.Builder
	w := csv.NewWriter(&b)
	n := g.columns()
	for _, row := range g.all() {
		record := make([]string, n)
		for i, c := range row {
			record[i] = c.plain()
			if c.Value != nil {
				record[i] = strconv.FormatFloat(*c.Value, 'g', -1, 64)
			}
		}
		_ = w.Write(record) // a Builder takes everything
	}
	w.Flush()
	return b.String()
}

// all is the head, if there is one, and the rows.
func (g Grid) all() [][]Cell {
	if len(g.Head) == 0 {
		return g.Rows
	}
	return append([][]Cell{g.Head}, g.Rows...)
}

// Markdown writes g with marks for italics, and with the tags sub and sup,
// which Markdown has no marks for.
func (g Grid) Markdown() string {
	var b strings.Builder
	line := func(row []Cell) {
		b.WriteString("|")
		for i := range g.columns() {
			entry := ""
			if i < len(row) {
				entry = markdown(row[i].Set)
			}
			b.WriteString(" " + entry + " |")
		}
		b.WriteString("\n")
	}
	if len(g.Title) > 0 {
		b.WriteString(markdown(g.Title) + "\n\n")
	}
	line(g.Head)
	b.WriteString("|")
	for i := range g.columns() {
		if g.right(i) {
			b.WriteString(" ---: |")
		} else {
			b.WriteString(" --- |")
		}
	}
	b.WriteString("\n")
	for _, row := range g.Rows {
		line(row)
	}
	for _, note := range g.Notes {
		b.WriteString("\n" + markdown(note) + "\n")
	}
	return b.String()
}

func markdown(t notation.Text) string {
	var b strings.Builder
	for _, r := range t {
		body := markdownEscapes.Replace(r.Text)
		if r.Italic && strings.TrimSpace(body) == body && body != "" {
			body = "*" + body + "*"
		}
		switch r.Place {
		case notation.Sub:
			body = "<sub>" + body + "</sub>"
		case notation.Super:
			body = "<sup>" + body + "</sup>"
		}
		b.WriteString(body)
	}
	return b.String()
}

var markdownEscapes = strings.NewReplacer(
	`\`, `\\`, "|", `\|`, "*", `\*`, "_", `\_`, "`", "\\`", "[", `\[`, "]", `\]`, "#", `\#`, "~", `\~`,
	"<", "&lt;", ">", "&gt;", "&", "&amp;", "\n", " ", "\r", " ")

// LaTeX writes g as a tabular, with title and notes as lines of text around it.
// Formulas stand in math mode, so that a minus is a minus.
func (g Grid) LaTeX() string {
	var b strings.Builder
	if len(g.Title) > 0 {
		b.WriteString("% The table needs no package.\n" + latexLine(g.Title) + "\n\n")
	}
	b.WriteString(`\begin{tabular}{`)
	for i := range g.columns() {
		b.WriteString(map[bool]string{true: "r", false: "l"}[g.right(i)])
	}
	b.WriteString("}\n\\hline\n")
	for i, row := range g.all() {
		entries := make([]string, len(row))
		for k, c := range row {
			entries[k] = c.latex()
		}
		// A row that began with a bracket would be taken for the option of the
		// line break before it.
		if i > 0 && strings.HasPrefix(entries[0], "[") {
			entries[0] = "{}" + entries[0]
		}
		b.WriteString(strings.Join(entries, " & ") + ` \\` + "\n")
		if i == 0 && len(g.Head) > 0 {
			b.WriteString("\\hline\n")
		}
	}
	b.WriteString("\\hline\n\\end{tabular}\n")
	for _, note := range g.Notes {
		b.WriteString("\n" + latexLine(note) + "\n")
	}
	return b.String()
}

func (c Cell) latex() string {
	switch {
	case len(c.Set) == 0:
		return ""
	case c.Prose:
		return latexLine(c.Set)
	}
	return "$" + strings.TrimSpace(c.Set.LaTeX()) + "$"
}

// latexLine writes a sentence: words outside of formulas, symbols within.
func latexLine(t notation.Text) string {
	var b strings.Builder
	isSymbol := func(r notation.Run) bool { return r.Italic || r.Place != notation.OnLine }
	for i := 0; i < len(t); {
		j := i
		for j < len(t) && isSymbol(t[j]) {
			j++
		}
		if j > i {
			b.WriteString("$" + strings.TrimRight(t[i:j].LaTeX(), " ") + "$")
			i = j
			continue
		}
		b.WriteString(notation.LaTeXWords(t[i].Text))
		i++
	}
	return b.String()
}

// WithoutBlankColumns is g without the columns that have a head but no entries.
func (g Grid) WithoutBlankColumns() Grid {
	out := Grid{Title: g.Title, Notes: g.Notes, Rows: make([][]Cell, len(g.Rows))}
	for i := range g.columns() {
		has := func(row []Cell) bool { return i < len(row) && len(row[i].Set) > 0 }
		if !slices.ContainsFunc(g.Rows, has) {
			continue
		}
		if i < len(g.Head) {
			out.Head = append(out.Head, g.Head[i])
		}
		out.Align = append(out.Align, map[bool]Align{true: Right, false: Left}[g.right(i)])
		for k, row := range g.Rows {
			if i < len(row) {
				out.Rows[k] = append(out.Rows[k], row[i])
			}
		}
	}
	return out
}
