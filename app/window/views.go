//go:build cgo && !nowindow

package window

import (
	"errors"
	"slices"
	"strings"

	"lobewright/app/study"
)

// askView keeps where the picture is seen from under a name; a view of the same
// name is replaced.
func (u *ui) askView() {
	s := u.now()
	name := say("view.name", len(s.Views)+1)
	u.ask(say("view.ask"), say("view.askText"), name, func(text string) error {
		text = strings.TrimSpace(text)
		if text == "" {
			return errors.New(say("view.noName"))
		}
		s := u.now()
		s.Views = slices.Clone(s.Views)
		v := study.View{Name: text, Camera: s.Camera.WithView(u.view.sight.Rows())}
		if i := slices.IndexFunc(s.Views, func(v study.View) bool { return v.Name == text }); i >= 0 {
			s.Views[i] = v
		} else {
			s.Views = append(s.Views, v)
		}
		if err := s.Check(); err != nil {
			return errors.New(say("view.refused", told(err)))
		}
		u.do(study.StepView, s)
		return nil
	})
}

// recall glides to a view that was kept.
func (u *ui) recall(v study.View) {
	u.moveCamera(study.StepAlong, func(study.Camera) study.Camera { return v.Camera })
}

// viewCommandsKept recall the views that were kept.
func (u *ui) viewCommandsKept() []*command {
	return u.eachView(u.recall)
}

// viewCommandsForget forget them.
func (u *ui) viewCommandsForget() []*command {
	return u.eachView(func(v study.View) {
		s := u.now()
		s.Views = slices.DeleteFunc(slices.Clone(s.Views), func(w study.View) bool { return w.Name == v.Name })
		u.do(study.StepView, s)
	})
}

func (u *ui) eachView(do func(study.View)) []*command {
	var out []*command
	for _, v := range u.now().Views {
		out = append(out, &command{key: "menu.views", label: func() string { return v.Name }, do: func() { do(v) }})
	}
	if len(out) == 0 {
		out = append(out, &command{key: "menu.noView", can: func() bool { return false }})
	}
	return out
}

// Limits of what hands and wheels do to the size of the picture: far out it
// stays readable, and near by an atom fills it (Å).
const (
	smallest    = 0.4
	nearestSpan = 1.4
)

// limited is a factor cut so that the picture stays between the limits.
func (u *ui) limited(factor float64) float64 {
	now := u.now().Camera.TheZoom()
	whole := u.view.sight.Span * now
	most := max(1, whole/nearestSpan)
	return min(max(now*factor, min(smallest, now)), max(most, now)) / now
}
