// Package export writes finished pictures to files.
package export

import (
	"bufio"
	"crypto/rand"
	"encoding/hex"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
)

// ErrExists is wrapped by the error for a file that is there already.
var ErrExists = errors.New("exists already")

// WriteFile writes a file whole or not at all: write fills a temporary file
// in the same folder, which is flushed to the disk and then takes the name.
// An existing file is left alone unless force is set (ErrExists). After an error nothing
// has changed and no temporary file is left.
func WriteFile(path string, force bool, write func(io.Writer) error) error {
	target, mode, err := checkTarget(path, force)
	if err != nil {
		return err
	}
	temporary, err := createBeside(target, mode)
	if err != nil {
		return fmt.Errorf("cannot write %s: %w", path, cause(err))
	}
	err = fill(temporary, write)
	if err == nil {
		err = takeName(temporary.Name(), target, force)
	}
	if err != nil {
		os.Remove(temporary.Name())
		return fmt.Errorf("cannot write %s: %w", path, cause(err))
	}
	syncFolder(filepath.Dir(target))
	return nil
}

// CheckTarget tells beforehand whether WriteFile would refuse a path, so that
// nothing is computed for a file that cannot be written.
func CheckTarget(path string, force bool) error {
	_, _, err := checkTarget(path, force)
	return err
}

// checkTarget resolves path, which may be a symbolic link to a file, and
// tells the permissions for the new file.
func checkTarget(path string, force bool) (target string, mode fs.FileMode, err error) {
	const ordinary = 0o666
	info, err := os.Stat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return path, ordinary, nil
	case err != nil:
		return "", 0, fmt.Errorf("cannot write %s: %w", path, cause(err))
	case info.IsDir():
		return "", 0, fmt.Errorf("cannot write %s: it is a folder; give the name of a file", path)
	case !info.Mode().IsRegular():
		return "", 0, fmt.Errorf("cannot write %s: it is not an ordinary file", path)
	case !force:
		return "", 0, fmt.Errorf("%s %w; --force overwrites it", path, ErrExists)
	}
	target, err = filepath.EvalSymlinks(path)
	if err != nil {
		return "", 0, fmt.Errorf("cannot write %s: %w", path, cause(err))
	}
	return target, info.Mode().Perm(), nil
}

// createBeside makes a new file in the folder of target. os.CreateTemp would
// give permissions for the owner alone, whatever the user's mask says.
func createBeside(target string, mode fs.FileMode) (*os.File, error) {
	folder, name := filepath.Split(target)
	for {
		var random [6]byte
		if _, err := rand.Read(random[:]); err != nil {
			return nil, err
		}
		beside := filepath.Join(folder, "."+name+"."+hex.EncodeToString(random[:])+".part")
		f, err := os.OpenFile(beside, os.O_WRONLY|os.O_CREATE|os.O_EXCL, mode)
		if !errors.Is(err, fs.ErrExist) {
			return f, err
		}
	}
}

// fill writes, flushes and closes the temporary file.
func fill(f *os.File, write func(io.Writer) error) error {
	buffered := bufio.NewWriter(f)
	err := write(buffered)
	if err == nil {
		err = buffered.Flush()
	}
	if err == nil {
		err = f.Sync()
	}
	if closing := f.Close(); err == nil {
		err = closing
	}
	return err
}

// takeName gives the temporary file its final name. Without force a second
// name is linked first, since that fails if somebody has made the target in
// the meantime; file systems without links get a plain rename.
func takeName(temporary, target string, force bool) error {
	if !force {
		err := os.Link(temporary, target)
		if err == nil {
			return os.Remove(temporary)
		}
		if errors.Is(err, fs.ErrExist) {
			return fmt.Errorf("it %w; --force overwrites it", ErrExists)
		}
	}
	return os.Rename(temporary, target)
}

// syncFolder flushes the new name to the disk, where the system can do that.
// A failure is no failure of the file, which is complete.
func syncFolder(folder string) {
	if d, err := os.Open(folder); err == nil {
		d.Sync()
		d.Close()
	}
}

// cause is the reason within an error of the file system, without the name
// of the system call and of the temporary file.
func cause(err error) error {
	var path *fs.PathError
	var link *os.LinkError
	switch {
	case errors.As(err, &path):
		return path.Err
	case errors.As(err, &link):
		return link.Err
	}
	return err
}
