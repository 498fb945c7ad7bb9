//go:build !cgo || nowindow

package window

import "context"

// Available tells whether this build has the window.
const Available = false

// Run returns ErrMissing.
func Run(context.Context, Options) error { return ErrMissing }
