package picture

import (
	"context"
	"image"
	"math"

	"lobewright/app/notation"
	"lobewright/render"
)

// A Label is a text placed on a panel, in millimetres from its upper left
// corner, y downward.
type Label struct {
	Runs []render.Run
	// X and Y are the left end of the base line.
	X, Y float64
	// Leader, if there is one, is a line from the label to what it names.
	Leader [][2]float64
	// Element marks the name of a symmetry element.
	Element bool
	// Sign is +1 or −1 for the printed sign of a lobe, 0 for an atom's name.
	Sign int
	// Over says that there was no free place, and that the label stands over
	// bodies: it needs a rim.
	Over bool
	// Size is in points.
	Size float64
}

// Unnamed are the names for which there was no room on a panel: those of atoms, and
// of axes of a frame, and those of symmetry elements.
type Unnamed struct{ Atoms, Elements []string }

// Distances of labels, in millimetres.
const (
	labelClear  = 0.35 // between a label and any body or other label
	ringStep    = 0.45 // from one distance that is tried to the next
	mostRings   = 26
	leaderFrom  = 1.3 // from this distance on a line leads to the atom
	leaderClear = 0.3 // between a label and the end of its line
	maskDensity = 7.0 // pixels a millimetre of the mask of bodies
	maskSide    = 1400.0
	leastSigned = 1.1 // radius of the smallest lobe that has its sign printed
	signGap     = 2.4 // between two signs of one lobe, such as a ring
	leastSign   = 5.0 // pt
)

// Labels places the atoms' names on a panel so that none touches a body, a bond
// or another label, and the printed signs of the lobes where they are wanted and
// seen. blocked are parts of the panel that are taken. The elements of the operations
// of AddElements are named first, and always.
func (b *Body) Labels(ctx context.Context, v Viewpoint, p Panel, size float64, fonts *render.Fonts, blocked []Box) (labels []Label, missing Unnamed, err error) {
	m, err := b.maskOf(ctx, v, p)
	if err != nil {
		return nil, missing, err
	}
	taken := append([]Box(nil), blocked...)
	names := b.group.AtomNames()
	s := b.stage
	middle := v.on(p, ball{centre: v.target})
	named := func(chosen bool) {
		for _, n := range s.named {
			if n.belongs(b.chosen) != chosen {
				continue
			}
			label, ok := b.elementName(n, v, p, size, fonts, m, middle, taken, chosen)
			if !ok {
				missing.Elements = append(missing.Elements, n.Name)
				continue
			}
			taken = append(taken, Box{label.X, label.Y - label.Size*mmPerPoint, label.width, label.Size * mmPerPoint})
			if label.Leader != nil {
				taken = append(taken, alongLine(label.Leader)...)
			}
			labels = append(labels, label.Label)
		}
	}
	named(true)
	for _, a := range b.axes {
		runs := runs(a.letter)
		w, ascent, descent := fonts.Measure(runs, size)
		box, _, ok := m.place(v.on(p, a.ball), middle, w, ascent+descent, taken)
		if !ok {
			missing.Atoms = append(missing.Atoms, a.letter.String())
			continue
		}
		taken = append(taken, box)
		labels = append(labels, Label{Runs: runs, X: box.X, Y: box.Y + ascent, Size: size})
	}
	for i, wanted := range s.labelled(b.group, s.carries) {
		if !wanted || b.key && !s.carries[i] {
			continue
		}
		around := v.on(p, s.around(s.atoms[i]))
		if around.x < 0 || around.x > p.Width || around.y < 0 || around.y > p.Height {
			continue // outside by the camera's own pan and zoom
		}
		runs := runs(notation.Words(names[i]))
		w, ascent, descent := fonts.Measure(runs, size)
		box, leader, ok := m.place(around, middle, w, ascent+descent, taken)
		if !ok {
			missing.Atoms = append(missing.Atoms, names[i])
			continue
		}
		taken = append(taken, box)
		if leader != nil {
			taken = append(taken, alongLine(leader)...)
		}
		labels = append(labels, Label{Runs: runs, X: box.X, Y: box.Y + ascent, Leader: leader, Size: size})
	}
	named(false)
	if s.look.Signs == "printed" {
		labels = append(labels, b.printedSigns(v, p, size, fonts, m)...)
	}
	return labels, missing, nil
}

// An elementLabel is a label with its width in millimetres.
type elementLabel struct {
	Label
	width float64
}

