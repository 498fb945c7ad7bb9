package work

import (
	"errors"

	"lobewright/app/study"
	"lobewright/symmetry"
	"lobewright/symmetry/message"
)

// points are the core atoms as the search for symmetry sees them. Kinds are
// atomic numbers: only atoms of one element are carried into each other.
func points(read *Structure, core []int) ([]symmetry.Point, []symmetry.Link) {
	points := make([]symmetry.Point, len(core))
	place := make(map[int]int, len(core)) // atom → point
	for k, i := range core {
		a := read.Molecule.Atoms[i]
		points[k] = symmetry.Point{Position: a.Position, Kind: int(a.Element)}
		place[i] = k
	}
	var links []symmetry.Link
	for _, b := range read.Bonds {
		i, inCore := place[b[0]]
		j, both := place[b[1]]
		if inCore && both {
			links = append(links, symmetry.Link{i, j})
		}
	}
	return points, links
}

// detect finds the group of the core in its default frame.
func detect(read *Structure, core []int, s study.Study) (*symmetry.Fit, error) {
	points, links := points(read, core)
	fit, err := symmetry.Detect(points, links, symmetry.Options{Tolerance: s.TheTolerance()})
	var close *symmetry.CloseError
	if errors.As(err, &close) {
		// Points are counted within the core; people know the atoms.
		names := read.AtomNames()
		return nil, blame(StageGroup, ConcernTolerance, message.Errorf(
			"tolerance %g Å is too large: %s and %s are only %.3f Å apart; take less than half of that",
			close.Tolerance, names[core[close.A]], names[core[close.B]], close.Distance))
	}
	if s.Tolerance < 0 {
		return nil, blame(StageGroup, ConcernTolerance, err)
	}
	return fit, blame(StageGroup, ConcernStructure, err)
}
