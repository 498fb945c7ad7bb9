//go:build cgo && !nowindow

package window

import (
	"math"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
	"gonum.org/v1/gonum/mat"

	"lobewright/app/notation"
	"lobewright/app/work"
	"lobewright/orbitals"
)

// angleText names the angle of an operation of a linear molecule.
func angleText(angle float64) string { return "φ = " + degrees(angle) + "°" }

// newAngleButton shows the angle and asks for it.
func newAngleButton(u *ui) *widget.Button {
	b := widget.NewButton(angleText(0), func() { u.guard(u.askPhi) })
	b.Importance = widget.LowImportance
	return b
}

// widest gives what shows an angle the room that the longest one needs.
type widest struct{}

// Layout implements fyne.Layout.
func (widest) Layout(objects []fyne.CanvasObject, size fyne.Size) { stacked{}.Layout(objects, size) }

// MinSize implements fyne.Layout.
func (widest) MinSize(objects []fyne.CanvasObject) fyne.Size {
	return widget.NewButton(angleText(359.9), nil).MinSize().Max(objects[0].MinSize())
}

// askPhi asks for the angle φ of a linear molecule's operations.
func (u *ui) askPhi() {
	u.askAngle(say("frames.askAngleText"), u.now().Angle, func(angle float64) {
		if angle < 0 {
			angle += 360
		}
		u.angled(angle)
	})
}

// An angleScale is the marks below the slider of the angle, every 30°, longer
// ones every 90°, with numbers every 180°.
type angleScale struct {
	marks   []*canvas.Rectangle
	numbers []*canvas.Text
}

const (
	markStep   = 30.0 // degrees
	longStep   = 90.0
	numberStep = 180.0
)

// onScale puts the slider of the angle on its track and scale.
func (u *ui) onScale(s *scrubBar) fyne.CanvasObject {
	c := container.New(&u.scale)
	for a := 0.0; a <= 360; a += markStep {
		mark := canvas.NewRectangle(nil)
		u.scale.marks = append(u.scale.marks, mark)
		c.Add(mark)
		if math.Mod(a, numberStep) == 0 {
			number := canvas.NewText(degrees(a), nil)
			number.Alignment = fyne.TextAlignCenter
			u.scale.numbers = append(u.scale.numbers, number)
			c.Add(number)
		}
	}
	u.scale.restyle(u)
	return container.NewStack(c, u.onTrack(s))
}

// restyle follows a change of colours or sizes.
func (a *angleScale) restyle(u *ui) {
	for _, m := range a.marks {
		m.FillColor = u.palette().Rule
		m.Refresh()
	}
	for _, n := range a.numbers {
		n.Color, n.TextSize = u.palette().Quiet, 9*float32(u.zoom())
		n.Refresh()
	}
}

// Layout implements fyne.Layout.
func (a *angleScale) Layout(_ []fyne.CanvasObject, size fyne.Size) {
	const inset, below, long, short = 16, 9, 6, 4
	at := func(angle float64) float32 {
		return inset + (size.Width-2*inset)*float32(min(angle, 359)/359)
	}
	for i, m := range a.marks {
		length := float32(short)
		angle := markStep * float64(i)
		if math.Mod(angle, longStep) == 0 {
			length = long
		}
		m.Resize(fyne.NewSize(1, length))
		m.Move(fyne.NewPos(at(angle), size.Height/2+below-4))
	}
	for i, n := range a.numbers {
		m := n.MinSize()
		n.Resize(m)
		n.Move(fyne.NewPos(at(numberStep*float64(i))-m.Width/2, size.Height-m.Height+3))
	}
}

// MinSize implements fyne.Layout.
func (a *angleScale) MinSize([]fyne.CanvasObject) fyne.Size { return fyne.NewSize(150, 46) }

// linearIrrep is the irrep of the group orbital that is chosen, if the molecule
// is linear.
func (u *ui) linearIrrep() (string, bool) {
	st, o := u.state, u.orbital()
	if o == nil || st.Group == nil || !st.Group.Fit.Setting.Infinite() || len(u.now().Basis) == 0 {
		return "", false
	}
	return st.Orbitals.Irreps[o.Irrep].Label, true
}

// linearMatrix sets the matrix of an operation for the partners of the group
// orbital that is chosen, row by row.
func (u *ui) linearMatrix(op work.Operation) notation.Text {
	m, err := u.state.Orbitals.PartnerMatrix(op, u.orbital())
	if err != nil {
		return nil
	}
	return matrixText(m)
}

// matrixText sets a matrix on one line: rows with a bar between them.
func matrixText(m *mat.Dense) notation.Text {
	n, _ := m.Dims()
	text := ""
	for i := range n {
		if i > 0 {
			text += " | "
		}
		for j := range n {
			if j > 0 {
				text += "  "
			}
			text += shortText(m.At(i, j), 3) // at any angle there is some long cosine
		}
	}
	if n > 1 {
		text = "(" + text + ")"
	}
	return notation.Words(text)
}

// linearImage is what an operation of a linear molecule makes of a partner.
func (u *ui) linearImage(op work.Operation, o *orbitals.GroupOrbital) []orbitals.Term {
	m, err := u.state.Orbitals.PartnerMatrix(op, o)
	if err != nil {
		return nil
	}
	n, _ := m.Dims()
	var terms []orbitals.Term
	for l := range n {
		if c := m.At(l, o.Partner); math.Abs(c) > 1e-9 {
			terms = append(terms, orbitals.Term{Function: l, Coefficient: c})
		}
	}
	return terms
}
