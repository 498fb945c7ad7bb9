package export

import (
	"bytes"
	"encoding/binary"
	"hash/crc32"
	"image"
	"image/color"
	"image/png"
	"testing"
)

func TestPNGCarriesItsResolutionAndReadsBack(t *testing.T) {
	img := image.NewRGBA(image.Rect(0, 0, 5, 3))
	img.SetRGBA(2, 1, color.RGBA{10, 20, 30, 255})
	var out bytes.Buffer
	if err := EncodePNG(&out, img, 300, nil); err != nil {
		t.Fatal(err)
	}
	chunks := map[string][]byte{}
	for data := out.Bytes()[8:]; len(data) > 0; {
		n := binary.BigEndian.Uint32(data)
		kind, body := string(data[4:8]), data[8:8+n]
		if sum := binary.BigEndian.Uint32(data[8+n:]); sum != crc32.ChecksumIEEE(data[4:8+n]) {
			t.Errorf("%s: wrong check sum", kind)
		}
		if kind != "IDAT" && chunks["IDAT"] != nil && kind != "IEND" {
			t.Errorf("%s stands after the image data", kind)
		}
		chunks[kind] = body
		data = data[12+n:]
	}
	// 300 dots per inch are 300/0.0254 = 11811.02 a metre.
	want := []byte{0, 0, 0x2e, 0x23, 0, 0, 0x2e, 0x23, 1}
	if !bytes.Equal(chunks["pHYs"], want) {
		t.Errorf("pHYs is % x, want % x", chunks["pHYs"], want)
	}
	if !bytes.Equal(chunks["sRGB"], []byte{0}) {
		t.Errorf("sRGB is % x", chunks["sRGB"])
	}
	back, err := png.Decode(&out)
	if err != nil {
		t.Fatal(err)
	}
	if r, g, b, _ := back.At(2, 1).RGBA(); r>>8 != 10 || g>>8 != 20 || b>>8 != 30 {
		t.Errorf("the pixel reads back as %d %d %d", r>>8, g>>8, b>>8)
	}
}
