package export

import (
	"encoding/binary"
	"hash/crc32"
	"slices"
)

// Tables and fields of this file are those of OpenType (ISO/IEC 14496-22:2019,
// chapter 5). It reads only the program's own typefaces.

// metrics of a typeface, in thousandths of the em.
type metrics struct {
	box             [4]int
	ascent, descent int
}

// subset is a TrueType font in which only some signs have outlines and widths;
// they keep their numbers. What else a font holds is left out, and what it
// needs to be scaled stays.
func subset(font []byte, signs []int) ([]byte, metrics) {
	tables := map[string][]byte{}
	count := int(binary.BigEndian.Uint16(font[4:]))
	for i := range count {
		entry := font[12+16*i:]
		offset, length := binary.BigEndian.Uint32(entry[8:]), binary.BigEndian.Uint32(entry[12:])
		tables[string(entry[:4])] = font[offset : offset+length]
	}
	head, glyf, loca := slices.Clone(tables["head"]), tables["glyf"], tables["loca"]
	numGlyphs := int(binary.BigEndian.Uint16(tables["maxp"][4:]))
	outline := func(g int) []byte {
		if binary.BigEndian.Uint16(head[50:]) == 0 {
			return glyf[2*int(binary.BigEndian.Uint16(loca[2*g:])) : 2*int(binary.BigEndian.Uint16(loca[2*g+2:]))]
		}
		return glyf[binary.BigEndian.Uint32(loca[4*g:]):binary.BigEndian.Uint32(loca[4*g+4:])]
	}
	kept := withParts(signs, outline)
	var newGlyf, newLoca []byte
	for g := range numGlyphs {
		newLoca = binary.BigEndian.AppendUint32(newLoca, uint32(len(newGlyf)))
		if kept[g] {
			newGlyf = append(newGlyf, outline(g)...)
			for len(newGlyf)%4 != 0 {
				newGlyf = append(newGlyf, 0)
			}
		}
	}
	newLoca = binary.BigEndian.AppendUint32(newLoca, uint32(len(newGlyf)))
	hmtx := slices.Clone(tables["hmtx"])
	full := int(binary.BigEndian.Uint16(tables["hhea"][34:]))
	for g := range full {
		if !kept[g] {
			clear(hmtx[4*g : 4*g+4]) // compresses well
		}
	}
	clear(hmtx[4*full:])
	em := int(binary.BigEndian.Uint16(head[18:]))
	signed := func(b []byte) int { return int(int16(binary.BigEndian.Uint16(b))) * 1000 / em }
	m := metrics{
		box:    [4]int{signed(head[36:]), signed(head[38:]), signed(head[40:]), signed(head[42:])},
		ascent: signed(tables["hhea"][4:]), descent: signed(tables["hhea"][6:]),
	}
	binary.BigEndian.PutUint16(head[50:], 1) // long offsets
	binary.BigEndian.PutUint32(head[8:], 0)
	return joined(map[string][]byte{
		"head": head, "glyf": newGlyf, "loca": newLoca, "hmtx": hmtx,
		"hhea": tables["hhea"], "maxp": tables["maxp"], "cvt ": tables["cvt "], "fpgm": tables["fpgm"], "prep": tables["prep"],
	}), m
}

// withParts marks signs, the one for what is missing, and those of which others
// are put together.
func withParts(signs []int, outline func(int) []byte) map[int]bool {
	kept := map[int]bool{}
	var keep func(g int)
	keep = func(g int) {
		if kept[g] {
			return
		}
		kept[g] = true
		data := outline(g)
		if len(data) < 10 || int16(binary.BigEndian.Uint16(data)) >= 0 {
			return
		}
		const words, scaled, more, twoScales, matrix = 0x1, 0x8, 0x20, 0x40, 0x80
		for at := 10; ; {
			flags := binary.BigEndian.Uint16(data[at:])
			keep(int(binary.BigEndian.Uint16(data[at+2:])))
			at += 6
			if flags&words != 0 {
				at += 2
			}
			switch {
			case flags&scaled != 0:
				at += 2
			case flags&twoScales != 0:
				at += 4
			case flags&matrix != 0:
				at += 8
			}
			if flags&more == 0 {
				return
			}
		}
	}
	keep(0)
	for _, g := range signs {
		keep(g)
	}
	return kept
}

// joined puts tables together to a font.
func joined(tables map[string][]byte) []byte {
	var names []string
	for name, data := range tables {
		if len(data) > 0 {
			names = append(names, name)
		}
	}
	slices.Sort(names)
	n := len(names)
	power := 1
	for 2*power <= n {
		power *= 2
	}
	log := 0
	for 1<<(log+1) <= power {
		log++
	}
	out := []byte{0, 1, 0, 0}
	for _, v := range []int{n, 16 * power, log, 16 * (n - power)} {
		out = binary.BigEndian.AppendUint16(out, uint16(v))
	}
	offset, headAt := len(out)+16*n, 0
	var body []byte
	for _, name := range names {
		data := tables[name]
		if name == "head" {
			headAt = offset + len(body)
		}
		out = append(out, name...)
		out = binary.BigEndian.AppendUint32(out, sum(data))
		out = binary.BigEndian.AppendUint32(out, uint32(offset+len(body)))
		out = binary.BigEndian.AppendUint32(out, uint32(len(data)))
		body = append(body, data...)
		for len(body)%4 != 0 {
			body = append(body, 0)
		}
	}
	out = append(out, body...)
	const whole = 0xb1b0afba // what the sum of the file shall be
	binary.BigEndian.PutUint32(out[headAt+8:], whole-sum(out))
	return out
}

// sum adds up the words of a table.
func sum(data []byte) uint32 {
	total := uint32(0)
	for len(data) >= 4 {
		total += binary.BigEndian.Uint32(data)
		data = data[4:]
	}
	var rest [4]byte
	copy(rest[:], data)
	return total + binary.BigEndian.Uint32(rest[:])
}

// subsetTag are the six capitals that tell different subsets apart.
func subsetTag(signs []int) string {
	var data []byte
	for _, g := range signs {
		data = binary.BigEndian.AppendUint16(data, uint16(g))
	}
	h := crc32.ChecksumIEEE(data)
	tag := make([]byte, 6)
	for i := range tag {
		tag[i] = byte('A' + h%26)
		h /= 26
	}
	return string(tag)
}
