package symmetry

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
)

// A TurnKind tells in which simple way a second frame lies to a first.
type TurnKind int

// The kinds, the simplest first.
const (
	TurnNone     TurnKind = iota // the axes are the same
	TurnSigns                    // the same lines, two of them the other way round
	TurnExchange                 // two axes lie along each other's lines
	TurnCycle                    // x, y and z go round
	TurnAbout                    // turned about one of the axes
	TurnOther                    // any other turn
)

// A TurnDescription says in which way a turn takes one frame to another.
type TurnDescription struct {
	Kind TurnKind
	// Axes are those that are exchanged, or those along whose lines x, y and z
	// lie that go round, or the one that is turned about; from 0.
	Axes [3]int
	// Angle (degrees, 0 to 180) is that of TurnAbout and TurnOther.
	Angle float64
}

// DescribeTurn describes the rotation that takes places in one frame to places
// in another. The senses of axes are left out of account where all of them lie
// along axes.
func DescribeTurn(turn mgl64.Mat3) TurnDescription {
	const near = 1e-6
	var line [3]int // row → column where the new axis lies
	along := true
	for i := range 3 {
		line[i] = -1
		for j := range 3 {
			if math.Abs(math.Abs(turn.At(i, j))-1) < near {
				line[i] = j
			}
		}
		along = along && line[i] >= 0
	}
	switch {
	case along && line == [3]int{0, 1, 2}:
		for i := range 3 {
			if turn.At(i, i) < 0 {
				return TurnDescription{Kind: TurnSigns}
			}
		}
		return TurnDescription{}
	case along:
		for i := range 3 {
			if line[i] == i {
				a, b := (i+1)%3, (i+2)%3
				return TurnDescription{Kind: TurnExchange, Axes: [3]int{min(a, b), max(a, b), i}}
			}
		}
		return TurnDescription{Kind: TurnCycle, Axes: line}
	}
	angle := mgl64.RadToDeg(math.Acos(math.Max(-1, math.Min(1, (turn.Trace()-1)/2))))
	for i := range 3 {
		if line[i] == i && turn.At(i, i) > 0 {
			return TurnDescription{Kind: TurnAbout, Axes: [3]int{i}, Angle: angle}
		}
	}
	return TurnDescription{Kind: TurnOther, Angle: angle}
}

// A Rename is an irrep that has another label in a second frame, with an
// operation that shows why: its character there is told apart from that of the
// irrep whose label it takes, and the operation has another name too.
type Rename struct {
	// Here and There are the labels of the irrep.
	Here, There string
	// Operation is the name here of the operation, Called its name there;
	// empty if no operation shows it, as where only a convention differs.
	Operation, Called string
	// Character is that of the irrep for the operation.
	Character float64
}

// Renamed lists the irreps that have other labels in a second frame, in the
// order of the first.
func Renamed(here, there *Setting, names *Exchange) []Rename {
	var out []Rename
	for i, ir := range here.Irreps {
		label := there.Irreps[names.Irreps[i]].Label
		if label == ir.Label {
			continue
		}
		r := Rename{Here: ir.Label, There: label}
		other, err := here.Irrep(label)
		for k, o := range here.Operations {
			called := there.Operations[names.Operations[k]].Name
			if err != nil || r.Operation != "" || called == o.Name || ir.Characters[o.Class] == other.Characters[o.Class] {
				continue
			}
			if math.Abs(ir.Characters[o.Class]-other.Characters[o.Class]) > 1e-6 {
				r.Operation, r.Called, r.Character = o.Name, called, ir.Characters[o.Class]
			}
		}
		out = append(out, r)
	}
	return out
}
