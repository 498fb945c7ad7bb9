package symmetry

import (
	"math"
	"strconv"
	"strings"
	"unicode/utf8"

	"gonum.org/v1/gonum/mat"
)

// WithPartners writes an irrep in other partners: new partner k is the sum over
// l of rows.At(k, l) times partner l, with rows orthogonal. The matrices become
// rows·D·rowsᵀ, and the functions the same combinations of the functions, each
// set with one common factor so that its numbers are as simple as can be. What
// does not depend on partners is shared with the irrep given.
func (ir Irrep) WithPartners(rows *mat.Dense) Irrep {
	out := ir
	out.Matrices = make([]*mat.Dense, len(ir.Matrices))
	for r, m := range ir.Matrices {
		var half mat.Dense
		half.Mul(rows, m)
		turned := new(mat.Dense)
		turned.Mul(&half, rows.T())
		turned.Apply(func(_, _ int, v float64) float64 { return tidy(v) }, turned)
		out.Matrices[r] = turned
	}
	out.Functions = turnedFunctions(ir.Functions, rows)
	out.sets = nil // they are of the partners before
	return out
}

// turnedFunctions combines the functions of partners, set by set. A set that
// cannot be read, or does not have one function a partner, is left out.
func turnedFunctions(functions [][]string, rows *mat.Dense) [][]string {
	d := len(functions)
	out := make([][]string, d)
	for k := range out {
		out[k] = []string{}
	}
	if d == 0 {
		return out
	}
	for j := range functions[0] {
		var list []named
		set := make([]*mat.VecDense, 0, d)
		for k := range functions {
			if j >= len(functions[k]) {
				break
			}
			l, v := readFunction(functions[k][j])
			if v == nil || list != nil && &l[0] != &list[0] {
				break
			}
			list = l
			set = append(set, v)
		}
		if len(set) < d {
			continue
		}
		turned := make([]*mat.Dense, d)
		for k := range turned {
			turned[k] = mat.NewDense(len(list), 1, nil)
			for l, v := range set {
				for i := range list {
					turned[k].Set(i, 0, turned[k].At(i, 0)+rows.At(k, l)*v.AtVec(i))
				}
			}
		}
		scale := 1 / unit(turned, 0)
		for k, t := range turned {
			v := mat.NewVecDense(len(list), nil)
			v.ScaleVec(scale, t.ColView(0))
			out[k] = append(out[k], combination(list, v))
		}
	}
	return out
}

// readFunction reads a function as combination prints it, as coefficients of
// the first list of named functions that holds all its terms; nil if none does.
func readFunction(text string) ([]named, *mat.VecDense) {
	for _, list := range [][]named{linears, rotations, squares, cubicCubes, axialCubes} {
		v := mat.NewVecDense(len(list), nil)
		if readSum(list, text, 1, v) {
			return list, v
		}
	}
	return nil, nil
}

// readSum adds the terms of a text, times a factor, to v.
func readSum(list []named, text string, factor float64, v *mat.VecDense) bool {
	depth, start := 0, 0
	for i := 0; i <= len(text); i++ {
		switch {
		case i == len(text) || depth == 0 && i > start && (text[i] == '+' || text[i] == '-'):
			if !readTerm(list, text[start:i], factor, v) {
				return false
			}
			start = i
		case text[i] == '(':
			depth++
		case text[i] == ')':
			depth--
		}
	}
	return text != ""
}

// readTerm reads a sign, a number, a root, and a name or a sum in brackets.
func readTerm(list []named, text string, factor float64, v *mat.VecDense) bool {
	switch {
	case strings.HasPrefix(text, "-"):
		factor, text = -factor, text[1:]
	case strings.HasPrefix(text, "+"):
		text = text[1:]
	}
	number := text[:len(text)-len(strings.TrimLeft(text, "0123456789."))]
	if number != "" {
		x, err := strconv.ParseFloat(number, 64)
		if err != nil {
			return false
		}
		factor, text = factor*x, text[len(number):]
	}
	if r, n := utf8.DecodeRuneInString(text); r == '√' {
		text = text[n:]
		under := text[:len(text)-len(strings.TrimLeft(text, "0123456789"))]
		x, err := strconv.Atoi(under)
		if err != nil {
			return false
		}
		factor, text = factor*math.Sqrt(float64(x)), text[len(under):]
	}
	for i, f := range list {
		if f.name == text {
			v.SetVec(i, v.AtVec(i)+factor)
			return true
		}
	}
	if strings.HasPrefix(text, "(") && strings.HasSuffix(text, ")") {
		return readSum(list, text[1:len(text)-1], factor, v)
	}
	return false
}
