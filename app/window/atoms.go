//go:build cgo && !nowindow

package window

import (
	"path/filepath"
	"slices"
	"strconv"
	"strings"

	"fyne.io/fyne/v2"

	"lobewright/app/notation"
	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/orbitals/structure"
)

// An atomTable takes the place of the left pane while the structure is edited:
// a row an atom with element, x, y and z in Å of the input. Whatever is right
// goes into the study at once, so that the picture follows; what is wrong stays
// in the table, marked, with the reason below it.
type atomTable struct {
	u     *ui
	pane  *pane
	rows  []work.AtomRow
	title string
	// wrote is what the study's coordinates were when rows were last the same
	// as they; of is the structure that they came from.
	wrote, of string
	faults    []work.CellFault

	editing bool // the marked cell
	row     int  // of the marked cell
	column  int
	typed   []rune
	caret   int
}

func newAtomTable(u *ui) *atomTable {
	t := &atomTable{u: u, column: 1}
	t.pane = newPane(t.draw, u)
	t.pane.least = fyne.NewSize(leftWidth+90, 100) // wide enough for most numbers
	t.pane.onKey, t.pane.onRune, t.pane.onLeave = t.key, t.rune, t.leave
	t.pane.holdsTab = func() bool { return true } // Escape and Ctrl+Tab leave
	t.pane.Hide()
	return t
}

// showAtoms opens or closes the table.
func (u *ui) showAtoms() {
	t := u.atoms
	if t.pane.Visible() {
		t.close()
		return
	}
	if u.state.Structure == nil && u.now().Coordinates == "" {
		return
	}
	t.wrote, t.of = "\x00", ""
	t.follow()
	u.pages.turnTo(noPage)
	u.given.Hide()
	t.pane.Show()
	t.mark(0, 1)
	u.win.Content().Refresh()
	u.win.Canvas().Focus(t.pane) // the pane is too new to know its canvas
}

func (t *atomTable) close() {
	t.end()
	t.pane.Hide()
	t.u.given.Show()
	t.u.win.Content().Refresh()
	t.u.win.Canvas().Focus(t.u.view)
	t.u.refreshPanes()
}

// follow takes the rows from the study where it is not the table that wrote
// it: after undo, or when something else was opened.
func (t *atomTable) follow() {
	s, st := t.u.now(), t.u.state
	if t.wrote == s.Coordinates && t.of == s.Structure {
		return
	}
	var m *structure.Molecule
	switch {
	case s.Coordinates != "":
		read, _, err := structure.Read(strings.NewReader(s.Coordinates), s.Structure)
		if err != nil {
			return
		}
		m = read
	case st.Structure != nil && st.Study.Structure == s.Structure && !st.Stale(work.StageStructure) && st.Study.Coordinates == "":
		m = st.Structure.Molecule
	default:
		return // it comes
	}
	t.rows, t.title = work.RowsOf(m), m.Title
	t.wrote, t.of, t.editing = s.Coordinates, s.Structure, false
	t.faults = nil
	t.row = min(t.row, max(0, len(t.rows)-1))
	t.pane.Update()
}

// cellName names the spot of a cell.
func cellName(row, column int) string {
	return "cell " + strconv.Itoa(row) + " " + strconv.Itoa(column)
}

// mark puts the keyboard on a cell and scrolls to it.
func (t *atomTable) mark(row, column int) {
	t.row, t.column = min(max(row, 0), max(0, len(t.rows)-1)), min(max(column, 0), 3)
	t.pane.mark = cellName(t.row, t.column)
	top := t.top(t.row)
	_, h := t.pane.size()
	switch {
	case top-t.pane.scroll < atomHead+4:
		t.pane.scrollTo(top - atomHead - 4)
	case top+2*atomRow-t.pane.scroll > h:
		t.pane.scrollTo(top + 2*atomRow - h)
	}
	t.pane.Update()
}

// begin starts typing in the marked cell: over what is there, or behind it.
func (t *atomTable) begin(keep bool) {
	row, column, ok := t.marked()
	if !ok {
		return
	}
	t.row, t.column = row, column
	t.editing, t.typed = true, nil
	if keep {
		t.typed = []rune(t.rows[t.row][t.column])
	}
	t.caret = len(t.typed)
	t.pane.Update()
}

// letter hands on what is typed, letter by letter.
func (t *atomTable) letter() {
	t.rows = slices.Clone(t.rows)
	t.rows[t.row][t.column] = string(t.typed)
	t.changed()
}

