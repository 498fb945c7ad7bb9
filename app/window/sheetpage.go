//go:build cgo && !nowindow

package window

import (
	"errors"
	"math"
	"slices"

	"lobewright/app/sheet"
	"lobewright/app/study"
	"lobewright/assets"
)

// A word of a study with the keys of what it is called and of its hint.
type option struct{ word, key, hint string }

// sheetKinds are the kinds of sheets; without a word the program chooses.
var sheetKinds = []option{
	{"", "figure.kindAuto", "figure.kindAutoHint"},
	{sheet.One, "figure.kindOne", "figure.kindOneHint"},
	{sheet.All, "figure.kindAll", "figure.kindAllHint"},
	{sheet.Set, "figure.kindSet", "figure.kindSetHint"},
	{sheet.Operations, "figure.kindOperations", "figure.kindOperationsHint"},
	{sheet.Molecule, "figure.kindMolecule", "figure.kindMoleculeHint"},
	{sheet.Frames, "figure.kindFrames", "figure.kindFramesHint"},
	{sheet.Descent, "figure.kindDescent", "figure.kindDescentHint"},
	{sheet.Levels, "figure.kindLevels", "figure.kindLevelsHint"},
}

// Words of a look; the first of each is the default.
var (
	styleOptions  = []option{{"lit", "figure.lit", "figure.litHint"}, {"ink", "figure.ink", "figure.inkHint"}}
	groundOptions = []option{
		{"paper", "figure.paper", "figure.groundHint"}, {"white", "figure.white", "figure.groundHint"},
		{"dark", "figure.dark", "figure.groundHint"}, {"transparent", "figure.transparent", "figure.transparentHint"},
	}
	shapeOptions = []option{
		{"contour", "figure.contour", "figure.contourHint"}, {"polar", "figure.polar", "figure.polarHint"}, {"square", "figure.square", "figure.squareHint"},
	}
	lengthOptions = []option{
		{"length", "figure.length", "figure.measureHint"}, {"area", "figure.area", "figure.measureHint"}, {"volume", "figure.volume", "figure.measureHint"},
	}
	signOptions = []option{
		{"", "figure.tones", "figure.tonesHint"}, {"hatching", "figure.hatching", "figure.hatchingHint"}, {"printed", "figure.printed", "figure.printedHint"},
	}
	languageOptions = []option{{string(assets.English), "menu.languageEnglish", "figure.languageHint"}, {string(assets.German), "menu.languageGerman", "figure.languageHint"}}
	fontOptions     = []option{{"sans", "figure.sans", "figure.sansHint"}, {"serif", "figure.serif", "figure.serifHint"}}
)

// inLanguage is a study whose figures speak the language in force, unless it
// chooses one.
func inLanguage(s study.Study) study.Study {
	if s.Figure.Language == "" && language() != assets.English {
		s.Figure.Language = string(language())
	}
	return s
}

// setFigure is a step that changes the figure or the animation.
func (u *ui) setFigure(change func(*study.Study)) {
	s := u.now()
	change(&s)
	u.do(study.StepFigure, s)
}

// setLook is a step that changes how bodies look.
func (u *ui) setLook(change func(*study.Look)) {
	s := u.now()
	change(&s.Look)
	if s.Equal(u.now()) {
		return
	}
	u.thumbs.forget()
	u.do(study.StepLook, s)
}

// label is a small heading above chips.
func (d *pageDrawing) label(text string) {
	d.words(text, d.head)
	d.y += 1
}

// option is one chip of a row.
func (d *pageDrawing) option(x *float64, name, text, hint string, on bool, do func()) {
	d.choice(x, words(text), chip{name: name, hint: hint, on: on, do: do})
}

// options is a row of chips of which one is on; where the study says nothing
// it is the first.
func (d *pageDrawing) options(name string, list []option, now string, set func(word string)) {
	if now == "" {
		now = list[0].word
	}
	x := float64(pad)
	for _, o := range list {
		d.option(&x, name+" "+o.word, say(o.key), say(o.hint), now == o.word, func() { set(o.word) })
	}
	d.endChoices()
}

// numbers is a row of chips of usual numbers, and one to type another.
func (d *pageDrawing) numbers(x *float64, name, unit, hint string, usual []float64, now float64, set func(float64), ask func()) {
	for _, n := range usual {
		text := numberText(n) + unit
		d.option(x, name+" "+numberText(n), text, hint, now == n, func() { set(n) })
	}
	other := say("figure.other")
	typed := now != 0 && !slices.Contains(usual, now)
	if typed {
		other = numberText(now) + unit + " …"
	}
	d.option(x, name+" typed", other, say("figure.typeHint"), typed, ask)
}

