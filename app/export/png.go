package export

import (
	"bytes"
	"compress/zlib"
	"encoding/binary"
	"hash/crc32"
	"image"
	"io"
	"math"
)

// Numbers and names of this format: W3C, Portable Network Graphics (PNG)
// Specification, third edition, 2025.

// A PNG is a picture that is painted while it is written.
type PNG struct {
	Width, Height int
	// DPI is the resolution in dots per inch, for the pHYs chunk.
	DPI float64
	// Opaque says that no pixel is transparent.
	Opaque bool
	// Study, if not empty, is carried in an iTXt chunk.
	Study []byte
	// Paint paints the part of the picture that dst.Rect names.
	Paint func(dst *image.RGBA) error
}

// bandBytes is about the memory that a band of a picture may take.
const bandBytes = 64 << 20

// Encode writes the picture band by band, marked as sRGB. The error is that of
// w or of Paint.
func (p PNG) Encode(w io.Writer) error {
	c := &chunks{w: w}
	c.begin(p.Width, p.Height, p.Opaque, p.DPI, p.Study)
	if c.err != nil {
		return c.err
	}
	data := &chunkStream{chunks: c, kind: "IDAT"}
	rows := newRows(data, p.Width, depthOf(p.Opaque))
	band := max(1, min(p.Height, bandBytes/(4*max(1, p.Width))))
	img := image.NewRGBA(image.Rect(0, 0, p.Width, band))
	for y := 0; y < p.Height; y += band {
		img.Rect = image.Rect(0, y, p.Width, min(y+band, p.Height))
		img.Pix = img.Pix[:img.Stride*img.Rect.Dy()]
		clear(img.Pix)
		if err := p.Paint(img); err != nil {
			return err
		}
		for row := range img.Rect.Dy() {
			rows.write(img.Pix[row*img.Stride:])
		}
	}
	if err := rows.close(); err != nil {
		return err
	}
	data.flush()
	c.chunk("IEND", nil)
	return c.err
}

// EncodePNG writes img with its resolution (dots per inch) and a study's file,
// which may be empty.
func EncodePNG(w io.Writer, img *image.RGBA, dpi float64, study []byte) error {
	return PNG{
		Width: img.Rect.Dx(), Height: img.Rect.Dy(), DPI: dpi, Opaque: img.Opaque(), Study: study, Paint: copying(img),
	}.Encode(w)
}

// copying paints parts of a picture that is there already.
func copying(img *image.RGBA) func(dst *image.RGBA) error {
	return func(dst *image.RGBA) error {
		for y := dst.Rect.Min.Y; y < dst.Rect.Max.Y; y++ {
			from := img.PixOffset(img.Rect.Min.X+dst.Rect.Min.X, img.Rect.Min.Y+y)
			copy(dst.Pix[dst.PixOffset(dst.Rect.Min.X, y):][:4*dst.Rect.Dx()], img.Pix[from:])
		}
		return nil
	}
}

// chunks writes the chunks of a file and keeps the first error.
type chunks struct {
	w   io.Writer
	err error
}

const pngSignature = "\x89PNG\r\n\x1a\n"

// begin writes all that stands before the picture.
func (c *chunks) begin(width, height int, opaque bool, dpi float64, study []byte) {
	c.write([]byte(pngSignature))
	header := binary.BigEndian.AppendUint32(nil, uint32(width))
	header = binary.BigEndian.AppendUint32(header, uint32(height))
	const colour, colourAlpha = 2, 6
	kind := byte(colourAlpha)
	if opaque {
		kind = colour
	}
	c.chunk("IHDR", append(header, 8, kind, 0, 0, 0))
	c.chunk("sRGB", []byte{0}) // perceptual rendering
	if perMetre := math.Round(dpi / 0.0254); perMetre >= 1 && perMetre <= math.MaxInt32 {
		size := binary.BigEndian.AppendUint32(nil, uint32(perMetre))
		size = binary.BigEndian.AppendUint32(size, uint32(perMetre))
		c.chunk("pHYs", append(size, 1))
	}
	if len(study) > 0 {
		c.chunk("iTXt", internationalText(studyKeyword, study))
	}
}

// internationalText is the body of an iTXt chunk with a compressed text.
func internationalText(keyword string, text []byte) []byte {
	var out bytes.Buffer
	out.WriteString(keyword)
	// A zero behind the keyword; compressed, by zlib; no language, no
	// translated keyword.
	out.Write([]byte{0, 1, 0, 0, 0})
	z := zlib.NewWriter(&out)
	_, _ = z.Write(text) // memory takes everything
	_ = z.Close()
	return out.Bytes()
}

// chunk writes length, type, data and check sum.
func (c *chunks) chunk(kind string, data []byte) {
	head := binary.BigEndian.AppendUint32(nil, uint32(len(data)))
	head = append(head, kind...)
	sum := crc32.Update(crc32.ChecksumIEEE(head[4:]), crc32.IEEETable, data)
	c.write(head)
	c.write(data)
	c.write(binary.BigEndian.AppendUint32(nil, sum))
}

