package structure

import (
	"math"

	"github.com/go-gl/mathgl/mgl64"
)

// A Polyhedron is an ideal coordination polyhedron: a central atom and ligands at one distance from it.
type Polyhedron struct {
	// Symbol is the polyhedral symbol of N. G. Connelly and others, Nomenclature of Inorganic Chemistry, IUPAC
	// Recommendations 2005, table IR-9.3 (two to six read in part, the others as listed by an open
	// encyclopedia, the nines from memory).
	Symbol string
	// Name is the shape in words.
	Name string
	// Shape says what fixes the directions: "symmetry", or how a free angle was chosen.
	Shape string
	// Centre and Ligand are the elements that are taken if none are given (own choice: a known compound has
	// this pair or one much like it).
	Centre, Ligand Element
	// Directions are unit vectors from the centre to the ligands.
	Directions []mgl64.Vec3
}

// How free angles were chosen.
const (
	bySymmetry = "fixed by symmetry"
	partOf     = "a larger ideal polyhedron without some of its ligands (own choice)"
	// Where spheres of one size that touch a common centre can grow largest within the symmetry, the shortest
	// edges are equal: the hard-sphere angles of J. L. Hoard, J. V. Silverton, Inorg. Chem. 2, 235 (1963) and
	// D. L. Kepert, Inorganic Stereochemistry (1982), both from memory; for 7, 8 and 9 ligands with the groups
	// C3v, D4d and D3h they are also the best packings of circles on a sphere (P. M. L. Tammes 1930, K. Schütte,
	// B. L. van der Waerden 1951, from memory).
	hardSpheres = "equal shortest edges (hard spheres)"
	ownChoice   = "own choice of the free angle"
)

// Polyhedra returns the ideal polyhedra by rising number of ligands, in the order of the table of symbols. z is
// the principal axis.
func Polyhedra() []Polyhedron {
	el := func(symbol string) Element { e, _ := ElementOf(symbol); return e }
	shape := func(symbol, name, how, centre, ligand string, directions []mgl64.Vec3) Polyhedron {
		return Polyhedron{symbol, name, how, el(centre), el(ligand), directions}
	}
	return []Polyhedron{
		shape("L-2", "linear", bySymmetry, "Hg", "Cl", poles()),
		shape("A-2", "angular", partOf, "S", "Cl", tetrahedron()[:2]),
		shape("TP-3", "trigonal plane", bySymmetry, "Al", "Cl", ring(3, right, 0)),
		shape("TPY-3", "trigonal pyramid", partOf, "P", "Cl", trigonal(math.Acos(-1./3))),
		shape("TS-3", "T-shape", partOf, "Br", "F", ring(4, right, 0)[:3]),
		shape("T-4", "tetrahedron", bySymmetry, "Zn", "Cl", tetrahedron()),
		shape("SP-4", "square plane", bySymmetry, "Pt", "Cl", ring(4, right, 0)),
		shape("SPY-4", "square pyramid", partOf, "Sn", "O", ring(4, squarePyramid, 0)),
		shape("SS-4", "see-saw", partOf, "S", "F", join(poles(), ring(3, right, 0)[1:])),
		shape("TBPY-5", "trigonal bipyramid", bySymmetry, "P", "F", join(poles(), ring(3, right, 0))),
		shape("SPY-5", "square pyramid", ownChoice, "Br", "F", join(poles()[:1], ring(4, squarePyramid, 0))),
		shape("OC-6", "octahedron", bySymmetry, "Co", "N", join(ring(4, right, 0), poles())),
		shape("TPR-6", "trigonal prism", hardSpheres, "W", "C", prism(math.Atan(2/math.Sqrt(3)))),
		shape("PBPY-7", "pentagonal bipyramid", bySymmetry, "I", "F", join(poles(), ring(5, right, 0))),
		shape("OCF-7", "octahedron, face capped", hardSpheres, "W", "F", cappedOctahedron()),
		shape("TPRS-7", "trigonal prism, square face capped", partOf, "Ta", "F", cappedPrism(1)),
		shape("CU-8", "cube", bySymmetry, "U", "F", cube()),
		shape("SAPR-8", "square antiprism", hardSpheres, "Ta", "F", squareAntiprism()),
		shape("DD-8", "dodecahedron", hardSpheres, "Mo", "C", dodecahedron()),
		shape("HBPY-8", "hexagonal bipyramid", bySymmetry, "U", "O", join(poles(), ring(6, right, 0))),
		shape("OCT-8", "octahedron, trans-bicapped", ownChoice, "U", "O",
			join(poles(), ring(3, cappedByPoles, 0), ring(3, math.Pi-cappedByPoles, math.Pi/3))),
		shape("TPRT-8", "trigonal prism, triangular faces bicapped", hardSpheres, "U", "O",
			join(poles(), prism(cappedByPoles))),
		shape("TPRS-8", "trigonal prism, square faces bicapped", partOf, "Zr", "F", cappedPrism(2)),
		shape("TPRS-9", "trigonal prism, square faces tricapped", hardSpheres, "Re", "H", cappedPrism(3)),
		shape("HBPY-9", "heptagonal bipyramid", bySymmetry, "U", "O", join(poles(), ring(7, right, 0))),
	}
}

