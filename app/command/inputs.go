package command

import (
	"io"

	"lobewright/assets"
	"lobewright/orbitals/structure"
)

// inputs are where structures come from besides files.
func inputs(standardInput io.Reader) structure.Inputs {
	return structure.Inputs{Stdin: standardInput, Demo: assets.Demos()}
}