func numberText(x float64) string { return plainText(math.Round(100*x) / 100) }

// sheetSettings is the page on which a sheet is set.
func (d *pageDrawing) sheetSettings() {
	s := d.now()
	f, l := s.Figure, s.Look
	d.saveRow("save sheet", say("figure.saveSheetHint"), d.askSheetFile)
	d.label(say("figure.shows"))
	x := float64(pad)
	for _, k := range sheetKinds {
		hint := say(k.hint)
		if k.word == "" {
			hint = say(k.hint, say(kindKey(sheet.Kind(s))))
		}
		d.option(&x, "kind "+k.word, say(k.key), hint, f.Sheet == k.word, func() {
			d.setFigure(func(s *study.Study) { s.Figure.Sheet = k.word })
		})
	}
	d.endChoices()
	if why, where := d.lacking(); why != "" {
		d.words(why, d.accent)
		d.y += 2
		if where != noPage {
			x = pad
			d.option(&x, "choose missing", say("figure.choose"), say("figure.chooseHint"), false, func() { d.pages.turnTo(where) })
			d.endChoices()
		}
	}

	d.label(say("figure.size"))
	x = pad
	width := f.TheWidth()
	if f.Slide && f.Width == 0 {
		width = 0
	}
	d.numbers(&x, "width", " mm", say("figure.widthHint"), []float64{85, 120, 180}, width, d.setWidth, d.askWidth)
	d.option(&x, "slide", say("figure.slide"), say("figure.slideHint"), f.Slide, func() {
		d.setFigure(func(s *study.Study) {
			s.Figure.Slide = !s.Figure.Slide
			s.Figure.Width, s.Figure.Height = 0, 0
		})
	})
	height := say("figure.heightFree")
	if f.Height > 0 {
		height = say("figure.heightNow", numberText(f.Height))
	}
	d.option(&x, "height", height, say("figure.heightHint"), f.Height > 0, d.askHeight)
	d.endChoices()
	d.label(say("figure.resolution"))
	x = pad
	d.numbers(&x, "resolution", "", say("figure.resolutionHint"), []float64{150, 300, 600}, f.TheResolution(), d.setResolution, d.askResolution)
	d.endChoices()

	d.label(say("figure.language"))
	x = pad
	chosen := f.Language
	if chosen == "" {
		chosen = string(language())
	}
	for _, o := range languageOptions {
		d.option(&x, "language "+o.word, say(o.key), say(o.hint), chosen == o.word, func() {
			d.setFigure(func(s *study.Study) { s.Figure.Language = o.word })
		})
	}
	d.endChoices()

	d.label(say("figure.type"))
	x = pad
	font := f.Font
	if font == "" {
		font = fontOptions[0].word
	}
	for _, o := range fontOptions {
		d.option(&x, "font "+o.word, say(o.key), say(o.hint), font == o.word, func() {
			d.setFigure(func(s *study.Study) { s.Figure.Font = o.word })
		})
	}
	d.option(&x, "text usual", say("figure.textUsual"), say("figure.textUsualHint"), f.TextSize == 0, func() { d.setTextSize(0) })
	d.numbers(&x, "text", " pt", say("figure.textHint"), []float64{7, 8, 10}, f.TextSize, d.setTextSize, d.askTextSize)
	d.endChoices()

	d.label(say("figure.parts"))
	x = pad
	part := func(name, text, hint string, of func(*study.Figure) *bool) {
		d.option(&x, name, text, hint, !*of(&f), func() {
			d.setFigure(func(s *study.Study) { *of(&s.Figure) = !*of(&s.Figure) })
		})
	}
	part("letters", say("figure.letters"), say("figure.lettersHint"), func(f *study.Figure) *bool { return &f.NoLetters })
	part("legend", say("figure.legend"), say("figure.legendHint"), func(f *study.Figure) *bool { return &f.NoLegend })
	part("card", say("figure.card"), say("figure.cardHint"), func(f *study.Figure) *bool { return &f.NoCard })
	part("coefficients", say("figure.coefficients"), say("figure.coefficientsHint"), func(f *study.Figure) *bool { return &f.NoCoefficients })
	part("caption", say("figure.caption"), say("figure.captionHint"), func(f *study.Figure) *bool { return &f.NoCaption })
	part("study", say("figure.study"), say("figure.studyHint"), func(f *study.Figure) *bool { return &f.NoStudy })
	d.endChoices()
	d.lookSettings(l)
	d.label(say("figure.shape"))
	d.options("shape", shapeOptions, l.Shape, func(w string) { d.setLook(func(l *study.Look) { l.Shape = w }) })
	d.label(say("figure.measure"))
	d.options("measure", lengthOptions, l.Size, func(w string) { d.setLook(func(l *study.Look) { l.Size = w }) })
	d.label(say("figure.signs"))
	d.options("signs", signOptions, l.Signs, func(w string) { d.setLook(func(l *study.Look) { l.Signs = w }) })
}

