package sheet

import "math"

// outline is the area of a line, as polygons that all run the same way round,
// so that they may overlap.
func (l Line) outline() [][][2]float64 {
	var out [][][2]float64
	for _, stroke := range l.strokes() {
		out = append(out, stroke.outline(l.Width, len(l.Dash) == 0)...)
	}
	return out
}

// A stroke is a full piece of a line.
type stroke struct {
	points [][2]float64
	closed bool
}

// strokes cuts a line by its dashes.
func (l Line) strokes() []stroke {
	if len(l.Points) == 0 {
		return nil
	}
	total := 0.0
	for _, d := range l.Dash {
		total += max(0, d)
	}
	if !(total > 0) {
		return []stroke{{l.Points, l.Closed}}
	}
	points := l.Points
	if l.Closed {
		points = append(append([][2]float64(nil), points...), points[0])
	}
	var out []stroke
	at, left := 0, l.Dash[0]
	now := [][2]float64{points[0]}
	for i := 1; i < len(points); {
		from, to := now[len(now)-1], points[i]
		length := math.Hypot(to[0]-from[0], to[1]-from[1])
		if length <= left {
			now = append(now, to)
			left -= length
			i++
			continue
		}
		share := left / length
		cut := [2]float64{from[0] + (to[0]-from[0])*share, from[1] + (to[1]-from[1])*share}
		if at%2 == 0 {
			out = append(out, stroke{points: append(now, cut)})
		}
		now = [][2]float64{cut}
		at++
		left = max(0, l.Dash[at%len(l.Dash)])
	}
	if at%2 == 0 && len(now) > 1 {
		out = append(out, stroke{points: now})
	}
	return out
}

func (s stroke) outline(width float64, round bool) [][][2]float64 {
	half := width / 2
	var out [][][2]float64
	n := len(s.points)
	segments := n - 1
	if s.closed {
		segments = n
	}
	for i := range segments {
		a, b := s.points[i], s.points[(i+1)%n]
		dx, dy := b[0]-a[0], b[1]-a[1]
		length := math.Hypot(dx, dy)
		if length == 0 {
			continue
		}
		nx, ny := -dy/length*half, dx/length*half
		out = append(out, oriented([][2]float64{
			{a[0] + nx, a[1] + ny}, {b[0] + nx, b[1] + ny}, {b[0] - nx, b[1] - ny}, {a[0] - nx, a[1] - ny},
		}))
	}
	for i, p := range s.points {
		if inner := s.closed || i > 0 && i < n-1; inner || round {
			out = append(out, circle(p[0], p[1], half))
		}
	}
	return out
}

// oriented turns a polygon so that its area is counted positive, as that of a
// circle here.
func oriented(points [][2]float64) [][2]float64 {
	area := 0.0
	for i, p := range points {
		q := points[(i+1)%len(points)]
		area += p[0]*q[1] - p[1]*q[0]
	}
	if area >= 0 {
		return points
	}
	out := make([][2]float64, len(points))
	for i, p := range points {
		out[len(points)-1-i] = p
	}
	return out
}
