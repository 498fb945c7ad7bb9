package render

import "math"

// Colours are worked with as float32 from 0 to 1: linear light for the looks
// Lit and Ink, the sRGB numbers themselves for Plain.

// fromSRGB holds the linear light of the 256 sRGB numbers (IEC 61966-2-1).
var fromSRGB = func() (t [256]float32) {
	for i := range t {
		v := float64(i) / 255
		if v <= 0.04045 {
			t[i] = float32(v / 12.92)
		} else {
			t[i] = float32(math.Pow((v+0.055)/1.055, 2.4))
		}
	}
	return t
}()

// toSRGB holds the sRGB numbers of linear light, found by the exponent and
// the first ten bits of the mantissa of a float32: from 2^-13, below which
// the number is 0, to 1. That is fine enough to be right within a tenth of a
// step.
var toSRGB = func() (t [14 << 10]uint8) {
	for i := range t {
		v := float64(math.Float32frombits(uint32(i+srgbBase)<<13 | 1<<12))
		if v <= 0.0031308 {
			v *= 12.92
		} else {
			v = 1.055*math.Pow(v, 1/2.4) - 0.055
		}
		t[i] = uint8(math.Min(255, v*255+0.5))
	}
	return t
}()

const srgbBase = (127 - 13) << 10

// tone returns the working numbers of a colour.
func (f *frame) tone(c Color) [3]float32 {
	if f.linear {
		return [3]float32{fromSRGB[c.R], fromSRGB[c.G], fromSRGB[c.B]}
	}
	return [3]float32{float32(c.R) / 255, float32(c.G) / 255, float32(c.B) / 255}
}

// encode returns the byte of a working number.
func encode(v float32, linear bool) uint8 {
	if !(v > 0) {
		return 0
	}
	if v > 1 {
		v = 1
	}
	if !linear {
		return uint8(int32(float32(v*255) + 0.5))
	}
	i := int(math.Float32bits(v)>>13) - srgbBase
	if i < 0 {
		return uint8(int32(v*(12.92*255) + 0.5))
	}
	return toSRGB[min(i, len(toSRGB)-1)]
}
