package work

import (
	"fmt"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/study"
	"lobewright/symmetry"
)

// An Exchange is another frame for a Group, with what everything in the frame
// in force is called there.
type Exchange struct {
	Frame symmetry.Frame
	// Fit is the group in that frame.
	Fit *symmetry.Fit
	// Names is nil for an infinite group, whose irreps are the same in every
	// frame.
	Names *symmetry.Exchange
}

// Exchanges lists every choice of axes that a rule in use gives for the group,
// the one in force first.
func (g *Group) Exchanges() []Exchange {
	var out []Exchange
	for _, frame := range g.Fit.Frames() {
		e := Exchange{Frame: frame, Fit: g.Fit.In(frame)}
		if !g.Fit.Setting.Infinite() {
			e.Names = symmetry.ExchangeNames(g.Fit.Setting, e.Fit.Setting, frame.Turn)
		}
		out = append(out, e)
	}
	return out
}

// Here is the frame in force as an Exchange with itself.
func (g *Group) Here() Exchange {
	e := Exchange{Frame: symmetry.Frame{Rule: g.Fit.Rule, Turn: mgl64.Ident3()}, Fit: g.Fit}
	if !g.Fit.Setting.Infinite() {
		e.Names = symmetry.ExchangeNames(g.Fit.Setting, g.Fit.Setting, e.Frame.Turn)
	}
	return e
}

// Held is the second frame that a study holds against the one in force; nil if
// it holds none. The error tells what is wrong with the choice.
func (g *Group) Held(h study.Held) (*Exchange, error) {
	if h.Frame == "" && h.Z == "" && h.X == "" {
		return nil, nil
	}
	fit, err := g.framed(h.Frame, h.Z, h.X)
	if err != nil {
		return nil, err
	}
	turn := fit.Rotation.Mul3(g.Fit.Rotation.Transpose())
	e := &Exchange{Frame: symmetry.Frame{Rule: fit.Rule, Turn: turn}, Fit: fit}
	if !fit.Setting.Infinite() {
		e.Names = symmetry.ExchangeNames(g.Fit.Setting, fit.Setting, turn)
	}
	return e, nil
}

// TryAxes tells whether a choice of axes, as in a Study, is possible for the
// group. The error is a *Problem that says what would be.
func (g *Group) TryAxes(frame, z, x string) error {
	_, err := g.framed(frame, z, x)
	return err
}

// framed is the group in a frame that is chosen as in a Study.
func (g *Group) framed(frame, z, x string) (*symmetry.Fit, error) {
	base := g.base
	if base == nil {
		base = g.Fit
	}
	if frame == symmetry.FrameDefault {
		// The default rule, even where the axes are those of a larger group.
		f, err := base.Frame(frame)
		if err != nil {
			return nil, blame(StageGroup, ConcernFrame, err)
		}
		return base.In(f), nil
	}
	return inFrame(base, g.Structure, g.Core, study.Study{Frame: frame, Z: z, X: x})
}

// A Renaming is a name here and elsewhere.
type Renaming struct{ Here, There string }

// A Relabelling is a convention that differs in names alone, by no rotation.
type Relabelling struct {
	// Name is plain text that --from takes: "F for T", "C5^2 for C5".
	Name string
	// Source is a key of symmetry.Rule.Sources or, with more words, a text.
	Source string
	// Irreps has every irrep; Classes those classes that have another name.
	Irreps, Classes []Renaming
}

// Relabellings lists the conventions that differ from ours in the names of the
// irreps or classes of a finite group alone. Those that count from another
// power of the principal axis follow from the characters: an irrep takes the
// name of the one whose character of R is that of R^k.
func Relabellings(s *symmetry.Setting) []Relabelling {
	var out []Relabelling
	if s.Infinite() {
		return nil
	}
	letters := func(name, source string, swap map[byte]byte) {
		r := Relabelling{Name: name, Source: source}
		changed := false
		for _, ir := range s.Irreps {
			there := ir.Label
			if to, ok := swap[there[0]]; ok {
				there = string(to) + there[1:]
				changed = true
			}
			r.Irreps = append(r.Irreps, Renaming{ir.Label, there})
		}
		if changed {
			out = append(out, r)
		}
	}
	letters("F for T", "common practice in spectroscopy", map[byte]byte{'T': 'F'})
	letters("U and V for G and H", "common practice in older texts", map[byte]byte{'G': 'U', 'H': 'V'})
	out = append(out, powers(s)...)
	if s.Symbol == "O" || s.Symbol == "Oh" {
		r := Relabelling{Name: "C2' for C2, C4^2 for C2", Source: "common practice"}
		for _, ir := range s.Irreps {
			r.Irreps = append(r.Irreps, Renaming{ir.Label, ir.Label})
		}
		for _, c := range s.Classes {
			switch c.Name {
			case "6C2":
				r.Classes = append(r.Classes, Renaming{c.Name, "6C2'"})
			case "3C2(=C4^2)":
				r.Classes = append(r.Classes, Renaming{c.Name, "3C4^2"})
			}
		}
		out = append(out, r)
	}
	return out
}

// powers are the relabellings that take another power of the principal
// operation for it.
func powers(s *symmetry.Setting) []Relabelling {
	name, order, exponent := principal(s)
	var out []Relabelling
	for j := 2; 2*j < order; j++ {
		if divisor(j, order) != 1 {
			continue
		}
		k := j
		for divisor(k, exponent) != 1 {
			k += order
		}
		there := s.ByPowers(k)
		r := Relabelling{Name: fmt.Sprintf("%s^%d for %s", name, j, name), Source: "common practice"}
		changed := false
		for i, ir := range s.Irreps {
			r.Irreps = append(r.Irreps, Renaming{ir.Label, s.Irreps[there[i]].Label})
			changed = changed || there[i] != i
		}
		if changed {
			out = append(out, r)
		}
	}
	return out
}

// principal is the rotation of the highest order, a rotatory reflection where
// that has twice an even order, with the exponent of the group.
func principal(s *symmetry.Setting) (name string, order, exponent int) {
	exponent = 1
	proper, improper := 1, 1
	for _, o := range s.Operations {
		n := o.Turn.Den
		if o.Turn.Improper && n%2 == 1 {
			n *= 2
		}
		exponent = exponent / divisor(exponent, n) * n
		if o.Turn.Improper {
			improper = max(improper, o.Turn.Den)
		} else {
			proper = max(proper, o.Turn.Den)
		}
	}
	if proper%2 == 0 && improper == 2*proper {
		return fmt.Sprintf("S%d", improper), improper, exponent
	}
	return fmt.Sprintf("C%d", proper), proper, exponent
}

func divisor(a, b int) int {
	for b != 0 {
		a, b = b, a%b
	}
	return a
}
