package table

import (
	"fmt"
	"strings"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/notation"
	"lobewright/app/work"
	"lobewright/symmetry"
)

// Contents writes a content: "A1g + 2Eg".
func Contents(list []symmetry.Content) string {
	labels, copies := make([]string, len(list)), make([]int, len(list))
	for i, c := range list {
		labels[i], copies[i] = c.Irrep.Label, c.Copies
	}
	return notation.Content(labels, copies)
}

// Correlation has what each irrep of the group becomes in the subgroup.
func Correlation(d *symmetry.Descent) Table {
	t := Table{Head: []string{d.Group.Symbol, d.Subgroup.Symbol}}
	for i, ir := range d.Group.Irreps {
		t.Add(ir.Label, Contents(d.Correlation[i]))
	}
	return t
}

// LinearCorrelation is Correlation for a linear group, whose symbol is given.
func LinearCorrelation(symbol string, d *symmetry.LinearDescent) Table {
	t := Table{Head: []string{symbol, d.Subgroup.Symbol}}
	for i, ir := range d.Irreps {
		t.Add(ir.Label, Contents(d.Correlation[i]))
	}
	return t
}

// DescentPartners lists the matrices of those irreps whose partners are not
// those of the subgroup, one after the other.
func DescentPartners(d *symmetry.Descent) Table {
	t := Table{Head: []string{d.Group.Symbol, "partners there", "matrix, row by row (column k: partner k of the group)"}}
	for i, ir := range d.Group.Irreps {
		if isIdentity(d.Partners[i]) {
			continue
		}
		var names []string
		for _, c := range d.Correlation[i] {
			for copy := range c.Copies {
				for k := range c.Irrep.Dimension {
					names = append(names, partnerName(c, copy, k))
				}
			}
		}
		t.Add(ir.Label, strings.Join(names, ", "), matrixRows(d.Partners[i]))
	}
	return t
}

// partnerName is "B1", "2 B1" for the second copy, "E:1" for the first of two
// partners.
func partnerName(c symmetry.Content, copy, partner int) string {
	name := c.Irrep.Label
	if c.Irrep.Dimension > 1 {
		name += fmt.Sprintf(":%d", partner+1)
	}
	if c.Copies > 1 {
		name = fmt.Sprintf("%d %s", copy+1, name)
	}
	return name
}

const (
	keptWidth      = 96 // characters of a line of operations
	mostKeptListed = 24 // operations in a list of subgroups
)

// Kept lists the operations of the group that a subgroup holds, with their
// names there where those are others.
func Kept(d *symmetry.Descent) Table {
	t := Table{}
	line := ""
	for i, o := range d.Operations {
		name := d.Group.Operations[o].Name
		if there := d.Subgroup.Operations[d.Images[i]].Name; there != name {
			name += "→" + there
		}
		if line != "" && notation.Width(line+"  "+name) > keptWidth {
			t.Add(line)
			line = ""
		}
		if line != "" {
			line += "  "
		}
		line += name
	}
	t.Add(line)
	return t
}

// Subgroups lists subgroups with the operations that they hold.
func Subgroups(list []*symmetry.Descent) Table {
	t := Table{Head: []string{"order", "subgroup", "operations"}, Align: []Align{Right}}
	for _, d := range list {
		var names []string
		for _, o := range d.Operations {
			names = append(names, d.Group.Operations[o].Name)
		}
		if n := len(names); n > mostKeptListed {
			names = append(names[:mostKeptListed:mostKeptListed], fmt.Sprintf("… (%d more)", n-mostKeptListed))
		}
		t.Add(fmt.Sprint(len(d.Operations)), d.Subgroup.Symbol, strings.Join(names, " "))
	}
	return t
}

// Rows lists the rows of a rotation.
func Rows(m mgl64.Mat3) Table {
	t := Table{}
	for i := range 3 {
		r := m.Row(i)
		t.Add("xyz"[i:i+1], notation.Vector(r[:], 4))
	}
	return t
}

// LinearNames says which irreps of the linear group go over into those of the
// finite group that hold functions of the basis.
func LinearNames(o *work.Orbitals) Table {
	t := Table{Head: []string{o.Fit.Setting.Symbol, o.Linear}}
	for i, irrep := range o.Irreps {
		if o.Content[i] > 0 {
			t.Add(irrep.Label, strings.Join(o.LinearNames(i), " or "))
		}
	}
	return t
}
