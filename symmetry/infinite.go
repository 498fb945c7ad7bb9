package symmetry

import (
	"strings"

	"lobewright/symmetry/message"
)

// InfiniteIrrep returns an irrep of C∞v, D∞h or Kh, whose operations cannot be
// listed, so that Characters and Matrices stay empty.
//
// For the linear groups lambda is |Λ|, the angular momentum about the axis,
// and mirror is +1 or −1 for Σ+ and Σ−, the sign under every σv; it is 0 for
// lambda > 0. For Kh lambda is l, and mirror 0. gerade is +1 (g) or −1 (u) in
// D∞h and Kh, 0 in C∞v.
//
// Partners for Λ > 0 are of the types cos Λφ and sin Λφ, in this order: (x, y),
// (xz, yz), (x²−y², 2xy). Those of Kh are the real harmonics in the order
// m = 0, then cosine and sine of rising m, except for P: x, y, z. The molecule
// lies along z, with the centre of D∞h or the atom of Kh at the origin.
func InfiniteIrrep(symbol string, lambda, gerade, mirror int) (Irrep, error) {
	k, err := parseSymbol(symbol)
	if err != nil {
		return Irrep{}, err
	}
	if !k.infinite() {
		return Irrep{}, message.Errorf("%s is finite: C∞v, D∞h and Kh are the infinite groups", symbol)
	}
	ir := Irrep{Lambda: lambda, Gerade: gerade, Mirror: mirror, Dimension: 2}
	linear, central := k.family != spherical, k.family != linearPolar
	switch {
	case k.family == spherical:
		ir.Dimension = 2*lambda + 1
	case lambda == 0:
		ir.Dimension = 1
	}
	ok := lambda >= 0 && lambda <= maxLambda &&
		(gerade != 0) == central && gerade*gerade <= 1 &&
		(mirror != 0) == (linear && lambda == 0) && mirror*mirror <= 1
	if !ok {
		return Irrep{}, message.Errorf("%s has no irrep with angular momentum %d, parity %d and mirror sign %d", symbol, lambda, gerade, mirror)
	}
	letters := "ΣΠΔΦΓΗΙΚΛΜΝ"
	if k.family == spherical {
		letters = "SPDFGHIKLMN"
	}
	ir.Label = string([]rune(letters)[lambda]) + map[int]string{1: "g", -1: "u", 0: ""}[gerade] +
		map[int]string{1: "+", -1: "-", 0: ""}[mirror]
	ir.Functions = infiniteFunctions(ir, k)
	return ir, nil
}

// maxLambda is the highest angular momentum that has a letter here; bases of
// f functions need no more than 3.
const maxLambda = 10

// infiniteFunctions lists, one list a partner, the functions up to the third
// degree that transform like the irrep.
func infiniteFunctions(ir Irrep, k kind) [][]string {
	const even, odd = 1, -1
	type set struct {
		parity int
		text   string // partners separated by blanks
	}
	var sets []set
	switch {
	case k.family == spherical:
		sets = map[int][]set{
			0: {{even, "x2+y2+z2"}},
			1: {{odd, "x y z"}, {even, "Rx Ry Rz"}},
			2: {{even, "2z2-x2-y2 2√3xz 2√3yz √3(x2-y2) 2√3xy"}},
		}[ir.Lambda]
	case ir.Lambda == 0 && ir.Mirror > 0:
		sets = []set{{odd, "z"}, {even, "z2"}, {even, "x2+y2"}, {odd, "z3"}}
	case ir.Lambda == 0:
		sets = []set{{even, "Rz"}}
	case ir.Lambda == 1:
		sets = []set{{odd, "x y"}, {even, "Ry -Rx"}, {even, "xz yz"}, {odd, "xz2 yz2"}}
	case ir.Lambda == 2:
		sets = []set{{even, "x2-y2 2xy"}, {odd, "z(x2-y2) 2xyz"}}
	case ir.Lambda == 3:
		sets = []set{{odd, "x(x2-3y2) y(3x2-y2)"}}
	}
	out := make([][]string, ir.Dimension)
	for i := range out {
		out[i] = []string{}
	}
	for _, s := range sets {
		if ir.Gerade == 0 || ir.Gerade == s.parity {
			for i, text := range strings.Fields(s.text) {
				out[i] = append(out[i], text)
			}
		}
	}
	return out
}
