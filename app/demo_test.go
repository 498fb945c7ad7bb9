package main_test

import (
	"os"
	"strings"
	"testing"

	"lobewright/assets"
	"lobewright/orbitals/structure"
	"lobewright/symmetry"
)

// fitOf finds the group of the atoms of a core.
func fitOf(t *testing.T, m *structure.Molecule, core []int, tolerance float64) *symmetry.Fit {
	t.Helper()
	points := make([]symmetry.Point, len(core))
	inCore := make(map[int]int, len(core))
	for k, i := range core {
		points[k] = symmetry.Point{Position: m.Atoms[i].Position, Kind: int(m.Atoms[i].Element)}
		inCore[i] = k
	}
	var links []symmetry.Link
	for _, b := range structure.Bonds(m) {
		k, ok := inCore[b[0]]
		l, ok2 := inCore[b[1]]
		if ok && ok2 {
			links = append(links, symmetry.Link{k, l})
		}
	}
	fit, err := symmetry.Detect(points, links, symmetry.Options{Tolerance: tolerance})
	if err != nil {
		t.Fatalf("%s: %v", m.Title, err)
	}
	return fit
}

func openDemo(t *testing.T, name string) *structure.Molecule {
	t.Helper()
	m, notes, err := structure.Open("demo:"+name, structure.Inputs{Demo: assets.Demos()})
	if err != nil || len(notes) > 0 {
		t.Fatalf("demo:%s: %v, %v", name, notes, err)
	}
	return m
}

func whole(m *structure.Molecule) []int {
	all := make([]int, len(m.Atoms))
	for i := range all {
		all[i] = i
	}
	return all
}

// The table of assets/demo/SOURCES.md says which group each demonstration has; those that were displaced have it
// within 0.004 Å, the others within the rounding of the file.
func TestDemonstrationsHaveTheGroupThatTheirTableNames(t *testing.T) {
	text, err := os.ReadFile("../assets/demo/SOURCES.md")
	if err != nil {
		t.Fatal(err)
	}
	met := map[string]bool{}
	for line := range strings.Lines(string(text)) {
		cells := strings.Split(line, " | ")
		if len(cells) != 4 || strings.HasPrefix(line, "| name") {
			continue
		}
		name := strings.TrimPrefix(cells[0], "| ")
		group, _, _ := strings.Cut(cells[2], ";")
		met[name] = true
		limit := 1e-5
		if strings.Contains(cells[3], "displaced by up to") {
			limit = 0.005
		}
		m := openDemo(t, name)
		fit := fitOf(t, m, whole(m), 0)
		if fit.Setting.Symbol != group || fit.Deviation > limit || fit.Doubtful {
			t.Errorf("%s: %s, deviation %.2g Å, doubtful %v, want %s within %g Å", name, fit.Setting.Symbol,
				fit.Deviation, fit.Doubtful, group, limit)
		}
	}
	for _, d := range assets.DemoList() {
		if !met[d.Name] {
			t.Errorf("%s is not in the table", d.Name)
		}
	}
}

// The hydrate is really distorted: alone its CuO6 has no symmetry, within 0.2 Å it is stretched along one axis, and only
// farther off an octahedron.
func TestTheHydrateIsADistortedOctahedron(t *testing.T) {
	m := openDemo(t, "hydrate")
	core, err := structure.Core(m, "1-7", "")
	if err != nil {
		t.Fatal(err)
	}
	for tolerance, want := range map[float64]string{0.02: "C1", 0.2: "D4h", 0.4: "Oh"} {
		if fit := fitOf(t, m, core, tolerance); fit.Setting.Symbol != want {
			t.Errorf("within %g Å: %s (deviation %.3f Å), want %s", tolerance, fit.Setting.Symbol, fit.Deviation, want)
		}
	}
}
