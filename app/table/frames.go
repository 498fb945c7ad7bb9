package table

import (
	"strings"

	"gonum.org/v1/gonum/mat"

	"lobewright/app/notation"
	"lobewright/app/work"
)

// Rules lists frames with what puts their axes, and whose rule it is. names are
// those of the points of the fit.
func Rules(exchanges []work.Exchange, names []string) Table {
	t := Table{Head: []string{"name", "axes"}}
	for i, e := range exchanges {
		if i > 0 {
			t.Break()
		}
		name := e.Frame.Rule.Name
		for _, clause := range strings.Split(notation.Convention(e.Fit, names), "; ") {
			t.Add(name, clause)
			name = ""
		}
		t.Add("", "source: "+notation.Source(e.Frame.Rule))
	}
	return t
}

// Rotations lists the matrices that take the input to each frame.
func Rotations(exchanges []work.Exchange) Table {
	t := Table{Head: []string{"frame", "x", "y", "z"}}
	for _, e := range exchanges {
		row := []string{e.Frame.Rule.Name}
		for i := range 3 {
			r := e.Fit.Rotation.Row(i)
			row = append(row, notation.Vector(r[:], 4))
		}
		t.Add(row...)
	}
	return t
}

// heads are the names of the frames, over columns.
func heads(first string, exchanges []work.Exchange) []string {
	head := []string{first}
	for _, e := range exchanges {
		head = append(head, e.Frame.Rule.Name)
	}
	return head
}

// IrrepNames has a row an irrep and a column a frame.
func IrrepNames(exchanges []work.Exchange) Table {
	t := Table{Head: heads("", exchanges)}
	for i := range exchanges[0].Fit.Setting.Irreps {
		row := []string{""}
		for _, e := range exchanges {
			row = append(row, e.Fit.Setting.Irreps[e.Names.Irreps[i]].Label)
		}
		t.Add(mark(row)...)
	}
	return t
}

// OperationNames has a row an operation and a column a frame.
func OperationNames(exchanges []work.Exchange) Table {
	t := Table{Head: heads("", exchanges)}
	for r := range exchanges[0].Fit.Setting.Operations {
		row := []string{""}
		for _, e := range exchanges {
			row = append(row, e.Fit.Setting.Operations[e.Names.Operations[r]].Name)
		}
		t.Add(mark(row)...)
	}
	return t
}

// mark puts a sign before a row whose names are not all the same.
func mark(row []string) []string {
	for _, name := range row[2:] {
		if name != row[1] {
			row[0] = "≠"
		}
	}
	return row
}

// Partners lists the matrices that take partners over to another frame, row by
// row, where they are not those of the same partners.
func Partners(exchanges []work.Exchange) Table {
	t := Table{Head: []string{"irrep", "frame", "matrix, row by row (column k: partner k here)"}}
	for i, ir := range exchanges[0].Fit.Setting.Irreps {
		label := ir.Label
		for _, e := range exchanges[1:] {
			m := e.Names.Partners[i]
			if isIdentity(m) {
				continue
			}
			t.Add(label, e.Frame.Rule.Name, matrixRows(m))
			label = ""
		}
	}
	return t
}

func isIdentity(m *mat.Dense) bool {
	n, _ := m.Dims()
	for i := range n {
		for j := range n {
			want := 0.0
			if i == j {
				want = 1
			}
			if d := m.At(i, j) - want; d > 1e-9 || d < -1e-9 {
				return false
			}
		}
	}
	return true
}

// matrixRows writes a small matrix on one line, in closed forms where it has
// some.
func matrixRows(m *mat.Dense) string {
	n, _ := m.Dims()
	rows := make([]string, n)
	for i := range n {
		entries := make([]string, n)
		for j := range n {
			x := m.At(i, j)
			exact, ok := notation.Exact(x)
			if !ok {
				exact = notation.Decimal(x, matrixPlaces)
			}
			entries[j] = exact
		}
		rows[i] = strings.Join(entries, " ")
	}
	return strings.Join(rows, "  |  ")
}

// Relabellings lists conventions with the names that are others there.
func Relabellings(list []work.Relabelling) Table {
	t := Table{Head: []string{"convention", "here = there", "source"}}
	for _, r := range list {
		var pairs []string
		for _, n := range append(append([]work.Renaming(nil), r.Irreps...), r.Classes...) {
			if n.Here != n.There {
				pairs = append(pairs, n.Here+" = "+n.There)
			}
		}
		t.Add(r.Name, strings.Join(pairs, ", "), r.Source)
	}
	return t
}
