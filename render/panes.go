package render

import (
	"encoding/binary"
	"math"
)

// Translucent discs mostly cover tiles from edge to edge and have one colour
// there. A disc that fills a tile is kept as an equation, and where all its
// discs lie in one order the tile's ground is one colour.

// paneColor is the colour of a translucent disc on a canvas; even tells that
// it is the same all over.
type paneColor struct {
	r, g, b float32
	even    bool
}

// wide is a translucent disc that fills the canvas: its nearness at the
// middle of the pixel (px, py) is n + nx·px + ny·py.
type wide struct {
	slot      uint32
	n, nx, ny float32
}

func (w *wide) near(px, py int) float32 { return w.n + w.nx*float32(px) + w.ny*float32(py) }

// evenColor finds the colour of a disc, that of the last slot, when it is
// even on the canvas: without hatching, seen from one side and away from the
// highlight.
func (t *tile) evenColor(p *part) (c paneColor) {
	d := &t.f.discs[p.index]
	l := &t.f.light
	if p.hatch.period > 0 {
		return c
	}
	front, back := 0, 0
	for _, e := range [4][2]int{{0, 0}, {t.side, 0}, {0, t.side}, {t.side, t.side}} {
		va, vb := l.sightAt(float32(t.x+e[0]), float32(t.y+e[1]))
		nl, nv := d.light, d.normal[0]*va+d.normal[1]*vb+d.normal[2]
		if nv < 0 {
			nl, nv = -nl, -nv
			back++
		} else {
			front++
		}
		if nl+nv >= l.glintSum && !p.flat {
			return c
		}
	}
	if front > 0 && back > 0 {
		return c
	}
	c.even = true
	half := float32(t.side) / 2
	t.sights.n = 0
	i := t.want(uint32(len(t.slots)-1), half, half)
	t.look()
	c.r, c.g, c.b = t.sights.color(i)
	t.sights.n = 0
	return c
}

// pane draws a translucent disc without a hole. It is one sheet, so its
// fragments are made at once, pixel row by pixel row, unless the layer is
// wanted for an outline.
func (t *tile) pane(d *disc, p *part, slot uint32, keep bool) {
	b := &p.box
	n := 1 << t.lg
	y0, y1 := max(t.clip.Min.Y, int(math.Max(-1e6, b.y0))-t.y-1), min(t.clip.Max.Y, int(math.Min(1e6, b.y1))-t.y+2)
	lo, hi := math.Max(b.x0, float64(t.x)), math.Min(b.x1, float64(t.x+t.side+1))
	var piece [2][2]float64
	var x0, x1 [16]int
	nx, ny := float32(d.n[1]), float32(d.n[2])
	full := uint32(1)<<n - 1
	area := t.clip
	all := d.fills(float64(t.x), float64(t.y), float64(t.x+t.side), float64(t.y+t.side), t.f.projs[p.proj].nMin)
	if keep = keep && (!all || t.solidAny); !keep {
		area = t.inner
		y0, y1 = max(y0, area.Min.Y), min(y1, area.Max.Y)
	}
	if all && !keep {
		corner := d.n[0] + d.n[1]*(float64(t.x)+0.5-d.mx) + d.n[2]*(float64(t.y)+0.5-d.my)
		t.wides = append(t.wides, wide{slot, float32(corner), nx, ny})
		return
	}
	for py := y0; py < y1; py++ {
		from, to, coreFrom, coreTo := math.MaxInt, 0, 0, math.MaxInt
		if all {
			from, to = area.Min.X, area.Max.X
		}
		for k := 0; k < n && !all; k++ {
			x0[k], x1[k] = 0, 0
			y := float64(t.y+py) + (float64(k)+0.5)/float64(n)
			if d.spans(y, lo, hi, &piece) > 0 {
				x0[k], x1[k] = t.pixelRange(piece[0][0], piece[0][1], k)
			}
			if x0[k] < x1[k] {
				from, to = min(from, x0[k]), max(to, x1[k])
			}
			coreFrom, coreTo = max(coreFrom, x0[k]), min(coreTo, x1[k])
		}
		row := d.n[0] + d.n[2]*(float64(t.y+py)+0.5-d.my) + d.n[1]*(float64(t.x)+0.5-d.mx)
		from, to = max(from, area.Min.X), min(to, area.Max.X)
		for x := from; x < to; x++ {
			mask := full
			if x < coreFrom || x >= coreTo {
				mask = 0
				for k := range n {
					if x >= x0[k] && x < x1[k] {
						mask |= 1 << k
					}
				}
			}
			i := py*t.side + x
			fr := frag{slot: slot, mask: mask, n: float32(row + d.n[1]*float64(x)), nx: nx, ny: ny}
			if t.solidAny {
				fr.mask = t.inFront(i, &fr)
				if fr.mask == 0 {
					continue
				}
			}
			if keep {
				t.front.at[i] = sheet{fr.mask, slot, fr.n, nx, ny}
				t.front.touch(py)
				continue
			}
			t.push(i, fr)
		}
	}
}

