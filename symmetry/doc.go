// Package symmetry holds point groups and finds them in sets of points.
//
// A Setting is a point group written in a frame: every individual operation
// with its matrix, the conjugacy classes, the irreducible representations with
// real orthogonal matrices. It needs no points: New makes it from a Schoenflies
// symbol. A Fit is a Setting found in points by Detect, together with the frame
// that the rules of frame.go give it, the nearest points that have the group
// exactly, and what every operation does to every point.
//
// The package knows points with a kind, and links between them; of elements and
// orbitals it knows nothing.
//
// Conventions. Frames are right-handed and the axes stay: an operation is
// active, it carries a point p to Matrix·p and a function f to the function
// r ↦ f(Matrix⁻¹·r). Cn turns counterclockwise for an eye on the positive end
// of its axis that looks toward the origin; Sn is that turn followed by the
// reflection in the plane square to the axis. Operation R carries partner k of
// an irrep into Σ_l Matrices[R].At(l, k) times partner l. Lengths are in Å and
// angles in radians; indices count from 0. Text that a person reads is made
// elsewhere from the keys that this package returns; labels and names of
// operations are those of the trade, in plain characters.
package symmetry
