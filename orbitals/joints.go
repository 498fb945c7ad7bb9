package orbitals

// joints keep apart and join sets of 0 … n−1 (union by the lower root, with
// halved paths).
type joints []int

func newJoints(n int) joints {
	j := make(joints, n)
	for i := range j {
		j[i] = i
	}
	return j
}

func (j joints) root(i int) int {
	for j[i] != i {
		j[i] = j[j[i]]
		i = j[i]
	}
	return i
}

func (j joints) join(a, b int) {
	a, b = j.root(a), j.root(b)
	j[max(a, b)] = min(a, b)
}

// number returns for each element the number of its set, counted from 0 in
// the order of the sets' lowest elements.
func (j joints) number() []int {
	out := make([]int, len(j))
	next := 0
	for i := range j {
		if r := j.root(i); r != i {
			out[i] = out[r]
			continue
		}
		out[i] = next
		next++
	}
	return out
}
