package work

import (
	"context"
	"math"

	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"

	"lobewright/app/study"
	"lobewright/orbitals"
	"lobewright/symmetry"
	"lobewright/symmetry/message"
)

// A Play is an operation with what it makes of the chosen function or group
// orbital.
type Play struct {
	Group     *Group
	Operation Operation
	// Sites[k] is the atom to which atom k goes, −1 for a spectator without
	// image.
	Sites []int
	// Subject is what the operation is played on. With study.NoSubject there
	// is only the operation, and all that follows is empty.
	Subject study.Subject
	Basis   *Basis
	// Function counts from 0; it is the subject or −1.
	Function int
	// Orbital is the subject or nil.
	Orbital *orbitals.GroupOrbital
	// Irrep is that of Orbital.
	Irrep symmetry.Irrep
	// Start and Image are coefficients, one a function of the basis, before and
	// after.
	Start, Image []float64
	// Terms is Image without what is zero: φ3, −φ2, 1/2 φ1 − √3/2 φ4.
	Terms []orbitals.Term
	// Partners is the image of a group orbital in terms of the partners of its
	// copy, by partner from 0.
	Partners []orbitals.Term
	// Matrix is what the operation does to these partners: column k is the
	// image of partner k. It is nil for a function.
	Matrix *mat.Dense
}

// Play carries out the operation of a study on its subject. A study without a
// subject or without a basis gets the operation alone.
func (w *Work) Play(ctx context.Context, s study.Study) (*Play, error) {
	var basis *Basis
	var all *Orbitals
	var group *Group
	var err error
	switch subjectOf(s) {
	case study.SubjectFunction:
		if basis, err = w.Basis(ctx, s); err == nil {
			group = basis.Group
		}
	case study.SubjectOrbital:
		if all, err = w.Orbitals(ctx, s); err == nil {
			group = all.Group
		}
	default:
		group, err = w.Group(ctx, s)
	}
	if err != nil {
		return nil, err
	}
	w.mu.Lock()
	defer w.mu.Unlock()
	return w.playOf(ctx, group, basis, all, s)
}

// subjectOf is the subject in force; without a basis there is none.
func subjectOf(s study.Study) study.Subject {
	if len(s.Basis) == 0 {
		return study.NoSubject
	}
	return s.Projection.TheSubject()
}

type playInputs struct {
	*Group
	basis      *Basis
	orbitals   *Orbitals
	operation  string
	angle      float64
	projection study.Projection
}

// playOf plays on the orbital that is chosen of all, or else on the function
// that is chosen of the basis, or else on nothing.
func (w *Work) playOf(ctx context.Context, group *Group, basis *Basis, all *Orbitals, s study.Study) (*Play, error) {
	inputs := playInputs{group, basis, all, s.Operation, angleOf(s), study.Projection{}}
	switch {
	case all != nil:
		inputs.projection = study.Projection{Irrep: s.Projection.Irrep, Copy: max(1, s.Projection.Copy), Partner: max(1, s.Projection.Partner)}
	case basis != nil:
		inputs.projection = study.Projection{Function: s.Projection.Function}
	}
	return w.plays.get(inputs, func() (*Play, error) {
		operation, err := group.Operation(s.Operation, s.Angle)
		if err != nil {
			return nil, blame(StagePlay, ConcernOperation, err)
		}
		p := &Play{Group: group, Operation: operation, Function: -1, Sites: sitesUnder(group, operation)}
		switch {
		case all != nil:
			err = w.playOrbital(ctx, all, s.Projection, p)
		case basis != nil:
			err = w.playFunction(ctx, basis, s.Projection.Function, p)
		}
		return p, err
	})
}

// sitesUnder tells where an operation carries the atoms.
func sitesUnder(g *Group, o Operation) []int {
	if o.Index >= 0 {
		return g.Sites.Permutations[o.Index]
	}
	out := make([]int, len(g.Sites.Positions))
	for k, from := range g.Sites.Positions {
		out[k] = -1
		to := o.Matrix.Mul3x1(from)
		nearest := g.Fit.Tolerance // that of spectators; the core is exact
		for j, p := range g.Sites.Positions {
			if d := p.Sub(to).Len(); g.Sites.Elements[j] == g.Sites.Elements[k] && d <= nearest {
				out[k], nearest = j, d
			}
		}
	}
	return out
}

func (w *Work) playFunction(ctx context.Context, basis *Basis, function int, p *Play) error {
	if err := checkFunction(basis, function); err != nil {
		return blame(StagePlay, ConcernFunction, err)
	}
	images, err := w.imager(ctx, basis, p)
	if err != nil {
		return err
	}
	terms, err := images(function - 1)
	if err != nil {
		return err
	}
	n := len(basis.Functions)
	p.Subject, p.Basis, p.Function = study.SubjectFunction, basis, function-1
	p.Start, p.Image = make([]float64, n), make([]float64, n)
	p.Start[p.Function] = 1
	for _, t := range terms {
		p.Image[t.Function] = t.Coefficient
	}
	p.Terms = terms
	return nil
}

