package session

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"sync/atomic"
)

// partNumber tells apart the files that one process writes at once.
var partNumber atomic.Int64

// write replaces a file by a whole new one: written beside it, flushed to the
// disk, renamed. After an error the old one is as it was. A symbolic link stays
// one.
func write(path string, data []byte) error {
	if target, err := filepath.EvalSymlinks(path); err == nil {
		path = target
	}
	if err := writeBeside(path, data); err != nil {
		return fmt.Errorf("cannot write %s: %w", path, cause(err))
	}
	return nil
}

func writeBeside(path string, data []byte) error {
	part := fmt.Sprintf("%s.%d-%d%s", path, os.Getpid(), partNumber.Add(1), partEnding)
	f, err := os.OpenFile(part, os.O_WRONLY|os.O_CREATE|os.O_TRUNC, 0o600)
	if err != nil {
		return err
	}
	_, err = f.Write(data)
	if err == nil {
		err = f.Sync()
	}
	if closing := f.Close(); err == nil {
		err = closing
	}
	if err == nil {
		err = os.Rename(part, path)
	}
	if err != nil {
		os.Remove(part)
		return err
	}
	// The new name is flushed too, where the system can do that; the file is
	// whole in any case.
	if folder, err := os.Open(filepath.Dir(path)); err == nil {
		_ = folder.Sync()
		folder.Close()
	}
	return nil
}

const partEnding = ".part"

// removeParts removes what instances that were killed while writing have left
// of this slot's files.
func (s *Session) removeParts() {
	if !s.lock.held() {
		return // others may be writing
	}
	for _, extension := range []string{"lobewright", "running"} {
		parts, _ := filepath.Glob(quotedPattern(s.path(extension)) + ".*" + partEnding)
		for _, part := range parts {
			os.Remove(part)
		}
	}
}

// quotedPattern makes a pattern that matches a path alone.
func quotedPattern(path string) string {
	if os.PathSeparator == '\\' {
		return path // there is no quoting, and hardly a bracket
	}
	return strings.NewReplacer(`\`, `\\`, "*", `\*`, "?", `\?`, "[", `\[`).Replace(path)
}

// openRegular opens an ordinary file. Others might hold the start up for ever.
func openRegular(path string) (*os.File, error) {
	info, err := os.Stat(path)
	if err != nil {
		return nil, bare(path, err)
	}
	if !info.Mode().IsRegular() {
		return nil, fmt.Errorf("%s: this is no ordinary file", filepath.Base(path))
	}
	f, err := os.Open(path)
	return f, bare(path, err)
}

// bare is an error of the file system with the file's name in the place of the
// system call and the whole path.
func bare(path string, err error) error {
	if err == nil {
		return nil
	}
	return fmt.Errorf("%s: %w", filepath.Base(path), cause(err))
}

// cause is the reason within an error of the file system.
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

// mostAside is how many files of one name are kept aside; the last place is
// used again and again.
const mostAside = 20

// putAside renames a file that cannot be read and says so.
func putAside(path string, reason error) Note {
	extension := filepath.Ext(path)
	stem := strings.TrimSuffix(path, extension)
	var aside string
	for n := 1; n <= mostAside; n++ {
		aside = stem + ".unread-" + strconv.Itoa(n) + extension
		if _, err := os.Lstat(aside); errors.Is(err, fs.ErrNotExist) {
			break
		}
	}
	if err := os.Rename(path, aside); err != nil {
		return Note{Text: oneLine(fmt.Sprintf("%v; it cannot be put aside: %v", reason, bare(path, err)))}
	}
	return Note{Text: oneLine(fmt.Sprintf("%v; the file is kept as %s", reason, filepath.Base(aside))), Kept: aside}
}

// oneLine keeps a message on one line, whatever a file's name contains.
func oneLine(s string) string {
	return strings.Map(func(r rune) rune {
		if r < ' ' || r == 0x7f {
			return ' '
		}
		return r
	}, s)
}
