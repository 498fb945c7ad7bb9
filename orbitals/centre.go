package orbitals

import (
	"cmp"
	"maps"
	"math"
	"slices"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/symmetry/message"
)

// arms returns, for each atom of the orbits of the given atoms, its place
// relative to the centre of an item.
func (b *builder) arms(choice int, it item, atoms []int) (map[int]mgl64.Vec3, error) {
	var centres map[int]mgl64.Vec3
	var err error
	if it.centre == "" {
		centres = b.ruledCentres(atoms)
	} else {
		centres, err = b.givenCentres(choice, it, atoms)
	}
	if err != nil {
		return nil, err
	}
	arms := make(map[int]mgl64.Vec3, len(centres))
	for k, c := range centres {
		arms[k] = b.sites.Positions[k].Sub(c)
	}
	// In the order of the atoms, so that the same one is always named.
	for _, k := range atoms {
		if arms[k].Len() < onCentre {
			return nil, message.Errorf("%s on %s has no direction, for the atom is on the centre: choose s, p, d or f functions there, or another centre with @",
				it.name, b.atom(k))
		}
	}
	b.straighten(arms)
	return arms, nil
}

// onCentre (Å) is the distance below which an atom counts as lying on its
// centre.
const onCentre = 1e-3

// straighten replaces each arm by the mean of what the operations say of it.
// Those of core atoms differ from it by rounding, which it removes; those of
// spectators, whose places are images of each other only nearly, by as much as
// that. For an infinite group there is nothing to do: all arms lie along z.
func (b *builder) straighten(arms map[int]mgl64.Vec3) {
	if b.sites.Setting.Infinite() {
		return
	}
	mean := make(map[int]mgl64.Vec3, len(arms))
	for k := range arms {
		sum := mgl64.Vec3{}
		for r, op := range b.sites.Setting.Operations {
			sum = sum.Add(op.Matrix.Transpose().Mul3x1(arms[b.sites.Permutations[r][k]]))
		}
		mean[k] = sum.Mul(1 / float64(b.sites.Setting.Order()))
	}
	maps.Copy(arms, mean)
}

// ruledCentres follows the rule for centres that nobody gave: the core atom
// bonded to the atom if there is just one, else the bonded core atom nearest
// the frame's origin, else the origin. Where two are equally near, none is the
// nearest.
func (b *builder) ruledCentres(atoms []int) map[int]mgl64.Vec3 {
	centres := make(map[int]mgl64.Vec3)
	for _, start := range atoms {
		if _, done := centres[start]; done {
			continue
		}
		for _, k := range b.sites.orbitOf(start) {
			centres[k] = b.ruledCentre(k)
		}
	}
	return centres
}

// equallyNear (Å) is the difference between distances below which two atoms
// are equally near.
const equallyNear = 1e-3

func (b *builder) ruledCentre(k int) mgl64.Vec3 {
	nearest, best, second := -1, math.Inf(1), math.Inf(1)
	for _, j := range b.linked(k) {
		if !b.sites.core(j) {
			continue
		}
		switch d := b.sites.Positions[j].Len(); {
		case d < best:
			nearest, best, second = j, d, best
		case d < second:
			second = d
		}
	}
	if nearest < 0 || second-best < equallyNear {
		return mgl64.Vec3{}
	}
	return b.sites.Positions[nearest]
}

// linked lists, rising, the atoms bonded to atom k by a bond or the image of
// one: bonds may have been counted on the structure as it was read, which has
// the group only nearly, but the rule must treat equal atoms alike.
func (b *builder) linked(k int) []int {
	in := make(map[int]bool)
	for _, j := range b.bonds[k] {
		in[j] = true
	}
	if s := b.sites; s.Setting.Infinite() {
		for _, j := range b.bonds[s.opposite(k)] {
			in[s.opposite(j)] = true
		}
	} else {
		for r, p := range s.Permutations {
			back := s.Permutations[s.Setting.Inverse(r)]
			for _, j := range b.bonds[p[k]] {
				if back[j] >= 0 {
					in[back[j]] = true
				}
			}
		}
	}
	return sorted(in)
}

// givenCentres follows @: the centre is the midpoint of the atoms that it
// names. The operations carry atoms and centre together, so of each orbit only
// one atom, the nearest to the centre, has this centre itself, and the others
// have its images. That is refused where it leaves a choice.
func (b *builder) givenCentres(choice int, it item, atoms []int) (map[int]mgl64.Vec3, error) {
	named, err := b.parseAtoms(it.centre)
	if err != nil {
		return nil, err
	}
	mid, exact := mgl64.Vec3{}, true
	for _, j := range named {
		mid = mid.Add(b.sites.Positions[j])
		exact = exact && b.sites.core(j)
	}
	mid = mid.Mul(1 / float64(len(named)))

	centres := make(map[int]mgl64.Vec3)
	carried := Note{Key: NoteCentreCarried, Choice: choice}
	byNearness := slices.Clone(atoms)
	distance := func(k int) float64 { return b.sites.Positions[k].Sub(mid).Len() }
	slices.SortStableFunc(byNearness, func(j, k int) int {
		return cmp.Compare(math.Round(distance(j)/equallyNear), math.Round(distance(k)/equallyNear))
	})
	reference := make(map[int]int)
	for _, start := range byNearness {
		c, done := centres[start]
		if !done {
			if err := b.spread(it, start, mid, exact, centres, reference); err != nil {
				return nil, err
			}
			continue
		}
		if c.Sub(mid).Len() < slack(exact) {
			continue
		}
		if distance(start)-distance(reference[start]) < equallyNear {
			return nil, message.Errorf("%s: %s and %s are equally near the centre, but operations that carry one to the other carry the centre elsewhere; choose one of them, or a centre that all operations leave",
				it, b.atom(reference[start]), b.atom(start))
		}
		carried.Atoms = append(carried.Atoms, start)
	}
	if len(carried.Atoms) > 0 {
		slices.Sort(carried.Atoms)
		b.notes = append(b.notes, carried)
	}
	return centres, nil
}

// slack (Å) bounds the distance of centres that are the same. Midpoints of
// core atoms are so to rounding; where spectators take part, to the tolerance
// within which they have images.
func slack(exact bool) float64 {
	if exact {
		return onSpot
	}
	return 0.1
}

// spread gives an atom a centre and the atoms of its orbit the images of this.
func (b *builder) spread(it item, start int, centre mgl64.Vec3, exact bool, centres map[int]mgl64.Vec3, reference map[int]int) error {
	centres[start], reference[start] = centre, start
	queue := []int{start}
	for len(queue) > 0 {
		k := queue[0]
		queue = queue[1:]
		for _, c := range b.generators {
			j, image := c.to(k), c.matrix.Mul3x1(centres[k])
			old, done := centres[j]
			switch {
			case !done:
				centres[j], reference[j] = image, start
				queue = append(queue, j)
			case old.Sub(image).Len() > slack(exact):
				return message.Errorf("%s on %s: operations that leave the atom in its place move this centre; choose one that they leave",
					it, b.atom(start))
			}
		}
	}
	return nil
}