// elementName places the name of a symmetry element beside the first of its
// points where there is room near by. That of a chosen one is bold, stands further
// away with a line that leads to it where there is no room, and at the last over
// what lies there.
func (b *Body) elementName(n namedElement, v Viewpoint, p Panel, size float64, fonts *render.Fonts, m mask, middle disc, taken []Box, chosen bool) (elementLabel, bool) {
	share := 0.85 // of the size of atoms' names
	text := runs(n.name)
	if chosen {
		share = 1
		for i := range text {
			text[i].Bold = true
		}
	}
	width, ascent, _ := fonts.Measure(text, share*size)
	const behind = 5.0 // mm of line, for an end that points away from the viewer
	var led *elementLabel
	shortest := math.Inf(1)
	for _, point := range n.points {
		box, leader, ok := m.place(v.on(p, ball{point, rimRoom}), middle, width, ascent, taken)
		label := elementLabel{Label{Runs: text, X: box.X, Y: box.Y + ascent, Leader: leader, Size: share * size, Element: true}, width}
		if !ok {
			continue
		}
		if leader == nil {
			return label, true
		}
		cost := math.Hypot(leader[1][0]-leader[0][0], leader[1][1]-leader[0][1])
		if v.rows.Row(2).Dot(point.Sub(v.target)) < 0 {
			cost += behind
		}
		if cost < shortest {
			led, shortest = &label, cost
		}
	}
	switch {
	case !chosen:
		return elementLabel{}, false
	case led != nil:
		return *led, true
	}
	at := v.on(p, ball{centre: n.points[0]})
	x, y := min(max(at.x-width/2, 0), max(0, p.Width-width)), min(max(at.y-ascent/2, 0), max(0, p.Height-ascent))
	return elementLabel{Label{Runs: text, X: x, Y: y + ascent, Size: share * size, Element: true, Over: true}, width}, true
}

// Signs are the printed signs alone, for panels without names.
func (b *Body) Signs(v Viewpoint, p Panel, size float64, fonts *render.Fonts) []Label {
	if b.stage.look.Signs != "printed" {
		return nil
	}
	return b.printedSigns(v, p, size, fonts, mask{density: maskScale(p)})
}

// A Box is a rectangle on a panel, in millimetres from its upper left corner.
type Box struct{ X, Y, W, H float64 }

func (b Box) meets(o Box) bool {
	return b.X < o.X+o.W && o.X < b.X+b.W && b.Y < o.Y+o.H && o.Y < b.Y+b.H
}

func (b Box) grown(by float64) Box { return Box{b.X - by, b.Y - by, b.W + 2*by, b.H + 2*by} }

// alongLine is a line as small boxes.
func alongLine(line [][2]float64) []Box {
	const steps, half = 12, 0.15
	var out []Box
	for k := range steps + 1 {
		t := float64(k) / steps
		x, y := line[0][0]*(1-t)+line[1][0]*t, line[0][1]*(1-t)+line[1][1]*t
		out = append(out, Box{x - half, y - half, 2 * half, 2 * half})
	}
	return out
}

// A mask tells where a panel shows bodies.
type mask struct {
	density       float64 // pixels a millimetre
	width, height int
	sums          []int32 // of covered pixels above and to the left
	panel         Panel
}

func maskScale(p Panel) float64 { return min(maskDensity, maskSide/max(p.Width, p.Height)) }

// maskOf draws the bodies coarsely. One may write on a translucent plane, not
// on its edge.
func (b *Body) maskOf(ctx context.Context, v Viewpoint, p Panel) (mask, error) {
	m := mask{density: maskScale(p), panel: p}
	m.width, m.height = max(1, int(p.Width*m.density)), max(1, int(p.Height*m.density))
	var scene render.Scene
	for _, s := range b.stage.scene.Shapes {
		if _, flat := s.Geometry.(render.Disc); flat && s.Material.Opacity < 1 {
			continue
		}
		scene.Shapes = append(scene.Shapes, s)
	}
	img := image.NewRGBA(image.Rect(0, 0, m.width, m.height))
	look := render.PlainLook(render.Color{})
	look.GroundOpacity = 0
	err := render.Draw(ctx, img, &scene, v.Camera(p), look, render.Quality{Samples: 4, DPI: m.density * 25.4}, render.Band{})
	m.sums = make([]int32, (m.width+1)*(m.height+1))
	for y := range m.height {
		row := int32(0)
		for x := range m.width {
			if img.Pix[img.PixOffset(x, y)+3] > 0 {
				row++
			}
			m.sums[(y+1)*(m.width+1)+x+1] = m.sums[y*(m.width+1)+x+1] + row
		}
	}
	return m, err
}

// free tells whether a box holds no body and lies on the panel.
func (m mask) free(b Box) bool {
	if b.X < 0 || b.Y < 0 || b.X+b.W > m.panel.Width || b.Y+b.H > m.panel.Height {
		return false
	}
	x0, y0 := int(b.X*m.density), int(b.Y*m.density)
	x1 := min(m.width, int(math.Ceil((b.X+b.W)*m.density)))
	y1 := min(m.height, int(math.Ceil((b.Y+b.H)*m.density)))
	w := m.width + 1
	return m.sums[y1*w+x1]-m.sums[y0*w+x1]-m.sums[y1*w+x0]+m.sums[y0*w+x0] == 0
}

