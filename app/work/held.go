package work

import (
	"math"
	"slices"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/symmetry"
	"lobewright/symmetry/message"
)

// RuleHeld names the frame of a subgroup whose axes are those of a larger group
// that the structure nearly has. Its Z is HeldAs with the symbol of that group.
const (
	RuleHeld = "held"
	HeldAs   = "held:"
)

// holds finds the operations of a larger group that carry the atoms as those of
// another do, in the order of that one's; nil if there are none for some.
//
// In a subgroup of a linear group the permutations do not tell operations apart:
// there the matrices must be the same, too, in the axes of the input.
func holds(larger, smaller *symmetry.Nearness) []int {
	big, fit := larger.Fit.Setting, smaller.Fit
	if big.Infinite() || big.Order() <= fit.Setting.Order() {
		return nil
	}
	var out []int
	turn := fit.Rotation.Mul3(larger.Fit.Rotation.Transpose())
	for r, o := range fit.Setting.Operations {
		at := -1
		for q, p := range big.Operations {
			if larger.Whole != nil && o.Matrix.Transpose().Mul3(turn.Mul3(p.Matrix).Mul3(turn.Transpose())).Trace() < alike {
				continue
			}
			// A plane and the inversion may carry the points alike, too.
			if p.Turn.Improper == o.Turn.Improper && math.Abs(p.Matrix.Trace()-o.Matrix.Trace()) < 1e-6 && slices.Equal(larger.Fit.Permutations[q], fit.Permutations[r]) {
				at = q
				break
			}
		}
		if at < 0 {
			return nil
		}
		out = append(out, at)
	}
	return out
}

// alike is the trace of the turn between operations that are the same but for the
// displacement of the atoms: that of 20°.
const alike = 2.879

// held is the frame of a group in which its axes are, as far as they can, those of
// the largest group of the ladder that holds it, so that going down from that
// group turns nothing that need not be turned.
func (l *Ladder) held(near *symmetry.Nearness) (symmetry.Frame, error) {
	fit := near.Fit
	var larger *symmetry.Nearness
	var images []int
	for _, n := range l.Groups {
		if larger != nil && n.Fit.Setting.Order() <= larger.Fit.Setting.Order() {
			continue
		}
		if n.Whole != nil && !Usual(n) {
			continue // of those with the same line the usual one stands for all
		}
		if found := holds(n, near); found != nil {
			larger, images = n, found
		}
	}
	if larger == nil {
		return symmetry.Frame{}, message.Errorf("no larger group that the structure nearly has holds this one, and there are no axes to keep")
	}
	d, err := larger.Fit.Setting.Descend(images)
	if err != nil {
		return symmetry.Frame{}, err
	}
	h := heldAxes{fit: fit, descent: d, images: images}
	h.guess = fit.Rotation.Mul3(d.Rotation.Mul3(larger.Fit.Rotation).Transpose())
	z, x := h.along(2), mgl64.Vec3{}
	if v, ok := h.axis(0); ok {
		x = v
	} else if y, ok := h.axis(1); ok {
		x = y.Cross(z)
	} else {
		x = h.guess.Col(0)
	}
	frame, err := fit.FrameAlong(z, x)
	if err != nil {
		return symmetry.Frame{}, err
	}
	what := HeldAs + larger.Fit.Setting.Symbol
	frame.Rule = symmetry.Rule{Name: RuleHeld, Z: what, X: what, Sources: []string{symmetry.SourceOwn}}
	return frame, nil
}

// heldAxes reads the axes of a subgroup's frame off its operations in the fit.
type heldAxes struct {
	fit     *symmetry.Fit
	descent *symmetry.Descent
	images  []int // of the operations of the fit, in the larger group
	// guess takes the frame of the subgroup in the larger group to that of the
	// fit, but for what the two differ by since atoms are moved.
	guess mgl64.Mat3
}

// along is an axis of the frame, from an operation or as guessed.
func (h heldAxes) along(axis int) mgl64.Vec3 {
	if v, ok := h.axis(axis); ok {
		return v
	}
	return h.guess.Col(axis)
}

// axis is the axis of an operation that lies along x, y or z (0, 1, 2) in the
// subgroup's frame.
func (h heldAxes) axis(axis int) (mgl64.Vec3, bool) {
	for i, o := range h.descent.Operations {
		there := h.descent.Subgroup.Operations[h.descent.Images[i]]
		if math.Abs(there.Axis[axis]) < 1-1e-6 {
			continue
		}
		v := h.fit.Setting.Operations[slices.Index(h.images, o)].Axis
		if v.Dot(h.guess.Col(axis)) < 0 {
			v = v.Mul(-1)
		}
		return v, true
	}
	return mgl64.Vec3{}, false
}
