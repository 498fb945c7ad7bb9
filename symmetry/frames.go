package symmetry

import (
	"math"
	"strings"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/symmetry/message"
)

// Names of the rules for axes beside "default". Each is offered where it
// applies.
const (
	FrameDefault     = "default"
	FramePlaneXZ     = "plane-xz"     // C2v: the plane with most atoms in xz, not yz
	FrameBetween     = "x-between"    // even n: x along the other C2 or σ, between the atoms
	FrameC2OnY       = "c2-on-y"      // odd n: a C2 along y, not x
	FrameSigmaYZ     = "sigma-yz"     // Cnv, odd n: a σv in yz, not xz
	FrameSigmaDXZ    = "sigma-d-xz"   // Dnd, even n: a σd in xz, C2′ between
	FrameXYExchanged = "xy-exchanged" // T, Th: x and y exchanged (a quarter turn about z)
	FrameZC3         = "z-c3"         // cubic and icosahedral groups: C3 along z
	FrameZC2         = "z-c2"         // O, Oh: a C2 that is no C4² along z
	FrameZC5         = "z-c5"         // icosahedral groups: C5 along z
	FrameOtherC2     = "other-c2"     // icosahedral groups: the other setting of three C2
	FrameFile        = "file"         // the axes of the input
	FrameExplicit    = "explicit"     // z and x given by a person
	// D2 and D2h: which of the default's axes become x, y and z.
	FrameYZX, FrameZXY, FrameXZY, FrameZYX, FrameYXZ = "axes-yzx", "axes-zxy", "axes-xzy", "axes-zyx", "axes-yxz"
)

// Further keys of Rule.Z and Rule.X.
const (
	ZC3Axis       = "c3-axis"
	ZC2Axis       = "c2-axis"
	ZC5Axis       = "c5-axis"
	ZExplicit     = "explicit"
	XPlaneXZ      = "plane-xz"
	XBetween      = "between-atoms"
	XC2OnY        = "c2-on-y"
	XSigmaYZ      = "sigma-yz"
	XSigmaDXZ     = "sigma-d-xz"
	XExchanged    = "xy-exchanged"
	XC2Across     = "c2-across"     // along a C2 square to z
	XHoldsC2      = "plane-with-c2" // xz holds the former z
	XOtherSetting = "other-setting" // a quarter turn about z from the default
	XPermuted     = "axes-permuted"
	XExplicit     = "explicit"
)

// A Frame is one choice of axes for a Fit.
type Frame struct {
	Rule Rule
	// Turn (determinant +1) takes places in the frame of the Fit to places in
	// this one.
	Turn mgl64.Mat3
}

// Frames lists every choice of axes that a rule in use gives for the points,
// the one in force first, then the default and the others, at the end the
// input's own axes (left out where they are those in force, and for a linear
// molecule that does not lie along the z of the input).
func (f *Fit) Frames() []Frame {
	back := f.fromDefault.Transpose()
	out := []Frame{{f.Rule, mgl64.Ident3()}}
	add := func(rule Rule, fromDefault mgl64.Mat3) {
		turn := orthonormal(fromDefault.Mul3(back))
		if rule.Name != f.Rule.Name {
			out = append(out, Frame{rule, cleanMatrix(turn)})
		}
	}
	add(f.defaultRule(), mgl64.Ident3())
	for _, r := range f.Setting.kind.rules(f.defaultRule()) {
		add(r.Rule, r.Turn)
	}
	if rule, turn := f.inputFrame(); !f.Setting.Infinite() || math.Abs(turn.At(2, 2)) == 1 {
		add(rule, turn)
	}
	return out
}

// defaultRule is the rule of the default frame.
func (f *Fit) defaultRule() Rule {
	if f.Rule.Name == FrameDefault {
		return f.Rule
	}
	return f.defaults
}