// changed checks all rows and hands them to the study if they are right. All
// that happens in one cell is one step.
func (t *atomTable) changed() {
	t.faults = work.CheckRows(t.rows)
	t.pane.Update()
	text, ok := work.CoordinatesOf(t.title, t.rows)
	if !ok || len(text) > study.MaxCoordinates {
		return
	}
	u := t.u
	s := u.now()
	if text == s.Coordinates {
		return
	}
	u.player.stop()
	if !u.history.Open() {
		u.history.Begin(study.StepAtomTable)
	}
	s.Coordinates = text
	s.Camera = s.Camera.WithView(u.view.sight.Rows()) // the view stays while atoms move
	s.Atoms = slices.DeleteFunc(slices.Clone(s.Atoms), func(a int) bool { return a > len(t.rows) })
	if s.Check() != nil {
		return
	}
	t.wrote, t.of = s.Coordinates, s.Structure
	keepsFile := u.hasFile()
	u.history.Set(s)
	if keepsFile {
		u.keepFile(u.studyFile, s)
	}
	u.changed()
}

// end finishes the cell at hand.
func (t *atomTable) end() {
	if t.editing {
		t.editing = false
		t.pane.Update()
	}
	if t.u.history.Open() {
		t.u.commit()
	}
}

// leave is end when the keyboard goes elsewhere.
func (t *atomTable) leave() {
	if t.editing {
		t.end()
	}
}

// add puts an atom like the marked one after it, a bond's length aside so that
// the two are not in one place.
func (t *atomTable) add() {
	t.end()
	row := work.AtomRow{"C", "0", "0", "0"}
	at := 0
	if len(t.rows) > 0 {
		at = t.row + 1
		row = t.rows[t.row]
	}
	const aside = 1.5 // Å
	for range 100 {
		moved, ok := movedAside(row, aside)
		if !ok {
			break
		}
		row = moved
		if len(work.CheckRows(append(slices.Clone(t.rows), row))) <= len(t.faults) {
			break
		}
	}
	t.rows = slices.Insert(slices.Clone(t.rows), at, row)
	t.changed()
	t.end()
	t.mark(at, 0)
}

// movedAside moves an atom along x.
func movedAside(row work.AtomRow, by float64) (work.AtomRow, bool) {
	x, err := strconv.ParseFloat(row[1], 64)
	row[1] = strconv.FormatFloat(x+by, 'f', -1, 64)
	return row, err == nil
}

// remove takes the marked atom away; the last one stays.
func (t *atomTable) remove() {
	t.end()
	if len(t.rows) < 2 || t.row >= len(t.rows) {
		return
	}
	t.rows = slices.Delete(slices.Clone(t.rows), t.row, t.row+1)
	t.changed()
	t.end()
	t.mark(t.row, t.column)
}

// rune types a letter.
func (t *atomTable) rune(r rune) bool {
	if !t.editing {
		t.begin(false)
	}
	const most = 40
	if !t.editing || len(t.typed) >= most {
		return true
	}
	t.typed = slices.Insert(t.typed, t.caret, r)
	t.caret++
	t.letter()
	return true
}

// key serves the keys of a table: in a cell they move the caret, else the mark.
func (t *atomTable) key(e *fyne.KeyEvent) bool {
	if t.editing {
		switch e.Name {
		case fyne.KeyLeft:
			t.caret = max(0, t.caret-1)
		case fyne.KeyRight:
			t.caret = min(len(t.typed), t.caret+1)
		case fyne.KeyHome:
			t.caret = 0
		case fyne.KeyEnd:
			t.caret = len(t.typed)
		case fyne.KeyBackspace:
			if t.caret > 0 {
				t.typed = slices.Delete(t.typed, t.caret-1, t.caret)
				t.caret--
				t.letter()
			}
		case fyne.KeyDelete:
			if t.caret < len(t.typed) {
				t.typed = slices.Delete(t.typed, t.caret, t.caret+1)
				t.letter()
			}
		case fyne.KeyReturn, fyne.KeyEnter, fyne.KeyDown:
			t.end()
			t.mark(t.row+1, t.column)
		case fyne.KeyUp:
			t.end()
			t.mark(t.row-1, t.column)
		case fyne.KeyTab:
			t.tab()
		case fyne.KeyEscape:
			t.giveUp()
		default:
			return false
		}
		t.pane.Update()
		return true
	}
	row, column, onCell := t.marked()
	if onCell {
		t.row, t.column = row, column
	}
	switch e.Name {
	case fyne.KeyUp, fyne.KeyDown:
		if !onCell || e.Name == fyne.KeyUp && row == 0 {
			return false
		}
		t.mark(row+map[bool]int{true: 1, false: -1}[e.Name == fyne.KeyDown], column)
	case fyne.KeyPageDown:
		t.mark(t.row+15, t.column)
	case fyne.KeyPageUp:
		t.mark(t.row-15, t.column)
	case fyne.KeyHome:
		t.mark(0, t.column)
	case fyne.KeyEnd:
		t.mark(len(t.rows)-1, t.column)
	case fyne.KeyReturn, fyne.KeyEnter, fyne.KeyF2:
		if !onCell {
			return false
		}
		t.begin(true)
	case fyne.KeyBackspace, fyne.KeyDelete:
		if onCell {
			t.begin(false)
			t.letter()
		}
	case fyne.KeyTab:
		t.tab()
	case fyne.KeyInsert:
		t.add()
	case fyne.KeyEscape:
		t.close()
	default:
		return false
	}
	return true
}

