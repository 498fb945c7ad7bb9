package work

import (
	"fmt"
	"math"
	"strings"

	"gonum.org/v1/gonum/mat"

	"lobewright/app/study"
	"lobewright/orbitals"
	"lobewright/symmetry"
	"lobewright/symmetry/message"
)

// turnKey is what of a study turns partners and mixes copies; empty if nothing
// does.
func turnKey(s study.Study) string {
	if len(s.Turn) == 0 && len(s.Mixing) == 0 || s.Projection.Irrep == "" {
		return ""
	}
	var b strings.Builder
	b.WriteString(s.Projection.Irrep)
	for _, list := range [][]study.PlaneRotation{s.Turn, s.Mixing} {
		b.WriteByte('\n')
		for _, r := range list {
			fmt.Fprintf(&b, "%d,%d,%v;", r.From, r.To, r.Angle)
		}
	}
	return b.String()
}

// Rotation is the orthogonal n×n matrix of plane rotations, carried out in
// their order: row k is the new function k in terms of the old ones. The error
// says which rotation names a function beyond n; has says that there are n:
// "Eu has partners 1 to 2".
func Rotation(n int, rotations []study.PlaneRotation, has func(n int) message.Text) (*mat.Dense, error) {
	out := mat.NewDense(n, n, nil)
	for i := range n {
		out.Set(i, i, 1)
	}
	for _, r := range rotations {
		if from, to := r.From, r.To; from < 1 || to < 1 || from > n || to > n || from == to {
			return nil, message.Errorf("%d cannot be turned into %d: %s", from, to, has(n))
		}
		sin, cos := sincos(r.Angle)
		f, t := r.From-1, r.To-1
		for k := range n {
			x, y := out.At(f, k), out.At(t, k)
			out.Set(f, k, snapped(cos*x+sin*y))
			out.Set(t, k, snapped(cos*y-sin*x))
		}
	}
	return out, nil
}

func hasPartners(irrep symmetry.Irrep) func(n int) message.Text {
	return func(n int) message.Text { return message.Words("%s has partners 1 to %d", irrep.Label, n) }
}

func hasCopies(irrep symmetry.Irrep) func(n int) message.Text {
	return func(n int) message.Text { return message.Words("%s has copies 1 to %d", irrep.Label, n) }
}

// turnedIrrep is an irrep in the partners that rotations make.
func turnedIrrep(irrep symmetry.Irrep, turn []study.PlaneRotation) (symmetry.Irrep, error) {
	if len(turn) == 0 {
		return irrep, nil
	}
	rows, err := Rotation(irrep.Dimension, turn, hasPartners(irrep))
	if err != nil {
		return irrep, err
	}
	return irrep.WithPartners(rows), nil
}

type turnedInputs struct {
	*Orbitals
	turn string
}

// turnedOf are the orbitals as a study turns and mixes them. What cannot be
// turned so is given back as it is, with the error.
func (w *Work) turnedOf(all *Orbitals, s study.Study) (*Orbitals, error) {
	key := turnKey(s)
	if key == "" {
		return all, nil
	}
	turned, err := w.turned.get(turnedInputs{all, key}, func() (*Orbitals, error) {
		return all.Turned(s.Projection.Irrep, s.Turn, s.Mixing)
	})
	if err != nil {
		return all, err
	}
	return turned, nil
}

