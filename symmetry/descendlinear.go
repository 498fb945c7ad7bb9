package symmetry

import (
	"math"

	"gonum.org/v1/gonum/mat"

	"lobewright/symmetry/message"
)

// A LinearDescent tells what becomes of the irreps of a linear molecule in a
// finite group with the same z, whose C2 or plane on x lies along the x of the
// partners cos Λφ.
type LinearDescent struct {
	Subgroup *Setting
	// Irreps are those of the linear group up to a Λ; Correlation and Partners
	// are as in Descent.
	Irreps      []Irrep
	Correlation [][]Content
	Partners    []*mat.Dense
}

// DescendLinear correlates the irreps of C∞v or D∞h up to |Λ| = most with those
// of a finite group that has the same z: Cn and Cnv in C∞v, every axial group
// in D∞h. It returns an error that lists these for any other group. (A single
// σv, the Cs of C∞v, has another z by its own rule: its plane is xy.)
func DescendLinear(symbol, subgroup string, most int) (*LinearDescent, error) {
	group, err := parseSymbol(symbol)
	if err != nil {
		return nil, err
	}
	if group.family != linearPolar && group.family != linearCentral {
		return nil, message.Errorf("%s is not the group of a linear molecule: C∞v and D∞h are", symbol)
	}
	k, err := parseSymbol(subgroup)
	if err != nil {
		return nil, err
	}
	polar := k.family == cyclic || k.family == pyramidal
	if !k.axial() || group.family == linearPolar && !polar {
		possible := message.Words("Cn and Cnv")
		if group.family == linearCentral {
			possible = message.Words("Cn, Cnv, Cnh, Dn, Dnh, Dnd, S2n, Cs and Ci")
		}
		return nil, message.Errorf("%s is no subgroup of %s with the same z: possible are %s", k.symbol(), symbol, possible)
	}
	d := &LinearDescent{Subgroup: newSetting(k)}
	for _, ir := range linearIrreps(symbol, group.family == linearCentral, most) {
		matrices := make([]*mat.Dense, d.Subgroup.Order())
		for r, o := range d.Subgroup.Operations {
			matrices[r] = linearMatrix(ir, o)
		}
		content, partners := d.Subgroup.split(matrices)
		d.Irreps = append(d.Irreps, ir)
		d.Correlation = append(d.Correlation, content)
		d.Partners = append(d.Partners, partners)
	}
	return d, nil
}

// linearIrreps lists Σ+, Σ−, Π, Δ … up to a Λ, all g before all u.
func linearIrreps(symbol string, central bool, most int) []Irrep {
	parities := []int{0}
	if central {
		parities = []int{1, -1}
	}
	var out []Irrep
	for _, gerade := range parities {
		for lambda := 0; lambda <= min(most, maxLambda); lambda++ {
			mirrors := []int{0}
			if lambda == 0 {
				mirrors = []int{1, -1}
			}
			for _, mirror := range mirrors {
				ir, err := InfiniteIrrep(symbol, lambda, gerade, mirror)
				if err != nil {
					panic("symmetry: " + err.Error())
				}
				out = append(out, ir)
			}
		}
	}
	return out
}

// linearMatrix is the matrix of an irrep of C∞v or D∞h for an operation that
// keeps z or turns it round: C(φ) turns the partners by Λφ, a σv with its trace
// at φ carries them to cos and sin of Λ(2φ) minus theirs, and what turns z
// round is the inversion times one of these.
func linearMatrix(ir Irrep, o Operation) *mat.Dense {
	m, sign := o.Matrix, 1.0
	if m.At(2, 2) < 0 {
		m = m.Mul(-1)
		sign = float64(ir.Gerade)
	}
	reverse := m.At(0, 0)*m.At(1, 1)-m.At(0, 1)*m.At(1, 0) < 0
	if ir.Lambda == 0 {
		if reverse {
			sign *= float64(ir.Mirror)
		}
		return mat.NewDense(1, 1, []float64{sign})
	}
	angle := float64(ir.Lambda) * math.Atan2(m.At(1, 0), m.At(0, 0))
	c, s := sign*math.Cos(angle), sign*math.Sin(angle)
	if reverse {
		return mat.NewDense(2, 2, []float64{c, s, s, -c})
	}
	return mat.NewDense(2, 2, []float64{c, -s, s, c})
}
