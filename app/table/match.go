package table

import (
	"strconv"
	"strings"

	"lobewright/app/notation"
	"lobewright/app/work"
)

// Match lists, partner by partner, which functions of the central atom go with
// a group orbital. A match without a central atom has no rows.
func Match(m *work.Match) Table {
	t := Table{
		Head:  []string{"", "copy", "partner", "like", "goes with"},
		Align: []Align{Left, Right, Right},
	}
	if m.Functions == nil {
		return t
	}
	names := m.Names()
	for _, p := range m.Pairs {
		irrep := m.Orbitals.Irreps[p.Irrep]
		t.Break()
		for k := range irrep.Dimension {
			row := []string{"", "", "", likeness(irrep, k), ""}
			if k == 0 {
				row[0] = notation.Orbital(irrep.Label)
			}
			if m.Orbitals.Content[p.Irrep] > 1 {
				row[1] = strconv.Itoa(p.Copy + 1)
			}
			if irrep.Dimension > 1 {
				row[2] = strconv.Itoa(k + 1)
			}
			switch {
			case p.Own:
				row[4] = "(on the central atom itself)"
			case len(p.Central) == 0:
				row[4] = "none: non-bonding by symmetry"
			default:
				row[4] = strings.Join(partnersOf(m, p.Central, k, names), ", ")
			}
			t.Add(row...)
		}
	}
	return t.withoutBlankColumns()
}

// partnersOf writes partner k of some copies of central functions.
func partnersOf(m *work.Match, copies []work.CentralCopy, k int, names []string) []string {
	out := make([]string, len(copies))
	for i, c := range copies {
		out[i] = notation.Named(m.With(c, k), names, notation.Words).String()
	}
	return out
}

// Lone lists the functions of the central atom that find no group orbital.
func Lone(m *work.Match) Table {
	t := Table{Align: []Align{Left, Left}}
	if m.Functions == nil {
		return t
	}
	names := m.Names()
	for _, c := range m.Lone {
		irrep := m.Functions.Irreps[c.Irrep]
		var list []string
		for k := range irrep.Dimension {
			list = append(list, partnersOf(m, []work.CentralCopy{c}, k, names)...)
		}
		t.Add(notation.Orbital(irrep.Label), strings.Join(list, ", "))
	}
	return t
}