// tab takes what was typed and goes on to the next cell, row by row; back with
// the shift key.
func (t *atomTable) tab() {
	by := 1
	if t.u.modifiers()&fyne.KeyModifierShift != 0 {
		by = -1
	}
	t.end()
	t.step(by)
}

// step moves the mark by cells, row by row; it stays where the table ends.
func (t *atomTable) step(by int) {
	to := t.row*4 + t.column + by
	if to >= 0 && to < 4*len(t.rows) {
		t.mark(to/4, to%4)
	}
}

// giveUp puts the cell back as it was.
func (t *atomTable) giveUp() {
	t.editing = false
	if t.u.history.Open() {
		t.u.history.Cancel()
	}
	t.wrote = "\x00"
	t.u.changed()
	t.follow()
}

// marked is the cell that the keyboard is on, if it is on one.
func (t *atomTable) marked() (row, column int, ok bool) {
	parts := strings.Fields(t.pane.mark)
	if len(parts) != 3 || parts[0] != "cell" {
		return 0, 0, false
	}
	row, err := strconv.Atoi(parts[1])
	column, err2 := strconv.Atoi(parts[2])
	return row, column, err == nil && err2 == nil && row < len(t.rows)
}

// Heights of the table, in units.
const (
	atomHead  = 92
	atomRow   = 23
	atomFault = 16
)

// top is where a row begins, in the whole content.
func (t *atomTable) top(row int) float64 {
	y := float64(atomHead) + float64(row)*atomRow
	last := -1
	for _, f := range t.faults {
		if f.Row >= row {
			break
		}
		if f.Row != last {
			y += atomFault
			last = f.Row
		}
	}
	return y
}

// columns are where the columns of cells begin and how wide they are.
func (t *atomTable) columns(b *board) (left, width [4]float64) {
	const number = 26
	x := pad + number - 6.0
	width[0] = 34
	rest := (b.width - pad - x - width[0] - 3*3) / 3
	for i := range left {
		if i > 0 {
			width[i] = rest
		}
		left[i] = x
		x += width[i] + 3
	}
	return left, width
}

// draw draws the rows that are seen, and what stands above them over these.
func (t *atomTable) draw(b *board) {
	faults := map[int][]work.CellFault{}
	for _, f := range t.faults {
		faults[f.Row] = append(faults[f.Row], f)
	}
	left, width := t.columns(b)
	quiet := style{size: secondSize, color: b.palette.Quiet, align: 1}
	y := atomHead - t.pane.scroll
	chosen := t.u.now().Atoms
	for i := range t.rows {
		here := faults[i]
		tall := float64(atomRow)
		if len(here) > 0 {
			tall += atomFault
		}
		if y+tall > atomHead-atomRow && y < b.height {
			if slices.Contains(chosen, i+1) {
				b.fill(0, y, b.width, atomRow, faint(b.palette.Accent, 0x28))
			}
			b.text(left[0]-6, y+16, notation.Words(strconv.Itoa(i+1)), quiet)
			for k := range 4 {
				t.drawCell(b, i, k, left[k], y, width[k], here)
			}
			if len(here) > 0 {
				b.text(left[0], y+atomRow+10, notation.Words(b.clipped(faultText(here[0]), b.width-left[0]-4, style{size: secondSize})),
					style{size: secondSize, color: b.palette.Accent, align: -1})
			}
		}
		y += tall
	}
	t.pane.extent = y + pad + t.pane.scroll
	t.drawHead(b, left, width)
}

