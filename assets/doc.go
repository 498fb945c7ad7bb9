// Package assets holds what is built into the program: typefaces, colours and demonstration structures.
//
// It imports nothing of the project and knows neither chemistry nor drawing: typefaces are bytes, structures are
// files, colours are values of image/color.
package assets
