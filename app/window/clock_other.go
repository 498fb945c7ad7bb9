//go:build cgo && !nowindow && !linux

package window

import "time"

// processStart is about when this process was started.
func processStart() time.Time { return time.Now() }
