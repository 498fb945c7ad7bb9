package window

import "errors"

// Options say how the window starts.
type Options struct {
	// Structure is opened instead of what the last session left; empty: the
	// last session, or the demonstration.
	Structure string
	// Version is shown under Help.
	Version string
}

// ErrMissing is returned by Run in a build without the window.
var ErrMissing = errors.New("this build has no window; build with cgo and a C compiler, or use the commands (see --help)")

// ErrNoDisplay is returned by Run, wrapped with the reason, where there is no
// display.
var ErrNoDisplay = errors.New("no display")
