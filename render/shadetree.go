package render

import "slices"

// shadeTree finds the balls that are felt at a place, in scenes of many
// bodies: a binary tree of boxes, each around the reach of its balls.
type shadeTree struct {
	order []int32 // balls, those of a node side by side
	nodes []shadeNode
}

type shadeNode struct {
	lo, hi      [3]float32
	from, to    int32 // in order
	left, right int32 // 0 for a leaf
}

// leafBalls is the number of balls up to which a node is not divided.
const leafBalls = 8

// reach is the distance at which a ball is no longer felt.
func (b *ball) reach() float32 { return b.r * sqrt32(b.weight/faintest) }

// build makes the tree of the balls anew.
func (t *shadeTree) build(balls []ball) {
	t.order, t.nodes = grow(t.order, len(balls)), t.nodes[:0]
	for i := range t.order {
		t.order[i] = int32(i)
	}
	if len(balls) > 0 {
		t.divide(balls, 0, int32(len(balls)))
	}
}

// divide makes the node of a part of the order and those below it.
func (t *shadeTree) divide(balls []ball, from, to int32) int32 {
	part := t.order[from:to]
	n := shadeNode{from: from, to: to}
	first := balls[part[0]].center()
	lo, hi := first, first // of the middles
	n.lo, n.hi = first, first
	for _, k := range part {
		c, r := balls[k].center(), balls[k].reach()
		for a := range 3 {
			lo[a], hi[a] = min(lo[a], c[a]), max(hi[a], c[a])
			n.lo[a], n.hi[a] = min(n.lo[a], c[a]-r), max(n.hi[a], c[a]+r)
		}
	}
	at := int32(len(t.nodes))
	t.nodes = append(t.nodes, n)
	if len(part) <= leafBalls {
		return at
	}
	axis := 0
	for a := 1; a < 3; a++ {
		if hi[a]-lo[a] > hi[axis]-lo[axis] {
			axis = a
		}
	}
	slices.SortFunc(part, func(i, j int32) int {
		a, b := balls[i].center()[axis], balls[j].center()[axis]
		switch {
		case a < b:
			return -1
		case a > b:
			return 1
		}
		return int(i - j)
	})
	mid := (from + to) / 2
	left := t.divide(balls, from, mid)
	right := t.divide(balls, mid, to)
	t.nodes[at].left, t.nodes[at].right = left, right
	return at
}

func (b *ball) center() [3]float32 { return [3]float32{b.x, b.y, b.z} }

// around appends the balls that may be felt within a distance of a place, in
// no order and with some that are not.
func (t *shadeTree) around(node int32, c [3]float32, far float32, found []int32) []int32 {
	if int(node) >= len(t.nodes) {
		return found
	}
	n := &t.nodes[node]
	d2 := float32(0)
	for a := range 3 {
		d := max(n.lo[a]-c[a], c[a]-n.hi[a], 0)
		d2 += d * d
	}
	if d2 > far*far {
		return found
	}
	if n.left == 0 {
		return append(found, t.order[n.from:n.to]...)
	}
	return t.around(n.right, c, far, t.around(n.left, c, far, found))
}
