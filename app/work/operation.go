package work

import (
	"math"
	"strings"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/symmetry"
	"lobewright/symmetry/message"
)

// An Operation is an operation of a Group, ready to be played.
type Operation struct {
	// Operation has name, matrix and axis. In a family its Turn is zero, since
	// the angle need not be a fraction of a circle.
	symmetry.Operation
	// Index is that in Setting.Operations; −1 in an infinite group.
	Index int
	// Angle (radians) is that of the turn about Axis: positive and as the name
	// says, so that C3^2 turns by 4π/3. Zero for a reflection and E.
	Angle float64
	// Improper says that a reflection in the plane square to Axis follows.
	Improper bool
	// Family says that the operation depends on φ, as C(φ) does.
	Family bool

	turns bool // even if by an angle of zero, in a family
}

// isFamily tells the name of an operation that depends on φ.
func isFamily(name string) bool { return strings.Contains(name, "φ") }

// Operations lists every operation of a finite group. Of an infinite group it
// lists the families, at the angle φ in degrees, and those operations that
// stand alone:
//
//	C∞v  E  C(φ)  σv(φ)
//	D∞h  E  C(φ)  σv(φ)  i  S(φ)  C2(φ)  σh
//	Kh   E  C(φ)  σ(φ)   i  S(φ)
//
// C(φ) and S(φ) turn about z; σv(φ) and σ(φ) are the plane that holds z and the
// direction φ from x toward y; C2(φ) is the axis in this direction. In Kh
// every direction is like z.
func (g *Group) Operations(angle float64) []Operation {
	setting := g.Fit.Setting
	if setting.Infinite() {
		return infiniteOperations(setting.Symbol, angle)
	}
	out := make([]Operation, len(setting.Operations))
	for i, o := range setting.Operations {
		out[i] = listed(o, i)
	}
	return out
}

func listed(o symmetry.Operation, index int) Operation {
	return Operation{
		Operation: o, Index: index,
		Angle:    2 * math.Pi * float64(o.Turn.Num) / float64(o.Turn.Den),
		Improper: o.Turn.Improper,
		turns:    o.Turn.Num != 0 && o.Axis.Len() > 0,
	}
}

func infiniteOperations(symbol string, angle float64) []Operation {
	sin, cos := sincos(angle)
	z, across := mgl64.Vec3{0, 0, 1}, mgl64.Vec3{-sin, cos, 0}
	turn := mgl64.Mat3FromRows(mgl64.Vec3{cos, -sin, 0}, mgl64.Vec3{sin, cos, 0}, z)
	flip := mgl64.Diag3(mgl64.Vec3{1, 1, -1})
	named := func(name string, matrix mgl64.Mat3, axis mgl64.Vec3, turn symmetry.Turn) Operation {
		o := listed(symmetry.Operation{Name: name, Matrix: matrix, Axis: axis, Turn: turn}, -1)
		o.Family = isFamily(name)
		return o
	}
	mirror := symmetry.Turn{Num: 0, Den: 1, Improper: true}
	identity := named("E", mgl64.Ident3(), mgl64.Vec3{}, symmetry.Turn{Num: 0, Den: 1})
	about := func(name string, matrix mgl64.Mat3, improper bool) Operation {
		o := symmetry.Operation{Name: name, Matrix: matrix, Axis: z}
		return Operation{Operation: o, Index: -1, Angle: mgl64.DegToRad(angle), Improper: improper, Family: true, turns: true}
	}
	rotation := about("C(φ)", turn, false)
	plane := named("σv(φ)", reflection(across), across, mirror)
	if symbol == "C∞v" {
		return []Operation{identity, rotation, plane}
	}
	inversion := named("i", mgl64.Diag3(mgl64.Vec3{-1, -1, -1}), mgl64.Vec3{}, symmetry.Turn{Num: 1, Den: 2, Improper: true})
	improper := about("S(φ)", flip.Mul3(turn), true)
	if symbol == "Kh" {
		plane.Name = "σ(φ)"
		return []Operation{identity, rotation, plane, inversion, improper}
	}
	axis := mgl64.Vec3{cos, sin, 0}
	half := named("C2(φ)", reflection(axis).Mul(-1), axis, symmetry.Turn{Num: 1, Den: 2})
	return []Operation{identity, rotation, plane, inversion, improper, half, named("σh", flip, z, mirror)}
}

