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

// toSRGB holds the sRGB number of linear light in steps of 1/4096 of its
// square root, which is fine enough to round every number correctly to
// within half a step of 1/255.
const sqrtSteps = 4096

var toSRGB = func() (t [sqrtSteps + 1]uint8) {
	for i := range t {
		r := float64(i) / sqrtSteps
		v := r * r
		if v <= 0.0031308 {
			v *= 12.92
		} else {
			v = 1.055*math.Pow(v, 1/2.4) - 0.055
		}
		t[i] = uint8(v*255 + 0.5)
	}
	return t
}()

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
		return uint8(v*255 + 0.5)
	}
	return toSRGB[int(float32(math.Sqrt(float64(v)))*sqrtSteps+0.5)]
}
