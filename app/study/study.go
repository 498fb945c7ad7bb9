// Package study holds what a person chose in one piece of work, and nothing
// that follows from it. Two equal studies give the same results, and so the
// same text, the same JSON and the same picture.
//
// A Study is a plain value. Encode and Decode make its file; a History holds
// the studies of one sitting, for undo and redo.
package study

import (
	"reflect"
	"slices"
)

// A Study is all choices of one piece of work. Its zero value has every
// default but no structure. Atoms, functions, copies, partners and matrix
// elements count from 1, as people count; zero means that nothing is chosen.
//
// Studies are handed about as values and share their lists, so a list is never
// changed in place: who changes one puts a new one there.
type Study struct {
	// Structure says where the structure comes from: the path of a file, "-"
	// for standard input, or a name such as "ideal:OC-6" or "demo:…". Where
	// there are Coordinates it is only their name.
	Structure string `record:"structure"`
	// Coordinates is the text of a coordinate list that came from no file that
	// could be read again; see WithCoordinates.
	Coordinates string `record:"coordinates,lines"`
	// Core and Ignore choose the atoms that decide the group; both empty:
	// all atoms.
	Core   string `record:"core"`
	Ignore string `record:"ignore"`
	// Tolerance (Å) is the farthest that a core atom may lie from its ideal
	// place. Zero stands for DefaultTolerance.
	Tolerance float64 `record:"tolerance"`
	// As chooses one of the groups that the structure nearly has, in the place
	// of the one that it has within the tolerance: "D4h", or "D4h:2" for the
	// second embedding.
	As string `record:"as"`
	// KeepAxes lays the axes of As like those of the largest group that the
	// structure nearly has and that holds it.
	KeepAxes bool `record:"keepAxes"`
	// Frame names the rule that puts the axes; empty: the default rule.
	Frame string `record:"frame"`
	// Z and X lay these axes without a rule: an operation, an atom (from the
	// origin to it), two atoms ("3,5": from one to the other) or a vector of
	// the input ("0,1,1").
	Z string `record:"z"`
	X string `record:"x"`
	// Basis holds the selections of functions, such as "Cl:sigma".
	Basis []string `record:"basis"`
	// Atoms are those chosen in the picture, rising. They decide nothing.
	Atoms      []int      `record:"atoms"`
	Projection Projection `record:"projection"`
	// Turn rotates the partners of the chosen irrep into each other, and Mixing
	// its copies; the rotations are carried out in their order.
	Turn   []PlaneRotation `record:"turn"`
	Mixing []PlaneRotation `record:"mixing"`
	// Operation names the operation whose symmetry element is shown and which
	// is played.
	Operation string `record:"operation"`
	// Moment is how far the operation has come: 0 at the start, 1 at the end.
	Moment float64 `record:"moment"`
	// Angle is φ in degrees, for the operations C(φ), σv(φ) … of linear
	// molecules: from 0 to 360.
	Angle float64 `record:"angle"`
	// Held is what is held beside the picture, to be compared with it.
	Held Held `record:"held"`
	// Central is the atom whose own functions are matched with the group
	// orbitals; zero leaves the choice to the program.
	Central int `record:"central"`
	// Subgroup is a group into which the irreps are followed: "C4v", or
	// "C4v:2" for the second embedding.
	Subgroup string `record:"subgroup"`
	// Kept are operations that Subgroup holds, "C4(x), σv(xy)": they choose one
	// of the subgroups that the operations of the group carry into each other.
	// Empty leaves it to the program.
	Kept   string `record:"kept"`
	Camera Camera `record:"camera"`
	// Views are cameras with names, kept to come back to.
	Views  []View `record:"views"`
	Look   Look   `record:"look"`
	Figure Figure `record:"figure"`
	// Levels are the heights that were set by hand on a sheet of levels.
	Levels    []Level   `record:"levels"`
	Animation Animation `record:"animation"`
}

