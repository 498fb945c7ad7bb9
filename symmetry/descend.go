package symmetry

import (
	"math"
	"sort"
	"strings"

	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"

	"lobewright/symmetry/message"
)

// A Descent is one way in which a subgroup lies in a group, with what becomes
// of the irreps there.
type Descent struct {
	Group, Subgroup *Setting
	// Operations are the indices in Group of the operations kept, rising.
	Operations []int
	// Rotation takes the group's frame to the subgroup's. It is E where the
	// subgroup can be written in the group's axes; else the smallest turn, of
	// those to a standard frame of the subgroup.
	Rotation mgl64.Mat3
	// Images[r] is the index in Subgroup of operation Operations[r].
	Images []int
	// Correlation has the content of each irrep of Group, in its order.
	Correlation [][]Content
	// Partners has one d×d orthogonal matrix an irrep of Group: column k is
	// partner k as a combination of the subgroup's partners, which stand in
	// the order of Correlation, copy by copy.
	Partners []*mat.Dense
}

// Descend writes a subgroup, given by the indices of its operations in a
// finite group, in its own standard frame and correlates the irreps by the
// restriction of their matrices. It returns an error if the operations form no
// group.
func (s *Setting) Descend(operations []int) (*Descent, error) {
	set := newOpSet(s.Order())
	for _, o := range operations {
		set.add(o)
	}
	if !set.has(0) || s.generated(operations...).size() != set.size() {
		return nil, message.Errorf("these operations of %s form no group", s.Symbol)
	}
	list, err := s.placements(set)
	if err != nil {
		return nil, err
	}
	best := list[0]
	for _, p := range list {
		if p.score() > best.score()+1e-12 {
			best = p
		}
	}
	return s.descend(best), nil
}

// A placement is a subgroup with one of its standard frames.
type placement struct {
	kind       kind
	operations []int
	turn       mgl64.Mat3 // from the group's frame to the subgroup's
}

// score is higher for smaller turns; of equal ones for that which leaves z,
// then x, the nearer.
func (p placement) score() float64 {
	t := p.turn
	return t.Trace() + 1e-3*t.At(2, 2) + 1e-6*t.At(0, 0) + 1e-8*t.At(0, 1) + 1e-9*t.At(0, 2)
}

// placements lists the standard frames of a subgroup.
func (s *Setting) placements(set opSet) ([]placement, error) {
	operations := set.members()
	k, turns, err := s.settingsOf(operations)
	if err != nil {
		return nil, err
	}
	standard := k.elements()
	var out []placement
	for _, t := range turns {
		fits := true
		for _, o := range operations {
			m := t.Mul3(s.Operations[o].Matrix).Mul3(t.Transpose())
			in := false
			for _, q := range standard {
				in = in || equalTo(q, m, 1e-6)
			}
			fits = fits && in
		}
		if fits {
			out = append(out, placement{k, operations, t})
		}
	}
	if out == nil {
		panic("symmetry: no frame for a subgroup " + k.symbol() + " of " + s.Symbol)
	}
	return out, nil
}

// Renamings lists the same subgroup in its standard frames, as far as its classes
// have other names there, and with them the irreps: D2h can be laid with any of
// its axes along z. The descent itself comes first, the others by the turn.
func (d *Descent) Renamings() ([]*Descent, error) {
	set := newOpSet(d.Group.Order())
	for _, o := range d.Operations {
		set.add(o)
	}
	list, err := d.Group.placements(set)
	if err != nil {
		return nil, err
	}
	sort.SliceStable(list, func(a, b int) bool { return list[a].score() > list[b].score()+1e-12 })
	names := func(images []int) string {
		key := ""
		for _, i := range images {
			key += d.Subgroup.Classes[d.Subgroup.Operations[i].Class].Name + " "
		}
		return key
	}
	out := []*Descent{d}
	known := map[string]bool{names(d.Images): true}
	for _, p := range list {
		if key := names(d.Group.images(p, d.Subgroup)); !known[key] {
			known[key] = true
			out = append(out, d.Group.descend(p))
		}
	}
	return out, nil
}

