package export

import (
	"context"
	"encoding/binary"
	"image"
	"io"
)

// EncodeAPNG writes a film as an animated PNG (PNG, third edition, 2025,
// sections 11.3.6 and 4.9); study, which may be empty, is carried like that of
// a PNG.
func (f *Film) EncodeAPNG(ctx context.Context, w io.Writer, study []byte) error {
	c := &chunks{w: w}
	const dpi = 96
	c.begin(f.Width, f.Height, f.Opaque, dpi, study)
	plays := uint32(0) // without end
	if f.Once {
		plays = 1
	}
	control := binary.BigEndian.AppendUint32(nil, uint32(len(f.Seconds)))
	c.chunk("acTL", binary.BigEndian.AppendUint32(control, plays))
	times := f.ticks(1000)
	sequence := uint32(0)
	var before *image.RGBA
	err := f.each(ctx, func(k int, img *image.RGBA) error {
		part := img.Rect
		if k > 0 {
			if part = changed(before, img); part.Empty() {
				part = image.Rect(0, 0, 1, 1)
			}
		}
		head := binary.BigEndian.AppendUint32(nil, sequence)
		sequence++
		for _, v := range []int{part.Dx(), part.Dy(), part.Min.X, part.Min.Y} {
			head = binary.BigEndian.AppendUint32(head, uint32(v))
		}
		head = binary.BigEndian.AppendUint16(head, uint16(min(times[k], 0xffff)))
		head = binary.BigEndian.AppendUint16(head, 1000)
		// The picture before stays, and the part takes its place.
		c.chunk("fcTL", append(head, 0, 0))
		data := &chunkStream{chunks: c, kind: "fdAT", sequence: &sequence}
		if k == 0 {
			data.kind, data.sequence = "IDAT", nil
		}
		rows := newRows(data, part.Dx(), depthOf(f.Opaque))
		for y := part.Min.Y; y < part.Max.Y; y++ {
			rows.write(img.Pix[img.PixOffset(part.Min.X, y):])
		}
		if before == nil {
			before = image.NewRGBA(img.Rect)
		}
		copy(before.Pix, img.Pix)
		if err := rows.close(); err != nil {
			return err
		}
		data.flush()
		return c.err
	})
	if err != nil {
		return err
	}
	c.chunk("IEND", nil)
	return c.err
}

// PNG is one picture of a film as a file of its own.
func (f *Film) PNG(ctx context.Context, k int, dpi float64, study []byte) (PNG, error) {
	img := image.NewRGBA(image.Rect(0, 0, f.Width, f.Height))
	if err := f.Paint(ctx, k, img); err != nil {
		return PNG{}, err
	}
	return PNG{Width: f.Width, Height: f.Height, DPI: dpi, Opaque: f.Opaque, Study: study, Paint: copying(img)}, nil
}
