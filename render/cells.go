package render

import (
	"encoding/binary"
	"math"
	"math/bits"
	"slices"
)

// cells are what the pixels of the canvas show for the most part, field by
// field; the head is known to the assembly.
type cells struct {
	slots      *uint32  // 0
	parts      *int32   // 8
	ns, steps  *float32 // 16, 24
	xs, ys, zs *float32 // 32, 40, 48
	slot       []uint32
	part       []int32   // -1 for the ground
	n          []float32 // nearness of one of its samples
	step       []float32 // nearness that counts as a jump
	x, y, z    []float32 // unit normal towards the viewer
	nl         []float32 // cosine between it and the key light
	whole      []uint8   // 1 where its colour is that of the pixel
}

// cell is one of them.
type cell struct {
	slot    uint32
	part    int32
	n, step float32
	x, y, z float32
}

// ready makes the cells fit a canvas of n pixels.
func (c *cells) ready(n int) {
	n += 2 * lanes // a group may reach beyond the last row
	if len(c.slot) == n {
		return
	}
	c.slot, c.part, c.whole = make([]uint32, n), make([]int32, n), make([]uint8, n)
	for _, p := range [6]*[]float32{&c.n, &c.step, &c.x, &c.y, &c.z, &c.nl} {
		*p = make([]float32, n)
	}
	c.slots, c.parts, c.ns, c.steps = &c.slot[0], &c.part[0], &c.n[0], &c.step[0]
	c.xs, c.ys, c.zs = &c.x[0], &c.y[0], &c.z[0]
}

func (c *cells) at(i int) cell {
	return cell{c.slot[i], c.part[i], c.n[i], c.step[i], c.x[i], c.y[i], c.z[i]}
}

// clear makes a pixel one of the ground.
func (c *cells) clear(i int) { c.slot[i], c.part[i], c.whole[i] = 0, -1, 0 }

// wholes returns which of the eight cells from i on have the colour of their
// pixel.
func (c *cells) wholes(i int) uint8 {
	// Gathers the lowest bits of eight bytes in the highest byte.
	return uint8(binary.LittleEndian.Uint64(c.whole[i:][:lanes]) * 0x0102040810204080 >> 56)
}

// goOn returns in which of the eight pixels from i on the surface goes on
// smoothly into those from j on.
func (c *cells) goOn(i, j int) uint8 {
	if useVectors {
		return uint8(goOnEight(c, i, j))
	}
	bit := uint8(0)
	for k := range lanes {
		if c.goesOn(i+k, j+k) {
			bit |= 1 << k
		}
	}
	return bit
}

// goesOn tells whether the surface of a pixel goes on smoothly into another.
// goOnEight does the same for eight.
func (c *cells) goesOn(i, j int) bool {
	if c.slot[i] == c.slot[j] {
		return true
	}
	dot := float32(float32(c.x[i]*c.x[j])+float32(c.y[i]*c.y[j])) + float32(c.z[i]*c.z[j])
	return c.part[i] == c.part[j] && abs32(c.n[i]-c.n[j]) < c.step[i] && dot > creaseCos
}

// fillCells finds what every pixel shows for the most part.
func (t *tile) fillCells() {
	c := &t.lines.cells
	c.ready(t.side * t.side)
	for y := t.clip.Min.Y; y < t.clip.Max.Y; y++ {
		t.sights.reset()
		for x := t.clip.Min.X; x < t.clip.Max.X; x += lanes {
			valid := laneBits(0, t.clip.Max.X-x)
			any, same := t.scan(y*t.side + x)
			for m := valid &^ any; m != 0; m &= m - 1 {
				c.clear(y*t.side + x + lowest(m))
			}
			if any &= valid; any != 0 {
				t.fillGroup(x, y, any, same)
			}
		}
		t.seeSights()
		for b := range t.sights.n {
			t.readCells(&t.sights.all[b], y*t.side+int(t.sights.owner[b]))
		}
	}
}

// fillGroup finds what those pixels of the scanned group at x show that have
// a bit in any, and wants their sights.
func (t *tile) fillGroup(x, y int, any, same uint8) {
	sc := &t.scanned
	b := t.sights.block()
	t.sights.owner[b] = int32(x)
	i := y*t.side + x
	whole := any
	for m := any &^ same; m != 0; m &= m - 1 {
		j := lowest(m)
		if t.whole(t.keys[(i+j)<<t.lg:][:1<<t.lg]) != 0 {
			continue
		}
		whole &^= 1 << j
		key := t.mainKey(b, j, x+j, y)
		if key == 0 {
			any &^= 1 << j
			t.lines.cells.clear(i + j)
		}
		sc.slot[j], sc.near[j] = uint32(key), math.Float32frombits(uint32(key>>32))
	}
	t.setCells(i, any, whole)
	t.aimLanes(&t.sights.all[b], &sc.slot, whole, x, y)
}

// setCells fills in the cells from i on that have a bit in any, from the
// scanned slots; whole has those that show one part alone.
func (t *tile) setCells(i int, any, whole uint8) {
	sc, c := &t.scanned, &t.lines.cells
	slots, parts := c.slot[i:][:lanes], c.part[i:][:lanes]
	ns, steps, wholes := c.n[i:][:lanes], c.step[i:][:lanes], c.whole[i:][:lanes]
	part, jump, persp := int32(-1), float32(0), false // the last part's
	flat := uint8(0)
	for m := any; m != 0; m &= m - 1 {
		j := lowest(m)
		slot := sc.slot[j]
		if p := t.slots[slot].part; p != part {
			part, jump = p, jumpPixels*t.f.pixelDepth(p, 1)
			persp, flat = t.f.parts[p].persp, 0xff
			if t.f.parts[p].hatch.period > 0 {
				flat = 0
			}
		}
		n, step := sc.near[j], jump
		if persp {
			step *= n
		}
		slots[j], parts[j], ns[j], steps[j] = slot, part, n, step
		wholes[j] = whole & flat >> j & 1
	}
}

// mainKey returns a sample of the part that covers most of a pixel that shows
// several, and wants its sight as sight j of block b.
func (t *tile) mainKey(b, j, x, y int) (key uint64) {
	keys := t.keys[(y*t.side+x)<<t.lg:][:1<<t.lg]
	best, slot := uint32(0), uint32(0)
	for todo := uint32(t.full); todo != 0; {
		mask, s := t.partGroup(keys, todo)
		todo &^= mask
		if bits.OnesCount32(mask) > bits.OnesCount32(best) {
			best, slot = mask, s
		}
	}
	if slot == 0 {
		return 0
	}
	mx, my := t.middle(best)
	t.aim(&t.sights.all[b], j, slot, float32(x)+mx, float32(y)+my)
	for _, k := range keys {
		if uint32(k) == slot {
			return k
		}
	}
	return 0
}

// readCells takes the normals of a block to the cells, of which i is the
// first.
func (t *tile) readCells(o *eight, i int) {
	c := &t.lines.cells
	if !slices.Contains(o.slot[:], 0) {
		copy(c.x[i:][:lanes], o.nx[:])
		copy(c.y[i:][:lanes], o.ny[:])
		copy(c.z[i:][:lanes], o.nz[:])
		copy(c.nl[i:][:lanes], o.nl[:])
		return
	}
	for j := range lanes {
		if o.slot[j] != 0 {
			c.x[i+j], c.y[i+j], c.z[i+j], c.nl[i+j] = o.nx[j], o.ny[j], o.nz[j], o.nl[j]
		}
	}
}
