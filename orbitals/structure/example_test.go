package structure_test

import (
	"fmt"
	"os"
	"strings"

	"lobewright/orbitals/structure"
)

func ExampleOpen() {
	m, _, err := structure.Open("ideal:OC-6,Co,N,1.96", structure.Inputs{})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(m.Formula(), "with", len(structure.Bonds(m)), "bonds")
	ligands, err := structure.ParseAtoms("N", m, nil)
	fmt.Println("the ligands have the indices", ligands, err)
	// Output:
	// CoN6 with 6 bonds
	// the ligands have the indices [1 2 3 4 5 6] <nil>
}

func ExampleRead() {
	_, _, err := structure.Read(strings.NewReader("2\nhydrogen\nH 0 0 0\nH 0 0 0,74\n"), "hydrogen.xyz")
	fmt.Println(err)
	// Output:
	// hydrogen.xyz:4: z of atom 2 is "0,74"; write decimals with a point
}

func ExampleWrite() {
	m, err := structure.Ideal("ring-4,P,2.2")
	if err != nil {
		fmt.Println(err)
		return
	}
	for i := range m.Atoms {
		for k, x := range m.Atoms[i].Position {
			m.Atoms[i].Position[k] = float64(int(x*1000)) / 1000
		}
	}
	if err := structure.Write(os.Stdout, m); err != nil {
		fmt.Println(err)
	}
	// Output:
	// 4
	// ideal:ring-4,P,2.2
	// P 1.555 0 0
	// P 0 1.555 0
	// P -1.555 0 0
	// P 0 -1.555 0
}