// images are the operations of the subgroup as it stands in its standard frame.
func (s *Setting) images(p placement, subgroup *Setting) []int {
	var out []int
	for _, o := range p.operations {
		m := p.turn.Mul3(s.Operations[o].Matrix).Mul3(p.turn.Transpose())
		out = append(out, subgroup.find(func(q Operation) bool { return equalTo(q.Matrix, m, 1e-6) }))
	}
	return out
}

// descend correlates the irreps for one placement.
func (s *Setting) descend(p placement) *Descent {
	d := &Descent{Group: s, Subgroup: newSetting(p.kind), Operations: p.operations, Rotation: p.turn}
	d.Images = s.images(p, d.Subgroup)
	for i := range s.Irreps {
		content, partners := d.restrict(&s.Irreps[i])
		d.Correlation = append(d.Correlation, content)
		d.Partners = append(d.Partners, partners)
	}
	return d
}

// settingsOf recognizes a subgroup and lists rotations that take the group's
// frame to standard frames of the subgroup.
func (s *Setting) settingsOf(operations []int) (kind, []mgl64.Mat3, error) {
	place := map[int]int32{}
	for i, o := range operations {
		place[o] = int32(i)
	}
	elements := make([]*element, len(operations))
	for i, o := range operations {
		e := &element{matrix: s.Operations[o].Matrix, improper: s.Operations[o].Turn.Improper}
		for _, p := range operations {
			e.permutation = append(e.permutation, place[s.Product(o, p)])
		}
		elements[i] = e
	}
	rec, ok := recognize(elements)
	if !ok {
		return kind{}, nil, message.Errorf("a subgroup of %s was not recognized", s.Symbol)
	}
	base := orthonormal(rec.axes())
	var turns []mgl64.Mat3
	if rec.x == (mgl64.Vec3{}) {
		turns = freeFrames(rec)
	} else {
		f := framing{kind: rec.kind}
		for _, m := range rec.kind.elements() {
			if m.Det() > 0 {
				f.proper = append(f.proper, m)
			}
		}
		for _, t := range f.turns() {
			turns = append(turns, t.Mul3(base))
			if rec.kind.icosahedral() {
				turns = append(turns, t.Mul3(turnAboutZ(1, 4)).Mul3(base))
			}
		}
	}
	for i := range turns {
		turns[i] = orthonormal(turns[i])
	}
	return rec.kind, turns, nil
}

// freeFrames are the frames of a group that leaves x open (all that does not
// make them differ from the group's own axes by more than they must).
func freeFrames(rec recognized) []mgl64.Mat3 {
	if rec.z == (mgl64.Vec3{}) { // C1, Ci
		return []mgl64.Mat3{mgl64.Ident3()}
	}
	var out []mgl64.Mat3
	for _, z := range []mgl64.Vec3{rec.z, rec.z.Mul(-1)} {
		if math.Abs(z.Z()-1) < 1e-12 {
			return []mgl64.Mat3{mgl64.Ident3()}
		}
		if z.Z() < -1e-9 {
			continue
		}
		// The smallest rotation that takes the group's z to this one.
		out = append(out, mgl64.QuatBetweenVectors(z, mgl64.Vec3{0, 0, 1}).Mat4().Mat3())
	}
	return out
}

// restrict finds what an irrep of the group holds in the subgroup.
func (d *Descent) restrict(ir *Irrep) ([]Content, *mat.Dense) {
	kept := make([]*mat.Dense, len(d.Operations))
	for r, o := range d.Operations {
		kept[d.Images[r]] = ir.Matrices[o]
	}
	return d.Subgroup.split(kept)
}