// reflection is the one in the plane through the origin with a unit normal.
func reflection(n mgl64.Vec3) mgl64.Mat3 {
	return mgl64.Ident3().Sub(n.OuterProd3(n).Mul(2))
}

// sincos is exact at the multiples of 30° and 45° that have simple values, so
// that a function which goes into another one goes into it exactly.
func sincos(degrees float64) (sin, cos float64) {
	full := math.Mod(degrees, 360)
	if full < 0 {
		full += 360
	}
	quarter := math.Floor(full / 90)
	rest := full - 90*quarter
	sin, cos = math.Sincos(mgl64.DegToRad(rest))
	switch rest {
	case 30:
		sin, cos = 0.5, math.Sqrt(3)/2
	case 45:
		sin, cos = math.Sqrt2/2, math.Sqrt2/2
	case 60:
		sin, cos = math.Sqrt(3)/2, 0.5
	}
	for range int(quarter) {
		sin, cos = cos, -sin
	}
	return sin + 0, cos + 0 // no negative zeros
}

// Operation finds an operation by its name, in plain characters or as it is
// set in type ("C3^2(z)", "C₃²(z)"). An unknown name is refused.
func (g *Group) Operation(name string, angle float64) (Operation, error) {
	all := g.Operations(angle)
	for _, o := range all {
		if o.Name == name {
			return o, nil
		}
	}
	plain := plainOperation.Replace(name)
	for _, o := range all {
		if o.Name == plain {
			return o, nil
		}
	}
	symbol := g.Fit.Setting.Symbol
	if len(all) > mostNamed {
		return Operation{}, message.Errorf("%s has no operation %q; it has %s … %s", symbol, name, all[0].Name, all[len(all)-1].Name)
	}
	names := make([]string, len(all))
	for i, o := range all {
		names[i] = o.Name
	}
	return Operation{}, message.Errorf("%s has no operation %q; it has %s", symbol, name, strings.Join(names, ", "))
}

// mostNamed is how many operations a message lists.
const mostNamed = 24

var plainOperation = strings.NewReplacer(
	"′", "'", "’", "'", "″", "''", " ", "",
	"₀", "0", "₁", "1", "₂", "2", "₃", "3", "₄", "4", "₅", "5", "₆", "6", "₇", "7", "₈", "8", "₉", "9",
	"ᵥ", "v", "ₕ", "h")

// HasAxis tells whether an axis of rotation, proper or improper, belongs to the
// operation.
func (o Operation) HasAxis() bool { return o.turns }

// HasPlane tells whether a plane of reflection, square to Axis, belongs to the
// operation.
func (o Operation) HasPlane() bool { return o.Improper && o.Axis.Len() > 0 }

// HasCentre tells whether the operation is the inversion.
func (o Operation) HasCentre() bool { return o.Improper && o.Axis.Len() == 0 }

// Steps is how many movements the operation is played in: two for an improper
// rotation, none for E.
func (o Operation) Steps() int {
	switch {
	case o.HasAxis() && o.HasPlane():
		return 2
	case o.HasAxis() || o.HasPlane() || o.HasCentre():
		return 1
	}
	return 0
}

// At is where the operation has carried a point at a moment t from 0 to 1. A
// rotation turns; a reflection passes through its plane and the inversion
// through its centre, flat or a point halfway; an improper rotation turns in
// the first half and is reflected in the second. At(1) is Matrix.
func (o Operation) At(t float64) mgl64.Mat3 {
	switch {
	case !(t > 0):
		return mgl64.Ident3()
	case t >= 1:
		return o.Matrix
	case o.Steps() == 2:
		if t <= 0.5 {
			return o.turned(2 * t)
		}
		return o.flattened(2*t - 1).Mul3(o.turned(1))
	case o.HasAxis():
		return o.turned(t)
	case o.HasPlane():
		return o.flattened(t)
	case o.HasCentre():
		return mgl64.Diag3(mgl64.Vec3{1 - 2*t, 1 - 2*t, 1 - 2*t})
	}
	return mgl64.Ident3()
}

func (o Operation) turned(t float64) mgl64.Mat3 {
	return mgl64.HomogRotate3D(o.Angle*t, o.Axis).Mat3()
}

// flattened presses toward the plane and out on its other side.
func (o Operation) flattened(t float64) mgl64.Mat3 {
	return mgl64.Ident3().Sub(o.Axis.OuterProd3(o.Axis).Mul(2 * t))
}
