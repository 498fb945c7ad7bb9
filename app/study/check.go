package study

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"unicode"
	"unicode/utf8"

	"lobewright/app/study/record"
)

// Limits of what a study holds. They are far beyond what is of use, and keep
// a file from elsewhere within bounds.
const (
	// MaxCoordinates is the most bytes of Coordinates: 20,000 atoms with a
	// hundred characters each.
	MaxCoordinates = 2 << 20
	// maxLines is the most lines of Coordinates.
	maxLines = 100_000

	maxPath      = 4096    // bytes of Structure
	maxSelection = 1 << 18 // bytes of a selection of atoms or functions
	maxName      = 256     // bytes of a name of an irrep, an operation, a frame
	maxBasis     = 256     // selections
	maxAtoms     = 20_000  // chosen ones
	maxNumber    = 1_000_000
	maxSize      = 1e5 // mm, dots per inch
)

// Check tells what of a study is out of range, as a *record.Error with its
// key. Whether the structure has what is chosen is not checked here.
func (s Study) Check() error {
	var c checker
	c.text("structure", s.Structure, maxPath)
	c.coordinates(s.Coordinates)
	c.text("core", s.Core, maxSelection)
	c.text("ignore", s.Ignore, maxSelection)
	c.number("tolerance", s.Tolerance, 0, math.MaxFloat64)
	c.text("as", s.As, maxName)
	c.text("frame", s.Frame, maxName)
	c.text("z", s.Z, maxName)
	c.text("x", s.X, maxName)
	c.basis(s.Basis)
	c.atoms(s.Atoms)
	p := s.Projection
	c.count("projection.function", p.Function)
	c.text("projection.irrep", p.Irrep, maxName)
	c.count("projection.copy", p.Copy)
	c.count("projection.partner", p.Partner)
	c.word("projection.subject", string(p.Subject), string(SubjectFunction), string(SubjectOrbital))
	for i, e := range p.Element {
		c.count(fmt.Sprintf("projection.element[%d]", i+1), e)
	}
	c.text("operation", s.Operation, maxName)
	c.number("moment", s.Moment, 0, 1)
	c.number("angle", s.Angle, 0, 360)
	c.camera(s.Camera)
	c.word("look.style", s.Look.Style, "lit", "ink")
	c.word("look.ground", s.Look.Ground, "paper", "white", "dark", "transparent")
	c.word("look.size", s.Look.Size, "length", "area", "volume")
	c.number("figure.width", s.Figure.Width, 0, maxSize)
	c.number("figure.height", s.Figure.Height, 0, maxSize)
	c.number("figure.resolution", s.Figure.Resolution, 0, maxSize)
	if c.err == nil {
		return nil // not a nil *record.Error within an error
	}
	return c.err
}

// A checker keeps the first thing that is wrong.
type checker struct{ err *record.Error }

func (c *checker) wrong(key, format string, arguments ...any) {
	if c.err == nil {
		c.err = record.Wrong(key, format, arguments...)
	}
}

func (c *checker) text(key, s string, most int) {
	switch {
	case len(s) > most:
		c.wrong(key, "the text has %d bytes; it may have %d", len(s), most)
	case !utf8.ValidString(s):
		c.wrong(key, "the text is not UTF-8")
	case strings.ContainsFunc(s, unicode.IsControl):
		c.wrong(key, "the text contains a control character")
	}
}

func (c *checker) coordinates(s string) {
	switch {
	case len(s) > MaxCoordinates:
		c.wrong("coordinates", "the text has %d bytes; it may have %d", len(s), MaxCoordinates)
	case strings.Count(s, "\n") >= maxLines:
		c.wrong("coordinates", "the text has more than %d lines", maxLines)
	case !utf8.ValidString(s):
		c.wrong("coordinates", "the text is not UTF-8")
	}
}

func (c *checker) number(key string, x, least, most float64) {
	switch {
	case math.IsNaN(x) || math.IsInf(x, 0):
		c.wrong(key, "%g is no finite number", x)
	case x < least:
		c.wrong(key, "%g is too small; the least is %g", x, least)
	case x > most:
		c.wrong(key, "%g is too large; the most is %g", x, most)
	}
}

func (c *checker) count(key string, n int) {
	if n < 0 || n > maxNumber {
		c.wrong(key, "%d is no number to count with; it counts from 1, and 0 is none", n)
	}
}

func (c *checker) word(key, s string, words ...string) {
	if s != "" && !slices.Contains(words, s) {
		c.wrong(key, "%.40q is not known; there are %s", s, strings.Join(words, ", "))
	}
}

func (c *checker) basis(basis []string) {
	if len(basis) > maxBasis {
		c.wrong("basis", "there are %d selections; there may be %d", len(basis), maxBasis)
	}
	for i, text := range basis {
		c.text(fmt.Sprintf("basis[%d]", i+1), text, maxSelection)
	}
}

func (c *checker) atoms(atoms []int) {
	if len(atoms) > maxAtoms {
		c.wrong("atoms", "there are %d atoms; there may be %d", len(atoms), maxAtoms)
	}
	before := 0
	for i, a := range atoms {
		if a <= before || a > maxNumber {
			c.wrong(fmt.Sprintf("atoms[%d]", i+1), "%d is out of place; atoms count from 1 and rise", a)
		}
		before = a
	}
}

func (c *checker) camera(v Camera) {
	c.number("camera.azimuth", v.Azimuth, -360, 360)
	c.number("camera.elevation", v.Elevation, -90, 90)
	if v.Rotation != [4]float64{} {
		square := 0.0
		for _, x := range v.Rotation {
			square += x * x
		}
		if !(math.Abs(square-1) <= 1e-6) {
			c.wrong("camera.rotation", "the squares add up to %.6g, not to 1", square)
		}
	}
	if v.Zoom != 0 {
		c.number("camera.zoom", v.Zoom, MinZoom, MaxZoom)
	}
	for i, x := range v.Pan {
		c.number(fmt.Sprintf("camera.pan[%d]", i+1), x, -MaxPan, MaxPan)
	}
}
