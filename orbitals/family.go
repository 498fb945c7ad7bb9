package orbitals

import (
	"maps"
	"math"
	"slices"
	"strings"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/orbitals/structure"
	"lobewright/symmetry/message"
)

// A builder gathers the functions of a Basis.
type builder struct {
	sites      *Sites
	generators []*carrier
	bonds      [][]int // atoms bonded to each atom
	molecule   *structure.Molecule

	functions []Function
	onSite    map[int][]int // indices of functions, by atom
	asked     []bool        // whether a person asked for a function
	choice    []int         // the choice that brought a function
	notes     []Note
}

func newBuilder(s *Sites) *builder {
	b := &builder{
		sites:      s,
		generators: s.generators(),
		bonds:      make([][]int, len(s.Positions)),
		molecule:   &structure.Molecule{Atoms: make([]structure.Atom, len(s.Positions))},
		onSite:     make(map[int][]int),
	}
	for _, l := range s.Links {
		b.bonds[l[0]] = append(b.bonds[l[0]], l[1])
		b.bonds[l[1]] = append(b.bonds[l[1]], l[0])
	}
	for k := range b.molecule.Atoms {
		b.molecule.Atoms[k].Element = s.Elements[k]
	}
	return b
}

// atom names an atom for a person.
func (b *builder) atom(k int) message.Text {
	return message.Words("atom %d (%s)", k+1, b.sites.Elements[k].Symbol())
}

// parseAtoms reads a choice of atoms.
func (b *builder) parseAtoms(text string) ([]int, error) {
	return structure.ParseAtoms(text, b.molecule, func(n int) ([]int, error) {
		orbits := b.sites.Orbits()
		if n > len(orbits) {
			return nil, message.Errorf("there is no orbit %d: the structure has orbits 1 to %d", n, len(orbits))
		}
		return orbits[n-1], nil
	})
}

// atoms reads the atoms of a choice. Spectators without image cannot carry
// functions: one that was chosen by its number is an error, those among an
// element or all are left out.
func (b *builder) atoms(choice int, text string) ([]int, error) {
	in := make(map[int]bool)
	left := make(map[int]bool)
	for term := range strings.SplitSeq(text, ",") {
		chosen, err := b.parseAtoms(term)
		if err != nil {
			return nil, err
		}
		for _, k := range chosen {
			switch {
			case b.sites.hasImages(k):
				in[k] = true
			case startsWithDigit(strings.TrimSpace(term)):
				return nil, message.Errorf("%s is a spectator and has no image under some operations, so it carries no functions: choose atoms of the core, or a core that holds it", b.atom(k))
			default:
				left[k] = true
			}
		}
	}
	if len(in) == 0 {
		return nil, message.Errorf("all atoms of %s are spectators without images under some operations, so they carry no functions: choose atoms of the core, or a core that holds them", quote(text))
	}
	if len(left) > 0 {
		b.notes = append(b.notes, Note{Key: NoteSpectators, Choice: choice, Atoms: sorted(left)})
	}
	return sorted(in), nil
}

func sorted(set map[int]bool) []int { return slices.Sorted(maps.Keys(set)) }

// family returns the functions of one item on atoms, completed to a set that
// the operations carry into itself, by rising atom.
func (b *builder) family(choice int, it item, atoms []int) ([]candidate, error) {
	var on map[int][]candidate
	var err error
	if isRelative(it.name) {
		on, err = b.relative(choice, it, atoms)
	} else {
		on, err = b.alongAxes(it.name, atoms)
	}
	if err != nil {
		return nil, err
	}
	return b.close(on)
}

// alongAxes lists the functions of the shell of name for the orbits of the
// atoms, and marks those that are asked for.
func (b *builder) alongAxes(name string, atoms []int) (map[int][]candidate, error) {
	l, index, one := functionNamed(name)
	if whole, ok := shellOf(name); ok {
		l, one = whole, false
	}
	if n := len(atoms) * (2*l + 1); n > MaxFunctions && !one {
		return nil, tooMany(n)
	}
	on := make(map[int][]candidate)
	asked := make(map[int]bool, len(atoms))
	for _, k := range atoms {
		asked[k] = true
	}
	for _, start := range atoms {
		if on[start] != nil {
			continue
		}
		for _, k := range b.sites.orbitOf(start) {
			shell := make([]candidate, 2*l+1)
			for i, n := range functionNames[l] {
				f := Function{Site: k, Shell: l, Vector: unit(2*l+1, i), Name: n, Kind: Kind(l)}
				shell[i] = candidate{f, asked[k] && (!one || i == index)}
			}
			on[k] = shell
		}
	}
	return on, nil
}

func tooMany(n int) error {
	return message.Errorf("%d functions are too many: at most %d can be projected together, so choose fewer atoms or functions", n, MaxFunctions)
}

func unit(n, i int) []float64 {
	v := make([]float64, n)
	v[i] = 1
	return v
}

