package work

import (
	"fmt"

	"lobewright/app/study"
	"lobewright/symmetry"
)

// detect finds the group of the core. Kinds are atomic numbers: only atoms of
// one element are carried into each other.
func detect(read *Structure, core []int, s study.Study) (*symmetry.Fit, error) {
	if s.Frame != "" && s.Frame != "default" {
		return nil, fmt.Errorf("frame %q is not known; there is one: default", s.Frame)
	}
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
	return symmetry.Detect(points, links, symmetry.Options{Tolerance: s.TheTolerance()})
}
