package orbitals

import (
	"math"
	"slices"

	"gonum.org/v1/gonum/mat"

	"lobewright/symmetry"
	"lobewright/symmetry/message"
)

// A Term is a function, by index, with a coefficient.
type Term struct {
	Function    int
	Coefficient float64
}

// A Representation says what every operation of a finite group makes of every
// function of an ordered orthonormal set. The set can be anything that lives on
// sites: functions on atoms, or displacements of them.
type Representation struct {
	setting *symmetry.Setting
	sites   []int // of the functions; the image of a function is on one site
	orbits  []int
	// terms[r] holds the images under operation r of all functions in turn,
	// that of function i from ends[r][i−1] to ends[r][i].
	terms [][]Term
	ends  [][]int
}

// negligible bounds coefficients that are zero but for rounding, which stays
// below 1e-14 in the products of a few matrices and unit vectors. What is left
// out is too small to be missed in results good to 1e-10; counted, it would
// join orbits of functions that are apart.
const negligible = 1e-12

// NewRepresentation makes the representation of sites that all carry the same
// m functions. permutations[r][k] is the site to which operation r carries site
// k, and blocks[r], m×m, what it makes of the functions of a site: function j
// of site k becomes Σ_i blocks[r][i][j] · function i of its image. For
// displacements the blocks are the matrices of the operations themselves.
// Function j of site k has the index k·m + j.
func NewRepresentation(setting *symmetry.Setting, permutations [][]int, blocks []*mat.Dense) (*Representation, error) {
	if setting.Infinite() {
		return nil, infinite(setting)
	}
	if len(permutations) != setting.Order() || len(blocks) != setting.Order() {
		return nil, message.Errorf("%s has %d operations, but %d permutations and %d blocks are given",
			setting.Symbol, setting.Order(), len(permutations), len(blocks))
	}
	m, _ := blocks[0].Dims()
	n := len(permutations[0])
	for r, p := range permutations {
		if rows, columns := blocks[r].Dims(); rows != m || columns != m {
			return nil, message.Errorf("the block of operation %d has %d rows and %d columns, not %d", r+1, rows, columns, m)
		}
		if !isPermutation(p, n) {
			return nil, message.Errorf("the images of the %d sites under operation %d are no permutation", n, r+1)
		}
	}
	sites := make([]int, n*m)
	for i := range sites {
		sites[i] = i / m
	}
	return newRepresentation(setting, sites, func(r, function int, add func(int, float64)) {
		site, j := function/m, function%m
		for i := range m {
			add(permutations[r][site]*m+i, blocks[r].At(i, j))
		}
	})
}

func infinite(setting *symmetry.Setting) error {
	return message.Errorf("%s has infinitely many operations, which cannot be listed", setting.Symbol)
}

func isPermutation(p []int, n int) bool {
	seen := make([]bool, n)
	for _, k := range p {
		if k < 0 || k >= n || seen[k] {
			return false
		}
		seen[k] = true
	}
	return len(p) == n
}

// Representation returns what the operations make of the functions. An
// infinite group has no list of operations, and so no Representation.
func (b *Basis) Representation() (*Representation, error) {
	setting := b.Sites.Setting
	if setting.Infinite() {
		return nil, infinite(setting)
	}
	onSite := make([][]int, len(b.Sites.Positions))
	sites := make([]int, len(b.Functions))
	for i, f := range b.Functions {
		sites[i] = f.Site
		onSite[f.Site] = append(onSite[f.Site], i)
	}
	operations := b.Sites.operations()
	var image []float64
	return newRepresentation(setting, sites, func(r, function int, add func(int, float64)) {
		f := b.Functions[function]
		image = operations[r].carry(f, image)
		for _, j := range onSite[operations[r].to(f.Site)] {
			if g := &b.Functions[j]; g.Shell == f.Shell {
				add(j, dot(g.Vector, image))
			}
		}
	})
}

