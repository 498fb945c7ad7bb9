package structure

import "testing"

func TestElementsStandInTheirPlaces(t *testing.T) {
	for symbol, want := range map[string][2]int{
		"H": {1, 1}, "He": {1, 18}, "Li": {2, 1}, "Be": {2, 2}, "B": {2, 13}, "C": {2, 14}, "Ne": {2, 18}, "Al": {3, 13}, "Cl": {3, 17},
		"K": {4, 1}, "Sc": {4, 3}, "Fe": {4, 8}, "Zn": {4, 12}, "Ga": {4, 13}, "Kr": {4, 18}, "Pd": {5, 10}, "I": {5, 17},
		"Cs": {6, 1}, "Ba": {6, 2}, "La": {6, 0}, "Yb": {6, 0}, "Lu": {6, 3}, "Hf": {6, 4}, "Pt": {6, 10}, "Pb": {6, 14}, "Rn": {6, 18},
		"Ra": {7, 2}, "U": {7, 0}, "No": {7, 0}, "Lr": {7, 3}, "Rf": {7, 4}, "Og": {7, 18},
	} {
		e, _ := ElementOf(symbol)
		period, group := e.Place()
		if period != want[0] || group != want[1] {
			t.Errorf("%s: period %d, group %d", symbol, period, group)
		}
	}
	counts := map[int]int{}
	for e := Element(1); e <= MaxElement; e++ {
		_, group := e.Place()
		counts[group]++
	}
	if counts[0] != 28 || counts[1] != 7 || counts[2] != 6 || counts[8] != 4 || counts[14] != 6 || counts[18] != 7 {
		t.Errorf("%v", counts)
	}
	if p, g := Element(0).Place(); p != 0 || g != 0 {
		t.Error("no element has a place")
	}
}
