package table

import (
	"fmt"
	"slices"
	"strconv"
	"strings"

	"lobewright/app/notation"
	"lobewright/symmetry"
)

const (
	coordinatePlaces = 4 // a ten-thousandth of an ångström: below any experiment
	axisPlaces       = 3
	characterPlaces  = 3
	matrixPlaces     = 4
)

// Operations lists every operation with its class, its axis or normal and
// where it carries the points of shown, whose indices it takes. Points are
// written as people count them.
func Operations(s *symmetry.Setting, permutations [][]int, shown []int) Table {
	t := Table{Head: []string{"class", "operation", "axis or normal"}}
	if len(shown) > 0 {
		t.Head = append(t.Head, carries+pointNumbers(shown, shown)+" to")
	}
	for _, c := range s.Classes {
		for i, r := range c.Members {
			op := s.Operations[r]
			row := []string{"", op.Name, axis(op)}
			if i == 0 {
				row[0] = c.Name
			}
			if len(shown) > 0 {
				images := make([]int, len(shown))
				for k, point := range shown {
					images[k] = permutations[r][point]
				}
				row = append(row, strings.Repeat(" ", len(carries))+pointNumbers(images, shown))
			}
			t.Add(row...)
		}
	}
	return t
}

const carries = "carries atoms "

// axis writes the axis of a rotation or the normal of a plane; E and i have
// none.
func axis(op symmetry.Operation) string {
	if op.Axis.Len() == 0 {
		return ""
	}
	return components(op.Axis[:])
}

// pointNumbers writes points from 1, each as wide as the largest of all.
func pointNumbers(points, all []int) string {
	width := len(strconv.Itoa(slices.Max(all) + 1))
	parts := make([]string, len(points))
	for i, p := range points {
		parts[i] = fmt.Sprintf("%*d", width, p+1)
	}
	return strings.Join(parts, " ")
}

// Characters is the character table of a finite group with the functions that
// transform like each irrep. Characters that are no whole numbers stand with
// three places, and below the table in closed form.
func Characters(s *symmetry.Setting) Table {
	t := Table{Head: []string{""}, Align: []Align{Left}}
	for _, c := range s.Classes {
		t.Head = append(t.Head, c.Name)
		t.Align = append(t.Align, Right)
	}
	closed := closedForms{}
	for _, irrep := range s.Irreps {
		row := []string{irrep.Label}
		for _, x := range irrep.Characters {
			row = append(row, notation.Short(x, characterPlaces))
			closed.note(x)
		}
		t.Add(append(row, " "+functions(irrep))...)
	}
	t.Notes = closed.lines()
	if pair := complexPairs(s); pair != "" {
		t.Notes = append(t.Notes, pair)
	}
	return t
}

// longestSet is how many characters the functions of all partners may have. In
// axes that are not those of the group some have hundreds; the JSON has them.
const longestSet = 80

// functions writes what transforms like an irrep: x²−y², (x, y).
func functions(irrep symmetry.Irrep) string {
	if len(irrep.Functions) == 0 {
		return ""
	}
	var sets []string
	for j := range irrep.Functions[0] {
		partners := make([]string, len(irrep.Functions))
		for k, list := range irrep.Functions {
			partners[k] = notation.PlainPolynomial(list[j])
		}
		set := strings.Join(partners, ", ")
		if len(partners) > 1 {
			set = "(" + set + ")"
		}
		if notation.Width(set) > longestSet {
			return strings.Join(append(sets, "…"), "  ")
		}
		sets = append(sets, set)
	}
	return strings.Join(sets, "  ")
}

// complexPairs says which irreps are pairs of complex conjugates.
func complexPairs(s *symmetry.Setting) string {
	var labels []string
	for _, irrep := range s.Irreps {
		if irrep.ComplexPair {
			labels = append(labels, irrep.Label)
		}
	}
	if len(labels) == 0 {
		return ""
	}
	return strings.Join(labels, ", ") + ": a pair of complex conjugates, taken together over real functions"
}

// closedForms collects the numbers of a table that are no whole numbers.
type closedForms struct {
	values []string // as printed, without sign, in order of appearance
	exact  map[string]string
}

func (c *closedForms) note(x float64) {
	printed := notation.Short(x, characterPlaces)
	if !strings.Contains(printed, ".") {
		return
	}
	if x < 0 {
		x, printed = -x, strings.TrimPrefix(printed, "−")
	}
	form, ok := notation.Exact(x)
	if !ok || c.exact[printed] != "" {
		return
	}
	if c.exact == nil {
		c.exact = map[string]string{}
	}
	c.exact[printed] = form
	c.values = append(c.values, printed)
}

func (c *closedForms) lines() []string {
	var lines []string
	for _, v := range c.values {
		lines = append(lines, v+" = "+c.exact[v])
	}
	return lines
}

// Matrices lists the matrices of every irrep of dimension 2 and more for
// every operation; those of dimension 1 are the characters.
func Matrices(s *symmetry.Setting) Table {
	t := Table{Head: []string{"irrep", "operation", "matrix, row by row"}}
	for _, irrep := range s.Irreps {
		if irrep.Dimension < 2 {
			continue
		}
		t.Break()
		for r, m := range irrep.Matrices {
			rows := make([]string, irrep.Dimension)
			for i := range rows {
				entries := make([]string, irrep.Dimension)
				for j := range entries {
					entries[j] = fmt.Sprintf("%7s", notation.Short(m.At(i, j), matrixPlaces))
				}
				rows[i] = strings.Join(entries, " ")
			}
			label := ""
			if r == 0 {
				label = irrep.Label
			}
			t.Add(label, s.Operations[r].Name, strings.Join(rows, "  |"))
		}
	}
	return t
}
