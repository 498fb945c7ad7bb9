package work

import (
	"context"
	"fmt"
	"math"
	"slices"

	"github.com/go-gl/mathgl/mgl64"
	"gonum.org/v1/gonum/mat"

	"lobewright/app/study"
	"lobewright/orbitals"
	"lobewright/symmetry"
	"lobewright/symmetry/message"
)

// A Match pairs group orbitals with the functions of a central atom that
// transform exactly alike: only these can combine, partner by partner.
type Match struct {
	// Orbitals are the group orbitals.
	Orbitals *Orbitals
	// Central is the atom, from 0; −1 where there is none, for the reason None.
	Central int
	None    error
	// Chosen says that a person chose the atom.
	Chosen bool
	// Functions are the s, p, d and f functions of the central atom, projected
	// like a basis: a copy is of one shell.
	Functions *Orbitals
	// Pairs has one entry a copy of the group orbitals, in their order.
	Pairs []Pair
	// Lone are the copies of Functions that find no group orbital.
	Lone []CentralCopy
}

// A Pair is one copy of group orbitals with what goes with it.
type Pair struct {
	Irrep, Copy int // of the group orbitals
	// Central are the copies that go with it: none if it is non-bonding by
	// symmetry.
	Central []CentralCopy
	// Own says that the copy lives on the central atom itself, and is not
	// matched.
	Own bool
}

// A CentralCopy is a copy of functions of the central atom. Partner k goes with
// partner k of the group orbital, and with no other; in a pair of complex
// conjugates, where partners can be turned freely, with both.
type CentralCopy struct {
	Irrep, Copy int // of Match.Functions
	// Phase is +1 or −1, the factor of the central functions with which they
	// and the group orbital face each other with equal signs, so that they
	// combine to a bonding orbital. It is 0 for a Lone copy.
	Phase int
}

// Match finds which functions of the central atom go with which group orbitals.
func (w *Work) Match(ctx context.Context, s study.Study) (*Match, error) {
	o, err := w.Orbitals(ctx, s)
	if err != nil {
		return nil, err
	}
	w.mu.Lock()
	defer w.mu.Unlock()
	return w.matchOf(ctx, o, s)
}

type matchInputs struct {
	*Orbitals
	central int
	turn    string
}

func (w *Work) matchOf(ctx context.Context, o *Orbitals, s study.Study) (*Match, error) {
	return w.matches.get(matchInputs{o, s.Central, turnKey(s)}, func() (*Match, error) {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		return NewMatch(o, s)
	})
}

// NewMatch matches group orbitals with the functions of the atom that a study
// chooses as the central one, or, without a choice, of the atom that no
// operation moves (of several the one with the most bonds, first those that
// carry no functions of the basis). Where there is no such atom the Match says
// why. Turned partners are matched with functions turned alike.
func NewMatch(o *Orbitals, s study.Study) (*Match, error) {
	m := &Match{Orbitals: o, Chosen: s.Central > 0}
	m.Central, m.None = centralAtom(o.Basis, s.Central)
	if m.None != nil {
		m.Central = -1
		return m, nil
	}
	var err error
	if m.Functions, err = centralFunctions(o.Group, m.Central); err != nil {
		return nil, err
	}
	if _, err := FindIrrep(s.Projection.Irrep, "", m.Functions.Irreps); err == nil && len(s.Turn) > 0 {
		if m.Functions, err = m.Functions.Turned(s.Projection.Irrep, s.Turn, nil); err != nil {
			return nil, err
		}
	}
	m.pair()
	return m, nil
}

// centralFunctions are the functions of an atom that no operation moves.
func centralFunctions(g *Group, atom int) (*Orbitals, error) {
	choice, err := orbitals.ParseChoice(fmt.Sprintf("%d:s,p,d,f", atom+1))
	if err != nil {
		return nil, err
	}
	basis, err := orbitals.NewBasis(g.Sites, choice)
	if err != nil {
		return nil, err
	}
	projection, err := basis.Project()
	if err != nil {
		return nil, err
	}
	return &Orbitals{Basis: &Basis{g, basis}, Projection: projection}, nil
}

