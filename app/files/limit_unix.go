//go:build unix

package files

import (
	"os/signal"
	"syscall"
)

// A limit on the size of files, as schedulers set it, shall be an error of the
// write and not end the program.
func init() { signal.Ignore(syscall.SIGXFSZ) }
