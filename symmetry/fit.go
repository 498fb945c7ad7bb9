package symmetry

import "github.com/go-gl/mathgl/mgl64"

// A Point is a place with a kind: two points can be carried into each other
// only if their kinds are equal. For molecules the kind is the atomic number,
// which the rules for the senses of the axes also use as a weight.
type Point struct {
	Position mgl64.Vec3 // Å
	Kind     int
}

// A Link joins two points, by index. Links (bonds) never decide the group;
// rules of frames count them.
type Link [2]int

// A Rule names the rule by which a frame was chosen. Its parts are keys from
// which a person's sentence is made elsewhere.
type Rule struct {
	// Name is what a person gives to ask for this frame: "default".
	Name string
	// Z and X are the keys of the rules that put z and x; see frame.go.
	Z, X string
	// Sources are keys: "web-page", "own-choice", "common-practice".
	Sources []string
}

// A Tie is a choice that the rule left open between frames that are not
// equivalent under the group.
type Tie struct {
	// What is a key: "z-axis", "z-sense", "x-axis", "x-sense".
	What string
	// Settled is a key that says how the choice was made.
	Settled string
}

// A Fit is a Setting found in a set of points, with the frame that it is
// written in and the nearest points that have the group exactly.
type Fit struct {
	Setting *Setting
	// Origin (Å, input's axes) and Rotation (determinant +1) take the input
	// to the working frame: p_working = Rotation·(p_input − Origin).
	Origin   mgl64.Vec3
	Rotation mgl64.Mat3
	// Ideal holds the least-squares points that have the group exactly, in
	// the working frame (Å), in the input's order.
	Ideal []mgl64.Vec3
	// Permutations[r][k] is the point to which operation r carries point k.
	// It is empty for an infinite group.
	Permutations [][]int
	// Deviation (Å) is the farthest distance of an input point from its
	// ideal place, and Worst the index of that point.
	Deviation float64
	Worst     int
	// Tolerance (Å) is the largest Deviation that was allowed.
	Tolerance float64
	// Doubtful is set if another group would be found within a factor of
	// three of the tolerance.
	Doubtful bool
	Rule     Rule
	Ties     []Tie

	// fromDefault takes the frame of the default rules to this one.
	fromDefault mgl64.Mat3
	defaults    Rule // the rule of that frame, where it is not this one
	least       leastSquares
	input       []mgl64.Vec3 // the points, in the input's axes
}