// lookSettings are those that sheets and animations share.
func (d *pageDrawing) lookSettings(l study.Look) {
	d.label(say("figure.look"))
	d.options("look", styleOptions, l.Style, func(w string) { d.setLook(func(l *study.Look) { l.Style = w }) })
	d.label(say("figure.ground"))
	d.options("ground", groundOptions, l.Ground, func(w string) { d.setLook(func(l *study.Look) { l.Ground = w }) })
}

// lacking says what must be chosen before a sheet of the kind at hand can be
// set, and on which page; empty if nothing lacks.
func (u *ui) lacking() (why string, where page) {
	s := u.now()
	kind := sheet.Kind(s)
	switch {
	case len(s.Basis) == 0 && kind != sheet.Molecule && kind != sheet.Frames && kind != sheet.Descent:
		return say("figure.lacksFunctions"), noPage
	case (kind == sheet.One || kind == sheet.Set) && s.Projection.Irrep == "":
		return say("figure.lacksOrbital"), noPage
	case kind == sheet.Frames && s.Held.Frame == "" && s.Held.Z == "" && s.Held.X == "":
		return say("figure.lacksFrame"), secondPage
	case kind == sheet.Descent && s.Subgroup == "":
		return say("figure.lacksSubgroup"), subgroupsPage
	}
	return "", noPage
}

// kindKey is the key of the name of a kind.
func kindKey(kind string) string {
	for _, k := range sheetKinds {
		if k.word == kind {
			return k.key
		}
	}
	return sheetKinds[0].key
}

func (u *ui) setWidth(mm float64) {
	u.setFigure(func(s *study.Study) {
		s.Figure.Width = mm
		if s.Figure.Slide {
			s.Figure.Slide, s.Figure.Height = false, 0
		}
	})
}

func (u *ui) setResolution(dpi float64) {
	u.setFigure(func(s *study.Study) { s.Figure.Resolution = dpi })
}

func (u *ui) setTextSize(pt float64) {
	u.setFigure(func(s *study.Study) { s.Figure.TextSize = pt })
}

func (u *ui) askWidth() {
	u.askNumber(say("figure.askWidth"), say("figure.askWidthText"), u.now().Figure.TheWidth(), 25, 1000, u.setWidth)
}

func (u *ui) askHeight() {
	u.askNumber(say("figure.askHeight"), say("figure.askHeightText"), u.now().Figure.Height, 0, 1000, func(mm float64) {
		u.setFigure(func(s *study.Study) { s.Figure.Height = mm })
	})
}

func (u *ui) askResolution() {
	u.askNumber(say("figure.askResolution"), say("figure.askResolutionText"), u.now().Figure.TheResolution(), 30, 2400, u.setResolution)
}

func (u *ui) askTextSize() {
	u.askNumber(say("figure.askText"), say("figure.askTextText"), max(u.now().Figure.TextSize, 4), 4, 72, u.setTextSize)
}

// askNumber asks for a number within bounds.
func (u *ui) askNumber(title, text string, now, least, most float64, set func(float64)) {
	u.ask(title, text, numberText(now), func(typed string) error {
		x, err := readNumber(typed, "")
		if err != nil || !(x >= least && x <= most) {
			return errors.New(say("figure.noNumber", numberText(least), numberText(most)))
		}
		set(x)
		u.pages.refocus()
		return nil
	})
}

// refocus gives the keyboard back to the page once a question is closed.
func (p *pages) refocus() {
	if p.open != noPage {
		p.u.post(func() {
			if p.u.win.Canvas().Overlays().Top() == nil && p.open != noPage && !p.u.closing {
				p.u.win.Canvas().Focus(p.pane)
			}
		})
	}
}
