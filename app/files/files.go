// Package files writes files whole or not at all: beside their place, flushed
// to the disk, then renamed.
package files

import (
	"bufio"
	"crypto/rand"
	"encoding/hex"
	"errors"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"strings"

	"lobewright/symmetry/message"
)

// ErrExists is wrapped by the error for a file that is there already.
var ErrExists = message.Errorf("exists already")

// Options say how a file is written.
type Options struct {
	// Force lets an existing file be replaced.
	Force bool
	// Mode are the permissions of a new file, less the user's mask; 0 stands
	// for those of an ordinary file. An existing file keeps its own.
	Mode fs.FileMode
}

const ordinaryMode = 0o666

// Write writes a file: write fills a temporary file in the same folder, which
// is flushed to the disk and then takes the name. A symbolic link stays one. An
// existing file is left alone without Force (ErrExists). After an error, which
// is one line, nothing has changed and no temporary file is left.
func Write(path string, o Options, write func(io.Writer) error) error {
	return WriteAll([]string{path}, o, func(_ int, w io.Writer) error { return write(w) })
}

// WriteAll is Write for files that belong together: none takes its name before
// all of them are written.
func WriteAll(paths []string, o Options, write func(i int, w io.Writer) error) (err error) {
	var parts []part
	defer func() {
		if err == nil {
			return
		}
		for _, p := range parts {
			os.Remove(p.beside)
			if p.named && p.isNew {
				os.Remove(p.target)
			}
		}
	}()
	for i, path := range paths {
		p := part{path: path}
		var mode fs.FileMode
		if p.target, mode, p.isNew, err = check(path, o); err != nil {
			return err
		}
		f, err := createBeside(p.target, mode)
		if err != nil {
			return cannot(path, err)
		}
		p.beside = f.Name()
		parts = append(parts, p)
		if err := fill(f, func(w io.Writer) error { return write(i, w) }); err != nil {
			return cannot(path, err)
		}
	}
	for i := range parts {
		p := &parts[i]
		if err := takeName(p.beside, p.target, o.Force); err != nil {
			return cannot(p.path, err)
		}
		p.named = true
	}
	for i, p := range parts {
		if folder := filepath.Dir(p.target); i == 0 || folder != filepath.Dir(parts[i-1].target) {
			syncFolder(folder)
		}
	}
	return nil
}

// A part is a file that is being written.
type part struct {
	path, target, beside string
	isNew, named         bool
}

func cannot(path string, err error) error {
	return message.Errorf("cannot write %s: %w", path, Cause(err))
}

// Check tells beforehand whether Write would refuse a path, so that nothing is
// computed for a file that cannot be written.
func Check(path string, force bool) error {
	_, _, _, err := check(path, Options{Force: force})
	if err != nil {
		return err
	}
	folder := filepath.Dir(path)
	switch info, err := os.Stat(folder); {
	case errors.Is(err, fs.ErrNotExist):
		return message.Errorf("cannot write %s: there is no folder %s", path, folder)
	case err == nil && !info.IsDir():
		return message.Errorf("cannot write %s: %s is no folder", path, folder)
	}
	return nil
}

// check resolves path, which may be a symbolic link to a file, and tells the
// permissions for the new file.
func check(path string, o Options) (target string, mode fs.FileMode, isNew bool, err error) {
	mode = o.Mode
	if mode == 0 {
		mode = ordinaryMode
	}
	info, err := os.Stat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		if to, err := os.Readlink(path); err == nil {
			return "", 0, false, message.Errorf("cannot write %s: it is a link to %s, which does not exist", path, to)
		}
		return path, mode, true, nil
	case err != nil:
		return "", 0, false, cannot(path, err)
	case info.IsDir():
		return "", 0, false, message.Errorf("cannot write %s: it is a folder; give the name of a file", path)
	case !info.Mode().IsRegular():
		return "", 0, false, message.Errorf("cannot write %s: it is not an ordinary file", path)
	case !o.Force:
		return "", 0, false, message.Errorf("%s %w; --force overwrites it", path, ErrExists)
	}
	target, err = filepath.EvalSymlinks(path)
	if err != nil {
		return "", 0, false, cannot(path, err)
	}
	return target, info.Mode().Perm(), false, nil
}

// PartEnding is what the names of files end with that are being written.
const PartEnding = ".part"

// RemoveParts removes what writers of a file that were killed have left beside
// it. Nobody may be writing it.
func RemoveParts(path string) {
	folder, name := filepath.Split(path)
	if folder == "" {
		folder = "."
	}
	entries, _ := os.ReadDir(folder)
	for _, e := range entries {
		middle, ok := strings.CutPrefix(e.Name(), "."+name+".")
		middle, part := strings.CutSuffix(middle, PartEnding)
		if _, err := hex.DecodeString(middle); ok && part && err == nil && len(middle) == 12 {
			os.Remove(filepath.Join(folder, e.Name()))
		}
	}
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
		beside := filepath.Join(folder, "."+name+"."+hex.EncodeToString(random[:])+PartEnding)
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
			return message.Errorf("it %w; --force overwrites it", ErrExists)
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

// Cause is the reason within an error of the file system, without the name
// of the system call and of the temporary file.
func Cause(err error) error {
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