// ahead returns the samples of a pixel where a plane lies in front of what is
// there.
func (t *tile) ahead(keys []uint64, near, nx, ny float32) (mask uint32) {
	// Mostly all samples agree.
	lo, hi := keys[0], keys[0]
	for _, key := range keys[1:] {
		lo, hi = min(lo, key), max(hi, key)
	}
	half := (abs32(nx) + abs32(ny)) / 2
	if near-half > math.Float32frombits(uint32(hi>>32)) {
		return 1<<len(keys) - 1
	}
	if near+half < math.Float32frombits(uint32(lo>>32)) {
		return 0
	}
	step := 1 / float32(len(keys))
	for k, key := range keys {
		at := near + nx*(float32(t.sx[k&15])-0.5) + ny*((float32(k)+0.5)*step-0.5)
		if int64(uint64(math.Float32bits(at))<<32|math.MaxUint32) > int64(key) {
			mask |= 1 << k
		}
	}
	return mask
}

// blank tells that the canvas shows nothing but its ground and the discs that
// fill it, in one order, and returns its pixel.
func (t *tile) blank() (uint32, bool) {
	return t.calmPixel, t.calm && !t.anyFrag && !t.bodies
}

// layWides adds the discs that fill the canvas to the layers of a pixel,
// where nothing opaque hides them; solid tells that there may be something.
func (t *tile) layWides(i, px, py int, solid bool) {
	next, at := t.first[i], int32(len(t.frags))
	full := uint32(1)<<(1<<t.lg) - 1
	for k := range t.wides {
		w := &t.wides[k]
		fr := frag{next: next, slot: w.slot, mask: full, n: w.near(px, py), nx: w.nx, ny: w.ny}
		if solid {
			fr.mask = t.ahead(t.keys[i<<t.lg:][:1<<t.lg], fr.n, w.nx, w.ny)
			if fr.mask == 0 {
				continue
			}
		}
		next = at
		at++
		t.frags = append(t.frags, fr)
	}
	t.first[i] = next
}

// inFront returns the samples of a pixel where a plane is not hidden.
func (t *tile) inFront(i int, fr *frag) uint32 {
	keys := t.keys[i<<t.lg:][:1<<t.lg]
	any := t.empty
	for _, key := range keys {
		any |= key
	}
	if any == 0 {
		return fr.mask
	}
	return fr.mask & t.ahead(keys, fr.n, fr.nx, fr.ny)
}

const maxEven = 4

// stack is an order of even discs, from the front.
type stack struct {
	slots [maxEven]uint32
	n     int
	pixel uint32 // its bytes over the ground
}

// findCalm finds out whether the discs that fill the canvas lie in one order
// all over it.
func (t *tile) findCalm() {
	t.calm = false
	t.last.n = -1
	if len(t.wides) == 0 {
		return
	}
	var first stack
	for k, c := range [4][2]int{{0, 0}, {t.side - 1, 0}, {0, t.side - 1}, {t.side - 1, t.side - 1}} {
		if _, ok := t.evenStack(0, c[0], c[1], false); !ok {
			return
		}
		if k == 0 {
			first = t.last
		} else if first != t.last {
			return
		}
	}
	t.calm, t.calmPixel = true, t.last.pixel
}

// evenStack returns the pixel of a stack of even discs in front of the
// ground. Neighbouring pixels mostly show the same stack, so that the last
// one is kept.
func (t *tile) evenStack(i, px, py int, frags bool) (uint32, bool) {
	if !frags && t.calm {
		return t.calmPixel, true
	}
	if len(t.wides) > maxEven {
		return 0, false
	}
	var near, slope [maxEven]float32
	var next stack
	place := func(n, nx, ny float32, slot uint32) {
		j := next.n & (maxEven - 1)
		for ; j > 0 && n > near[j-1]; j-- {
			near[j], slope[j], next.slots[j] = near[j-1], slope[j-1], next.slots[j-1]
		}
		near[j], slope[j], next.slots[j] = n, abs32(nx)+abs32(ny), slot
		next.n++
	}
	for k := range t.wides {
		w := &t.wides[k]
		if !t.panes[t.slots[w.slot].tri].even {
			return 0, false
		}
		place(w.near(px, py), w.nx, w.ny, w.slot)
	}
	full := uint32(1)<<(1<<t.lg) - 1
	for k := t.first[i]; frags && k >= 0; {
		fr := &t.frags[k]
		s := &t.slots[fr.slot]
		if next.n == maxEven || fr.mask != full || s.batch != -1 || t.f.parts[s.part].form != formDisc || !t.panes[s.tri].even {
			return 0, false
		}
		place(fr.n, fr.nx, fr.ny, fr.slot)
		k = fr.next
	}
	same := next.n == t.last.n
	for j := range next.n {
		if j > 0 && near[j-1]-near[j] < (slope[j]+slope[j-1])/2 {
			return 0, false // they may cross here
		}
		same = same && next.slots[j] == t.last.slots[j]
	}
	if !same {
		next.pixel = t.stackPixel(next.slots[:next.n])
		t.last = next
	}
	return t.last.pixel, true
}

// stackPixel blends even discs over the ground.
func (t *tile) stackPixel(slots []uint32) uint32 {
	var c [4]float32
	left := float32(1)
	for _, k := range slots {
		p := &t.panes[t.slots[k].tri]
		w := left * t.f.parts[t.slots[k].part].alpha
		c[0], c[1], c[2], left = c[0]+w*p.r, c[1]+w*p.g, c[2]+w*p.b, left-w
	}
	g := &t.f.ground
	w := left * g[3]
	v := t.f.pixel(min(c[0]+w*g[0], 1), min(c[1]+w*g[1], 1), min(c[2]+w*g[2], 1), 1-left+w)
	return binary.LittleEndian.Uint32(v[:])
}
