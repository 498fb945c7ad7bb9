package work

import (
	"strconv"
	"strings"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/app/study"
	"lobewright/symmetry"
	"lobewright/symmetry/message"
)

// inFrame writes a fit in the frame that a study chooses: by the name of a rule,
// or by what z and x lie along.
func inFrame(fit *symmetry.Fit, read *Structure, core []int, s study.Study) (*symmetry.Fit, error) {
	if s.Z == "" && s.X == "" {
		if s.Frame == "" || s.Frame == symmetry.FrameDefault {
			return fit, nil
		}
		frame, err := fit.Frame(s.Frame)
		if err != nil {
			return nil, blame(StageGroup, ConcernFrame, err)
		}
		return fit.In(frame), nil
	}
	d := directions{fit, read, core}
	z, err := d.parse(s.Z)
	if err != nil {
		return nil, blame(StageGroup, ConcernZ, message.Errorf("z: %w", err))
	}
	x, err := d.parse(s.X)
	if err != nil {
		return nil, blame(StageGroup, ConcernX, message.Errorf("x: %w", err))
	}
	frame, err := fit.FrameAlong(z, x)
	if err != nil {
		concern := ConcernZ
		if s.Z == "" {
			concern = ConcernX
		}
		return nil, blame(StageGroup, concern, err)
	}
	return fit.In(frame), nil
}

// directions reads what a person writes for an axis.
type directions struct {
	fit  *symmetry.Fit
	read *Structure
	core []int
}

// shortest (Å, or the unit of a vector that was typed) is the length below which
// two places give no direction.
const shortest = 1e-3

// parse reads a direction in the frame of the fit: an operation by its name, an
// atom (from the origin to it), two atoms, or three numbers, a vector in the
// axes of the input. It is zero for the empty text, and any length else.
func (d directions) parse(text string) (mgl64.Vec3, error) {
	text = strings.TrimSpace(text)
	if text == "" {
		return mgl64.Vec3{}, nil
	}
	parts := strings.Split(text, ",")
	numbers := make([]float64, len(parts))
	for i, part := range parts {
		var err error
		if numbers[i], err = strconv.ParseFloat(strings.TrimSpace(part), 64); err != nil {
			return d.operation(text)
		}
	}
	var out mgl64.Vec3
	var what message.Text
	switch len(numbers) {
	case 1, 2:
		from := mgl64.Vec3{}
		to, err := d.atom(parts[len(parts)-1])
		if err == nil && len(numbers) == 2 {
			from, err = d.atom(parts[0])
		}
		if err != nil {
			return mgl64.Vec3{}, err
		}
		out = to.Sub(from)
		if what = message.Words("atoms %s lie at one place", text); len(numbers) == 1 {
			what = message.Words("atom %s lies at the origin", text)
		}
	case 3:
		out = d.fit.Rotation.Mul3x1(mgl64.Vec3{numbers[0], numbers[1], numbers[2]})
		what = message.Words("the vector %s has no length", text)
	default:
		return mgl64.Vec3{}, message.Errorf("%q: an operation, one atom, two atoms or a vector of three numbers would do", text)
	}
	if !(out.Len() > shortest) || !(out.Len() < 1e12) {
		return mgl64.Vec3{}, message.Errorf("%s: that gives no direction", what)
	}
	return out, nil
}

func (d directions) operation(name string) (mgl64.Vec3, error) {
	group := Group{Structure: d.read, Fit: d.fit}
	if d.fit.Setting.Infinite() {
		return mgl64.Vec3{}, message.Errorf("%q: the axes of %s are not chosen by operations", name, d.fit.Setting.Symbol)
	}
	o, err := group.Operation(name, 0)
	if err != nil {
		return mgl64.Vec3{}, message.Errorf("%w; an atom (2), two atoms (2,3) or a vector (1,0,0) can be given too", err)
	}
	if o.Axis == (mgl64.Vec3{}) {
		return mgl64.Vec3{}, message.Errorf("%s has no axis", o.Name)
	}
	return o.Axis, nil
}

func (d directions) atom(text string) (mgl64.Vec3, error) {
	n, err := strconv.Atoi(strings.TrimSpace(text))
	if count := len(d.read.Molecule.Atoms); err != nil || n < 1 || n > count {
		return mgl64.Vec3{}, message.Errorf("there is no atom %s: the structure has atoms 1 to %d", strings.TrimSpace(text), count)
	}
	for k, i := range d.core {
		if i == n-1 {
			return d.fit.Ideal[k], nil
		}
	}
	return d.fit.Rotation.Mul3x1(d.read.Molecule.Atoms[n-1].Position.Sub(d.fit.Origin)), nil
}
