package orbitals

import (
	"testing"

	"github.com/go-gl/mathgl/mgl64"
)

// cage60 are the 60 atoms of a truncated icosahedron in Ih.
func cage60(t testing.TB) *Sites {
	t.Helper()
	var file contentFile
	readCheckValues(t, "content.json", &file)
	for _, c := range file.Cases {
		if c.Name == "truncated icosahedron, 60 vertices" {
			return sitesAt(t, c.Group, carbon, c.Positions)
		}
	}
	t.Fatal("the cage is missing")
	return nil
}

// All group orbitals of s and p on a 60-atom cage: 240 functions, 120
// operations. The aim is 30 ms on two cores, from the choice to the orbitals.
func BenchmarkProjectCage60(b *testing.B) {
	s := cage60(b)
	choices := parse(b, "all:s,p")
	for b.Loop() {
		basis, err := NewBasis(s, choices...)
		if err != nil {
			b.Fatal(err)
		}
		if _, err := basis.Project(); err != nil {
			b.Fatal(err)
		}
	}
}

// The four ligands of a square planar complex, what a person waits for first.
func BenchmarkProjectSquare(b *testing.B) {
	s := sitesAt(b, "D4h", fluorine, []mgl64.Vec3{{2, 0, 0}, {0, 2, 0}, {-2, 0, 0}, {0, -2, 0}})
	choices := parse(b, "all:sigma,pi")
	for b.Loop() {
		basis, err := NewBasis(s, choices...)
		if err != nil {
			b.Fatal(err)
		}
		if _, err := basis.Project(); err != nil {
			b.Fatal(err)
		}
	}
}

// A cubic block of 1,000 atoms with s functions in Oh: many orbits.
func BenchmarkProjectCube1000(b *testing.B) {
	var positions []mgl64.Vec3
	for i := range 10 {
		for j := range 10 {
			for k := range 10 {
				positions = append(positions, mgl64.Vec3{float64(i) - 4.5, float64(j) - 4.5, float64(k) - 4.5})
			}
		}
	}
	s := sitesAt(b, "Oh", carbon, positions)
	choices := parse(b, "all:s")
	for b.Loop() {
		basis, err := NewBasis(s, choices...)
		if err != nil {
			b.Fatal(err)
		}
		if _, err := basis.Project(); err != nil {
			b.Fatal(err)
		}
	}
}
