package work

import (
	"math"
	"slices"
	"strconv"
	"strings"

	"github.com/go-gl/mathgl/mgl64"
)

// An AxisChoice is a direction along which z or x can be laid.
type AxisChoice struct {
	// Text is what Study.Z or Study.X takes for it.
	Text string
	// Direction is a unit vector in the frame in force.
	Direction mgl64.Vec3
	// Operation names, in the frame in force, the rotation about the direction,
	// or the reflection whose plane holds it (Plane); empty where there is
	// none.
	Operation string
	Plane     bool
	// Atoms are those, from 0, toward which the direction points: on the line
	// itself, or with x in the half plane that z and x bound.
	Atoms []int
	// Input is 1, 2 or 3 where the direction is offered for being the x, y or z
	// of the input; else 0.
	Input int
	// Now says that the axis lies there already.
	Now bool
}

// mostAtomsOffered is how many atoms are offered where any direction will do.
const mostAtomsOffered = 24

// ZChoices lists where z can lie: along the axes that the group allows, else,
// where any direction will do, toward atoms and along the axes of the input.
func (g *Group) ZChoices() []AxisChoice {
	if g.Fit.Setting.Infinite() {
		return nil
	}
	z := mgl64.Vec3{0, 0, 1}
	return g.choices(g.Fit.Setting.AxesForZ(), z, mgl64.Vec3{})
}

// XChoices lists where x can lie with the z in force.
func (g *Group) XChoices() []AxisChoice {
	if g.Fit.Setting.Infinite() {
		return nil
	}
	z := mgl64.Vec3{0, 0, 1}
	return g.choices(g.Fit.Setting.LinesForX(z), mgl64.Vec3{1, 0, 0}, z)
}

// choices are those lines, or atoms and the axes of the input where there are
// none. now is where the axis lies; across is the z that x is square to.
func (g *Group) choices(lines []mgl64.Vec3, now, across mgl64.Vec3) []AxisChoice {
	var out []AxisChoice
	add := func(c AxisChoice) {
		for _, o := range out {
			if o.Direction.Dot(c.Direction) > 1-1e-6 {
				return
			}
		}
		c.Now = c.Direction.Dot(now) > 1-1e-6
		out = append(out, c)
	}
	for _, l := range lines {
		// Both senses are offered where atoms tell them apart.
		for _, v := range []mgl64.Vec3{l, l.Mul(-1)} {
			c := AxisChoice{Direction: v, Atoms: g.toward(v, across)}
			c.Operation, c.Plane = g.elementAlong(v)
			c.Text = g.textOf(c)
			if v == l || len(c.Atoms) > 0 || c.Direction.Dot(now) > 1-1e-6 {
				add(c)
			}
		}
	}
	if len(lines) > 0 {
		return out
	}
	flat := func(v mgl64.Vec3) mgl64.Vec3 { return v.Sub(across.Mul(v.Dot(across))) }
	for k := range g.Fit.Ideal {
		if v := flat(g.Fit.Ideal[k]); v.Len() > 10*shortest && len(out) < mostAtomsOffered {
			v = v.Normalize()
			add(AxisChoice{Direction: v, Atoms: g.toward(v, across), Text: strconv.Itoa(g.Core[k] + 1)})
		}
	}
	for i := range 3 {
		if v := flat(g.Fit.Rotation.Col(i)); v.Len() > 0.1 {
			add(AxisChoice{Direction: v.Normalize(), Input: i + 1, Text: []string{"1,0,0", "0,1,0", "0,0,1"}[i]})
		}
	}
	return out
}

// toward lists the core atoms on the side of the origin to which a direction
// points; with x, in the half plane bounded by z that holds it.
func (g *Group) toward(v, across mgl64.Vec3) []int {
	var out []int
	for k, p := range g.Fit.Ideal {
		q := p.Sub(across.Mul(p.Dot(across)))
		if l := q.Len(); l > 10*shortest && q.Dot(v) > l*(1-1e-8) {
			out = append(out, g.Core[k])
		}
	}
	return out
}

// elementAlong names the rotation about a line, the highest one, or else a
// plane that holds it.
func (g *Group) elementAlong(v mgl64.Vec3) (name string, plane bool) {
	order := 0
	for _, o := range g.Fit.Setting.Operations {
		along := math.Abs(o.Axis.Dot(v)) > 1-1e-6
		if along && !o.Turn.Improper && o.Turn.Num == 1 && o.Turn.Den > order {
			name, order = o.Name, o.Turn.Den
		}
	}
	if name != "" {
		return name, false
	}
	normal := ""
	for _, o := range g.Fit.Setting.Operations {
		switch {
		case !o.Turn.Improper || o.Turn.Num != 0:
		case math.Abs(o.Axis.Dot(v)) < 1e-6:
			return o.Name, true
		case math.Abs(o.Axis.Dot(v)) > 1-1e-6:
			normal = o.Name // of the one plane of Cs or Cnh
		}
	}
	return normal, false
}

// textOf writes a choice as a study takes it: by the lowest atom on it, which
// says the sense too, else as a vector of the input.
func (g *Group) textOf(c AxisChoice) string {
	if len(c.Atoms) > 0 {
		return strconv.Itoa(slices.Min(c.Atoms) + 1)
	}
	v := g.Fit.Rotation.Transpose().Mul3x1(c.Direction)
	parts := make([]string, 3)
	for i, x := range v {
		parts[i] = strconv.FormatFloat(math.Round(x*1e6)/1e6+0, 'f', -1, 64)
	}
	return strings.Join(parts, ",")
}

// ZNow is what Study.Z takes for the z in force: what keeps it while x is
// chosen.
func (g *Group) ZNow() string {
	for _, c := range g.ZChoices() {
		if c.Now {
			return c.Text
		}
	}
	v := g.Fit.Rotation.Row(2)
	return g.textOf(AxisChoice{Direction: g.Fit.Rotation.Mul3x1(v)})
}
