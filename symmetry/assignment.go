package symmetry

import "math"

// neverAssigned is the cost of a pair that must not be.
const neverAssigned = 1e12

// leastCost assigns every row of an n×n table of costs a column of its own so
// that the sum is the least (H. W. Kuhn, Naval Research Logistics Quarterly 2,
// 83 (1955), in the form with potentials and shortest augmenting paths; from
// memory). False: a pair that must not be could not be avoided.
func leastCost(cost []float64, image []int32) bool {
	n := len(image)
	u, v := make([]float64, n+1), make([]float64, n+1)
	match, way := make([]int, n+1), make([]int, n+1) // rows and columns from 1
	for i := 1; i <= n; i++ {
		match[0] = i
		least := make([]float64, n+1)
		used := make([]bool, n+1)
		for j := range least {
			least[j] = math.Inf(1)
		}
		at := 0
		for {
			used[at] = true
			row, delta, next := match[at], math.Inf(1), 0
			for j := 1; j <= n; j++ {
				if used[j] {
					continue
				}
				if d := cost[(row-1)*n+j-1] - u[row] - v[j]; d < least[j] {
					least[j], way[j] = d, at
				}
				if least[j] < delta {
					delta, next = least[j], j
				}
			}
			for j := 0; j <= n; j++ {
				if used[j] {
					u[match[j]] += delta
					v[j] -= delta
				} else {
					least[j] -= delta
				}
			}
			at = next
			if match[at] == 0 {
				break
			}
		}
		for at != 0 {
			match[at] = match[way[at]]
			at = way[at]
		}
	}
	for j := 1; j <= n; j++ {
		image[match[j]-1] = int32(j - 1)
		if cost[(match[j]-1)*n+j-1] >= neverAssigned {
			return false
		}
	}
	return true
}