// drawCell draws a cell, its caret while something is typed in it, and a thick
// frame where it is wrong.
func (t *atomTable) drawCell(b *board, row, column int, x, y, width float64, faults []work.CellFault) {
	typing := t.editing && row == t.row && column == t.column
	wrong := slices.ContainsFunc(faults, func(f work.CellFault) bool {
		return f.Column == column || f.Problem == work.CellNear && column > 0
	})
	ink := style{size: textSize, color: b.palette.Ink, align: -1}
	if typing {
		b.fill(x, y, width, atomRow-2, b.palette.Ground)
	}
	switch {
	case wrong:
		b.frame(x, y, width, atomRow-2, 2, b.palette.Accent)
	case typing:
		b.frame(x, y, width, atomRow-2, 1, b.palette.Ink)
	default:
		b.frame(x, y, width, atomRow-2, 1, faint(b.palette.Rule, 0x70))
	}
	text := t.rows[row][column]
	shown := b.clipped(text, width-7, ink)
	if typing {
		shown = tail(b, string(t.typed[:t.caret]), width-9, ink)
		w := b.text(x+4, y+16, notation.Words(shown), ink)
		b.fill(x+4.5+w, y+3, 1, atomRow-8, b.palette.Ink)
		after := string(t.typed[t.caret:])
		if room := width - 9 - w; room > 8 && after != "" {
			b.text(x+5.5+w, y+16, notation.Words(b.clipped(after, room, ink)), ink)
		}
	} else {
		b.text(x+4, y+16, notation.Words(shown), ink)
	}
	hint := ""
	if shown != text && !typing {
		hint = text
	}
	if len(faults) > 0 && wrong {
		hint = faultText(faults[0])
	}
	b.spot(spot{x: x, y: max(y, atomHead), width: width, height: max(0, min(atomRow-2, y+atomRow-2-atomHead)), name: cellName(row, column), hint: hint, do: func() {
		again := t.row == row && t.column == column && t.pane.mark == cellName(row, column)
		t.end()
		t.mark(row, column)
		if again {
			t.begin(true)
		}
	}})
}

// tail is the longest end of a line that fits.
func tail(b *board, text string, width float64, s style) string {
	runes := []rune(text)
	for len(runes) > 0 && b.measure(notation.Words(string(runes)), s) > width {
		runes = runes[1:]
	}
	return string(runes)
}

// drawHead draws what does not scroll: title, commands, names of columns.
func (t *atomTable) drawHead(b *board, left, width [4]float64) {
	b.fill(0, 0, b.width, atomHead-1, b.palette.Panel)
	strong := style{size: textSize, color: b.palette.Ink, align: -1, bold: true}
	quiet := style{size: secondSize, color: b.palette.Quiet}
	b.text(pad, pad+textSize, notation.Words(say("atoms.heading", len(t.rows))), strong)
	x := float64(pad)
	for _, c := range []struct {
		name, label, hint string
		do                func()
	}{
		{"atoms add", say("atoms.add"), say("atoms.addHint"), t.add}, {"atoms remove", say("atoms.remove"), say("atoms.removeHint"), t.remove},
		{"atoms close", say("atoms.close"), say("atoms.closeHint"), t.close},
	} {
		label := notation.Words(c.label)
		w := b.measure(label, style{size: secondSize}) + 14
		drawChip(b, x, 36, w, label, secondSize, chip{name: c.name, hint: c.hint, do: c.do})
		x += w + 4
	}
	for k, name := range []string{say("atoms.element"), "x", "y", "z"} {
		b.text(left[k]+width[k]/2, atomHead-8, notation.Words(name), quiet)
	}
	b.fill(pad, atomHead-3, b.width-2*pad, 1, faint(b.palette.Rule, 0x90))
}

// faultText says what is wrong with a cell.
func faultText(f work.CellFault) string {
	switch f.Problem {
	case work.CellElement:
		return say("atoms.noElement")
	case work.CellLarge:
		return say("atoms.large")
	case work.CellNear:
		return say("atoms.near", f.Other+1)
	}
	return say("atoms.noNumber")
}

// sourceText names where the structure is from, and whether it was edited.
func sourceText(s study.Study) string {
	source := s.Structure
	if filepath.IsAbs(source) {
		source = filepath.Base(source)
	}
	named := filepath.IsAbs(s.Structure) || strings.HasPrefix(source, "demo:") || strings.HasPrefix(source, "ideal:")
	if s.Coordinates != "" && named {
		return say("given.edited", source)
	}
	return source
}