func (m *Match) pair() {
	used := map[[2]int]bool{}
	for a, irrep := range m.Orbitals.Irreps {
		there := slices.IndexFunc(m.Functions.Irreps, func(other symmetry.Irrep) bool { return other.Label == irrep.Label })
		for c, partners := range m.Orbitals.of(a) {
			pair := Pair{Irrep: a, Copy: c, Own: m.own(partners)}
			if there >= 0 && !pair.Own {
				for k, functions := range m.Functions.of(there) {
					used[[2]int{there, k}] = true
					pair.Central = append(pair.Central, CentralCopy{there, k, m.phase(partners, functions)})
				}
			}
			m.Pairs = append(m.Pairs, pair)
		}
	}
	for a, copies := range m.Functions.Content {
		for c := range copies {
			if !used[[2]int{a, c}] {
				m.Lone = append(m.Lone, CentralCopy{Irrep: a, Copy: c})
			}
		}
	}
}

// own tells whether all partners live on the central atom.
func (m *Match) own(partners []*orbitals.GroupOrbital) bool {
	for _, p := range partners {
		for i, c := range p.Coefficients {
			if math.Abs(c) > roundingError && m.Orbitals.Functions[i].Site != m.Central {
				return false
			}
		}
	}
	return true
}

// phase is the sign of the overlap of partners with functions that transform
// alike.
func (m *Match) phase(partners, functions []*orbitals.GroupOrbital) int {
	if m.overlap(partners[0].Coefficients, functions[0].Coefficients) < -1e-9 {
		return -1
	}
	return 1
}

// bondWeights are the overlaps of σ, π, δ and φ kind that phase goes by. Only
// their order matters, and that one is far smaller than the one before: common
// practice, as in the angular overlap model.
var bondWeights = [...]float64{1, 0.4, 0.1, 0.02}

// Phase is +1 or −1, the factor of a combination of functions of an atom with which
// it and a combination of a basis that transforms alike face each other with equal
// signs, as CentralCopy.Phase tells it.
func Phase(group *Basis, combination []float64, atom int, functions *Basis, central []float64) int {
	m := Match{Orbitals: &Orbitals{Basis: group}, Central: atom, Functions: &Orbitals{Basis: functions}}
	if m.overlap(combination, central) < -1e-9 {
		return -1
	}
	return 1
}

// overlap is a model of the overlap of a combination of the basis with one of the
// central functions. On the line between two atoms, with z from the first to
// the second, functions of equal m overlap, and no others. With positive factors
// of the polynomials the one on the first atom is positive toward the second
// in the direction in which cos mφ is, and the one of shell l on the second has
// the sign (−1)^(l−m) toward the first.
func (m *Match) overlap(group, central []float64) float64 {
	sum := 0.0
	to := m.Functions.Group.Sites.Positions[m.Central]
	for i, c := range group {
		f := m.Orbitals.Functions[i]
		line := to.Sub(m.Orbitals.Group.Sites.Positions[f.Site])
		if c == 0 || line.Len() < 1e-6 {
			continue
		}
		local := alongZ(line.Normalize())
		a := turnedVector(f, local)
		for j, d := range central {
			g := m.Functions.Functions[j]
			if d == 0 {
				continue
			}
			b := turnedVector(g, local)
			for p, x := range a {
				order := orbitals.Order(f.Shell, p)
				for q, y := range b {
					if orbitals.Order(g.Shell, q) == order {
						sum += c * d * x * y * facing(g.Shell, order)
					}
				}
			}
		}
	}
	return sum
}

func facing(shell, order int) float64 {
	order = max(order, -order)
	if (shell-order)%2 != 0 {
		return -bondWeights[order]
	}
	return bondWeights[order]
}

// alongZ is a rotation that takes a unit vector to z.
func alongZ(v mgl64.Vec3) mgl64.Mat3 {
	across := mgl64.Vec3{1, 0, 0}
	if math.Abs(v[0]) > 0.7 {
		across = mgl64.Vec3{0, 1, 0}
	}
	x := across.Sub(v.Mul(across.Dot(v))).Normalize()
	return mgl64.Mat3FromRows(x, v.Cross(x), v)
}

func turnedVector(f orbitals.Function, by mgl64.Mat3) []float64 {
	var out mat.VecDense
	out.MulVec(orbitals.Rotation(f.Shell, by), mat.NewVecDense(len(f.Vector), f.Vector))
	return out.RawVector().Data
}

