package sheet

import (
	"slices"

	"lobewright/app/notation"
	"lobewright/app/picture"
)

// A tree draws a descent: labels, panels and the lines between.
type tree struct {
	*maker
	style          style
	panel          picture.Panel
	rowHeight, gap float64
	left, right    float64 // widths of the labels
	most           int     // panels in a row
}

// tieWidth is the width of lines between levels or labels, in millimetres.
const tieWidth = 0.22

// tieClear is the distance between a label and a line, in millimetres.
const tieClear = 1.2

func (t tree) draw(parents []parent, c *correlation, view picture.Viewpoint) (block, error) {
	var out block
	m := t.maker
	fan := max(6, 0.09*m.inner())
	inner := float64(t.most) * t.panel.Width
	width := t.left + t.right + 2*fan + inner + 4*tieClear
	if t.most == 0 {
		width = t.left + t.right + max(3*fan, 0.3*m.inner()) + 2*tieClear
	}
	panelsFrom := t.left + fan + 2*tieClear
	head := t.style.line() + 1
	symbols := func(text notation.Text, x, w float64) {
		b := m.line(text, t.style)
		out.put(b, x+(w-b.w)/2, 0)
	}
	symbols(notation.Group(c.symbol), 0, t.left)
	symbols(notation.Group(c.subgroup), width-t.right, t.right)
	// Where each branch and each parent stands.
	y := head
	ends := map[string][]float64{}
	var lines []Item
	for i, p := range parents {
		if i > 0 {
			y += 2 * t.gap
		}
		top := y
		var middles []float64
		for _, b := range p.branches {
			middle := y + t.rowHeight/2
			middles = append(middles, middle)
			for k, body := range b.bodies {
				panel, err := m.panel(body, view, t.panel, m.say("captions.as", p.label, b.label), false)
				if err != nil {
					return out, err
				}
				out.put(panel, panelsFrom+(inner-float64(len(b.bodies))*t.panel.Width)/2+float64(k)*t.panel.Width, middle-t.panel.Height/2)
			}
			ends[b.label] = append(ends[b.label], middle)
			y += t.rowHeight + t.gap
		}
		at := (top + y - t.gap) / 2
		label := m.line(notation.Irrep(p.label), t.style)
		out.put(label, t.left-label.w, at-label.h/2)
		if t.most == 0 {
			continue
		}
		for k, middle := range middles {
			half := float64(len(p.branches[k].bodies)) * t.panel.Width / 2
			// Across the panels a line runs level, so that it covers none.
			lines = append(lines, t.tie([2]float64{t.left + tieClear, at}, [2]float64{panelsFrom - tieClear, middle}, [2]float64{panelsFrom + inner/2 - half, middle}))
		}
	}
	y -= t.gap
	// The subgroup's labels stand as near to what leads to them as they can.
	var labels []string
	var wanted []float64
	for _, l := range c.order {
		if len(ends[l]) == 0 {
			continue
		}
		sum := 0.0
		for _, e := range ends[l] {
			sum += e
		}
		labels, wanted = append(labels, l), append(wanted, sum/float64(len(ends[l])))
	}
	places := spread(wanted, t.style.line()*1.15, head+t.style.line()/2, y-t.style.line()/2)
	at := map[string]float64{}
	for i, l := range labels {
		at[l] = places[i]
		out.put(m.line(notation.Irrep(l), t.style), width-t.right, places[i]-t.style.line()/2)
	}
	// The lines to the right, from the panels or from the labels on the left.
	y = head
	for i, p := range parents {
		if i > 0 {
			y += 2 * t.gap
		}
		top := y
		first := len(lines)
		for _, b := range p.branches {
			middle := y + t.rowHeight/2
			half := float64(len(b.bodies)) * t.panel.Width / 2
			lines = append(lines, t.tie([2]float64{panelsFrom + inner/2 + half, middle}, [2]float64{panelsFrom + inner + tieClear, middle},
				[2]float64{width - t.right - tieClear, at[b.label]}))
			y += t.rowHeight + t.gap
		}
		if t.most == 0 {
			middle := (top + y - t.gap) / 2
			for k := range p.branches {
				lines[first+k] = t.tie([2]float64{t.left + tieClear, middle}, [2]float64{width - t.right - tieClear, at[p.branches[k].label]})
			}
		}
	}
	out.items = append(lines, out.items...)
	out.grow(width, y-t.gap)
	return out, nil
}

func (t tree) tie(points ...[2]float64) Line {
	return Line{Points: points, Width: tieWidth * t.weight(), Color: t.palette.Quiet}
}

// spread moves places along a line apart until each two are at least a distance
// apart, each as little as it can, within low and high if there is room. Equal
// ones keep their order.
func spread(wanted []float64, distance, low, high float64) []float64 {
	n := len(wanted)
	order := make([]int, n)
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(a, b int) int {
		switch {
		case wanted[a] < wanted[b]:
			return -1
		case wanted[a] > wanted[b]:
			return 1
		}
		return 0
	})
	// Pools of adjacent violators (isotonic regression): places that touch move
	// as one, to the mean of what they want.
	type pool struct {
		sum   float64
		count int
	}
	var pools []pool
	mean := func(p pool) float64 { return p.sum / float64(p.count) }
	for k, i := range order {
		pools = append(pools, pool{wanted[i] - float64(k)*distance, 1})
		for len(pools) > 1 && mean(pools[len(pools)-1]) < mean(pools[len(pools)-2]) {
			last := pools[len(pools)-1]
			pools = pools[:len(pools)-1]
			pools[len(pools)-1].sum += last.sum
			pools[len(pools)-1].count += last.count
		}
	}
	out := make([]float64, n)
	k := 0
	highest := high - float64(n-1)*distance
	for _, p := range pools {
		at := max(low, min(mean(p), highest))
		for range p.count {
			out[order[k]] = at + float64(k)*distance
			k++
		}
	}
	return out
}
