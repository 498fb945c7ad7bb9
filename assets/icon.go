package assets

import _ "embed" // for the icon

//go:embed desktop/lobewright-256.png
var icon []byte

// Icon returns the program's icon as a PNG of 256 × 256 pixels. It must not be
// changed.
func Icon() []byte { return icon }
