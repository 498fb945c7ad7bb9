package structure

import (
	"bufio"
	"errors"
	"io"
	"strings"

	"lobewright/symmetry/message"
)

// Limits of what is read, held before any work is done.
const (
	// MaxAtoms is the greatest number of atoms of a structure.
	MaxAtoms = 20_000
	// MaxLine is the greatest length of a line in bytes. Titles that list properties of a whole box of atoms
	// reach some thousand bytes; lines of atoms a hundred or two.
	MaxLine = 64 << 10
	// MaxBytes is the greatest number of bytes up to the end of the first frame: 20,000 lines of 800 bytes.
	MaxBytes = 16 << 20
)

// lines hands out the lines of a text one by one and counts them. A line ends with LF, CR LF or a lone CR.
type lines struct {
	in     *bufio.Reader
	file   string
	number int // of the line handed out last, from 1
	bytes  int
	line   []byte
	afterR bool // the last line ended with CR: an LF that follows belongs to it
}

func newLines(r io.Reader, file string) *lines {
	return &lines{in: bufio.NewReaderSize(r, 32<<10), file: file}
}

func (l *lines) fail(p Problem, line int, want message.Text, format string, args ...any) *Error {
	return &Error{File: l.file, Line: line, Problem: p, What: message.Words(format, args...), Want: want}
}

// start takes away a byte order mark and refuses UTF-16.
func (l *lines) start() error {
	head, _ := l.in.Peek(3)
	switch {
	case strings.HasPrefix(string(head), "\xef\xbb\xbf"):
		_, err := l.in.Discard(3)
		return err
	case strings.HasPrefix(string(head), "\xff\xfe"), strings.HasPrefix(string(head), "\xfe\xff"),
		len(head) >= 2 && (head[0] == 0) != (head[1] == 0):
		return l.fail(NotText, 1, message.Words("save it as UTF-8 or plain ASCII"), "the file is UTF-16 text")
	}
	return nil
}

// next returns the next line without its end, io.EOF after the last one, or an *Error.
func (l *lines) next() (string, error) {
	l.line = l.line[:0]
	for {
		c, err := l.in.ReadByte()
		if errors.Is(err, io.EOF) {
			if len(l.line) == 0 {
				return "", io.EOF
			}
			return l.end(false), nil
		}
		if err != nil {
			e := l.fail(CannotRead, l.number+1, message.Text{}, "reading broke off: %s", systemError(err))
			e.Err = err
			return "", e
		}
		if l.bytes++; l.bytes > MaxBytes {
			return "", l.fail(TooLarge, l.number+1, message.Words("the first frame may take %s bytes", message.Count(MaxBytes)),
				"no end of the first frame within %s bytes", message.Count(MaxBytes))
		}
		switch {
		case c == '\n' && l.afterR && len(l.line) == 0:
			l.afterR = false
		case c == '\n' || c == '\r':
			return l.end(c == '\r'), nil
		case c == 0 || c == 0x7f || c < ' ' && !strings.ContainsRune("\t\v\f\x1a", rune(c)):
			return "", l.fail(NotText, l.number+1, wantFile, "the file is binary, not text (byte %#02x)", c)
		case len(l.line) == MaxLine:
			return "", l.fail(LineTooLong, l.number+1, message.Words("a line may take %s bytes", message.Count(MaxLine)),
				"the line is longer than %s bytes", message.Count(MaxLine))
		default:
			l.line = append(l.line, c)
		}
	}
}

// end counts the line that is complete. The mark that old systems put at the end of a text, 0x1a, is dropped.
func (l *lines) end(afterR bool) string {
	l.number++
	l.afterR = afterR
	return strings.TrimRight(string(l.line), "\x1a")
}

// nextFilled returns the next line that is not blank.
func (l *lines) nextFilled() (string, error) {
	for {
		text, err := l.next()
		if err != nil || strings.TrimSpace(text) != "" {
			return text, err
		}
	}
}

// systemError is the last part of an error of the operating system, fit for one line: "no such file or directory".
func systemError(err error) error {
	for {
		inner := errors.Unwrap(err)
		if inner == nil {
			if text := err.Error(); printable(text) != text {
				return message.Errorf("%s", printable(text))
			}
			return err
		}
		err = inner
	}
}
