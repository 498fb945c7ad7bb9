// Package orbitals takes functions on the atoms of a structure to group
// orbitals.
//
// Its objects, in the order in which the data walks through them:
//
//   - Sites: the atoms, in the working frame of a [symmetry.Setting], with the
//     permutations that its operations make of them;
//   - Choice: which functions on which atoms, as a person writes it;
//   - Basis: the functions chosen, completed to a set that the operations do
//     not leave;
//   - Representation: what every operation makes of every function. It can be
//     built without a Basis, from sites and one block an operation, so that
//     displacements or other functions can be projected too;
//   - Projection: the group orbitals, with all partners, and the content;
//   - Ledger: the projection of one function, operation by operation;
//   - ClosedForm: coefficients as roots and cosines instead of decimals.
//
// # Conventions
//
// Positions are in ångström, in a right-handed frame, the working frame; z is
// the axis of a linear structure, and the origin a point that all operations
// leave. Operations are active: R carries the point p to R·p and the function
// f to the function r ↦ f(R⁻¹r), and column k of a matrix is the image of
// function k. Atoms, functions, copies and partners count from 0.
//
// The functions are real and normalized, the polynomial of each name with a
// positive factor, without the phase of Condon and Shortley. Overlap between
// atoms is neglected, so a group orbital is normalized if the squares of its
// coefficients add up to 1.
//
// A linear structure or a single atom has infinitely many operations. Its
// group orbitals come from the angular momentum instead; see [Basis.Project].
package orbitals
