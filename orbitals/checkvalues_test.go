package orbitals

import (
	"fmt"
	"maps"
	"math"
	"testing"

	"github.com/go-gl/mathgl/mgl64"

	"lobewright/orbitals/structure"
)

type contentFile struct {
	Cases []struct {
		Name, Group, Functions string
		Positions              []mgl64.Vec3
		Characters             []float64
		Content                map[string]int
	}
	Linear []struct {
		Name, Group, Functions string
		Content                map[string]int
	}
	OneCentre map[string]map[string]map[string]int
}

// chosen writes the name of functions in content.json as a choice.
func chosen(functions string) string {
	switch functions {
	case "pi_inplane":
		return "all:pi-in"
	case "pi_vertical":
		return "all:pi-out"
	}
	return "all:" + functions
}

func TestContentOfTextbookSets(t *testing.T) {
	var file contentFile
	readCheckValues(t, "content.json", &file)
	for _, c := range file.Cases {
		t.Run(fmt.Sprintf("%s %s %s", c.Group, c.Name, c.Functions), func(t *testing.T) {
			s := sitesAt(t, c.Group, carbon, c.Positions)
			b := basis(t, s, chosen(c.Functions))
			p := project(t, b)
			if got := contentOf(p); !maps.Equal(got, c.Content) {
				t.Errorf("content %v, want %v", got, c.Content)
			}
			for i, want := range c.Characters {
				if math.Abs(p.Characters[i]-want) > 1e-9 {
					t.Errorf("characters %v, want %v", p.Characters, c.Characters)
					break
				}
			}
			r, err := b.Representation()
			if err != nil {
				t.Fatal(err)
			}
			checkProjection(t, r, p)
			orbits := r.Orbits()
			for i, f := range b.Functions {
				if orbits[i] != f.Orbit {
					t.Fatalf("function %d is in orbit %d of the basis and in orbit %d of its representation", i+1, f.Orbit+1, orbits[i]+1)
				}
			}
		})
	}
}

func TestContentOfShellsOfOneAtom(t *testing.T) {
	var file contentFile
	readCheckValues(t, "content.json", &file)
	for group, shells := range file.OneCentre {
		for letter, want := range shells {
			if _, ok := shellOf(letter); !ok {
				continue // g, h and i have no named functions; see the next test
			}
			s := sitesAt(t, group, xenon, []mgl64.Vec3{{}})
			b := basis(t, s, "Xe:"+letter)
			p := project(t, b)
			if got := contentOf(p); !maps.Equal(got, want) {
				t.Errorf("%s, %s shell: %v, want %v", group, letter, got, want)
			}
			if r, err := b.Representation(); err == nil {
				checkProjection(t, r, p)
			}
		}
	}
}

// Shells that have no named functions go through blocks, as any basis can.
func TestContentOfHighShellsByBlocks(t *testing.T) {
	var file contentFile
	readCheckValues(t, "content.json", &file)
	for group, shells := range file.OneCentre {
		s := setting(t, group)
		if s.Infinite() {
			continue
		}
		for l, letter := range []string{"s", "p", "d", "f", "g", "h", "i"} {
			r := shellRepresentation(t, group, l)
			p, err := Project(r)
			if err != nil {
				t.Fatal(err)
			}
			if got := contentOf(p); !maps.Equal(got, shells[letter]) {
				t.Errorf("%s, %s shell: %v, want %v", group, letter, got, shells[letter])
			}
			checkProjection(t, r, p)
		}
	}
}

func TestContentOfLinearMolecules(t *testing.T) {
	var file contentFile
	readCheckValues(t, "content.json", &file)
	if len(file.Linear) == 0 {
		t.Fatal("no linear molecules to compare")
	}
	for _, c := range file.Linear {
		s := &Sites{
			Setting:   setting(t, c.Group),
			Positions: []mgl64.Vec3{{}, {0, 0, 1.9}, {0, 0, -1.9}},
			Elements:  []structure.Element{xenon, fluorine, fluorine},
			Links:     [][2]int{{0, 1}, {0, 2}},
		}
		if c.Group == "C∞v" {
			s.Elements[2] = carbon
		}
		p := project(t, basis(t, s, "2,3:"+c.Functions))
		if got := contentOf(p); !maps.Equal(got, c.Content) {
			t.Errorf("%s, %s: %v, want %v", c.Name, c.Functions, got, c.Content)
		}
	}
}
