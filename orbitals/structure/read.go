package structure

import (
	"errors"
	"io"
	"math"
	"path/filepath"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"

	"lobewright/symmetry/message"
)

const (
	// MaxCoordinate (Å) is the largest coordinate that is taken. Even an unfolded box of a simulation stays
	// within 10 µm, and a position of this size is still exact to 1e-11 Å.
	MaxCoordinate = 1e5
	// MinDistance (Å) is the least distance of two atoms. The shortest bond, of H2, is 0.74 Å; what is
	// nearer than this is one atom written twice.
	MinDistance = 0.1
)

var (
	wantFile  = message.Words(`expected a coordinate list: the number of atoms, a title, then lines such as "O 0.0 0.0 0.117"`)
	wantAtom  = message.Words(`expected element x y z in Å, such as "O 0.0 0.0 0.117"`)
	wantCount = message.Words("line 1 must hold the number of atoms, line 2 a title")
	wantLines = message.Words("the count must equal the number of atom lines")
)

// Read reads a plain coordinate list: a line with the number of atoms, a line with a title, then a line an atom
// with its element and x, y and z in Å. (Trade practice, no standard.) It takes the list as it is found: any
// line ends, a byte order mark, tabs, columns after the fourth, symbols in any case, numbered labels (C12),
// atomic numbers, exponents written with D. Of several frames the first is taken, and a Note says so.
//
// name is the file's name for messages and the title where the file has none. The error is an *Error.
func Read(r io.Reader, name string) (*Molecule, []Note, error) {
	in := newLines(r, name)
	if err := in.start(); err != nil {
		return nil, nil, err
	}
	count, countLine, err := readCount(in)
	if err != nil {
		return nil, nil, err
	}
	p := parser{in: in, count: count, countLine: countLine}
	if err := p.title(name); err != nil {
		return nil, nil, err
	}
	if err := p.atoms(); err != nil {
		return nil, nil, err
	}
	if err := p.rest(); err != nil {
		return nil, nil, err
	}
	if err := p.spots(); err != nil {
		return nil, nil, err
	}
	return &p.molecule, p.notes, nil
}

// readCount reads the number of atoms from the first line that is not blank.
func readCount(in *lines) (count, line int, err error) {
	text, err := in.nextFilled()
	if errors.Is(err, io.EOF) {
		return 0, 0, in.fail(IsEmpty, 1, wantFile, "the file is empty")
	}
	if err != nil {
		return 0, 0, err
	}
	if !utf8.ValidString(text) {
		return 0, 0, in.fail(NotText, in.number, wantFile, "the file is binary, not text")
	}
	fields := strings.Fields(text)
	n, bad := strconv.Atoi(fields[0])
	if bad == nil && len(fields) > 1 {
		_, bad = number(fields[1]) // a word may follow the count, a number means that this is no count
		if bad == nil {
			bad = strconv.ErrSyntax
		} else {
			bad = nil
		}
	}
	switch {
	case errors.Is(bad, strconv.ErrRange), bad == nil && n > MaxAtoms:
		return 0, 0, in.fail(TooManyAtoms, in.number, message.Words("a structure may have up to %s", message.Count(MaxAtoms)),
			"%s atoms are too many", strings.Trim(found(fields[0]), `"`))
	case bad != nil:
		return 0, 0, in.fail(BadCount, in.number, wantCount, "expected the number of atoms, found %s",
			found(strings.TrimSpace(text)))
	case n < 1:
		return 0, 0, in.fail(BadCount, in.number, wantCount, "the number of atoms is %d, it must be from 1 to %s", n, message.Count(MaxAtoms))
	}
	return n, in.number, nil
}

// A parser holds what is known so far of the frame that is read.
type parser struct {
	in               *lines
	count, countLine int
	molecule         Molecule
	lineOf           []int // the line of each atom
	notes            []Note
	labels, isotopes bool // already remarked
}

func (p *parser) note(key Problem, format string, args ...any) {
	p.notes = append(p.notes, Note{File: p.in.file, Line: p.in.number, Problem: key, What: message.Words(format, args...)})
}

// title reads the title. A title in an older encoding is read as Latin-1, so that an Å stays an Å.
func (p *parser) title(name string) error {
	text, err := p.in.next()
	if err != nil && !errors.Is(err, io.EOF) {
		return err
	}
	if !utf8.ValidString(text) {
		runes := make([]rune, len(text))
		for i := range runes {
			runes[i] = rune(text[i])
		}
		text = string(runes)
		p.note(TitleDecoded, "the title is not UTF-8; it was read as Latin-1")
	}
	p.molecule.Title = oneLine(text)
	if p.molecule.Title == "" {
		p.molecule.Title = oneLine(filepath.Base(name))
	}
	return nil
}

// oneLine makes a title fit on one line: control characters and others that print nothing, such as those that turn
// the direction of writing, become blanks; blanks at the ends are dropped.
func oneLine(text string) string {
	text = strings.Map(func(r rune) rune {
		if !unicode.IsPrint(r) {
			return ' '
		}
		return r
	}, text)
	return strings.TrimSpace(text)
}