const right = math.Pi / 2

var (
	// squarePyramid is the angle between the apical and a basal ligand, 104.48°, with the cosine -1/4. Own
	// choice: real ones lie between 95° and 105°, and repulsion among the ligands is least near 104° (Kepert
	// 1982, from memory), while equal edges would put the centre into the base, as in an octahedron.
	squarePyramid = math.Acos(-0.25)
	// cappedByPoles is the polar angle of a trigonal prism or antiprism with ligands on both poles, 60°. In the
	// prism it makes the edges to the caps, 2 sin(θ/2), and the edges along the axis, 2 cos θ, equal (hard
	// spheres). In the antiprism the same rule would give a cube, another symbol; it takes over the prism's
	// angle, between the octahedron's 54.7° and the cube's 70.5° (own choice).
	cappedByPoles = math.Pi / 3
)

// at returns the unit vector with polar angle θ and azimuth φ (radians).
func at(theta, phi float64) mgl64.Vec3 {
	return mgl64.Vec3{math.Sin(theta) * math.Cos(phi), math.Sin(theta) * math.Sin(phi), math.Cos(theta)}
}

// ring returns n directions with polar angle θ, evenly about z, the first at azimuth φ.
func ring(n int, theta, phi float64) []mgl64.Vec3 {
	out := make([]mgl64.Vec3, n)
	for k := range out {
		out[k] = at(theta, phi+2*math.Pi*float64(k)/float64(n))
		if theta == right {
			out[k][2] = 0 // the cosine of the nearest number to π/2 is 6e-17
		}
	}
	return out
}

func poles() []mgl64.Vec3 { return []mgl64.Vec3{{0, 0, 1}, {0, 0, -1}} }

func join(parts ...[]mgl64.Vec3) (out []mgl64.Vec3) {
	for _, p := range parts {
		out = append(out, p...)
	}
	return out
}

// trigonal returns three directions about z with polar angle θ.
func trigonal(theta float64) []mgl64.Vec3 { return ring(3, theta, 0) }

func tetrahedron() []mgl64.Vec3 {
	a := 1 / math.Sqrt(3)
	return []mgl64.Vec3{{a, a, a}, {-a, -a, a}, {a, -a, -a}, {-a, a, -a}}
}

func cube() (out []mgl64.Vec3) {
	a := 1 / math.Sqrt(3)
	for i := range 8 {
		out = append(out, mgl64.Vec3{a * float64(1-i&1*2), a * float64(1-i>>1&1*2), a * float64(1-i>>2*2)})
	}
	return out
}

// prism returns a trigonal prism along z with polar angle θ. With tan θ = 2/√3 all nine edges are equal.
func prism(theta float64) []mgl64.Vec3 {
	return join(ring(3, theta, 0), ring(3, math.Pi-theta, 0))
}

// cappedPrism returns a trigonal prism with up to three caps over its square faces. Its polar angle has the sine
// 2/3: in the tricapped one the edges of the triangles, √3 sin θ, and those to the caps, √(2 - sin θ), are equal.
// The prisms with fewer caps keep this angle.
func cappedPrism(caps int) []mgl64.Vec3 {
	return join(prism(math.Asin(2./3)), ring(3, right, math.Pi/3)[:caps])
}

// cappedOctahedron returns a cap on the pole, three ligands at δ from it and three more, staggered, each at δ from
// two of those and from each other. δ is 77.87°, with the cosine 1 - (4/√3) cos(7π/18) (Schütte and van der
// Waerden 1951, from memory; the test measures the edges).
func cappedOctahedron() []mgl64.Vec3 {
	cos := 1 - 4/math.Sqrt(3)*math.Cos(7*math.Pi/18)
	// An edge of the lower triangle is 2 sin(δ/2) = √3 sin θ.
	lower := math.Pi - math.Asin(2*math.Sqrt((1-cos)/2)/math.Sqrt(3))
	return join(poles()[:1], ring(3, math.Acos(cos), 0), ring(3, lower, math.Pi/3))
}

// squareAntiprism: the edges of the squares, √2 sin θ, and those between them, √(4 cos²θ + (2-√2) sin²θ), are
// equal for tan²θ = 2√2, θ = 59.26°.
func squareAntiprism() []mgl64.Vec3 {
	theta := math.Atan(math.Sqrt(2 * math.Sqrt2))
	return join(ring(4, theta, 0), ring(4, math.Pi-theta, math.Pi/4))
}

// dodecahedron returns two trapezoids that stand on each other: A ligands at θA from the axis, B ligands at θB from
// its other end. The edges AA, AB within and AB between the trapezoids are equal for θB = π - 3θA and
// 4cos⁴θA - cos²θA - 1 = 0: 36.85° and 69.46°, the hard-sphere angles of Hoard and Silverton (1963).
func dodecahedron() []mgl64.Vec3 {
	a := math.Acos(math.Sqrt((1 + math.Sqrt(17)) / 8))
	b := 3 * a // from the end of the axis on which A lies
	return []mgl64.Vec3{
		at(a, 0), at(a, math.Pi), at(math.Pi-a, right), at(math.Pi-a, -right),
		at(b, 0), at(b, math.Pi), at(math.Pi-b, right), at(math.Pi-b, -right),
	}
}
