// Package study holds what a person chose in one piece of work, and nothing
// that follows from it. Two equal studies give the same results, and so the
// same text, the same JSON and the same picture.
package study

// Version is the version of the study's form that this program writes.
const Version = 1

// A Study is all choices of one piece of work. Its zero value has every
// default but no structure. Atoms, functions, copies, partners and matrix
// elements count from 1, as people count; zero means that nothing is chosen.
type Study struct {
	Version int `json:"version"`
	// Structure says where the structure comes from: the path of a file, "-"
	// for standard input, or a name such as "ideal:OC-6" or "demo:…".
	Structure string `json:"structure"`
	// Core and Ignore choose the atoms that decide the group; both empty:
	// all atoms.
	Core   string `json:"core,omitempty"`
	Ignore string `json:"ignore,omitempty"`
	// Tolerance (Å) is the farthest that a core atom may lie from its ideal
	// place. Zero stands for DefaultTolerance.
	Tolerance float64 `json:"tolerance,omitempty"`
	// Frame names the rule that puts the axes; empty: the default rule.
	Frame string `json:"frame,omitempty"`
	// Basis holds the selections of functions, such as "Cl:sigma".
	Basis      []string   `json:"basis,omitempty"`
	Projection Projection `json:"projection,omitzero"`
	// Operation names an operation whose symmetry element is shown.
	Operation string `json:"operation,omitempty"`
	Camera    Camera `json:"camera,omitzero"`
	Look      Look   `json:"look,omitzero"`
	Figure    Figure `json:"figure,omitzero"`
}

// A Projection says what is projected and which result is looked at.
type Projection struct {
	// Function is the function of the basis whose ledger is made.
	Function int `json:"function,omitempty"`
	// Irrep is a label; Copy and Partner choose a group orbital of it.
	Irrep   string `json:"irrep,omitempty"`
	Copy    int    `json:"copy,omitempty"`
	Partner int    `json:"partner,omitempty"`
	// Element is the matrix element that weighs the operations in the
	// ledger; zero stands for (1, 1). Character takes the character instead.
	Element   [2]int `json:"element,omitzero"`
	Character bool   `json:"character,omitempty"`
}

// A Camera says from where the picture is seen. The zero Camera leaves the
// choice to the program.
type Camera struct {
	// Azimuth is counted from +x toward +y, Elevation from the xy plane
	// toward +z, both in degrees. They count only if Set.
	Set       bool    `json:"set,omitempty"`
	Azimuth   float64 `json:"azimuth,omitempty"`
	Elevation float64 `json:"elevation,omitempty"`
	// Orthographic turns the perspective off.
	Orthographic bool `json:"orthographic,omitempty"`
}

// A Look says how bodies are drawn.
type Look struct {
	// Style is "lit" or "ink"; empty stands for "lit".
	Style string `json:"style,omitempty"`
	// Ground is "paper", "white", "dark" or "transparent"; empty stands for
	// "paper".
	Ground string `json:"ground,omitempty"`
	// Size is what goes with |c| of a lobe: "length", "area" or "volume";
	// empty stands for "length".
	Size string `json:"size,omitempty"`
	// NoLabels and NoAxes leave the atoms' labels and the triad out.
	NoLabels bool `json:"noLabels,omitempty"`
	NoAxes   bool `json:"noAxes,omitempty"`
}

// A Figure says how large the picture is on paper.
type Figure struct {
	// Width and Height are in millimetres, Resolution in dots per inch. Zero
	// stands for the defaults, a zero Height for one that suits the content.
	Width      float64 `json:"width,omitempty"`
	Height     float64 `json:"height,omitempty"`
	Resolution float64 `json:"resolution,omitempty"`
	// NoCaption leaves out the label and the legend below the picture.
	NoCaption bool `json:"noCaption,omitempty"`
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
