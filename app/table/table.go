// Package table lays results out in rows and columns: operations,
// characters, contents, group orbitals and ledgers.
package table

import (
	"slices"
	"strings"

	"lobewright/app/notation"
)

// Align tells on which side of its column an entry stands.
type Align int

// The sides.
const (
	Left Align = iota
	Right
)

// A Table is rows of plain entries under a head. Rows may be shorter than
// the head; what is missing is blank.
type Table struct {
	Title string
	Head  []string
	// Align has one entry a column; columns beyond it stand left.
	Align []Align
	Rows  [][]string
	// Breaks are the indices of rows before which a little space stands.
	Breaks []int
	// Notes stand below.
	Notes []string
}

// Add appends a row.
func (t *Table) Add(entries ...string) { t.Rows = append(t.Rows, entries) }

// Break puts space before the next row that is added.
func (t *Table) Break() {
	if len(t.Rows) > 0 {
		t.Breaks = append(t.Breaks, len(t.Rows))
	}
}

// withoutBlankColumns drops the columns that have a head but no entries.
func (t Table) withoutBlankColumns() Table {
	blank := func(i int) bool {
		return !slices.ContainsFunc(t.Rows, func(row []string) bool { return i < len(row) && row[i] != "" })
	}
	for i := len(t.Head) - 1; i >= 0; i-- {
		if !blank(i) {
			continue
		}
		t.Head = slices.Delete(slices.Clone(t.Head), i, i+1)
		if i < len(t.Align) {
			t.Align = slices.Delete(slices.Clone(t.Align), i, i+1)
		}
		for k, row := range t.Rows {
			if i < len(row) {
				t.Rows[k] = slices.Delete(slices.Clone(row), i, i+1)
			}
		}
	}
	return t
}

const (
	margin = "  " // before every row
	gap    = "  " // between columns
)

// Text lays t out for a terminal, in columns as wide as their widest entry.
// Lines have no blanks at their end; the last line ends with a line feed.
func (t Table) Text() string {
	widths := t.widths()
	var b strings.Builder
	if t.Title != "" {
		b.WriteString(t.Title + "\n")
	}
	if len(t.Head) > 0 {
		t.writeRow(&b, t.Head, widths)
	}
	breaks := t.Breaks
	for i, row := range t.Rows {
		if len(breaks) > 0 && breaks[0] == i {
			b.WriteString("\n")
			breaks = breaks[1:]
		}
		t.writeRow(&b, row, widths)
	}
	for _, note := range t.Notes {
		b.WriteString(margin + note + "\n")
	}
	return b.String()
}

func (t Table) widths() []int {
	var widths []int
	for _, row := range append([][]string{t.Head}, t.Rows...) {
		for i, entry := range row {
			if i == len(widths) {
				widths = append(widths, 0)
			}
			widths[i] = max(widths[i], notation.Width(entry))
		}
	}
	return widths
}

func (t Table) writeRow(b *strings.Builder, row []string, widths []int) {
	var line strings.Builder
	for i, entry := range row {
		if i > 0 {
			line.WriteString(gap)
		}
		pad := strings.Repeat(" ", widths[i]-notation.Width(entry))
		if i < len(t.Align) && t.Align[i] == Right {
			line.WriteString(pad + entry)
		} else {
			line.WriteString(entry + pad)
		}
	}
	b.WriteString(strings.TrimRight(margin+line.String(), " ") + "\n")
}
