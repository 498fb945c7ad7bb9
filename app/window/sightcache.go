//go:build cgo && !nowindow

package window

import (
	"lobewright/app/picture"
	"lobewright/app/study"
	"lobewright/app/work"
)

// A sightCache keeps what the program chooses of the camera for a structure:
// choosing takes time, and what is shown already does not turn when other
// functions are chosen.
type sightCache struct {
	group   *work.Group
	basis   *work.Basis
	best    picture.Orbit
	settled bool // the functions that came with the structure have been seen
}

// sight is the view of a structure and the lobes of a basis, which may be nil;
// awaited tells that the basis is still being computed.
func (c *sightCache) sight(camera study.Camera, g *work.Group, b *work.Basis, awaited bool) picture.Orbit {
	if c.group != g {
		c.settled = false
	}
	switch {
	case c.group != g || !c.settled && c.basis != b:
		c.best = picture.BestOrbit(g, b)
	case c.basis != b && b != nil:
		// Only where lobes would reach out of the picture does it become wider.
		const margin = 1.12
		if wider := c.best.Fitted(g, b); wider.Span > margin*c.best.Span {
			c.best = wider
		}
	}
	c.group, c.basis, c.settled = g, b, c.settled || !awaited
	return c.best.Seen(camera)
}