// Frame returns the choice of axes with a name, or an error that lists those
// that there are.
func (f *Fit) Frame(name string) (Frame, error) {
	var names []string
	for _, fr := range f.Frames() {
		if fr.Rule.Name == name {
			return fr, nil
		}
		names = append(names, fr.Rule.Name)
	}
	return Frame{}, message.Errorf("no frame %q for %s: it has %s", name, f.Setting.Symbol, strings.Join(names, ", "))
}

// rules lists the choices of axes of a kind of group, from its standard axes.
func (k kind) rules(usual Rule) []Frame {
	quarter := turnAboutZ(1, 4)
	one := func(name, x string, turn mgl64.Mat3, sources ...string) []Frame {
		return []Frame{{Rule{name, usual.Z, x, sources}, turn}}
	}
	switch k.family {
	case pyramidal:
		switch {
		case k.n == 2:
			return one(FramePlaneXZ, XPlaneXZ, quarter, SourceCommon)
		case k.n%2 == 0:
			return one(FrameBetween, XBetween, turnAboutZ(1, 2*k.n), SourceCommon)
		}
		return one(FrameSigmaYZ, XSigmaYZ, quarter, SourceCommon)
	case antiprismatic:
		if k.n%2 == 0 {
			return one(FrameSigmaDXZ, XSigmaDXZ, turnAboutZ(1, 4*k.n), SourceCommon)
		}
		return one(FrameC2OnY, XC2OnY, quarter, SourceCommon)
	case dihedral, prismatic:
		switch {
		case k.n == 2:
			return permutedAxes()
		case k.n%2 == 0:
			return one(FrameBetween, XBetween, turnAboutZ(1, 2*k.n), SourceCommon)
		}
		return one(FrameC2OnY, XC2OnY, quarter, SourceCommon)
	case tetrahedralProper, pyritohedral:
		return append(one(FrameXYExchanged, XExchanged, quarter, SourceOwn), k.alongC3())
	case tetrahedral:
		return []Frame{k.alongC3()}
	case octahedralProper, octahedral:
		return []Frame{k.alongC3(), {Rule{FrameZC2, ZC2Axis, XC2Across, []string{SourceCommon, SourceOwn}},
			axesAlong(mgl64.Vec3{1, 1, 0}, mgl64.Vec3{0, 0, 1})}}
	case icosahedralProper, icosahedral:
		across := []string{SourceCommon, SourceOwn}
		return []Frame{
			{Rule{FrameOtherC2, usual.Z, XOtherSetting, []string{SourceCommon}}, quarter},
			k.alongC3(),
			{Rule{FrameZC5, ZC5Axis, XC2Across, across}, axesAlong(mgl64.Vec3{0, 1, golden}, mgl64.Vec3{1, 0, 0})},
		}
	}
	return nil
}

// alongC3 is the frame with the C3 about (1,1,1) along z; x lies along a C2
// square to it where there is one, else xz holds the former z.
func (k kind) alongC3() Frame {
	z := mgl64.Vec3{1, 1, 1}
	rule := Rule{FrameZC3, ZC3Axis, XC2Across, []string{SourceCommon, SourceOwn}}
	switch {
	case k.icosahedral():
		for _, m := range k.elements() {
			if a := rotationAxis(m); m.Det() > 0 && math.Abs(m.Trace()+1) < 1e-9 && math.Abs(a.Dot(z)) < 1e-9 {
				return Frame{rule, axesAlong(z, a)}
			}
		}
	case k.family == octahedral || k.family == octahedralProper:
		return Frame{rule, axesAlong(z, mgl64.Vec3{1, -1, 0})}
	}
	rule.X = XHoldsC2
	return Frame{rule, axesAlong(z, mgl64.Vec3{-1, -1, 2})}
}

// axesAlong is the turn to the frame with z and x along two perpendicular
// lines.
func axesAlong(z, x mgl64.Vec3) mgl64.Mat3 {
	z = z.Normalize()
	x = x.Sub(z.Mul(x.Dot(z))).Normalize()
	return mgl64.Mat3FromRows(x, z.Cross(x), z)
}