// close keeps, of the candidates on each atom, those that were asked for and
// all into which operations carry them.
func (b *builder) close(on map[int][]candidate) ([]candidate, error) {
	type place struct{ site, index int }
	kept := make(map[place]bool)
	var queue []place
	var image []float64
	sites := slices.Sorted(maps.Keys(on))
	for _, k := range sites {
		for i, c := range on[k] {
			if c.asked {
				kept[place{k, i}] = true
				queue = append(queue, place{k, i})
			}
		}
	}
	for len(queue) > 0 {
		at := queue[0]
		queue = queue[1:]
		f := on[at.site][at.index].Function
		for _, c := range b.generators {
			target := c.to(at.site)
			image = c.carry(f, image)
			square := 0.0
			for i, g := range on[target] {
				overlap := dot(g.Vector, image)
				square += overlap * overlap
				if p := (place{target, i}); math.Abs(overlap) > same && !kept[p] {
					kept[p] = true
					queue = append(queue, p)
				}
			}
			if math.Abs(square-1) > same {
				return nil, message.Errorf("%s on %s is carried by %s to another direction than %s has on %s: choose functions along the axes, or another centre with @",
					f.Name, b.atom(f.Site), c.name, f.Name, b.atom(target))
			}
		}
		if len(kept) > MaxFunctions {
			return nil, tooMany(len(kept))
		}
	}
	var family []candidate
	for _, k := range sites {
		for i, c := range on[k] {
			if kept[place{k, i}] {
				family = append(family, c)
			}
		}
	}
	return family, nil
}

// relative lists the functions of an item that is named relative to a centre
// for the orbits of the atoms, and marks those that are asked for.
func (b *builder) relative(choice int, it item, atoms []int) (map[int][]candidate, error) {
	if len(atoms) > MaxFunctions {
		return nil, tooMany(len(atoms))
	}
	arms, err := b.arms(choice, it, atoms)
	if err != nil {
		return nil, err
	}
	asked := make(map[int]bool, len(atoms))
	for _, k := range atoms {
		asked[k] = true
	}
	on := make(map[int][]candidate)
	for _, k := range slices.Sorted(maps.Keys(arms)) {
		functions, err := b.around(it.name, k, arms[k])
		if err != nil {
			return nil, err
		}
		for i := range functions {
			functions[i].asked = functions[i].asked && asked[k]
		}
		on[k] = functions
	}
	return on, nil
}

// hydrogen has no p function in a minimal basis: its sigma is the s function.
const hydrogen structure.Element = 1

// around lists the functions on an atom at r from its centre that the name can
// mean, and marks the one or ones that it does mean.
func (b *builder) around(name string, k int, r mgl64.Vec3) ([]candidate, error) {
	if name == nameSigma {
		if b.sites.Elements[k] == hydrogen {
			return []candidate{{Function{Site: k, Vector: []float64{1}, Name: "s", Kind: KindS}, true}}, nil
		}
		return []candidate{directed(k, nameSigma, KindSigma, r.Mul(-1), true)}, nil
	}
	if name != namePiIn && name != namePiOut {
		pi1, pi2 := piDirections(r)
		return []candidate{
			directed(k, namePi1, KindPi, pi1, name != namePi2),
			directed(k, namePi2, KindPi, pi2, name != namePi1),
		}, nil
	}
	normal, err := b.sites.plane()
	if err != nil {
		return nil, err
	}
	if math.Abs(normal.Dot(r.Normalize())) > same {
		return nil, message.Errorf("%s on %s: the atom or its centre lies outside the plane of the structure; choose pi, or a centre in the plane", name, b.atom(k))
	}
	// All on one side of the plane, so that equal signs are one lobe.
	return []candidate{
		directed(k, namePiIn, KindPi, normal.Cross(r), name == namePiIn),
		directed(k, namePiOut, KindPi, normal, name == namePiOut),
	}, nil
}

// directed is a p function with its positive lobe along a direction.
func directed(k int, name string, kind Kind, direction mgl64.Vec3, asked bool) candidate {
	d := direction.Normalize()
	for i := range d {
		if math.Abs(d[i]) < negligible {
			d[i] = 0 // rounding, and no negative zero
		}
	}
	return candidate{Function{
		Site: k, Shell: 1, Vector: []float64{d[0], d[1], d[2]}, Name: name, Kind: kind, Direction: d,
	}, asked}
}

// piDirections returns the directions of pi1 and pi2 on an atom at r from its
// centre: pi1 along z × r, pi2 square to both and with positive z; x and y
// where r lies along z.
func piDirections(r mgl64.Vec3) (pi1, pi2 mgl64.Vec3) {
	z := mgl64.Vec3{0, 0, 1}
	u := r.Normalize()
	if z.Cross(u).Len() < 1e-6 {
		return mgl64.Vec3{1, 0, 0}, mgl64.Vec3{0, 1, 0}
	}
	pi1 = z.Cross(u).Normalize()
	return pi1, u.Cross(pi1).Normalize()
}

// plane returns the normal of the plane in which all core atoms lie, with
// positive z, else x, else y.
func (s *Sites) plane() (mgl64.Vec3, error) {
	var core []mgl64.Vec3
	for k, p := range s.Positions {
		if s.core(k) {
			core = append(core, p)
		}
	}
	var along, normal mgl64.Vec3
	for _, p := range core {
		if d := p.Sub(core[0]); d.Len() > along.Len() {
			along = d
		}
	}
	for _, p := range core {
		if c := along.Cross(p.Sub(core[0])); c.Len() > normal.Len() {
			normal = c
		}
	}
	if along.Len() < onSpot || normal.Len() < onSpot*along.Len() {
		return mgl64.Vec3{}, message.Errorf("pi-in and pi-out need a plane, but the core atoms lie on a line: choose pi")
	}
	normal = normal.Normalize()
	for _, p := range core {
		if math.Abs(normal.Dot(p.Sub(core[0]))) > onSpot {
			return mgl64.Vec3{}, message.Errorf("pi-in and pi-out need a planar structure: choose pi")
		}
	}
	for _, axis := range []int{2, 0, 1} {
		if math.Abs(normal[axis]) > 1e-6 {
			if normal[axis] < 0 {
				normal = normal.Mul(-1)
			}
			break
		}
	}
	return normal, nil
}