func (c *chunks) write(data []byte) {
	if c.err == nil {
		_, c.err = c.w.Write(data)
	}
}

// A chunkStream cuts a stream into chunks of one type.
type chunkStream struct {
	chunks *chunks
	kind   string
	// sequence, if not nil, counts the chunks of an animation and stands at
	// their beginning.
	sequence *uint32
	buffer   []byte
}

const chunkBytes = 1 << 16

func (s *chunkStream) Write(data []byte) (int, error) {
	for rest := data; len(rest) > 0; {
		if len(s.buffer) == 0 && s.sequence != nil {
			s.buffer = binary.BigEndian.AppendUint32(s.buffer, *s.sequence)
			*s.sequence++
		}
		n := min(len(rest), chunkBytes-len(s.buffer))
		s.buffer = append(s.buffer, rest[:n]...)
		rest = rest[n:]
		if len(s.buffer) == chunkBytes {
			s.flush()
		}
	}
	return len(data), s.chunks.err
}

func (s *chunkStream) flush() {
	if len(s.buffer) > 0 {
		s.chunks.chunk(s.kind, s.buffer)
		s.buffer = s.buffer[:0]
	}
}

// rows filters and compresses the rows of a picture.
type rows struct {
	z         *zlib.Writer
	depth     int // bytes a pixel
	now, last []byte
	filtered  [5][]byte // by filter, each with the filter's number in front
}

// depthOf is how many bytes a pixel has.
func depthOf(opaque bool) int {
	if opaque {
		return 3
	}
	return 4
}

// newRows writes to w, for pixels of four bytes with the opacity last, of three
// without it, or of the opacity alone.
func newRows(w io.Writer, width, depth int) *rows {
	r := &rows{z: zlib.NewWriter(w), depth: depth}
	r.now, r.last = make([]byte, width*depth), make([]byte, width*depth)
	for i := range r.filtered {
		r.filtered[i] = make([]byte, 1+width*depth)
		r.filtered[i][0] = byte(i)
	}
	return r
}

// write adds a row of premultiplied pixels; it may be longer than the row.
// An error of the writer below is returned by close.
func (r *rows) write(rgba []byte) {
	r.now, r.last = r.last, r.now
	for i, j := 0, 0; i < len(r.now); i, j = i+r.depth, j+4 {
		from := rgba[j : j+4 : j+4]
		switch {
		case r.depth == 1:
			r.now[i] = from[3]
		case from[3] == 255:
			copy(r.now[i:i+r.depth], from)
		default:
			var pixel [4]byte
			unmultiply(pixel[:], from)
			copy(r.now[i:i+r.depth], pixel[:])
		}
	}
	_, _ = r.z.Write(r.best())
}

func (r *rows) close() error { return r.z.Close() }

// unmultiply takes the opacity out of a colour.
func unmultiply(to, from []byte) {
	a := uint32(from[3])
	switch a {
	case 0:
		to[0], to[1], to[2] = 0, 0, 0
	default:
		for i := range 3 {
			to[i] = uint8(min(255, (uint32(from[i])*255+a/2)/a))
		}
	}
	to[3] = uint8(a)
}

// best filters the row as compresses best by the rule of thumb of the
// specification (section 12.7): the least sum of absolute differences.
func (r *rows) best() []byte {
	const none, sub, up, average, paeth = 0, 1, 2, 3, 4
	d, now, last := r.depth, r.now, r.last
	if bytes.Equal(now, last) {
		clear(r.filtered[up][1:])
		return r.filtered[up]
	}
	fs, fu, fa, fp := r.filtered[sub][1:], r.filtered[up][1:], r.filtered[average][1:], r.filtered[paeth][1:]
	copy(r.filtered[none][1:], now)
	var sums [5]int
	for i, x := range now {
		var a, c byte
		if i >= d {
			a, c = now[i-d], last[i-d]
		}
		b := last[i]
		s, u, m, p := x-a, x-b, x-byte((int(a)+int(b))/2), x-predicted(a, b, c)
		fs[i], fu[i], fa[i], fp[i] = s, u, m, p
		sums[none] += magnitude(x)
		sums[sub] += magnitude(s)
		sums[up] += magnitude(u)
		sums[average] += magnitude(m)
		sums[paeth] += magnitude(p)
	}
	best := none
	for f, sum := range sums {
		if sum < sums[best] {
			best = f
		}
	}
	return r.filtered[best]
}

func magnitude(x byte) int { return max(int(int8(x)), -int(int8(x))) }

// predicted is the neighbour, of left, upper and upper left, that is nearest
// to left + upper − upper left (Paeth's predictor, section 9.4).
func predicted(a, b, c byte) byte {
	pa, pb := int(b)-int(c), int(a)-int(c)
	pc := max(pa+pb, -pa-pb)
	pa, pb = max(pa, -pa), max(pb, -pb)
	switch {
	case pa <= pb && pa <= pc:
		return a
	case pb <= pc:
		return b
	}
	return c
}