func (w *Work) playOrbital(ctx context.Context, all *Orbitals, projection study.Projection, p *Play) error {
	orbital, err := all.Orbital(projection)
	if err != nil {
		return err
	}
	images, err := w.imager(ctx, all.Basis, p)
	if err != nil {
		return err
	}
	p.Subject, p.Basis, p.Orbital, p.Start = study.SubjectOrbital, all.Basis, orbital, orbital.Coefficients
	p.Irrep = all.Irreps[orbital.Irrep]
	if p.Image, err = apply(images, orbital.Coefficients); err != nil {
		return err
	}
	p.Terms = termsOf(p.Image)
	if p.Matrix, err = matrixAmong(all, orbital, p.Operation, images); err != nil {
		return err
	}
	d, _ := p.Matrix.Dims()
	column := make([]float64, d)
	p.Partners = termsOf(mat.Col(column, orbital.Partner, p.Matrix))
	return nil
}

// An imager gives what an operation makes of a function of the basis.
type imager func(function int) ([]orbitals.Term, error)

func (w *Work) imager(ctx context.Context, basis *Basis, p *Play) (imager, error) {
	if p.Operation.Index < 0 {
		return continuous(basis, p.Operation.Matrix, p.Sites), nil
	}
	representation, err := w.representationOf(ctx, basis)
	if err != nil {
		return nil, err
	}
	return func(function int) ([]orbitals.Term, error) {
		return representation.Image(p.Operation.Index, function), nil
	}, nil
}

// continuous makes images under an operation that is in no list: the vector of
// the function is turned and resolved into the functions of the site to which
// it is carried.
func continuous(basis *Basis, matrix mgl64.Mat3, sites []int) imager {
	shells := make(map[int]*mat.Dense)
	return func(function int) ([]orbitals.Term, error) {
		f := basis.Functions[function]
		if shells[f.Shell] == nil {
			shells[f.Shell] = orbitals.Rotation(f.Shell, matrix)
		}
		var turned mat.VecDense
		turned.MulVec(shells[f.Shell], mat.NewVecDense(len(f.Vector), f.Vector))
		var terms []orbitals.Term
		square := 0.0
		for j, g := range basis.Functions {
			if g.Site != sites[f.Site] || g.Shell != f.Shell {
				continue
			}
			c := snapped(mat.Dot(mat.NewVecDense(len(g.Vector), g.Vector), &turned))
			square += c * c
			if c != 0 {
				terms = append(terms, orbitals.Term{Function: j, Coefficient: c})
			}
		}
		if math.Abs(square-1) > 1e-9 {
			return nil, message.Errorf("the operation carries φ%d out of the basis", function+1)
		}
		return terms, nil
	}
}

// apply carries a combination of functions.
func apply(images imager, coefficients []float64) ([]float64, error) {
	out := make([]float64, len(coefficients))
	for i, c := range coefficients {
		if c == 0 {
			continue
		}
		terms, err := images(i)
		if err != nil {
			return nil, err
		}
		for _, t := range terms {
			out[t.Function] += c * t.Coefficient
		}
	}
	for i, c := range out {
		out[i] = snapped(c)
	}
	return out, nil
}

// matrixAmong is what an operation does to the partners of the copy to which an
// orbital belongs. A finite group has it in its irrep; else it follows from the
// partners themselves.
func matrixAmong(all *Orbitals, orbital *orbitals.GroupOrbital, o Operation, images imager) (*mat.Dense, error) {
	irrep := all.Irreps[orbital.Irrep]
	if o.Index >= 0 {
		return irrep.Matrices[o.Index], nil
	}
	partners := make([][]float64, irrep.Dimension)
	for _, g := range all.Projection.Orbitals {
		if g.Irrep == orbital.Irrep && g.Copy == orbital.Copy {
			partners[g.Partner] = g.Coefficients
		}
	}
	out := mat.NewDense(irrep.Dimension, irrep.Dimension, nil)
	for k, partner := range partners {
		image, err := apply(images, partner)
		if err != nil {
			return nil, err
		}
		for l, other := range partners {
			sum := 0.0
			for i, c := range other {
				sum += c * image[i]
			}
			out.Set(l, k, snapped(sum))
		}
	}
	return out, nil
}

func termsOf(coefficients []float64) []orbitals.Term {
	var out []orbitals.Term
	for i, c := range coefficients {
		if math.Abs(c) > roundingError {
			out = append(out, orbitals.Term{Function: i, Coefficient: c})
		}
	}
	return out
}

// roundingError bounds what a few products leave of whole numbers.
const roundingError = 1e-12

// snapped is x without rounding error about a whole number.
func snapped(x float64) float64 {
	if whole := math.Round(x); math.Abs(x-whole) < roundingError {
		return whole + 0
	}
	return x
}