// A Projection says what is projected and which result is looked at.
type Projection struct {
	// Function is the function of the basis whose ledger is made.
	Function int `record:"function"`
	// Irrep is a label; Copy and Partner choose a group orbital of it.
	Irrep   string `record:"irrep"`
	Copy    int    `record:"copy"`
	Partner int    `record:"partner"`
	// Subject is what the operation is played on and what is drawn; see
	// TheSubject.
	Subject Subject `record:"subject"`
	// Element is the matrix element that weighs the operations in the
	// ledger; zero stands for (1, 1). Character takes the character instead.
	Element   [2]int `record:"element"`
	Character bool   `record:"character"`
}

// A PlaneRotation turns two functions of an orthonormal set into each other:
// From becomes cos·From + sin·To, and To becomes −sin·From + cos·To. Both count
// from 1 and differ; Angle is in degrees, from −360 to 360.
type PlaneRotation struct {
	From  int     `record:"from"`
	To    int     `record:"to"`
	Angle float64 `record:"angle"`
}

// Held is a second frame or a second group orbital, held against the one in
// force. Frame, Z and X are as in a Study, Irrep, Copy and Partner as in a
// Projection.
type Held struct {
	Frame   string `record:"frame"`
	Z       string `record:"z"`
	X       string `record:"x"`
	Irrep   string `record:"irrep"`
	Copy    int    `record:"copy"`
	Partner int    `record:"partner"`
}

// A View is a camera with the name under which it is found again.
type View struct {
	Name   string `record:"name"`
	Camera Camera `record:"camera"`
}

// A Subject is what an operation is played on.
type Subject string

// The subjects.
const (
	NoSubject       Subject = ""
	SubjectFunction Subject = "function" // the function of the basis
	SubjectOrbital  Subject = "orbital"  // the group orbital
)

// TheSubject is the subject in force. Without a choice it is the group orbital
// if an irrep is chosen, else the function; NoSubject if that is not chosen
// either.
func (p Projection) TheSubject() Subject {
	switch {
	case p.Irrep != "" && (p.Subject != SubjectFunction || p.Function == 0):
		return SubjectOrbital
	case p.Function != 0:
		return SubjectFunction
	}
	return NoSubject
}

// A Look says how bodies are drawn.
type Look struct {
	// Style is "lit" or "ink"; empty stands for "lit".
	Style string `record:"style"`
	// Ground is "paper", "white", "dark" or "transparent"; empty stands for
	// "paper".
	Ground string `record:"ground"`
	// Size is what goes with |c| of a lobe: "length", "area" or "volume";
	// empty stands for "length".
	Size string `record:"size"`
	// Shape is what a lobe is: "contour", a surface of equal value; "polar",
	// as far from the atom as |Y| is large; "square", likewise with Y². Empty
	// stands for "contour".
	Shape string `record:"shape"`
	// Signs tells the sign of a lobe a second time: "hatching" on the negative
	// ones, or "printed" + and −; empty: by tone alone.
	Signs string `record:"signs"`
	// Nodes shows the nodal planes of the group orbital.
	Nodes bool `record:"nodes"`
	// Elements shows all symmetry elements, not only those of the operation.
	Elements bool `record:"elements"`
	// Coloured gives the atoms colours by element.
	Coloured bool `record:"coloured"`
	// Displacements shows how far the atoms are from the ideal structure.
	Displacements bool `record:"displacements"`
	// Split shows all partners of the set side by side.
	Split bool `record:"split"`
	// NoLabels and NoAxes leave the atoms' labels and the triad out.
	NoLabels bool `record:"noLabels"`
	NoAxes   bool `record:"noAxes"`
}

