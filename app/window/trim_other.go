//go:build cgo && !nowindow && !linux

package window

// trimC does nothing where the C library gives memory back by itself.
func trimC() {}
