package table

import (
	"strings"

	"gonum.org/v1/gonum/mat"

	"lobewright/app/notation"
	"lobewright/app/work"
	"lobewright/orbitals"
	"lobewright/symmetry"
)

// OperationsGrid lists every operation with its class, the three components of
// its axis or normal, and the atom to which each atom of the core is carried.
func OperationsGrid(g *work.Group, say Say) Grid {
	out := Grid{
		Title: notation.Fill(say("table.operationsTitle"), notation.Group(g.Fit.Setting.Symbol)),
		Head:  []Cell{Words(say("table.class")), Words(say("table.operation"))},
		Align: []Align{Left, Left},
	}
	for _, axis := range []string{"x", "y", "z"} {
		out.Head = append(out.Head, Cell{Set: notation.Polynomial(axis)})
		out.Align = append(out.Align, Right)
	}
	for _, name := range g.CoreNames() {
		out.Head = append(out.Head, Words(name))
		out.Align = append(out.Align, Left)
	}
	names := g.CoreNames()
	for _, c := range g.Fit.Setting.Classes {
		for _, r := range c.Members {
			op := g.Fit.Setting.Operations[r]
			row := []Cell{Operation(c.Name), Operation(op.Name)}
			for _, x := range op.Axis {
				if op.Axis.Len() == 0 {
					row = append(row, Cell{})
				} else {
					row = append(row, Number(x))
				}
			}
			for _, image := range g.Fit.Permutations[r] {
				row = append(row, Words(names[image]))
			}
			out.Add(row...)
		}
	}
	return out
}

// CharactersGrid is the character table of a finite group with the functions
// that transform like each irrep.
func CharactersGrid(s *symmetry.Setting, say Say) Grid {
	out := Grid{
		Title: notation.Fill(say("table.charactersTitle"), notation.Group(s.Symbol)),
		Head:  []Cell{Words(say("table.irrep"))}, Align: []Align{Left},
	}
	for _, c := range s.Classes {
		out.Head = append(out.Head, Operation(c.Name))
		out.Align = append(out.Align, Right)
	}
	out.Head = append(out.Head, Words(say("table.functions")))
	for _, irrep := range s.Irreps {
		row := []Cell{Irrep(irrep.Label)}
		for _, x := range irrep.Characters {
			row = append(row, Number(x))
		}
		out.Add(append(row, functionSets(irrep))...)
	}
	if pairs := pairLabels(s); len(pairs) > 0 {
		out.Notes = append(out.Notes, joined(pairs).Then(notation.Words(say("table.complexPairs"))))
	}
	return out
}

func pairLabels(s *symmetry.Setting) (labels []notation.Text) {
	for _, irrep := range s.Irreps {
		if irrep.ComplexPair {
			labels = append(labels, notation.Irrep(irrep.Label))
		}
	}
	return labels
}

// functionSets are the functions that transform like an irrep, partners
// together in brackets.
func functionSets(irrep symmetry.Irrep) Cell {
	if len(irrep.Functions) == 0 {
		return Cell{}
	}
	var sets []notation.Text
	for j := range irrep.Functions[0] {
		partners := make([]notation.Text, len(irrep.Functions))
		for k, list := range irrep.Functions {
			partners[k] = notation.Polynomial(list[j])
		}
		set := joined(partners)
		if len(partners) > 1 {
			set = notation.Words("(").Then(set, notation.Words(")"))
		}
		if notation.Width(set.String()) <= longestSet {
			sets = append(sets, set)
		}
	}
	return Cell{Set: joined(sets)}
}

// joined sets texts with commas between them.
func joined(texts []notation.Text) (out notation.Text) {
	for i, t := range texts {
		if i > 0 {
			out = out.Then(notation.Words(", "))
		}
		out = out.Then(t)
	}
	return out
}

// MatricesGrid lists the matrices of every irrep, a row for each row of a
// matrix.
func MatricesGrid(s *symmetry.Setting, say Say) Grid {
	largest := 0
	for _, irrep := range s.Irreps {
		largest = max(largest, irrep.Dimension)
	}
	out := Grid{
		Title: notation.Fill(say("table.matricesTitle"), notation.Group(s.Symbol)),
		Head:  []Cell{Words(say("table.irrep")), Words(say("table.operation")), Words(say("table.row"))},
		Align: []Align{Left, Left, Right},
	}
	for k := range largest {
		column := Whole(k + 1)
		column.Value = nil
		out.Head = append(out.Head, column)
		out.Align = append(out.Align, Right)
	}
	for _, irrep := range s.Irreps {
		for r, m := range irrep.Matrices {
			for i := range irrep.Dimension {
				row := []Cell{Irrep(irrep.Label), Operation(s.Operations[r].Name), Whole(i + 1)}
				for j := range irrep.Dimension {
					row = append(row, Number(m.At(i, j)))
				}
				out.Add(row...)
			}
		}
	}
	return out
}

// ContentGrid lists how many copies of each irrep a basis holds, with the
// characters of the basis below for a finite group.
func ContentGrid(o *work.Orbitals, say Say) Grid {
	out := Grid{
		Title: notation.Fill(say("table.contentTitle"), notation.Group(o.Fit.Setting.Symbol)),
		Head:  []Cell{Words(say("table.irrep")), Words(say("table.copies"))},
		Align: []Align{Left, Right},
	}
	for _, c := range o.Fit.Setting.Classes {
		out.Head = append(out.Head, Operation(c.Name))
		out.Align = append(out.Align, Right)
	}
	for i, irrep := range o.Irreps {
		if o.Content[i] == 0 {
			continue
		}
		row := []Cell{Irrep(irrep.Label), Whole(o.Content[i])}
		for _, x := range irrep.Characters {
			row = append(row, Number(x))
		}
		out.Add(row...)
	}
	if len(o.Projection.Characters) > 0 {
		row := []Cell{Words(say("table.basis")), {}}
		for _, x := range o.Projection.Characters {
			row = append(row, Number(x))
		}
		out.Add(row...)
	}
	return out
}

