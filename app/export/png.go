package export

import (
	"bytes"
	"encoding/binary"
	"hash/crc32"
	"image"
	"image/png"
	"io"
	"math"
)

// EncodePNG writes img with its resolution (dots per inch) in the pHYs chunk
// and marked as sRGB (W3C, Portable Network Graphics, third edition, 2025,
// sections 11.3.2.5 and 11.3.4.3).
func EncodePNG(w io.Writer, img image.Image, dpi float64) error {
	var encoded bytes.Buffer
	encoder := png.Encoder{CompressionLevel: png.DefaultCompression}
	if err := encoder.Encode(&encoded, img); err != nil {
		return err
	}
	// The signature (8 bytes) and IHDR (25) come first; both chunks must
	// stand before the image data.
	const headEnd = 8 + 25
	data := encoded.Bytes()
	parts := [][]byte{data[:headEnd], renderingIntent(), physicalSize(dpi), data[headEnd:]}
	for _, part := range parts {
		if _, err := w.Write(part); err != nil {
			return err
		}
	}
	return nil
}

// renderingIntent is an sRGB chunk that asks for perceptual rendering.
func renderingIntent() []byte { return chunk("sRGB", []byte{0}) }

// physicalSize is a pHYs chunk: pixels a metre along both axes.
func physicalSize(dpi float64) []byte {
	perMetre := uint32(math.Round(dpi / 0.0254))
	data := binary.BigEndian.AppendUint32(nil, perMetre)
	data = binary.BigEndian.AppendUint32(data, perMetre)
	return chunk("pHYs", append(data, 1))
}

// chunk frames data as a PNG chunk: length, type, data, check sum.
func chunk(kind string, data []byte) []byte {
	out := binary.BigEndian.AppendUint32(nil, uint32(len(data)))
	out = append(append(out, kind...), data...)
	return binary.BigEndian.AppendUint32(out, crc32.ChecksumIEEE(out[4:]))
}
