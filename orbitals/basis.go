package orbitals

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/symmetry/message"
)

// A Kind tells functions apart that never share a group orbital.
type Kind int

// The kinds of functions: shells along the axes of the frame, and the sets
// relative to a centre.
const (
	KindS Kind = iota
	KindP
	KindD
	KindF
	KindSigma
	KindPi
)

// String returns "s", "p", "d", "f", "sigma" or "pi".
func (k Kind) String() string {
	return [...]string{"s", "p", "d", "f", nameSigma, namePi}[k]
}

// A Function is a real, normalized function on an atom.
type Function struct {
	Site  int // the atom
	Shell int // l
	// Vector has the 2l+1 components along the functions of the shell, in
	// the order of FunctionNames, in the working frame. Its length is 1.
	Vector []float64
	// Name is one of FunctionNames, "sigma", "pi1", "pi2", or in a planar
	// structure "pi-in", "pi-out".
	Name string
	Kind Kind
	// Direction is where the positive lobe of a p function named relative
	// to a centre points, a unit vector in the working frame; otherwise zero.
	Direction mgl64.Vec3
	// Orbit numbers, from 0, the sets of functions that the operations carry
	// into each other, in the order of the basis.
	Orbit int
}

// Value returns the value of the angular function in a direction of any length
// but zero.
func (f Function) Value(direction mgl64.Vec3) float64 {
	return dot(f.Vector, Harmonics(f.Shell, direction))
}

// A Basis is an ordered set of functions that the operations carry into
// themselves.
type Basis struct {
	Sites     *Sites
	Functions []Function
	// Notes say where the basis differs from what was chosen.
	Notes []Note
}

// A NoteKey says what a Note is about.
type NoteKey string

const (
	// NoteCompleted: Functions were added, because operations carry the
	// chosen ones into them.
	NoteCompleted NoteKey = "completed"
	// NoteContained: the functions Names on Atoms were left out, because
	// others chosen before them hold the same.
	NoteContained NoteKey = "contained"
	// NoteSpectators: Atoms of the chosen element, or of all, were left out,
	// because they are spectators without image.
	NoteSpectators NoteKey = "spectators"
	// NoteCentreCarried: Atoms have their functions relative to an image of
	// the centre that was given, not to this centre itself.
	NoteCentreCarried NoteKey = "centre-carried"
)

// A Note tells what a Basis has made of a Choice.
type Note struct {
	Key       NoteKey
	Choice    int      // index of the choice
	Functions []int    // indices of functions of the basis
	Names     []string // names of functions
	Atoms     []int
}

// MaxFunctions is the most functions that a basis may have. Group orbitals
// take the square of this number of coefficients, 128 MiB.
const MaxFunctions = 4096

// same (dimensionless) bounds what counts as zero among overlaps of unit
// vectors that the geometry makes 0 or 1 exactly. Their rounding stays below
// 1e-12; nothing in a structure makes them small without making them zero but
// an axis that is nearly, and not quite, along a bond.
const same = 1e-7

// NewBasis makes the functions of the choices, in their order: within a choice
// function by function as written, each on its atoms in rising order, a shell
// or a pi set atom by atom. Functions that occur already are left out, and what
// operations carry out of the set is completed; Notes tell of both. The error
// is one line for the person who chose.
func NewBasis(sites *Sites, choices ...Choice) (*Basis, error) {
	b := newBuilder(sites)
	for n, c := range choices {
		if err := b.addChoice(n, c); err != nil {
			return nil, err
		}
	}
	if len(b.functions) == 0 {
		return nil, message.Errorf("no functions are chosen: %s", choiceExample)
	}
	b.noteCompletions(len(choices))
	b.numberOrbits()
	return &Basis{Sites: sites, Functions: b.functions, Notes: b.notes}, nil
}

// A candidate is a function that a family may hold, and whether a person asked
// for it.
type candidate struct {
	Function
	asked bool
}

// addChoice adds the functions of a choice.
func (b *builder) addChoice(n int, c Choice) error {
	atoms, err := b.atoms(n, c.atoms)
	if err != nil {
		return err
	}
	for _, it := range c.items {
		family, err := b.family(n, it, atoms)
		if err != nil {
			return err
		}
		if err := b.merge(n, family); err != nil {
			return err
		}
	}
	return nil
}

// merge adds a family of functions, a set that the operations carry into
// itself, to the basis. What is contained in functions of the basis is left
// out; what overlaps with them otherwise is refused.
func (b *builder) merge(choice int, family []candidate) error {
	if n := len(b.functions) + len(family); n > MaxFunctions {
		return message.Errorf("%d functions are too many: at most %d can be projected together, so choose fewer atoms or functions", n, MaxFunctions)
	}
	left := Note{Key: NoteContained, Choice: choice}
	for _, f := range family {
		residual, twin := b.residual(f.Function)
		switch {
		case residual > 1-same:
			b.onSite[f.Site] = append(b.onSite[f.Site], len(b.functions))
			b.functions = append(b.functions, f.Function)
			b.asked = append(b.asked, f.asked)
			b.choice = append(b.choice, choice)
		case residual > same:
			return message.Errorf("%s on %s overlaps with its %s, chosen before: choose either the %s functions or those relative to a centre there",
				f.Name, b.atom(f.Site), b.functions[twin].Name, shellLetters[f.Shell:f.Shell+1])
		case b.functions[twin].Name == f.Name && dot(b.functions[twin].Vector, f.Vector) > 1-same:
			b.asked[twin] = b.asked[twin] || f.asked
		default:
			left.Names = append(left.Names, f.Name)
			left.Atoms = append(left.Atoms, f.Site)
		}
	}
	if len(left.Atoms) > 0 {
		b.notes = append(b.notes, left)
	}
	return nil
}

// residual returns the squared length of the part of f that is square to the
// functions of its shell that its atom has already, and the index of the one
// that overlaps most with f.
func (b *builder) residual(f Function) (square float64, twin int) {
	square, most := 1.0, 0.0
	for _, i := range b.onSite[f.Site] {
		g := b.functions[i]
		if g.Shell != f.Shell {
			continue
		}
		overlap := dot(g.Vector, f.Vector)
		square -= overlap * overlap
		if math.Abs(overlap) > most {
			most, twin = math.Abs(overlap), i
		}
	}
	return square, twin
}

// noteCompletions tells, choice by choice, which functions nobody asked for.
func (b *builder) noteCompletions(choices int) {
	for n := range choices {
		note := Note{Key: NoteCompleted, Choice: n}
		for i := range b.functions {
			if b.choice[i] == n && !b.asked[i] {
				note.Functions = append(note.Functions, i)
			}
		}
		if len(note.Functions) > 0 {
			b.notes = append(b.notes, note)
		}
	}
}

// numberOrbits numbers the orbits of functions.
func (b *builder) numberOrbits() {
	join := newJoints(len(b.functions))
	var image []float64
	for i, f := range b.functions {
		for _, c := range b.generators {
			image = c.carry(f, image)
			for _, j := range b.onSite[c.to(f.Site)] {
				g := b.functions[j]
				if g.Shell == f.Shell && math.Abs(dot(g.Vector, image)) > negligible {
					join.join(i, j)
				}
			}
		}
	}
	for i, n := range join.number() {
		b.functions[i].Orbit = n
	}
}

func dot(a, b []float64) float64 {
	sum := 0.0
	for i, x := range a {
		sum += x * b[i]
	}
	return sum
}
