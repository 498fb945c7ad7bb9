//go:build cgo && !nowindow

package window

import (
	"errors"
	"fmt"
	"strings"

	"lobewright/app/notation"
	"lobewright/app/picture"
	"lobewright/app/study"
)

// filmSettings is the page on which an animation is set.
func (d *pageDrawing) filmSettings() {
	s := d.now()
	a := s.Animation
	d.saveRow("save film", say("figure.saveFilmHint"), d.askFilmFile)
	if why := d.noFilm(); why != "" {
		d.words(why, d.accent)
	} else if op, ok := d.operation(); ok {
		d.line(fill(say("figure.plays"), notation.Operation(op.Name)), d.plain)
	}
	d.y += 2
	x := float64(pad)
	d.option(&x, "play film", say("figure.play"), say("figure.playHint"), false, d.togglePlay)
	d.endChoices()

	d.label(say("figure.seconds"))
	x = pad
	setSeconds := func(t float64) { d.setFigure(func(s *study.Study) { s.Animation.Seconds = t }) }
	d.option(&x, "seconds usual", say("figure.secondsUsual"), say("figure.secondsUsualHint"), a.Seconds == 0, func() { setSeconds(0) })
	d.numbers(&x, "seconds", " s", say("figure.secondsHint"), []float64{1, 2, 4}, a.Seconds, setSeconds, func() {
		d.askNumber(say("figure.askSeconds"), say("figure.askSecondsText"), max(a.Seconds, 1), 0.1, 60, setSeconds)
	})
	d.endChoices()

	d.label(say("figure.rate"))
	x = pad
	rate := a.Rate
	if rate == 0 {
		rate = picture.DefaultMovieRate
	}
	setRate := func(r float64) { d.setFigure(func(s *study.Study) { s.Animation.Rate = r }) }
	d.numbers(&x, "rate", "", say("figure.rateHint"), []float64{12, 25, 50}, rate, setRate, func() {
		d.askNumber(say("figure.askRate"), say("figure.askRateText"), rate, 1, 60, setRate)
	})
	d.endChoices()

	d.label(say("figure.pixels"))
	x = pad
	w, h := filmSize(a)
	known := false
	for _, size := range filmSizes {
		on := w == size[0] && h == size[1]
		known = known || on
		text := sizeText(size[0], size[1])
		d.option(&x, "pixels "+text, text, say("figure.pixelsHint"), on, func() { d.setFilmSize(size[0], size[1]) })
	}
	other := say("figure.other")
	if !known {
		other = sizeText(w, h) + " …"
	}
	d.option(&x, "pixels typed", other, say("figure.typeHint"), !known, d.askFilmSize)
	d.endChoices()

	d.label(say("figure.parts"))
	x = pad
	d.option(&x, "once", say("figure.once"), say("figure.onceHint"), a.Once, func() {
		d.setFigure(func(s *study.Study) { s.Animation.Once = !s.Animation.Once })
	})
	d.option(&x, "caption", say("figure.caption"), say("figure.captionHint"), !s.Figure.NoCaption, func() {
		d.setFigure(func(s *study.Study) { s.Figure.NoCaption = !s.Figure.NoCaption })
	})
	d.option(&x, "study", say("figure.study"), say("figure.studyHint"), !s.Figure.NoStudy, func() {
		d.setFigure(func(s *study.Study) { s.Figure.NoStudy = !s.Figure.NoStudy })
	})
	d.endChoices()
	d.lookSettings(s.Look)
}

// filmSizes are usual sizes, in pixels.
var filmSizes = [][2]int{{400, 300}, {picture.DefaultMovieWidth, picture.DefaultMovieHeight}, {1280, 720}, {1920, 1080}}

// filmSize is the size in force, in pixels.
func filmSize(a study.Animation) (w, h int) {
	if a.Width == 0 || a.Height == 0 {
		return picture.DefaultMovieWidth, picture.DefaultMovieHeight
	}
	return a.Width, a.Height
}

func sizeText(w, h int) string { return fmt.Sprintf("%d × %d", w, h) }

func (u *ui) setFilmSize(w, h int) {
	u.setFigure(func(s *study.Study) { s.Animation.Width, s.Animation.Height = w, h })
}

func (u *ui) askFilmSize() {
	now := sizeText(filmSize(u.now().Animation))
	u.ask(say("figure.askPixels"), say("figure.askPixelsText"), now, func(typed string) error {
		var w, h int
		var rest string
		n, _ := fmt.Sscanf(strings.ReplaceAll(strings.ReplaceAll(strings.ToLower(typed), "×", " "), "x", " ")+" ", "%d %d%s", &w, &h, &rest)
		const least, most = 64, 4096
		if n != 2 || w < least || h < least || w > most || h > most {
			return errors.New(say("figure.noPixels", least, most))
		}
		u.setFilmSize(w, h)
		u.pages.refocus()
		return nil
	})
}

// noFilm says why no animation can be written; empty if it can.
func (u *ui) noFilm() string {
	s := u.now()
	op, ok := u.operation()
	switch {
	case len(s.Basis) == 0:
		return say("figure.needsFunctions")
	case !ok:
		return say("figure.needsOperation")
	case op.Family && s.Angle == 0:
		return say("figure.needsAngle")
	}
	return ""
}