// atoms reads as many atoms as were counted.
func (p *parser) atoms() error {
	p.molecule.Atoms = make([]Atom, 0, p.count)
	for len(p.molecule.Atoms) < p.count {
		text, err := p.in.nextFilled()
		if errors.Is(err, io.EOF) {
			return p.in.fail(CutShort, max(p.in.number, 1), wantLines,
				"the file ends after %d of the %d atoms that line %d counts", len(p.molecule.Atoms), p.count, p.countLine)
		}
		if err != nil {
			return err
		}
		if err := p.atom(text); err != nil {
			return err
		}
	}
	return nil
}

// atom reads one line of the form El x y z.
func (p *parser) atom(text string) error {
	fields := fourFields(text)
	if len(fields) < 4 {
		return p.in.fail(BadAtom, p.in.number, wantAtom, "expected atom %d of %d, found %s",
			len(p.molecule.Atoms)+1, p.count, found(strings.TrimSpace(text)))
	}
	e, err := p.element(fields[0])
	if err != nil {
		return err
	}
	a := Atom{Element: e}
	for i, f := range fields[1:4] {
		x, bad := number(f)
		if bad != nil {
			return p.in.fail(BadNumber, p.in.number, message.Words("%s", bad), "%c of atom %d is %s", "xyz"[i],
				len(p.molecule.Atoms)+1, found(f))
		}
		if math.Abs(x) > MaxCoordinate {
			return p.in.fail(TooFar, p.in.number, message.Words("coordinates are in Å and may reach %s", message.Count(MaxCoordinate)),
				"%c of atom %d is %s Å", "xyz"[i], len(p.molecule.Atoms)+1, strings.Trim(found(f), `"`))
		}
		a.Position[i] = x
	}
	p.molecule.Atoms = append(p.molecule.Atoms, a)
	p.lineOf = append(p.lineOf, p.in.number)
	return nil
}

// fourFields splits off the first four columns; what follows them is not looked at.
func fourFields(text string) []string {
	fields := make([]string, 0, 4)
	for f := range strings.FieldsSeq(text) {
		if fields = append(fields, f); len(fields) == 4 {
			break
		}
	}
	return fields
}

// element reads a symbol in any case, a symbol with a number behind it, or an atomic number.
func (p *parser) element(text string) (Element, error) {
	if e, ok := ElementOf(text); ok {
		return e, nil
	}
	if n, err := strconv.Atoi(text); err == nil && 1 <= n && n <= int(MaxElement) && text[0] != '+' {
		return Element(n), nil
	}
	if text == "D" || text == "T" {
		if !p.isotopes {
			p.isotopes = true
			p.note(IsotopesRead, "%s was read as hydrogen", text)
		}
		return 1, nil
	}
	symbol := strings.TrimRight(text, "0123456789")
	if e, ok := ElementOf(symbol); ok {
		if !p.labels {
			p.labels = true
			p.note(LabelsRead, "labels such as %s were read as elements", shorten(text))
		}
		return e, nil
	}
	if head := strings.TrimRight(text, "abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ'"); head != text {
		symbol := strings.TrimRight(head, "0123456789")
		if _, ok := ElementOf(symbol); ok && symbol != head {
			return 0, p.in.fail(UnknownElement, p.in.number, message.Words("write %s or %s", head, symbol),
				"unknown element %s: letters after the number are not read", found(text))
		}
	}
	return 0, p.in.fail(UnknownElement, p.in.number, message.Words("write a symbol such as Fe, or an atomic number from 1 to 118"),
		"unknown element %s", found(text))
}

// rest looks at what follows the last atom: nothing, another frame, or an atom too many.
func (p *parser) rest() error {
	text, err := p.in.nextFilled()
	if errors.Is(err, io.EOF) {
		return nil
	}
	if err != nil {
		// The frame is complete; what follows it is not needed, so it may be too long, too large or binary.
		p.note(TextLeft, "what follows the last atom was not read")
		return nil
	}
	fields := fourFields(text)
	if _, err := strconv.Atoi(fields[0]); err == nil && len(fields) == 1 {
		p.note(FirstFrame, "further frames follow; the first one was taken")
		return nil
	}
	if len(fields) == 4 && allNumbers(fields[1:]) {
		return p.in.fail(AtomsLeft, p.in.number, wantLines,
			"another atom follows the %d that line %d counts", p.count, p.countLine)
	}
	p.note(TextLeft, "what follows the last atom was not read")
	return nil
}

func allNumbers(fields []string) bool {
	for _, f := range fields {
		if _, err := number(f); err != nil {
			return false
		}
	}
	return true
}

// spots refuses two atoms on one spot.
func (p *parser) spots() error {
	i, j, ok := onOneSpot(p.molecule.Atoms, MinDistance)
	if !ok {
		return nil
	}
	d := p.molecule.Atoms[i].Position.Sub(p.molecule.Atoms[j].Position).Len()
	return p.in.fail(OneSpot, p.lineOf[j], message.Words("no two atoms may be nearer than %g Å", MinDistance),
		"atom %d lies on the spot of atom %d of line %d (%.2g Å apart)", j+1, i+1, p.lineOf[i], d)
}