// split takes a representation, by one matrix an operation, apart by the
// projections P_k1 = (d/h) Σ_R D_k1(R)·R: first partners are an orthonormal
// basis of the image of P_11, made from the representation's functions in
// their order; P_k1 gives the others of the same copy. Row l of the result is
// partner l of the content, in its order; so column k is function k as a
// combination of the partners.
func (s *Setting) split(representation []*mat.Dense) ([]Content, *mat.Dense) {
	n, _ := representation[0].Dims()
	partners := mat.NewDense(n, n, nil)
	row := 0
	var content []Content
	for i := range s.Irreps {
		sub := &s.Irreps[i]
		projections := projections(sub, representation)
		copies := 0
		var taken []*mat.VecDense
		for seed := 0; seed < n; seed++ {
			first := mat.VecDenseCopyOf(projections[0].ColView(seed))
			for _, v := range taken {
				first.AddScaledVec(first, -mat.Dot(v, first), v)
			}
			norm := mat.Norm(first, 2)
			if norm < negligible {
				continue
			}
			if largest(first) < 0 {
				norm = -norm
			}
			first.ScaleVec(1/norm, first)
			for p := range projections {
				v := mat.NewVecDense(n, nil)
				v.MulVec(projections[p], first)
				for k := 0; k < n; k++ {
					partners.Set(row, k, tidyZero(tidy(v.AtVec(k))))
				}
				row++
				// In a complex pair P_11 holds both partners of a copy.
				if p == 0 || sub.ComplexPair {
					taken = append(taken, v)
				}
			}
			copies++
		}
		if copies > 0 {
			content = append(content, Content{*sub, copies})
		}
	}
	if row != n {
		panic("symmetry: functions lost in " + s.Symbol)
	}
	return content, partners
}

// projections are the P_k1 of an irrep in a representation.
func projections(ir *Irrep, representation []*mat.Dense) []*mat.Dense {
	n, _ := representation[0].Dims()
	out := make([]*mat.Dense, ir.Dimension)
	for p := range out {
		out[p] = mat.NewDense(n, n, nil)
		for r, m := range representation {
			var term mat.Dense
			term.Scale(ir.Matrices[r].At(p, 0)*float64(ir.Dimension)/float64(len(representation)), m)
			out[p].Add(out[p], &term)
		}
	}
	return out
}

func tidyZero(v float64) float64 {
	if math.Abs(v) < 1e-15 {
		return 0
	}
	return v
}

// largest is the entry of the largest size, the first among equals.
func largest(v *mat.VecDense) float64 {
	best := 0.0
	for i := 0; i < v.Len(); i++ {
		if math.Abs(v.AtVec(i)) > math.Abs(best)+1e-9 {
			best = v.AtVec(i)
		}
	}
	return best
}

// Descents lists the ways in which subgroups of a symbol lie in a finite
// group, one a conjugacy class, those whose frame turns least first; of the
// subgroups of a class the one is taken whose frame turns least. It returns an
// error that lists the subgroups there are if there is none.
func (s *Setting) Descents(symbol string) ([]*Descent, error) {
	k, err := parseSymbol(symbol)
	if err != nil {
		return nil, err
	}
	sets, err := s.subgroups()
	if err != nil {
		return nil, err
	}
	var chosen []placement
	found := map[string]bool{}
	var symbols []string
	for _, set := range sets {
		sub, _, err := s.settingsOf(set.members())
		if err != nil {
			return nil, err
		}
		if name := sub.symbol(); !found[name] {
			found[name] = true
			symbols = append(symbols, name)
		}
		if sub != k {
			continue
		}
		best := placement{}
		for _, c := range s.conjugates(set) {
			list, err := s.placements(c)
			if err != nil {
				return nil, err
			}
			for _, p := range list {
				if best.operations == nil || p.score() > best.score()+1e-12 {
					best = p
				}
			}
		}
		chosen = append(chosen, best)
	}
	if chosen == nil {
		return nil, message.Errorf("%s is no subgroup of %s: its subgroups are %s", k.symbol(), s.Symbol, strings.Join(symbols, " "))
	}
	sort.SliceStable(chosen, func(a, b int) bool { return chosen[a].score() > chosen[b].score()+1e-9 })
	out := make([]*Descent, len(chosen))
	for i, p := range chosen {
		out[i] = s.descend(p)
	}
	return out, nil
}
