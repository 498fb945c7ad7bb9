package work

import (
	"math"
	"strings"

	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"

	"lobewright/orbitals"
	"lobewright/orbitals/structure"
	"lobewright/symmetry"
)

// A Share is the part of a distortion that transforms as one partner of one
// copy of an irrep.
type Share struct {
	Irrep         string
	Copy, Partner int     // from 0
	Amount        float64 // Å
	Dimension     int     // of the irrep
}

// noDistortion (Å) is what rounding leaves of a distortion that is none.
const noDistortion = 1e-9

// Displacements are the ways (Å, in the frame of the group) from the ideal
// places of the core atoms to those of the input.
func (l *Ladder) Displacements(n *symmetry.Nearness) []mgl64.Vec3 {
	out := make([]mgl64.Vec3, len(l.Core))
	for k, i := range l.Core {
		at := n.Fit.Rotation.Mul3x1(l.Molecule.Atoms[i].Position.Sub(n.Fit.Origin))
		out[k] = at.Sub(n.Fit.Ideal[k])
	}
	return out
}

// Displacements are the ways (Å, in the working frame) from the ideal places of
// the core atoms, in the order of Core, to those of the input.
func (g *Group) Displacements() []mgl64.Vec3 {
	out := make([]mgl64.Vec3, len(g.Core))
	for k, i := range g.Core {
		at := g.Fit.Rotation.Mul3x1(g.Molecule.Atoms[i].Position.Sub(g.Fit.Origin))
		out[k] = at.Sub(g.Fit.Ideal[k])
	}
	return out
}

// Distortion resolves the displacement of the core from the ideal structure of
// a group by symmetry: the amounts are the parts of the displacement along an
// orthonormal set of symmetry coordinates, made by the same projection as group
// orbitals, so that their squares add up to Σ d². What is nothing is left out.
//
// The totally symmetric share is nothing, since the ideal structure is the
// nearest one; nor is there a translation or a rotation, which the fit has
// taken out.
func (l *Ladder) Distortion(n *symmetry.Nearness) ([]Share, error) {
	fit := n.Fit
	d := make([]float64, 0, 3*len(l.Core))
	sum := 0.0
	for _, v := range l.Displacements(n) {
		d = append(d, v[0], v[1], v[2])
		sum += v.Dot(v)
	}
	if math.Sqrt(sum) < noDistortion {
		return nil, nil
	}
	if fit.Setting.Infinite() {
		return l.linearDistortion(fit, d)
	}
	blocks := make([]*mat.Dense, fit.Setting.Order())
	for r, o := range fit.Setting.Operations {
		blocks[r] = mat.NewDense(3, 3, nil)
		for i := range 3 {
			row := o.Matrix.Row(i)
			blocks[r].SetRow(i, row[:])
		}
	}
	rep, err := orbitals.NewRepresentation(fit.Setting, fit.Permutations, blocks)
	if err != nil {
		return nil, err
	}
	projection, err := orbitals.Project(rep)
	if err != nil {
		return nil, err
	}
	return shares(projection, d), nil
}

// linearDistortion puts a p function on every atom, which goes like a
// displacement: an infinite group has no list of matrices.
func (l *Ladder) linearDistortion(fit *symmetry.Fit, d []float64) ([]Share, error) {
	core := &structure.Molecule{}
	all := make([]int, len(l.Core))
	for k, i := range l.Core {
		core.Atoms = append(core.Atoms, l.Molecule.Atoms[i])
		all[k] = k
	}
	sites, err := orbitals.NewSites(fit, all, core, nil)
	if err != nil {
		return nil, err
	}
	choice, err := orbitals.ParseChoice("all:px,py,pz")
	if err != nil {
		return nil, err
	}
	basis, err := orbitals.NewBasis(sites, choice)
	if err != nil {
		return nil, err
	}
	projection, err := basis.Project()
	if err != nil {
		return nil, err
	}
	ordered := make([]float64, len(basis.Functions))
	for i, f := range basis.Functions {
		ordered[i] = d[3*f.Site+strings.Index("xyz", f.Name[1:])]
	}
	return shares(projection, ordered), nil
}

// shares are the parts of a displacement along symmetry coordinates.
func shares(projection *orbitals.Projection, d []float64) []Share {
	var out []Share
	for _, o := range projection.Orbitals {
		amount := 0.0
		for i, c := range o.Coefficients {
			amount += c * d[i]
		}
		if math.Abs(amount) > noDistortion {
			irrep := projection.Irreps[o.Irrep]
			out = append(out, Share{irrep.Label, o.Copy, o.Partner, amount, irrep.Dimension})
		}
	}
	return out
}

// A Portion is the part of a distortion that belongs to one irrep, all copies
// together: the square roots of sums of squares.
type Portion struct {
	Irrep  string
	Amount float64 // Å
	// Partners has the part of each partner, in Å.
	Partners []float64
}

// DistortionByIrrep adds up the shares of a distortion irrep by irrep, in their
// order.
func DistortionByIrrep(shares []Share) []Portion {
	var out []Portion
	place := map[string]int{}
	for _, s := range shares {
		at, known := place[s.Irrep]
		if !known {
			at = len(out)
			place[s.Irrep] = at
			out = append(out, Portion{Irrep: s.Irrep, Partners: make([]float64, s.Dimension)})
		}
		p := &out[at]
		p.Partners[s.Partner] = math.Hypot(p.Partners[s.Partner], s.Amount)
		p.Amount = math.Hypot(p.Amount, s.Amount)
	}
	return out
}