// place finds the nearest free place around a disc; among equally near ones
// that which leads away from the middle of the picture. Further out a line
// leads to the disc.
func (m mask) place(around, middle disc, width, height float64, taken []Box) (Box, [][2]float64, bool) {
	const turns = 32
	outward := math.Atan2(middle.y-around.y, around.x-middle.x)
	for ring := range mostRings {
		gap := labelClear + ringStep*float64(ring)
		best, least, found := Box{}, math.Inf(1), false
		for k := range turns {
			angle := 2 * math.Pi * float64(k) / turns
			sin, cos := math.Sincos(angle)
			r := around.radius + gap
			x := around.x + r*cos + width/2*(cos-1)
			y := around.y - r*sin - height/2*(sin+1)
			box := Box{x, y, width, height}
			if !m.free(box.grown(labelClear)) || meetsAny(box.grown(labelClear), taken) {
				continue
			}
			// Sideways is read best; equal ones go to the right.
			cost := math.Abs(math.Remainder(angle-outward, 2*math.Pi)) + 0.3*math.Abs(sin) - 0.01*cos
			if cost < least {
				best, least, found = box, cost, true
			}
		}
		if !found {
			continue
		}
		if gap < leaderFrom {
			return best, nil, true
		}
		leader := leaderTo(best, around)
		if meetsAnyOf(alongLine(leader), taken) {
			continue
		}
		return best, leader, true
	}
	return Box{}, nil, false
}

func meetsAny(b Box, taken []Box) bool {
	for _, t := range taken {
		if b.meets(t) {
			return true
		}
	}
	return false
}

func meetsAnyOf(boxes, taken []Box) bool {
	for _, b := range boxes {
		if meetsAny(b, taken) {
			return true
		}
	}
	return false
}

// leaderTo is the line from a label to the rim of a disc.
func leaderTo(b Box, d disc) [][2]float64 {
	x, y := min(max(d.x, b.X), b.X+b.W), min(max(d.y, b.Y), b.Y+b.H)
	dx, dy := d.x-x, d.y-y
	l := math.Hypot(dx, dy)
	if l == 0 {
		return [][2]float64{{x, y}, {x, y}}
	}
	start, end := leaderClear/l, 1-0.7*d.radius/l
	return [][2]float64{{x + dx*start, y + dy*start}, {x + dx*end, y + dy*end}}
}

// printedSigns writes + and − into the lobes that are seen and large enough.
func (b *Body) printedSigns(v Viewpoint, p Panel, size float64, fonts *render.Fonts, m mask) []Label {
	camera, scene := v.Camera(p), render.Scene{Shapes: b.stage.scene.Shapes}
	w, h := max(1, int(p.Width*m.density)), max(1, int(p.Height*m.density))
	var picker render.Renderer
	var out []Label
	var written []disc
	var boxes []Box
	for _, mark := range b.signs {
		d := v.on(p, mark.ball)
		if d.radius < leastSigned || tooNear(d, written) {
			continue
		}
		hit, ok := picker.Pick(&scene, camera, render.Quality{DPI: m.density * 25.4}, w, h, int(d.x*m.density), int(d.y*m.density))
		if !ok || hit.ID != mark.id || scene.Shapes[hit.Shape].Material.Color != b.stage.lobeMaterial(mark.sign).Color {
			continue
		}
		label := Label{Runs: []render.Run{{Text: "+", Bold: true}}, Sign: 1}
		if mark.sign < 0 {
			label = Label{Runs: []render.Run{{Text: "−", Bold: true}}, Sign: -1}
		}
		label.Size = max(leastSign, min(size, size*d.radius/2))
		width, _, _ := fonts.Measure(label.Runs, label.Size)
		const axis = 0.31 // of the size: the height of the bars of both signs
		label.X, label.Y = d.x-width/2, d.y+axis*label.Size*mmPerPoint
		_, up, down := fonts.Measure(label.Runs, label.Size)
		if box := (Box{label.X, label.Y - up, width, up + down}); !meetsAny(box, boxes) && box.X > 0 && box.X+box.W < p.Width && box.Y > 0 && box.Y+box.H < p.Height {
			out, written, boxes = append(out, label), append(written, d), append(boxes, box)
		}
	}
	return out
}

func tooNear(d disc, others []disc) bool {
	for _, o := range others {
		if math.Hypot(d.x-o.x, d.y-o.y) < signGap {
			return true
		}
	}
	return false
}