// CentralAtoms are the atoms that no operation moves, from 0, rising: those
// whose functions are an orbit of one.
func (g *Group) CentralAtoms() []int {
	var out []int
	for k := range g.Sites.Positions {
		if g.mover(k) < 0 && (!g.Fit.Setting.Infinite() || g.onAxis(k)) {
			out = append(out, k)
		}
	}
	return out
}

// mover is the first operation that moves an atom, −1 if none does.
func (g *Group) mover(atom int) int {
	return slices.IndexFunc(g.Sites.Permutations, func(p []int) bool { return p[atom] != atom })
}

// onAxis tells whether an atom stays in place under the operations of an infinite
// group: in C∞v every atom does, else the one in the centre.
func (g *Group) onAxis(atom int) bool {
	const onSpot = 1e-4 // Å, as for sites
	return g.Fit.Setting.Symbol == "C∞v" || g.Sites.Positions[atom].Len() < onSpot
}

// centralAtom chooses the central atom; chosen counts from 1, 0 for no choice.
func centralAtom(b *Basis, chosen int) (int, error) {
	g := b.Group
	can := g.CentralAtoms()
	names := g.AtomNames()
	switch {
	case chosen > len(names):
		return -1, message.Errorf("atom %d does not exist; there are atoms 1 to %d", chosen, len(names))
	case len(can) == 0:
		return -1, message.Errorf("there is no central atom: the operations of %s leave no atom in its place", g.Fit.Setting.Symbol)
	case chosen > 0 && !slices.Contains(can, chosen-1):
		return -1, g.notCentral(chosen-1, can)
	case chosen > 0:
		return chosen - 1, nil
	}
	bonds := make([]int, len(names))
	for _, l := range g.Sites.Links {
		bonds[l[0]]++
		bonds[l[1]]++
	}
	carries := make([]bool, len(names))
	for _, f := range b.Functions {
		carries[f.Site] = true
	}
	best := can[0]
	for _, k := range can[1:] {
		if carries[best] != carries[k] {
			if carries[best] {
				best = k
			}
			continue
		}
		if bonds[k] > bonds[best] {
			best = k
		}
	}
	return best, nil
}

// notCentral says why an atom cannot be the central one, and which can.
func (g *Group) notCentral(atom int, can []int) error {
	names := g.AtomNames()
	var list []message.Text
	for _, k := range can {
		list = append(list, message.Words("%s", names[k]))
	}
	if n := len(list); n > 8 {
		list = append(list[:8:8], message.Words("%d more", n-8))
	}
	which := message.Join(list, ", ")
	if r := g.mover(atom); r >= 0 {
		image := message.Words("nowhere")
		if to := g.Sites.Permutations[r][atom]; to >= 0 {
			image = message.Words("to %s", names[to])
		}
		return message.Errorf("%s cannot be the central atom: %s carries it %s, so that its functions are no set by themselves; %s can",
			names[atom], g.Fit.Setting.Operations[r].Name, image, which)
	}
	return message.Errorf("%s cannot be the central atom, since it does not lie in the centre; %s can", names[atom], which)
}

// Names are those of the central functions, with the number of the valence shell
// of the element: "5s", "5px", "4dz2".
func (m *Match) Names() []string {
	out := make([]string, len(m.Functions.Functions))
	e := m.Functions.Group.Sites.Elements[m.Central]
	for i, f := range m.Functions.Functions {
		out[i] = fmt.Sprint(e.Valence(f.Shell), f.Name)
	}
	return out
}

// With are the coefficients of the central function that goes with a partner of
// a pair, among Functions, with the sign of its phase.
func (m *Match) With(c CentralCopy, partner int) []float64 {
	g := m.Functions.Partners(c.Irrep, c.Copy)[partner]
	out := slices.Clone(g.Coefficients)
	if c.Phase < 0 {
		for i, x := range out {
			if x != 0 {
				out[i] = -x
			}
		}
	}
	return out
}

// PairOf is the entry of a copy of group orbitals; nil if there is none.
func (m *Match) PairOf(irrep, copy int) *Pair {
	for i, p := range m.Pairs {
		if p.Irrep == irrep && p.Copy == copy {
			return &m.Pairs[i]
		}
	}
	return nil
}
