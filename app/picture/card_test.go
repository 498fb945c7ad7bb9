package picture

import (
	"math"
	"testing"

	"lobewright/app/study"
)

func TestACardShowsTheAxesAsThePictureDoes(t *testing.T) {
	o := orbitalsOf(t, "demo:water", "H:s")
	rows := NewOrbit(0.5, 0.4).Rows()
	c := FrameCard(o.Group, rows)
	for i, a := range c.Axes {
		if math.Abs(a.Len()-1) > 1e-12 {
			t.Errorf("axis %d has the length %v", i, a.Len())
		}
		if got := c.Letters[i].String(); got != "xyz"[i:i+1] {
			t.Errorf("axis %d is called %q", i, got)
		}
	}
	if c.Axes[2][1] < 0.5 {
		t.Errorf("z does not point up: %v", c.Axes[2])
	}
	if cross := c.Axes[0].Cross(c.Axes[1]); cross.Sub(c.Axes[2]).Len() > 1e-12 {
		t.Errorf("the axes are not right-handed: %v", c.Axes)
	}
	if len(c.Lines) < 3 {
		t.Errorf("the card says no more than %v", c.Lines)
	}
}

func TestTheSecondCardShowsTheOtherAxesInTheSamePicture(t *testing.T) {
	o := orbitalsOf(t, "demo:water", "H:s")
	held, err := o.Group.Held(study.Held{Frame: "plane-xz"})
	if err != nil {
		t.Fatal(err)
	}
	rows := NewOrbit(0.5, 0.4).Rows()
	first, second := FrameCard(o.Group, rows), HeldCard(o.Group, held, rows)
	if !second.Dashed || first.Dashed {
		t.Error("not the second triad is the dashed one")
	}
	if d := first.Axes[2].Sub(second.Axes[2]).Len(); d > 1e-9 {
		t.Errorf("the two z are %v apart", d)
	}
	// What is x in one setting of a plane is y in the other.
	if dot := first.Axes[1].Dot(second.Axes[0]); math.Abs(math.Abs(dot)-1) > 1e-9 {
		t.Errorf("x of the second lies %v along y of the first", dot)
	}
	if got := second.Letters[0].String(); got != "x2" && got != "x₂" {
		t.Errorf("the second x is called %q", got)
	}
}
