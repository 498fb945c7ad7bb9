package table

import (
	"fmt"
	"math"

	"lobewright/app/notation"
	"lobewright/app/work"
)

// Ladder lists the groups that a structure nearly has, those that show chooses,
// with the distortion from each. shares has one list a group.
func Ladder(l *work.Ladder, shares [][]work.Share, show func(i int) bool) Table {
	t := Table{
		Head:  []string{"group", "", "deviation Å", "measure", "axis in the input", "distortion by irrep, Å"},
		Align: []Align{Left, Right, Right, Right},
	}
	embeddings := map[string]int{}
	for _, n := range l.Groups {
		embeddings[n.Fit.Setting.Symbol]++
	}
	for i, n := range l.Groups {
		if !show(i) {
			continue
		}
		symbol := n.Fit.Setting.Symbol
		which := ""
		if all := embeddings[symbol]; all > 1 {
			which = fmt.Sprintf("%d of %d", n.Embedding, all)
		}
		t.Add(symbol, which, notation.Decimal(n.Fit.Deviation, 4), notation.Decimal(n.Measure, 4), notation.Vector(n.Axis[:], 3), Distortion(shares[i]))
	}
	return t
}

// leastShown (Å) is the least part of a distortion that is written out.
const leastShown = 5e-5

// Distortion writes the shares of a distortion: for each irrep, all copies
// together, the square root of the sum of the squares, with the partners of a
// degenerate one in brackets.
func Distortion(shares []work.Share) string {
	var order []string
	squares := map[string][]float64{} // by partner
	for _, s := range shares {
		if squares[s.Irrep] == nil {
			order = append(order, s.Irrep)
		}
		for len(squares[s.Irrep]) <= s.Partner {
			squares[s.Irrep] = append(squares[s.Irrep], 0)
		}
		squares[s.Irrep][s.Partner] += s.Amount * s.Amount
	}
	text := ""
	for _, label := range order {
		sum := 0.0
		partners := ""
		for _, q := range squares[label] {
			sum += q
			if partners != "" {
				partners += ", "
			}
			partners += notation.Decimal(math.Sqrt(q), 4)
		}
		if math.Sqrt(sum) < leastShown {
			continue
		}
		if text != "" {
			text += "  "
		}
		text += notation.Orbital(label) + " " + notation.Decimal(math.Sqrt(sum), 4)
		if len(squares[label]) > 1 {
			text += " (" + partners + ")"
		}
	}
	return text
}