// Turned is the same set with the partners of one irrep turned into each other,
// in all its copies, and its copies mixed, in all partners. Coefficients, the
// matrices of the irrep and the functions it is like follow. The error is a
// *Problem: there is no such irrep, partner or copy.
func (o *Orbitals) Turned(label string, turn, mixing []study.PlaneRotation) (*Orbitals, error) {
	a, err := FindIrrep(label, o.Fit.Setting.Symbol, o.Irreps)
	if err != nil {
		return nil, blame(StageOrbital, ConcernIrrep, err)
	}
	irrep := o.Irreps[a]
	rows, err := Rotation(irrep.Dimension, turn, hasPartners(irrep))
	if err != nil {
		return nil, blame(StageOrbital, ConcernPartner, err)
	}
	if o.Content[a] == 0 {
		p := *o.Projection
		p.Irreps = append([]symmetry.Irrep(nil), o.Irreps...)
		p.Irreps[a] = irrep.WithPartners(rows)
		return &Orbitals{Basis: o.Basis, Projection: &p, Plain: o}, nil
	}
	mix, err := Rotation(o.Content[a], mixing, hasCopies(irrep))
	if err != nil {
		return nil, blame(StageOrbital, ConcernCopy, err)
	}
	p := *o.Projection
	p.Irreps = append([]symmetry.Irrep(nil), o.Irreps...)
	p.Irreps[a] = irrep.WithPartners(rows)
	p.Orbitals = append([]orbitals.GroupOrbital(nil), o.Projection.Orbitals...)
	set := o.of(a)
	for c := range set {
		for k := range set[c] {
			sum := make([]float64, len(o.Functions))
			orbit := set[c][k].Orbit
			for from := range set {
				share := mix.At(c, from)
				if share == 0 {
					continue
				}
				if set[from][k].Orbit != orbit {
					orbit = -1
				}
				for l := range set[from] {
					addTo(sum, share*rows.At(k, l), set[from][l].Coefficients)
				}
			}
			for i, x := range sum {
				sum[i] = snapped(x)
			}
			at := o.index(a, c, k)
			p.Orbitals[at].Coefficients, p.Orbitals[at].Orbit = sum, orbit
		}
	}
	return &Orbitals{Basis: o.Basis, Projection: &p, Plain: o}, nil
}

// of are the group orbitals of an irrep, by copy and partner.
func (o *Orbitals) of(irrep int) [][]*orbitals.GroupOrbital {
	out := make([][]*orbitals.GroupOrbital, o.Content[irrep])
	for c := range out {
		out[c] = make([]*orbitals.GroupOrbital, o.Irreps[irrep].Dimension)
	}
	for i := range o.Projection.Orbitals {
		if g := &o.Projection.Orbitals[i]; g.Irrep == irrep {
			out[g.Copy][g.Partner] = g
		}
	}
	return out
}

// Partners are the partners of one copy of an irrep, from 0.
func (o *Orbitals) Partners(irrep, copy int) []*orbitals.GroupOrbital { return o.of(irrep)[copy] }

// index is the place of a group orbital in the list, −1 if it is not there.
func (o *Orbitals) index(irrep, copy, partner int) int {
	for i, g := range o.Projection.Orbitals {
		if g.Irrep == irrep && g.Copy == copy && g.Partner == partner {
			return i
		}
	}
	return -1
}

func addTo(sum []float64, factor float64, v []float64) {
	if factor == 0 {
		return
	}
	for i, x := range v {
		sum[i] += factor * x
	}
}

// unturned are the orbitals before anything was turned.
func (o *Orbitals) unturned() *Orbitals {
	if o.Plain != nil {
		return o.Plain
	}
	return o
}

// LastTurn takes the last rotation off a list if it is one of a pair, from 1,
// and returns its angle (degrees), 0 if it is not.
func LastTurn(list []study.PlaneRotation, from, to int) (before []study.PlaneRotation, angle float64) {
	if n := len(list); n > 0 && list[n-1].From == from && list[n-1].To == to {
		return list[:n-1], list[n-1].Angle
	}
	return list, 0
}

// WithTurn is a list of rotations that ends with that of a pair, from 1, by an
// angle in degrees: the last one of this pair is replaced. A turn by 0 is left
// out.
func WithTurn(list []study.PlaneRotation, from, to int, angle float64) []study.PlaneRotation {
	before, _ := LastTurn(list, from, to)
	angle = OneTurn(angle)
	out := append([]study.PlaneRotation(nil), before...)
	if angle != 0 {
		out = append(out, study.PlaneRotation{From: from, To: to, Angle: angle})
	}
	return out
}

// TurnMarks are the marks of the rotation of a pair, from 1, that ends the turn
// of a study, or would. Their angles count from where the rotations before it
// have left the partners.
func (o *Orbitals) TurnMarks(s study.Study, from, to int) ([]Mark, error) {
	before, _ := LastTurn(s.Turn, from, to)
	base, err := o.unturned().Turned(s.Projection.Irrep, before, nil)
	if err != nil {
		return nil, err
	}
	a, err := FindIrrep(s.Projection.Irrep, o.Fit.Setting.Symbol, base.Irreps)
	if err != nil {
		return nil, err
	}
	return base.Marks(a, from-1, to-1), nil
}

// OneTurn is an angle in degrees from 0 to below 360; one that is there already
// is not touched by rounding.
func OneTurn(degrees float64) float64 {
	if degrees >= 0 && degrees < 360 {
		return degrees
	}
	return math.Mod(math.Mod(degrees, 360)+360, 360)
}
