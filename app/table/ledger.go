package table

import (
	"fmt"

	"lobewright/app/notation"
	"lobewright/app/work"
	"lobewright/orbitals"
)

// Say is a text by its key, as assets.Texts.Say is.
type Say func(key string, arguments ...any) string

// LedgerGrid lists a projection operation by operation: class, operation, what
// becomes of the function, weight, and the sum so far, under a title that says
// what is projected. A note tells the result.
func LedgerGrid(l *work.Ledger, say Say) Grid {
	f := l.Functions[l.Ledger.Function]
	g := Grid{
		Title: notation.Fill(say("table.ledgerTitle"), notation.PhiText(fmt.Sprint(l.Ledger.Function+1)), notation.Function(f.Name),
			notation.Words(l.AtomNames()[f.Site]), notation.Irrep(l.Irrep.Label), WeightText(l, say)),
		Head:  []Cell{Words(say("table.class")), Words(say("table.operation")), Words(say("table.image")), Words(say("table.weight")), Words(say("table.sumSoFar"))},
		Align: []Align{Left, Left, Left, Right, Left},
	}
	setting := l.Fit.Setting
	for _, row := range l.Rows {
		op := setting.Operations[row.Operation]
		sum := notation.Terms(row.Sum)
		g.Add(Operation(setting.Classes[op.Class].Name), Operation(op.Name), Sum(row.Image, notation.OneKind(row.Image)), Number(row.Weight),
			Sum(sum, notation.OneKind(sum)))
	}
	if result := l.Result(); result != nil {
		g.Notes = append(g.Notes, notation.Fill(say("table.ledgerNorm"), notation.Words(NormText(l.Norm)), CombinationForm(result)))
	} else {
		g.Notes = append(g.Notes, notation.Words(say("table.ledgerZero")))
	}
	return g
}

// WeightText says with what a ledger weighs the operations: a matrix element,
// counted from 1, or the character.
func WeightText(l *work.Ledger, say Say) notation.Text {
	if l.ByCharacter() {
		return notation.Words(say("table.theCharacter"))
	}
	return notation.Words(say("table.theElement", l.Element[0]+1, l.Element[1]+1))
}

// NormText writes a length in closed form too, where it has one that is no
// whole number.
func NormText(norm float64) string {
	decimal := notation.Short(norm, 3)
	if exact, ok := notation.Exact(norm); ok && exact != decimal {
		return exact + " = " + decimal
	}
	return decimal
}

// CombinationForm sets normalized coefficients in closed form where there is
// one.
func CombinationForm(coefficients []float64) notation.Text {
	if form, ok := orbitals.FindClosedForm(coefficients); ok {
		return notation.ClosedForm(form)
	}
	terms := notation.Terms(coefficients)
	return notation.CombinationText(terms, notation.PhiText, notation.OneKind(terms))
}
