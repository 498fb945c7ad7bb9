package work

import (
	"math"
	"strconv"
	"strings"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/orbitals/structure"
)

// An AtomRow is an atom as it is typed in a table: element, x, y and z in Å of
// the input. What is typed need not be right.
type AtomRow [4]string

// RowsOf writes a molecule as rows, with numbers that read back as the same.
func RowsOf(m *structure.Molecule) []AtomRow {
	rows := make([]AtomRow, len(m.Atoms))
	for i, a := range m.Atoms {
		rows[i][0] = a.Element.Symbol()
		for k, x := range a.Position {
			rows[i][k+1] = strconv.FormatFloat(x, 'f', -1, 64)
		}
	}
	return rows
}

// A CellProblem is the key of what is wrong with a cell.
type CellProblem string

// What can be wrong with a cell.
const (
	CellElement CellProblem = "element" // no element has this symbol
	CellNumber  CellProblem = "number"  // no number
	CellLarge   CellProblem = "large"   // beyond structure.MaxCoordinate
	CellNear    CellProblem = "near"    // nearer than structure.MinDistance to another atom
)

// A CellFault is a cell that is wrong; Row and Column count from 0.
type CellFault struct {
	Row, Column int
	Problem     CellProblem
	// Other is the row of the atom that is too near.
	Other int
}

// CheckRows lists what is wrong, row by row. Atoms that are too near are told
// of the later one, and only where all numbers of both are right. Of more than
// some thousand atoms distances are left to the reader of coordinates.
func CheckRows(rows []AtomRow) []CellFault {
	var out []CellFault
	places := make([]mgl64.Vec3, len(rows))
	sound := make([]bool, len(rows))
	for i, r := range rows {
		sound[i] = true
		if _, ok := rowElement(r[0]); !ok {
			out = append(out, CellFault{Row: i, Problem: CellElement})
		}
		for k := range 3 {
			x, err := rowNumber(r[k+1])
			switch {
			case err != nil:
				out = append(out, CellFault{Row: i, Column: k + 1, Problem: CellNumber})
				sound[i] = false
			case math.Abs(x) > structure.MaxCoordinate:
				out = append(out, CellFault{Row: i, Column: k + 1, Problem: CellLarge})
				sound[i] = false
			}
			places[i][k] = x
		}
		const most = 3000
		for j := 0; sound[i] && j < i && i < most; j++ {
			if sound[j] && places[i].Sub(places[j]).LenSqr() < structure.MinDistance*structure.MinDistance {
				out = append(out, CellFault{Row: i, Column: 1, Problem: CellNear, Other: j})
				break
			}
		}
	}
	return out
}

func rowElement(text string) (structure.Element, bool) {
	text = strings.TrimSpace(text)
	if n, err := strconv.Atoi(text); err == nil && n >= 1 && n <= int(structure.MaxElement) {
		return structure.Element(n), true
	}
	return structure.ElementOf(text)
}

// rowNumber reads a number with a point or, as many keyboards have it, a
// comma, and with a true minus sign as it is printed.
func rowNumber(text string) (float64, error) {
	text = strings.NewReplacer(",", ".", "−", "-").Replace(strings.TrimSpace(text))
	x, err := strconv.ParseFloat(text, 64)
	if err != nil {
		return 0, err
	}
	if math.IsNaN(x) || math.IsInf(x, 0) || strings.ContainsAny(text, "xXpP_") {
		return 0, strconv.ErrSyntax
	}
	return x, nil
}

// CoordinatesOf writes rows that CheckRows finds nothing wrong with as a list of
// coordinates under a title. ok is false for other rows, and for none.
func CoordinatesOf(title string, rows []AtomRow) (text string, ok bool) {
	if len(rows) == 0 || len(rows) > structure.MaxAtoms || len(CheckRows(rows)) > 0 {
		return "", false
	}
	m := structure.Molecule{Title: title, Atoms: make([]structure.Atom, len(rows))}
	for i, r := range rows {
		m.Atoms[i].Element, _ = rowElement(r[0])
		for k := range 3 {
			m.Atoms[i].Position[k], _ = rowNumber(r[k+1])
		}
	}
	var b strings.Builder
	if structure.Write(&b, &m) != nil {
		return "", false
	}
	return b.String(), true
}
