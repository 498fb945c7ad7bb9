package render

import (
	"github.com/go-gl/mathgl/mgl64"
)

// Vec3 is a point or a direction; lengths are in the units of the scene
// unless a field says millimetres.
type Vec3 = mgl64.Vec3

// Affine is the map p -> Linear·p + Shift. Reflections and singular maps are
// allowed: normals and winding stay right, and a body pressed flat is drawn
// flat.
type Affine struct {
	Linear mgl64.Mat3
	Shift  Vec3
}

// Identity returns the map that leaves every point where it is.
func Identity() Affine { return Affine{Linear: mgl64.Ident3()} }

// Linear returns the map p -> m·p, which keeps the origin in its place.
func Linear(m mgl64.Mat3) Affine { return Affine{Linear: m} }

// About returns the map that applies m with centre c fixed.
func About(m mgl64.Mat3, c Vec3) Affine { return Affine{m, c.Sub(m.Mul3x1(c))} }

// Apply returns the image of a point.
func (a Affine) Apply(p Vec3) Vec3 { return a.Linear.Mul3x1(p).Add(a.Shift) }

// After returns the map that applies b first and a to its result.
func (a Affine) After(b Affine) Affine {
	return Affine{a.Linear.Mul3(b.Linear), a.Apply(b.Shift)}
}

// Scene is a plain value: the shapes to draw and the fonts that their texts
// are set in. Drawing only reads it; one scene may be drawn by several
// goroutines at once.
type Scene struct {
	Shapes []Shape
	// Fonts serves the shapes with a Text; without fonts texts are not drawn.
	Fonts *Fonts
}

// Add appends a shape and returns its index.
func (s *Scene) Add(g Geometry, m Material) int {
	s.Shapes = append(s.Shapes, Shape{Geometry: g, Material: m})
	return len(s.Shapes) - 1
}

// Shape is a geometry, moved by a transform, with a material.
type Shape struct {
	Geometry Geometry
	// Transform moves the geometry; nil leaves it where it is.
	Transform *Affine
	Material  Material
	// Place puts the shape on the picture instead of into the scene, in
	// front of everything; nil is the usual case.
	Place *Place
}

// Place fixes a shape to the picture: an axis triad in a corner, a scale bar,
// a panel letter. The geometry's x runs to the right, y up and z to the
// viewer, seen without perspective; such shapes hide each other by their
// depth and lie in front of the scene.
type Place struct {
	// X and Y name the point of the picture where the geometry's origin
	// comes to lie, as shares of its width from the left and of its height
	// from below.
	X, Y float64
	// OffsetX and OffsetY, in millimetres to the right and up, are added.
	OffsetX, OffsetY float64
	// Unit is the length of one unit of the geometry in millimetres; 0 is 1.
	Unit float64
	// Share, when it is not 0, takes the place of Unit: one unit of the
	// geometry is this share of the picture's short side.
	Share float64
	// Turn gives the geometry the scene's orientation: it is turned as the
	// camera sees the scene.
	Turn bool
}

// Geometry is one of Sphere, Cylinder, Cone, Arrow, Disc, Polygon, Line,
// Text and *Mesh.
type Geometry interface{ geometry() }

// Sphere is drawn exactly, without facets; a transform makes it an
// ellipsoid.
type Sphere struct {
	Center Vec3
	Radius float64
}

// Cylinder is a round rod from A to B with flat ends, drawn exactly.
type Cylinder struct {
	A, B   Vec3
	Radius float64
}

// Cone is a round cone with a flat base, drawn exactly.
type Cone struct {
	Base, Apex Vec3
	Radius     float64
}

// Arrow is a cylinder from From that ends in a cone with its apex at To.
// HeadLength and HeadRadius of 0 are chosen from Radius; the head is never
// longer than the arrow.
type Arrow struct {
	From, To               Vec3
	Radius                 float64
	HeadLength, HeadRadius float64
}

// Disc is a flat round plate without thickness; a translucent disc is one
// layer. Hole is the radius of a round hole in its middle.
type Disc struct {
	Center, Normal Vec3
	Radius         float64
	Hole           float64
}

// Polygon is a flat simple polygon without thickness, convex or not.
type Polygon struct {
	Points []Vec3
}

// Line is a polyline with a width on the picture.
type Line struct {
	Points []Vec3
	Closed bool
	// Width in millimetres on the picture.
	Width float64
	// Dash lists the lengths of strokes and gaps by turns, in millimetres on
	// the picture; empty is a full line.
	Dash []float64
}

// Mesh is an indexed surface of triangles. The slices are read while
// drawing and not copied.
type Mesh struct {
	Positions [][3]float32
	// Normals, one a position, need not be of unit length; nil gives every
	// triangle its own flat normal.
	Normals [][3]float32
	// Coords, one a position, are surface coordinates for the hatching.
	Coords    [][2]float32
	Triangles [][3]uint32
	// Closed states that the surface has no rim and that its triangles run
	// counter-clockwise seen from outside. The far side of an opaque closed
	// surface is then left out.
	Closed bool
}

// Text is a label. It is set at the output's own resolution and always faces
// the viewer; a transform or place moves its anchor only.
type Text struct {
	At   Vec3
	Runs []Run
	// Size of the type in points (1/72 inch); indices follow from it.
	Size float64
	// AlignX and AlignY say which point of the text lies at the anchor: -1
	// is its left or lower edge (the base line for AlignY -1), 0 its middle
	// and 1 its right or upper edge.
	AlignX, AlignY float64
	// OffsetX and OffsetY, in millimetres to the right and up, are added to
	// the anchor on the picture.
	OffsetX, OffsetY float64
	// Halo is the width in millimetres of a rim in HaloColor around the
	// signs; 0 is none.
	Halo      float64
	HaloColor Color
	// Through shows the text through the bodies in front of its anchor;
	// otherwise they hide it.
	Through bool
	// Lift brings the anchor nearer to the viewer by this length of the
	// scene, so that a text at the centre of a body lies on the body.
	Lift float64
	// Fixed keeps the text where it is; otherwise texts that would overlap
	// are pushed apart, the later ones first.
	Fixed bool
}

// Run is a piece of a text in one style.
type Run struct {
	Text         string
	Italic, Bold bool
	Script       Script
	// Script text of a run that is Stacked begins where the run before it
	// began, so that a superscript stands above a subscript.
	Stacked bool
}

// Script says whether a run stands on the base line or is an index.
type Script int

// The places of a run.
const (
	OnLine Script = iota
	Sub
	Super
	// SubSuper is raised within a lowered index, as the power in the index of
	// d with z².
	SubSuper
)

func (Sphere) geometry()   {}
func (Cylinder) geometry() {}
func (Cone) geometry()     {}
func (Arrow) geometry()    {}
func (Disc) geometry()     {}
func (Polygon) geometry()  {}
func (Line) geometry()     {}
func (Text) geometry()     {}
func (*Mesh) geometry()    {}
