package structure

import (
	"fmt"
	"strconv"
	"testing"

	"lobewright/symmetry"
)

// detect finds the group of a whole molecule.
func detect(t *testing.T, m *Molecule) *symmetry.Fit {
	t.Helper()
	var points []symmetry.Point
	for _, a := range m.Atoms {
		points = append(points, symmetry.Point{Position: a.Position, Kind: int(a.Element)})
	}
	var links []symmetry.Link
	for _, b := range Bonds(m) {
		links = append(links, symmetry.Link(b))
	}
	fit, err := symmetry.Detect(points, links, symmetry.Options{})
	if err != nil {
		t.Fatalf("%s: %v", m.Title, err)
	}
	return fit
}

func TestIdealPolyhedraHaveTheirPointGroup(t *testing.T) {
	for _, p := range pointGroups {
		m, err := Ideal(p.symbol)
		if err != nil {
			t.Fatal(err)
		}
		fit := detect(t, m)
		if fit.Setting.Symbol != p.group || fit.Setting.Order() != p.order || fit.Deviation > 1e-12 || fit.Doubtful {
			t.Errorf("%s: %s of order %d, deviation %.1g Å, doubtful %v, want %s", m.Title, fit.Setting.Symbol,
				fit.Setting.Order(), fit.Deviation, fit.Doubtful, p.group)
		}
	}
}

func TestIdealRingsHaveTheGroupOfThePolygon(t *testing.T) {
	for _, n := range []int{3, 4, 5, 6, 7, 8, 9, 12, 24, MaxRing} {
		m, err := Ideal("ring-" + strconv.Itoa(n))
		if err != nil {
			t.Fatal(err)
		}
		fit := detect(t, m)
		if want := fmt.Sprintf("D%dh", n); fit.Setting.Symbol != want || fit.Deviation > 1e-11 {
			t.Errorf("%s: %s, deviation %.1g Å, want %s", m.Title, fit.Setting.Symbol, fit.Deviation, want)
		}
	}
}
