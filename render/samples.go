package render

// The places of the samples in a pixel. Each of the N samples has a row of
// its own, sample k at height (k+1/2)/N, and a column of its own, so that a
// near upright or near level edge has N steps (common practice, known as N
// rooks). So a sample row is a picture row of its own with one sample a
// pixel.
var samplePlaces = [5][]float64{
	{0.5},
	{0.25, 0.75},
	{0.375, 0.875, 0.125, 0.625},
	{0.9375, 0.3125, 0.5625, 0.0625, 0.8125, 0.4375, 0.6875, 0.1875},
	{
		1.5 / 16, 8.5 / 16, 4.5 / 16, 11.5 / 16, 15.5 / 16, 7.5 / 16, 3.5 / 16, 12.5 / 16,
		0.5 / 16, 9.5 / 16, 5.5 / 16, 13.5 / 16, 2.5 / 16, 10.5 / 16, 6.5 / 16, 14.5 / 16,
	},
}

// sampleShift returns the power of two of a number of samples.
func sampleShift(n int) int {
	switch {
	case n == 0:
		return 2
	case n <= 1:
		return 0
	case n <= 2:
		return 1
	case n <= 4:
		return 2
	case n <= 8:
		return 3
	}
	return 4
}
