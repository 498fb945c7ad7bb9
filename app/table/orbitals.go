package table

import (
	"strconv"
	"strings"

	"lobewright/app/notation"
	"lobewright/app/work"
	"lobewright/orbitals"
	"lobewright/symmetry"
)

// Atoms lists up to most atoms in the working frame; spectators are marked.
func Atoms(g *work.Group, most int) Table {
	t := Table{
		Head:  []string{"atom", "", "x", "y", "z"},
		Align: []Align{Right, Left, Right, Right, Right},
	}
	core := make([]bool, len(g.Molecule.Atoms))
	for _, i := range g.Core {
		core[i] = true
	}
	for i, p := range g.Sites.Positions {
		if i == most {
			t.Notes = []string{"… and " + strconv.Itoa(len(g.Sites.Positions)-most) + " more (all of them: --json)"}
			break
		}
		row := []string{strconv.Itoa(i + 1), g.Sites.Elements[i].Symbol()}
		for _, x := range p {
			row = append(row, notation.Decimal(x, coordinatePlaces))
		}
		if !core[i] {
			row = append(row, "spectator")
		}
		t.Add(row...)
	}
	return t
}

// FunctionName names a function with its atom: "Cl2 sigma".
func FunctionName(b *work.Basis, f orbitals.Function) string {
	return b.Group.Sites.Elements[f.Site].Symbol() + strconv.Itoa(f.Site+1) + " " + f.Name
}

// Basis lists the functions with their atoms, where those that have one
// point, and the set of those that the operations carry into each other.
func Basis(b *work.Basis) Table {
	t := Table{
		Head:  []string{"", "atom", "function", "set", "positive lobe"},
		Align: []Align{Left, Right, Left, Right, Left},
	}
	pointed := false
	for i, f := range b.Functions {
		direction := ""
		if f.Direction.Len() > 0 {
			direction = components(f.Direction[:])
			pointed = true
		}
		t.Add(notation.Phi(i), b.Group.Sites.Elements[f.Site].Symbol()+strconv.Itoa(f.Site+1), f.Name, strconv.Itoa(f.Orbit+1), direction)
	}
	if !pointed {
		t.Head = t.Head[:4]
	}
	return t
}

// components writes a unit vector in columns.
func components(v []float64) string {
	parts := make([]string, len(v))
	for i, x := range v {
		s := notation.Short(x, axisPlaces)
		parts[i] = strings.Repeat(" ", max(0, 6-notation.Width(s))) + s
	}
	return strings.Join(parts, " ")
}

// Representation lists the characters of the basis class by class.
func Representation(o *work.Orbitals) Table {
	var t Table
	row := []string{}
	closed := closedForms{}
	for i, c := range o.Fit.Setting.Classes {
		t.Head = append(t.Head, c.Name)
		t.Align = append(t.Align, Right)
		x := o.Projection.Characters[i]
		row = append(row, notation.Short(x, characterPlaces))
		closed.note(x)
	}
	t.Add(row...)
	t.Notes = closed.lines()
	return t
}

// combinationWidth is how wide a line of a combination becomes before it is
// broken.
const combinationWidth = 72

// Orbitals lists the group orbitals with their combinations, in closed form
// where there is one. Copies and partners are numbered only where there are
// several.
func Orbitals(o *work.Orbitals) Table {
	t := Table{Align: []Align{Left, Right, Right}}
	t.Head = []string{"", "copy", "partner", "like", "combination"}
	last := orbitals.GroupOrbital{Irrep: -1}
	for _, orbital := range o.Projection.Orbitals {
		irrep := o.Irreps[orbital.Irrep]
		row := []string{"", "", "", likeness(irrep, orbital.Partner)}
		if orbital.Irrep != last.Irrep || orbital.Copy != last.Copy {
			row[0] = notation.Orbital(irrep.Label)
			if orbital.Irrep != last.Irrep || irrep.Dimension > 1 {
				t.Break()
			}
		}
		if o.Content[orbital.Irrep] > 1 {
			row[1] = strconv.Itoa(orbital.Copy + 1)
		}
		if irrep.Dimension > 1 {
			row[2] = strconv.Itoa(orbital.Partner + 1)
		}
		for i, line := range combinationLines(orbital.Coefficients) {
			if i == 0 {
				t.Add(append(row, line)...)
			} else {
				t.Add("", "", "", "", line)
			}
		}
		last = orbital
	}
	return t.withoutBlankColumns()
}

// likeness is the simplest function that a partner transforms like.
func likeness(irrep symmetry.Irrep, partner int) string {
	if partner < len(irrep.Functions) && len(irrep.Functions[partner]) > 0 {
		return notation.PlainPolynomial(irrep.Functions[partner][notation.Likest(irrep.Functions[0])])
	}
	return ""
}

func combinationLines(coefficients []float64) []string {
	if form, ok := orbitals.FindClosedForm(coefficients); ok {
		return fold(formTerms(form.String()))
	}
	return fold(spaced(notation.Combination(notation.Terms(coefficients), notation.ExactCoefficient)))
}

// formTerms cuts a closed form before the signs of its terms, but not within
// the brackets of a coefficient, which stand deeper than the first function.
func formTerms(form string) []string {
	level := strings.Count(form[:strings.Index(form, "φ")], "(") - strings.Count(form[:strings.Index(form, "φ")], ")")
	var terms []string
	depth, start := 0, 0
	for i, r := range form {
		switch r {
		case '(':
			depth++
		case ')':
			depth--
		case '+', '−':
			if depth == level && i > start && form[i-1] == ' ' {
				terms = append(terms, form[start:i])
				start = i
			}
		}
	}
	return append(terms, form[start:])
}

// fold joins terms to lines of at most combinationWidth.
func fold(terms []string) []string {
	var lines []string
	line := ""
	for _, part := range terms {
		if line != "" && notation.Width(line+part) > combinationWidth {
			lines = append(lines, strings.TrimRight(line, " "))
			line = ""
		}
		line += part
	}
	return append(lines, strings.TrimRight(line, " "))
}

// Ledger lists one projection operation by operation.
func Ledger(l *work.Ledger) Table {
	t := Table{Head: []string{"operation", "image", "weight", "sum so far"}, Align: []Align{Left, Left, Right}}
	closed := closedForms{}
	for _, row := range l.Rows {
		closed.note(row.Weight)
		sum := fold(spaced(notation.Combination(notation.Terms(row.Sum), notation.DecimalCoefficient)))
		t.Add(l.Group.Sites.Setting.Operations[row.Operation].Name, strings.Join(notation.Combination(row.Image, notation.ExactCoefficient), " "),
			notation.Short(row.Weight, characterPlaces), sum[0])
		for _, line := range sum[1:] {
			t.Add("", "", "", line)
		}
	}
	t.Notes = closed.lines()
	return t
}

func spaced(parts []string) []string {
	for i := range parts {
		parts[i] += " "
	}
	return parts
}
