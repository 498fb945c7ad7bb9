package export

import (
	"bufio"
	"compress/lzw"
	"context"
	"encoding/binary"
	"image"
	"io"

	"lobewright/symmetry/message"
)

// Numbers and names of this format: CompuServe, Graphics Interchange Format,
// version 89a, 1990; the extension that begins anew is common practice.

// MostGIFRate is how many pictures a second a GIF can show: readers take times
// shorter than two hundredths of a second for a tenth.
const MostGIFRate = 50

// EncodeGIF writes a film as a GIF with one palette for all pictures; study,
// which may be empty, is carried as a comment.
func (f *Film) EncodeGIF(ctx context.Context, w io.Writer, study []byte) error {
	p, err := f.palette(ctx)
	if err != nil {
		return err
	}
	out := bufio.NewWriterSize(w, 1<<16)
	g := &gifWriter{w: out, width: f.Width, height: f.Height, palette: p, opaque: f.Opaque}
	g.header(f.Once, study)
	times := f.ticks(100)
	err = f.each(ctx, func(k int, img *image.RGBA) error {
		g.picture(img, max(2, times[k]))
		return ctx.Err()
	})
	if err != nil {
		return err
	}
	g.byte(0x3b)
	return out.Flush()
}

// palette looks at some of the pictures.
func (f *Film) palette(ctx context.Context) (*palette, error) {
	const looks = 9
	c := newCensus()
	img := image.NewRGBA(image.Rect(0, 0, f.Width, f.Height))
	last := -1
	for i := range looks {
		k := i * (len(f.Seconds) - 1) / (looks - 1)
		if k == last {
			continue
		}
		last = k
		if err := f.Paint(ctx, k, img); err != nil {
			return nil, err
		}
		c.add(img)
	}
	return c.palette(transparentIndex), nil
}

// transparentIndex is the last index: pixels that are not there, or that stay
// as they are.
const transparentIndex = 255

type gifWriter struct {
	w             *bufio.Writer // keeps the first error
	width, height int
	palette       *palette
	opaque        bool
	before, now   []uint8
	cut           []uint8
}

func (g *gifWriter) byte(b ...byte) { _, _ = g.w.Write(b) }
func (g *gifWriter) short(v ...int) {
	for _, x := range v {
		_, _ = g.w.Write(binary.LittleEndian.AppendUint16(nil, uint16(x)))
	}
}

func (g *gifWriter) header(once bool, study []byte) {
	_, _ = g.w.WriteString("GIF89a")
	g.short(g.width, g.height)
	// A table of 256 colours, 8 bits each, for all pictures.
	g.byte(0xf7, transparentIndex, 0)
	var table [3 * 256]byte
	for i, c := range g.palette.colours {
		copy(table[3*i:], c[:])
	}
	g.byte(table[:]...)
	if !once {
		g.byte(0x21, 0xff, 11)
		_, _ = g.w.WriteString("NETSCAPE2.0")
		g.byte(3, 1, 0, 0, 0)
	}
	if len(study) > 0 {
		g.byte(0x21, 0xfe)
		b := &blockWriter{w: g.w}
		_, _ = b.Write([]byte(studyKeyword + "\n"))
		_, _ = b.Write(ascii(study))
		b.close()
	}
}

// picture writes what has changed since the picture before, for a time in
// hundredths of a second.
func (g *gifWriter) picture(img *image.RGBA, time int) {
	if g.now == nil {
		g.now, g.before = make([]uint8, g.width*g.height), make([]uint8, g.width*g.height)
		for i := range g.before {
			g.before[i] = transparentIndex
		}
	}
	g.palette.index(g.now, img, transparentIndex)
	r := differing(g.width, g.height, func(x, y int) bool { return g.now[y*g.width+x] != g.before[y*g.width+x] })
	// What is opaque is drawn over; else the ground is restored behind each.
	const keep, restore = 1, 2
	disposal := byte(keep)
	if !g.opaque {
		disposal = restore
		for i := range g.before {
			g.before[i] = transparentIndex
		}
		r = differing(g.width, g.height, func(x, y int) bool { return g.now[y*g.width+x] != transparentIndex })
	}
	if r.Empty() {
		r = image.Rect(0, 0, 1, 1)
	}
	g.byte(0x21, 0xf9, 4, disposal<<2|1)
	g.short(min(time, 0xffff))
	g.byte(transparentIndex, 0)
	g.byte(0x2c)
	g.short(r.Min.X, r.Min.Y, r.Dx(), r.Dy())
	g.byte(0, 8)
	g.cut = g.cut[:0]
	for y := r.Min.Y; y < r.Max.Y; y++ {
		from := y*g.width + r.Min.X
		for i := from; i < from+r.Dx(); i++ {
			index := g.now[i]
			if index == g.before[i] {
				index = transparentIndex // long runs compress best
			}
			g.cut = append(g.cut, index)
		}
	}
	b := &blockWriter{w: g.w}
	z := lzw.NewWriter(b, lzw.LSB, 8)
	_, _ = z.Write(g.cut)
	_ = z.Close()
	b.close()
	g.now, g.before = g.before, g.now
}

// A blockWriter cuts a stream into blocks of up to 255 bytes, and ends it with
// an empty one.
type blockWriter struct {
	w     *bufio.Writer
	block [256]byte // its length first
}

func (b *blockWriter) Write(data []byte) (int, error) {
	for _, x := range data {
		_ = b.WriteByte(x)
	}
	return len(data), nil
}

func (b *blockWriter) WriteByte(x byte) error {
	b.block[0]++
	b.block[b.block[0]] = x
	if b.block[0] == 255 {
		return b.Flush()
	}
	return nil
}

func (b *blockWriter) Flush() error {
	_, err := b.w.Write(b.block[:1+int(b.block[0])])
	b.block[0] = 0
	return err
}

func (b *blockWriter) close() {
	if b.block[0] > 0 {
		_ = b.Flush()
	}
	_ = b.w.WriteByte(0)
}

// CheckGIF tells of a rate that no GIF can show.
func CheckGIF(rate float64) error {
	if rate > MostGIFRate {
		return message.Errorf("a GIF shows %d pictures a second at the most, not %g; an APNG or MP4 shows more", MostGIFRate, rate)
	}
	return nil
}