// A Figure says what a figure shows and how large it is on paper.
type Figure struct {
	// Sheet is what the panels show: "one" group orbital, "all" of a basis, all
	// partners of one "set", the "operations" on the chosen function, the
	// "molecule" with its symmetry elements, two "frames", the "descent" into
	// Subgroup, or the "levels" of group orbitals and central orbitals. Empty
	// stands for "one".
	Sheet string `record:"sheet"`
	// Slide makes the sheet 16:9, with text to be read from afar.
	Slide bool `record:"slide"`
	// Language is that of the words in figures, "en" or "de"; empty stands for
	// that of the window, and for "en" outside of it.
	Language string `record:"language"`
	// Font is "sans" or "serif"; empty stands for "sans".
	Font string `record:"font"`
	// TextSize is in points; zero stands for 8, or 18 on a slide.
	TextSize float64 `record:"textSize"`
	// NoLetters, NoLegend, NoCard and NoCoefficients leave these out of a
	// sheet: the letters of the panels, the legend of signs and sizes, the card
	// with triad and rule, and the closed forms.
	NoLetters      bool `record:"noLetters"`
	NoLegend       bool `record:"noLegend"`
	NoCard         bool `record:"noCard"`
	NoCoefficients bool `record:"noCoefficients"`
	// NoStudy keeps the study out of the files of figures.
	NoStudy bool `record:"noStudy"`
	// Width and Height are in millimetres, Resolution in dots per inch. Zero
	// stands for the defaults, a zero Height for one that suits the content.
	Width      float64 `record:"width"`
	Height     float64 `record:"height"`
	Resolution float64 `record:"resolution"`
	// NoCaption leaves out the label and the legend below the picture.
	NoCaption bool `record:"noCaption"`
}

// A Level is the height of a level in a sketch of interactions, set by hand: it
// claims no energy. Height counts upward, in percent of the column's height.
type Level struct {
	// Side is "group" or "central".
	Side string `record:"side"`
	// Irrep and Copy say which level; copies count within the side.
	Irrep  string  `record:"irrep"`
	Copy   int     `record:"copy"`
	Height float64 `record:"height"`
}

// An Animation says how an operation is written as a moving picture. Zeros
// stand for the defaults.
type Animation struct {
	// Seconds is how long the operation takes, Rate the pictures in a second.
	Seconds float64 `record:"seconds"`
	Rate    float64 `record:"rate"`
	// Width and Height are in pixels.
	Width  int `record:"width"`
	Height int `record:"height"`
	// Once plays the operation once instead of again and again.
	Once bool `record:"once"`
}

// DefaultTolerance (Å) is about the scatter of a good crystal structure, and
// well below the distortions that chemists call by name.
const DefaultTolerance = 0.02

// TheTolerance is the tolerance in force, in Å.
func (s Study) TheTolerance() float64 {
	if s.Tolerance == 0 {
		return DefaultTolerance
	}
	return s.Tolerance
}

// TheElement is the matrix element in force, counted from 1; zero twice where
// the character is used instead.
func (p Projection) TheElement() [2]int {
	switch {
	case p.Character:
		return [2]int{}
	case p.Element == [2]int{}:
		return [2]int{1, 1}
	}
	return p.Element
}

// The defaults of a figure: the width of one column of most journals, and
// what printers ask for at least.
const (
	DefaultWidth      = 85  // mm
	DefaultResolution = 300 // dots per inch
)

// TheWidth is the width in force, in millimetres.
func (f Figure) TheWidth() float64 {
	if f.Width == 0 {
		return DefaultWidth
	}
	return f.Width
}

// TheResolution is the resolution in force, in dots per inch.
func (f Figure) TheResolution() float64 {
	if f.Resolution == 0 {
		return DefaultResolution
	}
	return f.Resolution
}

// Opened is the study with another structure. What was chosen about the old
// one is forgotten; how pictures are drawn stays.
func (s Study) Opened(structure string) Study {
	return Study{
		Structure: structure,
		Camera:    Camera{Orthographic: s.Camera.Orthographic},
		Look:      s.Look,
		Figure:    s.Figure,
		Animation: s.Animation,
	}
}

// Equal tells whether two studies are the same choices.
func (s Study) Equal(t Study) bool {
	return slices.Equal(s.Basis, t.Basis) && slices.Equal(s.Atoms, t.Atoms) && slices.Equal(s.Views, t.Views) &&
		slices.Equal(s.Turn, t.Turn) && slices.Equal(s.Mixing, t.Mixing) &&
		slices.Equal(s.Levels, t.Levels) && reflect.DeepEqual(s.withoutLists(), t.withoutLists())
}

// withoutLists leaves out what may be empty in two ways, nil or of no length.
func (s Study) withoutLists() Study {
	s.Basis, s.Atoms, s.Views = nil, nil, nil
	s.Turn, s.Mixing, s.Levels = nil, nil, nil
	return s
}
