package orbitals_test

import (
	"fmt"
	"strings"

	"lobewright/orbitals"
	"lobewright/orbitals/structure"
	"lobewright/symmetry"
)

// Water, from coordinates to the group orbitals of its hydrogen atoms.
func Example() {
	molecule, _, err := structure.Read(strings.NewReader(`3
water
O  0.0000  0.0000  0.1173
H  0.7572  0.0000 -0.4692
H -0.7572  0.0000 -0.4692
`), "water.xyz")
	if err != nil {
		fmt.Println(err)
		return
	}
	var points []symmetry.Point
	for _, a := range molecule.Atoms {
		points = append(points, symmetry.Point{Position: a.Position, Kind: int(a.Element)})
	}
	fit, err := symmetry.Detect(points, nil, symmetry.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	sites, err := orbitals.NewSites(fit, []int{0, 1, 2}, molecule, structure.Bonds(molecule))
	if err != nil {
		fmt.Println(err)
		return
	}
	choice, err := orbitals.ParseChoice("H:s")
	if err != nil {
		fmt.Println(err)
		return
	}
	basis, err := orbitals.NewBasis(sites, choice)
	if err != nil {
		fmt.Println(err)
		return
	}
	projection, err := basis.Project()
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(fit.Setting.Symbol)
	for _, g := range projection.Orbitals {
		form, _ := orbitals.FindClosedForm(g.Coefficients)
		fmt.Println(projection.Irreps[g.Irrep].Label, form)
	}
	// Output:
	// C2v
	// A1 (φ1 + φ2)/√2
	// B2 (φ1 − φ2)/√2
}