// OrbitalsGrid lists the group orbitals as combinations, in closed form where
// there is one.
func OrbitalsGrid(o *work.Orbitals, say Say) Grid {
	out := orbitalHeads(o, say)
	out.Title = notation.Fill(say("table.orbitalsTitle"), notation.Group(o.Fit.Setting.Symbol))
	out.Head = append(out.Head, Words(say("table.combination")))
	for i := range o.Projection.Orbitals {
		out.Add(append(orbitalCells(o, i), Cell{Set: CombinationForm(o.Projection.Orbitals[i].Coefficients)})...)
	}
	out.Notes = basisNotes(o)
	return out.WithoutBlankColumns()
}

// CoefficientsGrid has a row a group orbital and a column a function.
func CoefficientsGrid(o *work.Orbitals, say Say) Grid {
	out := orbitalHeads(o, say)
	out.Title = notation.Fill(say("table.coefficientsTitle"), notation.Group(o.Fit.Setting.Symbol))
	for _, f := range o.Functions {
		out.Head = append(out.Head, Cell{Set: functionText(o.Basis, f)})
		out.Align = append(out.Align, Right)
	}
	for i, orbital := range o.Projection.Orbitals {
		row := orbitalCells(o, i)
		for _, c := range orbital.Coefficients {
			row = append(row, Number(c))
		}
		out.Add(row...)
	}
	return out.WithoutBlankColumns()
}

func orbitalHeads(o *work.Orbitals, say Say) Grid {
	return Grid{
		Head:  []Cell{Words(say("table.orbital")), Words(say("table.copy")), Words(say("table.partner")), Words(say("table.like"))},
		Align: []Align{Left, Right, Right, Left},
	}
}

// orbitalCells name a group orbital. Copies and partners are numbered only
// where there are several.
func orbitalCells(o *work.Orbitals, i int) []Cell {
	orbital := o.Projection.Orbitals[i]
	irrep := o.Irreps[orbital.Irrep]
	row := []Cell{{Set: notation.OrbitalText(irrep.Label), Plain: notation.Orbital(irrep.Label)}, {}, {}, {}}
	if o.Content[orbital.Irrep] > 1 {
		row[1] = Whole(orbital.Copy + 1)
	}
	if irrep.Dimension > 1 {
		row[2] = Whole(orbital.Partner + 1)
	}
	if orbital.Partner < len(irrep.Functions) && len(irrep.Functions[orbital.Partner]) > 0 {
		row[3] = Cell{Set: notation.Polynomial(irrep.Functions[orbital.Partner][notation.Likest(irrep.Functions[0])])}
	}
	return row
}

// basisNotes say which function is which: φ1 = Cl2 σ.
func basisNotes(o *work.Orbitals) []notation.Text {
	var line notation.Text
	for i, f := range o.Functions {
		if i > 0 {
			line = line.Then(notation.Words(", "))
		}
		line = line.Then(notation.PhiText(strings.TrimPrefix(notation.Phi(i), "φ")), notation.Words(" = "), functionText(o.Basis, f))
	}
	return []notation.Text{line}
}

func functionText(b *work.Basis, f orbitals.Function) notation.Text {
	atom, _, _ := strings.Cut(FunctionName(b, f), " ")
	return notation.Words(atom + " ").Then(notation.Function(f.Name))
}

// FramesGrid lists what each irrep and each operation is called in every frame
// that a rule in use gives, the one in force first. Below stand the partners
// that are not the same.
func FramesGrid(exchanges []work.Exchange, say Say) Grid {
	here := exchanges[0].Fit.Setting
	out := Grid{
		Title: notation.Fill(say("table.framesTitle"), notation.Group(here.Symbol)),
		Head:  []Cell{Words(say("table.kind"))}, Align: []Align{Left},
	}
	for _, e := range exchanges {
		out.Head = append(out.Head, Words(e.Frame.Rule.Name))
	}
	if exchanges[0].Names == nil {
		return out
	}
	for i := range here.Irreps {
		row := []Cell{Words(say("table.irrep"))}
		for _, e := range exchanges {
			row = append(row, Irrep(e.Fit.Setting.Irreps[e.Names.Irreps[i]].Label))
		}
		out.Add(row...)
	}
	for r := range here.Operations {
		row := []Cell{Words(say("table.operation"))}
		for _, e := range exchanges {
			row = append(row, Operation(e.Fit.Setting.Operations[e.Names.Operations[r]].Name))
		}
		out.Add(row...)
	}
	for i, irrep := range here.Irreps {
		for _, e := range exchanges[1:] {
			// The sign of a single function says nothing.
			if m := e.Names.Partners[i]; irrep.Dimension > 1 && !isIdentity(m) {
				out.Notes = append(out.Notes, partnersNote(irrep.Label, e.Frame.Rule.Name, m, say))
			}
		}
	}
	return out
}

func partnersNote(label, frame string, m *mat.Dense, say Say) notation.Text {
	return notation.Fill(say("table.partners"), notation.Irrep(label), notation.Words(frame), notation.Words(matrixRows(m)))
}