// permutedAxes are the five other ways to lay the three axes of D2 and D2h.
func permutedAxes() []Frame {
	unit := map[rune]mgl64.Vec3{'x': {1, 0, 0}, 'y': {0, 1, 0}, 'z': {0, 0, 1}}
	var out []Frame
	for _, name := range []string{FrameYZX, FrameZXY, FrameXZY, FrameZYX, FrameYXZ} {
		axes := []rune(strings.TrimPrefix(name, "axes-"))
		x, z := unit[axes[0]], unit[axes[2]]
		y := z.Cross(x)
		if y.Dot(unit[axes[1]]) < 0 { // keep x and y, turn z round
			z = z.Mul(-1)
			y = y.Mul(-1)
		}
		out = append(out, Frame{Rule{name, XPermuted, XPermuted, []string{SourceCommon}}, cleanMatrix(mgl64.Mat3FromRows(x, y, z))})
	}
	return out
}

// In writes the Fit in another frame: places, setting and permutations.
func (f *Fit) In(frame Frame) *Fit {
	g := *f
	g.defaults = f.defaultRule()
	g.Rule = frame.Rule
	g.fromDefault = orthonormal(frame.Turn.Mul3(f.fromDefault))
	g.Ideal = make([]mgl64.Vec3, len(f.Ideal))
	for k, v := range f.Ideal {
		g.Ideal[k] = clean(frame.Turn.Mul3x1(v))
	}
	g.placeInInput()
	g.Setting = f.Setting.Turned(frame.Turn)
	if frame.Rule.Name == FrameFile && frame.Rule.X != XInputLabels && !f.Setting.kind.keepsLabels(g.fromDefault) {
		g.Setting = turnedSetting(f.Setting.kind, g.fromDefault)
	}
	if frame.Rule.Name != FrameDefault {
		g.Ties = nil
		for _, t := range f.Ties {
			if t.What == TieOrigin {
				g.Ties = append(g.Ties, t)
			}
		}
	}
	if f.Setting.Infinite() {
		return &g
	}
	e := ExchangeNames(f.Setting, g.Setting, frame.Turn)
	g.Permutations = make([][]int, len(f.Permutations))
	for r, perm := range f.Permutations {
		g.Permutations[e.Operations[r]] = perm
	}
	return &g
}

// FrameAlong is a frame with z and x along given directions (in the frame of
// the Fit; any length). A zero z keeps z, a zero x leaves it to the default:
// the former x where z is kept, else a C2, else a plane that holds z. It
// returns an error, with what would be possible, where z is along no axis of
// the group that can be its z, or where x is neither along a C2 nor in a plane
// though the group has such. In a linear group z can be turned round, and x may lie
// anywhere.
func (f *Fit) FrameAlong(z, x mgl64.Vec3) (Frame, error) {
	up := mgl64.Vec3{0, 0, 1}
	if z != (mgl64.Vec3{}) {
		if z.Len() < 1e-9 {
			return Frame{}, message.Errorf("z has no direction: the two places are the same")
		}
		up = z.Normalize()
	}
	allowed := f.Setting.AxesForZ()
	if k := f.Setting.kind; k.infinite() && k.family != spherical {
		allowed = []mgl64.Vec3{{0, 0, 1}}
	}
	up, ok := nearestLine(up, allowed)
	if !ok && f.Setting.Infinite() {
		return Frame{}, message.Errorf("z cannot lie there in %s: it lies along the molecule, and x is free", f.Setting.Symbol)
	}
	if !ok {
		return Frame{}, message.Errorf("z cannot lie there in %s: %s", f.Setting.Symbol, f.Setting.possible(allowed, "z"))
	}
	across := f.Setting.LinesForX(up)
	side := mgl64.Vec3{}
	switch {
	case x != (mgl64.Vec3{}):
		side = x.Sub(up.Mul(x.Dot(up)))
		if side.Len() < 1e-6*x.Len() {
			return Frame{}, message.Errorf("x cannot lie along z")
		}
		if side, ok = nearestLine(side.Normalize(), across); !ok {
			return Frame{}, message.Errorf("x cannot lie there in %s: %s", f.Setting.Symbol, f.Setting.possible(across, "x"))
		}
	case math.Abs(up.Z()) > 1-1e-9:
		side = mgl64.Vec3{1, 0, 0}
	case len(across) > 0:
		side = across[0]
	default:
		side = perpendicular(up)
	}
	return Frame{Rule{FrameExplicit, ZExplicit, XExplicit, []string{SourceOwn}}, cleanMatrix(axesAlong(up, side))}, nil
}

