package work

import (
	"math"
	"slices"

	"lobewright/orbitals"
)

// A Cancelling is a set of operations of a ledger that add up to nothing.
type Cancelling struct {
	// Rows are indices of rows of the ledger, rising.
	Rows []int
	// Image is what the first of them makes of the function, if the others
	// make the same of it or its negative; nil if they make different things
	// of it that cancel only together.
	Image []orbitals.Term
}

// Cancelling says why a function projects to nothing: which operations cancel
// which. Operations with the same image, up to sign, and opposite weight make
// pairs, each with the first that is free; what is left over of one image
// cancels together if it can, and else with all that is left over. Operations
// of weight 0 add nothing and stand in no set. Nil if the sum is not 0.
func (l *Ledger) Cancelling() []Cancelling {
	if l.Norm > 0 {
		return nil
	}
	var out []Cancelling
	var rest []int
	for _, same := range l.sameImages() {
		left := same
		for i := 0; i < len(left); i++ {
			k := slices.IndexFunc(left[i+1:], func(s signedRow) bool { return math.Abs(s.weight+left[i].weight) < equalWeight })
			if k < 0 {
				continue
			}
			k += i + 1
			out = append(out, l.cancelling([]int{left[i].row, left[k].row}))
			left = slices.Delete(left, k, k+1)
			left = slices.Delete(left, i, i+1)
			i--
		}
		sum := 0.0
		var rows []int
		for _, s := range left {
			sum += s.weight
			rows = append(rows, s.row)
		}
		switch {
		case len(rows) == 0:
		case math.Abs(sum) < equalWeight:
			out = append(out, l.cancelling(rows))
		default:
			rest = append(rest, rows...)
		}
	}
	if len(rest) > 0 {
		slices.Sort(rest)
		out = append(out, Cancelling{Rows: rest})
	}
	slices.SortFunc(out, func(a, b Cancelling) int { return a.Rows[0] - b.Rows[0] })
	return out
}

func (l *Ledger) cancelling(rows []int) Cancelling {
	slices.Sort(rows)
	return Cancelling{Rows: rows, Image: l.Rows[rows[0]].Image}
}

// equalWeight bounds the difference of weights, and of coefficients of images,
// that symmetry makes equal.
const equalWeight = 1e-9

// A signedRow is a row with its weight relative to the image of the first row
// that has the same image or its negative.
type signedRow struct {
	row    int
	weight float64
}

// sameImages gathers the rows of weight other than 0 by their images, up to
// sign.
func (l *Ledger) sameImages() [][]signedRow {
	var out [][]signedRow
	for i, row := range l.Rows {
		if row.Weight == 0 {
			continue
		}
		k := slices.IndexFunc(out, func(s []signedRow) bool { return signOf(l.Rows[s[0].row].Image, row.Image) != 0 })
		if k < 0 {
			out = append(out, []signedRow{{i, row.Weight}})
			continue
		}
		out[k] = append(out[k], signedRow{i, row.Weight * signOf(l.Rows[out[k][0].row].Image, row.Image)})
	}
	return out
}

// signOf is 1 if two sums are equal, −1 if they are opposite, else 0.
func signOf(a, b []orbitals.Term) float64 {
	if len(a) != len(b) {
		return 0
	}
	for _, sign := range []float64{1, -1} {
		if slices.EqualFunc(a, b, func(s, t orbitals.Term) bool {
			return s.Function == t.Function && math.Abs(s.Coefficient-sign*t.Coefficient) < equalWeight
		}) {
			return sign
		}
	}
	return 0
}

// Idle lists the rows whose operations have the weight 0.
func (l *Ledger) Idle() []int {
	var out []int
	for i, row := range l.Rows {
		if row.Weight == 0 {
			out = append(out, i)
		}
	}
	return out
}

// Total is the sum over all operations, one number a function.
func (l *Ledger) Total() []float64 { return l.Rows[len(l.Rows)-1].Sum }

// Result is the total made of length 1; nil if the function projects to
// nothing.
func (l *Ledger) Result() []float64 {
	if l.Norm == 0 {
		return nil
	}
	out := slices.Clone(l.Total())
	for i := range out {
		out[i] /= l.Norm
	}
	return out
}

// Among resolves the result into the group orbitals of its basis: the terms
// count in all.Projection.Orbitals. A single term of coefficient 1 or −1 says
// that the result is that group orbital. Nil if the function projects to
// nothing, or if the group orbitals are those of another basis.
func (l *Ledger) Among(all *Orbitals) []orbitals.Term {
	result := l.Result()
	if result == nil || all == nil || all.Basis != l.Basis {
		return nil
	}
	var out []orbitals.Term
	for i, o := range all.Projection.Orbitals {
		sum := 0.0
		for k, c := range o.Coefficients {
			sum += c * result[k]
		}
		if math.Abs(sum) > equalWeight {
			if whole := math.Round(sum); math.Abs(sum-whole) < equalWeight {
				sum = whole
			}
			out = append(out, orbitals.Term{Function: i, Coefficient: sum})
		}
	}
	return out
}

// Largest is the largest coefficient that any of the sums has on the way, so
// that all of them can be drawn to one scale.
func (l *Ledger) Largest() float64 {
	largest := 0.0
	for _, row := range l.Rows {
		for _, c := range row.Sum {
			largest = max(largest, math.Abs(c))
		}
	}
	return largest
}

// ImageUnder is what an operation makes of function number n, counted from 0.
// Unlike a Representation it serves operations of infinite groups at any
// angle. The error says that the basis lacks what the function becomes.
func (b *Basis) ImageUnder(o Operation, n int) ([]orbitals.Term, error) {
	return continuous(b, o.Matrix, sitesUnder(b.Group, o))(n)
}
