package export

import (
	"bytes"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"
	"unicode/utf16"

	"lobewright/app/files"
	"lobewright/app/study"
	"lobewright/symmetry/message"
)

// Every figure carries its study where its format has a place for such things:
//
//	PNG, APNG  an iTXt chunk, compressed
//	GIF        a comment
//	SVG        an element within <metadata>
//	PDF        an attached file
//	GLB        a member of "extras"
//	MP4        a box of type uuid
//
// It is the study's own file, as study.Encode writes it. Readers here trust
// nothing: every length is checked, every text has a limit.

// studyKeyword names a study in a figure.
const studyKeyword = "lobewright study"

// ErrNoStudy is wrapped by the error for a file that is a figure and carries
// no study.
var ErrNoStudy = message.Errorf("carries no study; figures of this program do, unless they were made with --no-study")

// Limits of what is read of a figure.
const (
	maxFile = 2 << 30   // bytes of a file that is only walked through
	maxHeld = 256 << 20 // bytes of a file that must be searched
)

// maxStudy is the most bytes of a study; tests lower it.
var maxStudy = study.MaxBytes

// A carrier finds the study's file in a figure's bytes; nil if there is none.
// The error is one line without the file's name.
type carrier struct {
	name   string // of the format, for messages
	magic  func(head []byte) bool
	find   func(r io.ReaderAt, size int64) ([]byte, error)
	ending []string
}

var carriers = []carrier{
	{"PNG", begins(pngSignature), findInPNG, []string{".png", ".apng"}},
	{"GIF", begins("GIF8"), findInGIF, []string{".gif"}},
	{"PDF", contains("%PDF-"), findInPDF, []string{".pdf"}},
	{"GLB", begins("glTF"), findInGLB, []string{".glb"}},
	{"MP4", func(head []byte) bool { return len(head) >= 8 && string(head[4:8]) == "ftyp" }, findInMP4, []string{".mp4"}},
	{"SVG", contains("<svg"), findInSVG, []string{".svg"}},
}

func begins(magic string) func([]byte) bool {
	return func(head []byte) bool { return bytes.HasPrefix(head, []byte(magic)) }
}

func contains(magic string) func([]byte) bool {
	return func(head []byte) bool { return bytes.Contains(head, []byte(magic)) }
}

// CarriesStudy tells by its ending whether a file is one that StudyIn reads:
// a figure or a study file.
func CarriesStudy(path string) bool {
	ending := strings.ToLower(filepath.Ext(path))
	if ending == study.Extension {
		return true
	}
	for _, c := range carriers {
		for _, e := range c.ending {
			if e == ending {
				return true
			}
		}
	}
	return false
}

// StudyIn reads the study that a figure carries, or a study file. The error is
// one line; it wraps ErrNoStudy where a figure carries none.
func StudyIn(path string) (study.Study, error) {
	f, err := os.Open(path)
	if err != nil {
		return study.Study{}, message.Errorf("cannot open %s: %w", path, files.Cause(err))
	}
	defer f.Close()
	info, err := f.Stat()
	switch {
	case err != nil:
		return study.Study{}, message.Errorf("cannot open %s: %w", path, files.Cause(err))
	case info.IsDir():
		return study.Study{}, message.Errorf("cannot open %s: it is a folder", path)
	case !info.Mode().IsRegular():
		return study.Study{}, message.Errorf("cannot open %s: it is not an ordinary file", path)
	}
	return ReadStudy(f, info.Size(), filepath.Base(path))
}

// ReadStudy is StudyIn for bytes that are at hand; name stands in messages.
func ReadStudy(r io.ReaderAt, size int64, name string) (study.Study, error) {
	name = oneLine(name)
	head := make([]byte, min(size, 4096))
	if _, err := r.ReadAt(head, 0); err != nil && err != io.EOF {
		return study.Study{}, message.Errorf("%s: cannot be read: %w", name, files.Cause(err))
	}
	if strings.EqualFold(filepath.Ext(name), study.Extension) {
		return study.Read(io.NewSectionReader(r, 0, size), name)
	}
	for _, c := range carriers {
		if !c.magic(head) {
			continue
		}
		if size > maxFile {
			return study.Study{}, message.Errorf("%s: the file is larger than %d bytes", name, maxFile)
		}
		data, err := c.find(r, size)
		switch {
		case err != nil:
			return study.Study{}, message.Errorf("%s: %w", name, err)
		case data == nil:
			return study.Study{}, message.Errorf("%s %w", name, ErrNoStudy)
		}
		s, err := study.Decode(data, name)
		if err != nil {
			err = message.Errorf("the study in %w", err)
		}
		return s, err
	}
	return study.Study{}, message.Errorf("%s: this is no figure that could carry a study: neither PNG, GIF, SVG, PDF, GLB nor MP4", name)
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

// held reads a part of a file into memory if it is within a limit.
func held(r io.ReaderAt, at, n, limit int64) ([]byte, error) {
	if n > limit {
		return nil, message.Errorf("the study would have more than %d bytes", limit)
	}
	data := make([]byte, n)
	if _, err := io.ReadFull(io.NewSectionReader(r, at, n), data); err != nil {
		return nil, errCutOff
	}
	return data, nil
}

var errCutOff = message.Errorf("the file is cut off")

// expanded reads a compressed study up to its limit.
func expanded(z io.Reader) ([]byte, error) {
	data, err := io.ReadAll(io.LimitReader(z, int64(maxStudy)+1))
	switch {
	case len(data) > maxStudy:
		return nil, message.Errorf("the study is larger than %d bytes", maxStudy)
	case err != nil:
		return nil, message.Errorf("the study in it is damaged")
	}
	return data, nil
}

// ascii writes the characters of a study beyond ASCII as JSON's escapes, for
// formats that take no others.
func ascii(study []byte) []byte {
	out := make([]byte, 0, len(study))
	for _, r := range string(study) {
		switch {
		case r < 0x80:
			out = append(out, byte(r))
		case r < 0x10000:
			out = fmt.Appendf(out, `\u%04x`, r)
		default:
			high, low := utf16.EncodeRune(r)
			out = fmt.Appendf(out, `\u%04x\u%04x`, high, low)
		}
	}
	return out
}
