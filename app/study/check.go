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
	maxRotations = 64
	maxViews     = 64
	maxLevels    = 1000
	maxPixels    = 16_384
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
	c.rotations("turn", s.Turn)
	c.rotations("mixing", s.Mixing)
	c.text("operation", s.Operation, maxName)
	c.number("moment", s.Moment, 0, 1)
	c.number("angle", s.Angle, 0, 360)
	c.text("held.frame", s.Held.Frame, maxName)
	c.text("held.z", s.Held.Z, maxName)
	c.text("held.x", s.Held.X, maxName)
	c.text("held.irrep", s.Held.Irrep, maxName)
	c.count("held.copy", s.Held.Copy)
	c.count("held.partner", s.Held.Partner)
	c.count("central", s.Central)
	c.text("subgroup", s.Subgroup, maxName)
	c.text("kept", s.Kept, maxName)
	c.camera("camera", s.Camera)
	c.views(s.Views)
	c.look(s.Look)
	c.figure(s.Figure)
	c.levels(s.Levels)
	c.number("animation.seconds", s.Animation.Seconds, 0, 60)
	c.number("animation.rate", s.Animation.Rate, 0, 60)
	c.pixels("animation.width", s.Animation.Width)
	c.pixels("animation.height", s.Animation.Height)
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

func (c *checker) rotations(key string, rotations []PlaneRotation) {
	if len(rotations) > maxRotations {
		c.wrong(key, "there are %d rotations; there may be %d", len(rotations), maxRotations)
	}
	for i, r := range rotations {
		key := fmt.Sprintf("%s[%d]", key, i+1)
		c.number(key+".angle", r.Angle, -360, 360)
		switch {
		case r.From < 1 || r.From > maxNumber || r.To < 1 || r.To > maxNumber:
			c.wrong(key, "from %d to %d is no rotation; functions count from 1", r.From, r.To)
		case r.From == r.To:
			c.wrong(key, "function %d cannot be turned into itself", r.From)
		}
	}
}

func (c *checker) views(views []View) {
	if len(views) > maxViews {
		c.wrong("views", "there are %d views; there may be %d", len(views), maxViews)
	}
	for i, v := range views {
		key := fmt.Sprintf("views[%d]", i+1)
		c.text(key+".name", v.Name, maxName)
		if v.Name == "" {
			c.wrong(key+".name", "a view needs a name")
		}
		c.camera(key+".camera", v.Camera)
	}
}

func (c *checker) look(l Look) {
	c.word("look.style", l.Style, "lit", "ink")
	c.word("look.ground", l.Ground, "paper", "white", "dark", "transparent")
	c.word("look.size", l.Size, "length", "area", "volume")
	c.word("look.shape", l.Shape, "contour", "polar", "square")
	c.word("look.signs", l.Signs, "hatching", "printed")
}

func (c *checker) figure(f Figure) {
	c.word("figure.sheet", f.Sheet, "one", "all", "set", "operations", "molecule", "frames", "descent", "levels")
	c.word("figure.language", f.Language, "en", "de")
	c.word("figure.font", f.Font, "sans", "serif")
	c.number("figure.textSize", f.TextSize, 0, 200)
	c.number("figure.width", f.Width, 0, maxSize)
	c.number("figure.height", f.Height, 0, maxSize)
	c.number("figure.resolution", f.Resolution, 0, maxSize)
}

func (c *checker) levels(levels []Level) {
	if len(levels) > maxLevels {
		c.wrong("levels", "there are %d levels; there may be %d", len(levels), maxLevels)
	}
	for i, l := range levels {
		key := fmt.Sprintf("levels[%d]", i+1)
		c.word(key+".side", l.Side, "group", "central")
		c.text(key+".irrep", l.Irrep, maxName)
		c.count(key+".copy", l.Copy)
		c.number(key+".height", l.Height, 0, 100)
	}
}

func (c *checker) pixels(key string, n int) {
	if n < 0 || n > maxPixels {
		c.wrong(key, "%d is no size in pixels; it may be %d", n, maxPixels)
	}
}

func (c *checker) camera(key string, v Camera) {
	c.number(key+".azimuth", v.Azimuth, -360, 360)
	c.number(key+".elevation", v.Elevation, -90, 90)
	if v.Rotation != [4]float64{} {
		square := 0.0
		for _, x := range v.Rotation {
			square += x * x
		}
		if !(math.Abs(square-1) <= 1e-6) {
			c.wrong(key+".rotation", "the squares add up to %.6g, not to 1", square)
		}
	}
	if v.Zoom != 0 {
		c.number(key+".zoom", v.Zoom, MinZoom, MaxZoom)
	}
	for i, x := range v.Pan {
		c.number(fmt.Sprintf("%s.pan[%d]", key, i+1), x, -MaxPan, MaxPan)
	}
}