// newRepresentation calls image for every operation and function; it adds the
// terms of the image, by rising function.
func newRepresentation(setting *symmetry.Setting, sites []int, image func(r, function int, add func(int, float64))) (*Representation, error) {
	n := len(sites)
	rep := &Representation{setting: setting, sites: sites}
	join := newJoints(n)
	var of int // the function whose image is being added
	var square float64
	var terms []Term
	add := func(j int, c float64) {
		square += c * c
		if whole := math.Round(c); math.Abs(c-whole) < 1e-14 {
			c = whole
		}
		if math.Abs(c) > negligible {
			terms = append(terms, Term{j, c})
			join.join(of, j)
		}
	}
	for r := range setting.Operations {
		terms = make([]Term, 0, max(n, len(terms)*5/4))
		ends := make([]int, n)
		for of = range n {
			square = 0
			image(r, of, add)
			if math.Abs(square-1) > 1e-9 {
				return nil, message.Errorf("operation %s carries function %d out of the set", setting.Operations[r].Name, of+1)
			}
			ends[of] = len(terms)
		}
		rep.terms = append(rep.terms, terms)
		rep.ends = append(rep.ends, ends)
	}
	rep.orbits = join.number()
	return rep, nil
}

// Setting is the group that is represented.
func (r *Representation) Setting() *symmetry.Setting { return r.setting }

// Size is the number of functions.
func (r *Representation) Size() int { return len(r.sites) }

// Orbits numbers, from 0, for each function the set of those that the
// operations carry into each other.
func (r *Representation) Orbits() []int { return slices.Clone(r.orbits) }

// Image returns what an operation makes of a function, by rising function. The
// slice is part of the Representation and must not be changed.
func (r *Representation) Image(operation, function int) []Term {
	start := 0
	if function > 0 {
		start = r.ends[operation][function-1]
	}
	end := r.ends[operation][function]
	return r.terms[operation][start:end:end]
}

// Apply returns what an operation makes of a combination of the functions.
func (r *Representation) Apply(operation int, coefficients []float64) []float64 {
	out := make([]float64, len(coefficients))
	for i, c := range coefficients {
		if c == 0 {
			continue
		}
		for _, t := range r.Image(operation, i) {
			out[t.Function] += c * t.Coefficient
		}
	}
	return out
}

// trace is the character of an operation.
func (r *Representation) trace(operation int) float64 {
	sum := 0.0
	for i := range r.sites {
		for _, t := range r.Image(operation, i) {
			if t.Function == i {
				sum += t.Coefficient
			}
		}
	}
	return sum
}

// Characters returns one character a class.
func (r *Representation) Characters() []float64 {
	out := make([]float64, len(r.setting.Classes))
	for c, class := range r.setting.Classes {
		sum := 0.0
		for _, op := range class.Members {
			sum += r.trace(op)
		}
		out[c] = sum / float64(len(class.Members))
		if whole := math.Round(out[c]); math.Abs(out[c]-whole) < 1e-10 {
			out[c] = whole + 0 // no negative zero
		}
	}
	return out
}

// Content returns how many copies of each irrep of the setting the
// representation holds: n_α = (1/h) Σ_R χ_α(R) χ(R). A pair of complex
// conjugates, whose characters are the sum of the two, counts half of that,
// since Σ χ_α² is then 2h.
func (r *Representation) Content() ([]int, error) {
	return content(r.setting, r.Characters())
}

func content(setting *symmetry.Setting, characters []float64) ([]int, error) {
	out := make([]int, len(setting.Irreps))
	for a, irrep := range setting.Irreps {
		sum := 0.0
		for c, class := range setting.Classes {
			sum += float64(len(class.Members)) * irrep.Characters[c] * characters[c]
		}
		copies := sum / float64(setting.Order())
		if irrep.ComplexPair {
			copies /= 2
		}
		out[a] = int(math.Round(copies))
		if math.Abs(copies-math.Round(copies)) > 1e-6 || out[a] < 0 {
			return nil, message.Errorf("the functions hold %g copies of %s in %s: what the operations make of them is no representation of the group",
				copies, irrep.Label, setting.Symbol)
		}
	}
	return out, nil
}
