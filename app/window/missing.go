//go:build !cgo || nowindow

package window

import "context"

// Run returns ErrMissing.
func Run(context.Context, Options) error { return ErrMissing }
