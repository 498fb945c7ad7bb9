//go:build linux || darwin || freebsd || netbsd || openbsd || dragonfly

package session

import (
	"errors"
	"os"
	"syscall"
)

// tryLock locks a file, which is made if need be. It returns nil if somebody
// else has it locked, and a lock that holds nothing where the file system knows
// no locks. The error is that the file cannot be made.
func tryLock(path string) (*lock, error) {
	f, err := os.OpenFile(path, os.O_RDWR|os.O_CREATE, 0o600)
	if err != nil {
		return nil, err
	}
	for {
		err = syscall.Flock(int(f.Fd()), syscall.LOCK_EX|syscall.LOCK_NB)
		if !errors.Is(err, syscall.EINTR) {
			break
		}
	}
	switch {
	case err == nil:
		return &lock{f}, nil
	case errors.Is(err, syscall.EWOULDBLOCK):
		f.Close()
		return nil, nil
	}
	f.Close()
	return &lock{}, nil
}
