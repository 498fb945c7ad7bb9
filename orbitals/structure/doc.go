// Package structure says what a molecule is and where it comes from: a file, standard input, an ideal
// coordination polyhedron, a planar ring, or an embedded demonstration.
//
// A Molecule is a title and a list of atoms; an Atom is an Element and a position in ångström, in the axes of
// the file. Nothing here knows about symmetry: a Molecule hands its atoms on as points with a kind.
// Atoms count from 0 here and from 1 in everything that a person writes or reads: file messages, the numbers of
// a choice of atoms such as "2-4,7".
//
//	m, notes, err := structure.Open("ideal:OC-6,Co,N,1.96", structure.Inputs{})
//
// Everything that comes from outside is held against limits before work is done on it. What cannot be read is
// an *Error: one line with the file, the line, what is wrong and what would be right.
package structure
