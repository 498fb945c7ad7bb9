package session

import (
	"errors"

	"io"
	"io/fs"
	"os"
	"path/filepath"
	"strconv"
	"strings"

	"lobewright/app/files"
	"lobewright/symmetry/message"
)

// write replaces a file by a whole new one that only its owner may read.
func write(path string, data []byte) error {
	return files.Write(path, files.Options{Force: true, Mode: 0o600}, func(w io.Writer) error {
		_, err := w.Write(data)
		return err
	})
}

// removeParts removes what instances that were killed while writing have left
// of this slot's files.
func (s *Session) removeParts() {
	if !s.lock.held() {
		return // others may be writing
	}
	for _, extension := range []string{"lobewright", "running"} {
		files.RemoveParts(s.path(extension))
	}
}

// openRegular opens an ordinary file. Others might hold the start up for ever.
func openRegular(path string) (*os.File, error) {
	info, err := os.Stat(path)
	if err != nil {
		return nil, bare(path, err)
	}
	if !info.Mode().IsRegular() {
		return nil, message.Errorf("%s: this is no ordinary file", filepath.Base(path))
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
	return message.Errorf("%s: %w", filepath.Base(path), files.Cause(err))
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
		return Note{Text: message.Words("%v; it cannot be put aside: %v", reason, bare(path, err))}
	}
	return Note{Text: message.Words("%v; the file is kept as %s", reason, filepath.Base(aside)), Kept: aside}
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
