package structure

import (
	"bufio"
	"io"
	"strconv"
)

// Write writes a molecule as a plain coordinate list, in Å. Numbers are written in full, so that Read gives back
// exactly the same molecule (its title made to fit on one line).
func Write(w io.Writer, m *Molecule) error {
	out := bufio.NewWriter(w)
	line := appendInt(nil, len(m.Atoms))
	line = append(line, '\n')
	line = append(line, oneLine(m.Title)...)
	line = append(line, '\n')
	for _, a := range m.Atoms {
		line = append(line, a.Element.Symbol()...)
		for _, x := range a.Position {
			line = append(line, ' ')
			line = strconv.AppendFloat(line, x, 'f', -1, 64)
		}
		line = append(line, '\n')
		if _, err := out.Write(line); err != nil {
			return err
		}
		line = line[:0]
	}
	if _, err := out.Write(line); err != nil {
		return err
	}
	return out.Flush()
}
