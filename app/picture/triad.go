package picture

// Sizes of the triad of axes in the corner.
const (
	triadLetter = 1.22 // place of a letter along its axis, in lengths of it
	axisWidth   = 0.35 // mm
)
