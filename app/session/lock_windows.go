package session

import (
	"errors"
	"os"
	"syscall"
)

// tryLock opens a file, which is made if need be, so that nobody else can open
// it. It returns nil if somebody else has done so.
func tryLock(path string) (*lock, error) {
	name, err := syscall.UTF16PtrFromString(path)
	if err != nil {
		return nil, err
	}
	const share = 0 // with nobody
	handle, err := syscall.CreateFile(name, syscall.GENERIC_READ|syscall.GENERIC_WRITE, share, nil,
		syscall.OPEN_ALWAYS, syscall.FILE_ATTRIBUTE_NORMAL, 0)
	const sharingViolation = syscall.Errno(32)
	switch {
	case err == nil:
		return &lock{os.NewFile(uintptr(handle), path)}, nil
	case errors.Is(err, sharingViolation):
		return nil, nil
	}
	return nil, &os.PathError{Op: "open", Path: path, Err: err}
}
