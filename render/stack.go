package render

// stack blends the strips of a group over what lies behind them. Every sheet
// is weighed with what the sheets in front of it let through, so none need be
// sorted. The layout is known to the assembly.
type stack struct {
	strips  *strip          // 0
	at      *int32          // 8: of two that are equally near the later is in front
	through *[lanes]float32 // 16: what lies in front of a strip lets through
	count   int64           // 24
	crosses int64           // 32: pixels in which two sheets may change places
	_       [3]int64
	r, g, b [lanes]float32 // 64, 96, 128: what lies behind, weighed with its opacity; then all
	a       [lanes]float32 // 160
	buf     [][lanes]float32
}

// blend blends the strips of a pile.
func (k *stack) blend(strips []strip, pile []int32) {
	k.buf = grow(k.buf, len(pile))
	if useVectors {
		k.strips, k.at, k.through, k.count = &strips[0], &pile[0], &k.buf[0], int64(len(pile))
		stackEight(k)
		return
	}
	k.plain(strips, pile)
}

// plain is blend, one pixel after the other. stackEight does the same for all
// side by side.
func (k *stack) plain(strips []strip, pile []int32) {
	k.crosses = 0
	through := k.buf
	for j := range pile {
		p := &strips[pile[j]]
		for l := range lanes {
			through[j][l] = 1
		}
		for i := range j {
			q := &strips[pile[i]]
			apart := p.part != q.part && p.part >= 0 && q.part >= 0
			for l := range lanes {
				d := q.n[l] - p.n[l]
				if d > 0 {
					through[j][l] *= 1 - q.a[l]
				} else {
					through[i][l] *= 1 - p.a[l]
				}
				if apart && abs32(d) < (abs32(q.nx[l]-p.nx[l])+abs32(q.ny[l]-p.ny[l]))*0.5 && q.a[l]*p.a[l] > 0 {
					k.crosses |= 1 << l
				}
			}
		}
	}
	for l := range lanes {
		r, g, b, left := float32(0), float32(0), float32(0), float32(1)
		for j := range pile {
			p := &strips[pile[j]]
			left *= 1 - p.a[l]
			if p.a[l] > 0 {
				w := through[j][l] * p.a[l]
				r, g, b = r+float32(w*p.r[l]), g+float32(w*p.g[l]), b+float32(w*p.b[l])
			}
		}
		k.r[l], k.g[l], k.b[l] = upTo1(r+float32(left*k.r[l])), upTo1(g+float32(left*k.g[l])), upTo1(b+float32(left*k.b[l]))
		k.a[l] = 1 - left + float32(left*k.a[l])
	}
}

func upTo1(v float32) float32 {
	if v > 1 {
		return 1
	}
	return v
}
