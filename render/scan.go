package render

import "math"

// scan is what the opaque samples of a group show: for every pixel slot and
// nearness of one of them. The layout is known to the assembly.
type scan struct {
	slot      [lanes]uint32  // 0
	near      [lanes]float32 // 32
	any, same uint32         // 64, 68: pixels with any sample not 0, with all samples the same
}

// scan looks at the samples of the group whose first pixel is i.
func (t *tile) scan(i int) (any, same uint8) {
	s := &t.scanned
	keys := t.keys[i<<t.lg:][:lanes<<t.lg]
	if t.lg == 2 && useVectors {
		scanFour(s, &keys[0])
	} else {
		s.plain(keys, 1<<t.lg)
	}
	return uint8(s.any), uint8(s.same)
}

// plain scans groups of n samples a pixel. scanFour does the same for four.
func (s *scan) plain(keys []uint64, n int) {
	s.any, s.same = 0, 0
	for k := range lanes {
		p := keys[k*n:][:n]
		one := p[n/2]
		first := uint32(one)
		any, same := uint32(0), true
		for _, v := range p {
			any |= uint32(v)
			same = same && uint32(v) == first
		}
		s.slot[k], s.near[k] = first, math.Float32frombits(uint32(one>>32))
		if any != 0 {
			s.any |= 1 << k
		}
		if same {
			s.same |= 1 << k
		}
	}
}

// fillLanes writes one pixel to those of a group that have a bit; at is the
// place of the first in the row.
func fillLanes(row []uint8, at int, bit uint8, pixel uint32) {
	for m := bit; m != 0; m &= m - 1 {
		o := row[4*(at+lowest(m)):][:4]
		o[0], o[1], o[2], o[3] = uint8(pixel), uint8(pixel>>8), uint8(pixel>>16), uint8(pixel>>24)
	}
}