// lineTolerance is how far (radians, about 1°) a direction that a person gives
// may lie from the axis that is meant.
const lineTolerance = 0.02

// nearestLine moves a direction onto the nearest of some lines, if it is near
// one; with no lines every direction will do.
func nearestLine(v mgl64.Vec3, lines []mgl64.Vec3) (mgl64.Vec3, bool) {
	if len(lines) == 0 {
		return v, true
	}
	for _, l := range lines {
		if d := v.Dot(l); math.Abs(d) > math.Cos(lineTolerance) {
			return l.Mul(math.Copysign(1, d)), true
		}
	}
	return v, false
}

// AxesForZ are the lines along which z can lie: the principal axis, one of the
// axes of D2, D2h, cubic and icosahedral groups, the normal of the plane of
// Cs; none for C1 and Ci, where every line will do.
func (s *Setting) AxesForZ() []mgl64.Vec3 {
	k := s.kind
	var out []mgl64.Vec3
	add := func(a mgl64.Vec3) {
		for _, l := range out {
			if math.Abs(l.Dot(a)) > 1-1e-9 {
				return
			}
		}
		out = append(out, a)
	}
	rectangular := k.n == 2 && (k.family == dihedral || k.family == prismatic)
	for _, o := range s.Operations {
		switch {
		case o.Axis == (mgl64.Vec3{}):
		case k.axial() && !rectangular:
			if m := unitAxis(s.turn.Col(2)); k.n > 1 || k.family == cyclicHorizontal {
				add(m)
			}
		case !o.Turn.Improper:
			add(o.Axis)
		}
	}
	return out
}

// LinesForX are the lines square to z along a C2 or in a plane of the group.
func (s *Setting) LinesForX(z mgl64.Vec3) []mgl64.Vec3 {
	var out []mgl64.Vec3
	add := func(a mgl64.Vec3) {
		for _, l := range out {
			if math.Abs(l.Dot(a)) > 1-1e-9 {
				return
			}
		}
		out = append(out, a)
	}
	for _, o := range s.Operations {
		if o.Turn == (Turn{1, 2, false}) && math.Abs(o.Axis.Dot(z)) < 1e-9 {
			add(o.Axis)
		}
	}
	for _, o := range s.Operations {
		if o.Turn == (Turn{0, 1, true}) && math.Abs(o.Axis.Dot(z)) < 1e-9 {
			add(o.Axis.Cross(z).Normalize())
		}
	}
	return out
}

// possible lists the lines by operations that lie along them.
func (s *Setting) possible(lines []mgl64.Vec3, axis string) message.Text {
	var names []message.Text
	for _, l := range lines {
		var name message.Text
		for _, o := range s.Operations {
			along := math.Abs(math.Abs(o.Axis.Dot(l))-1) < 1e-9
			if along && !o.Turn.Improper && name.Empty() {
				name = message.Words("%s", o.Name)
			}
		}
		for _, o := range s.Operations {
			in := o.Turn == Turn{0, 1, true} && math.Abs(o.Axis.Dot(l)) < 1e-9
			if name.Empty() && in {
				name = message.Words("in %s", o.Name)
			}
		}
		if !name.Empty() {
			names = append(names, name)
		}
	}
	const most = 12
	if len(names) > most {
		names = append(names[:most], message.Words("…"))
	}
	return message.Words("possible for %s are %s", axis, message.Join(names, ", "))
}
