package table

import (
	"fmt"
	"math"
	"strings"

	"lobewright/app/notation"
	"lobewright/app/work"
)

// Ladder lists the groups that a structure nearly has, those that show chooses,
// with the distortion from each. shares has one list a group.
func Ladder(l *work.Ladder, shares [][]work.Share, show func(i int) bool) Table {
	t := Table{
		Head:  []string{"group", "", "distortion by irrep, Å", "atom moves Å", "measure", "z in the input"},
		Align: []Align{Left, Left, Left, Right, Right, Right},
	}
	degenerate := false
	for i := range l.Groups {
		if show(i) {
			_, partners := Distortion(shares[i])
			degenerate = degenerate || partners != ""
		}
	}
	if degenerate {
		t.Head = append(t.Head, "by partner, Å")
	}
	embeddings := map[string]int{}
	for _, n := range l.Groups {
		embeddings[n.Fit.Setting.Symbol]++
	}
	largest, below := l.Within()
	for i, n := range l.Groups {
		if !show(i) {
			continue
		}
		symbol := n.Fit.Setting.Symbol
		which := ""
		if all := embeddings[symbol]; all > 1 {
			which = fmt.Sprintf("%d of %d", n.Embedding, all)
		}
		if below[i] {
			which = strings.TrimSpace(which + "  in " + l.Groups[largest].Fit.Setting.Symbol)
		}
		if n.Whole != nil && !below[i] {
			which = strings.TrimSpace(which + "  of " + n.Whole.Fit.Setting.Symbol)
		}
		distortion, partners := Distortion(shares[i])
		if distortion == "" {
			distortion = "none"
		}
		row := []string{symbol, which, distortion, notation.Decimal(n.Fit.Deviation, 4), notation.Decimal(n.Measure, 4), notation.Vector(n.Axis[:], 3)}
		if degenerate {
			row = append(row, partners)
		}
		t.Add(row...)
	}
	return t
}

// leastShown (Å) is the least part of a distortion that is written out.
const leastShown = 5e-5

// Distortion writes the shares of a distortion: for each irrep, all copies
// together, the square root of the sum of the squares; and for each degenerate
// one the same for its single partners.
func Distortion(shares []work.Share) (byIrrep, byPartner string) {
	var order []string
	squares := map[string][]float64{} // by partner
	for _, s := range shares {
		if squares[s.Irrep] == nil {
			order = append(order, s.Irrep)
		}
		for len(squares[s.Irrep]) < s.Dimension {
			squares[s.Irrep] = append(squares[s.Irrep], 0)
		}
		squares[s.Irrep][s.Partner] += s.Amount * s.Amount
	}
	var irreps, partners []string
	for _, label := range order {
		sum := 0.0
		var parts []string
		for _, q := range squares[label] {
			sum += q
			parts = append(parts, notation.Decimal(math.Sqrt(q), 4))
		}
		if math.Sqrt(sum) < leastShown {
			continue
		}
		irreps = append(irreps, notation.Orbital(label)+" "+notation.Decimal(math.Sqrt(sum), 4))
		if len(parts) > 1 {
			partners = append(partners, notation.Orbital(label)+" "+strings.Join(parts, ", "))
		}
	}
	return strings.Join(irreps, "  "), strings.Join(partners, "  ")
}
