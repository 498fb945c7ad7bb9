package command

import "lobewright/app/study"

// showpieces are the figures that the program makes without a command.
func showpieces() []showpiece {
	return []showpiece{
		{"square-plane", study.Study{Structure: "demo:square-plane"}},
		orbitalPiece("demo:square-plane", "Cl:sigma", "B1g", 1, 1),
		orbitalPiece("demo:square-plane", "Cl:sigma", "Eu", 1, 1),
		orbitalPiece("demo:square-plane", "Cl:sigma", "Eu", 1, 2),
		{"octahedron", study.Study{Structure: "demo:octahedron"}},
		orbitalPiece("demo:octahedron", "C:sigma", "Eg", 1, 1),
		orbitalPiece("demo:octahedron", "C:sigma", "Eg", 1, 2),
		orbitalPiece("demo:octahedron", "C:pi", "T2g", 1, 1),
		orbitalPiece("demo:tetrahedron", "Cl:sigma", "T2", 1, 1),
		{"sandwich-staggered", study.Study{Structure: "demo:sandwich-staggered"}},
		orbitalPiece("demo:sandwich-staggered", "C:pz", "E1g", 1, 1),
		orbitalPiece("demo:sandwich-staggered", "C:pz", "E1g", 1, 2),
		orbitalPiece("demo:benzene", "C:pz", "B2g", 1, 1),
		orbitalPiece("demo:benzene", "C:pz", "E1g", 1, 1),
		orbitalPiece("demo:dimer", "Re:d", "A2u", 1, 1),
		{"furan", study.Study{Structure: "demo:furan", Operation: "σv'(yz)"}},
	}
}
