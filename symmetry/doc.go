// Package symmetry holds point groups and finds them in sets of points.
package symmetry
