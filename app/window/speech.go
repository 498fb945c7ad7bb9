//go:build cgo && !nowindow

package window

import (
	"os"
	"sync"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/lang"

	"lobewright/app/notation"
	"lobewright/app/session"
	"lobewright/app/work"
	"lobewright/assets"
)

// systemLanguage is that of the desktop. It is asked for once, before the
// toolkit is told anything else.
var systemLanguage = sync.OnceValue(func() assets.Language {
	return assets.LanguageOf(lang.SystemLocale().LanguageString())
})

// languageOf is the language that a person chose, or that of the system.
func languageOf(p session.Preferences) assets.Language {
	system := systemLanguage()
	for _, l := range assets.Languages() {
		if string(l) == p.Language {
			return l
		}
	}
	return system
}

// speakToolkit has the toolkit's own words, such as those of the menu of an
// entry, follow. It takes them from the system's language, which on Linux is
// what the environment says, whenever translations are added.
func speakToolkit(l assets.Language) {
	_ = os.Setenv("LANGUAGE", string(l))
	_ = lang.AddTranslationsForLocale([]byte(`{"Lobewright": "Lobewright"}`), fyne.Locale(l))
}

// setLanguage keeps a choice of language, "" for the system's, and has the
// whole window speak it.
func (u *ui) setLanguage(chosen string) {
	u.preferences(func(p *session.Preferences) { p.Language = chosen })
	l := languageOf(u.session.Preferences())
	speak(l)
	speakToolkit(l)
	u.win.SetMainMenu(u.mainMenu())
	u.menusSaid = ""
	u.oneByOne.SetText(say("ledger.oneByOne"))
	u.hints.show("", fyne.Position{})
	u.win.Content().Refresh()
	u.show(false)
	u.refreshPanes()
}

// languageCommands choose the language. Each is named in itself, so that it is
// found by whoever cannot read the present one.
func (u *ui) languageCommands() []*command {
	choice := func(key string, l string) *command {
		return &command{key: key, do: func() { u.setLanguage(l) }, on: func() bool { return u.session.Preferences().Language == l }}
	}
	return []*command{choice("menu.languageSystem", ""), choice("menu.languageEnglish", string(assets.English)), choice("menu.languageGerman", string(assets.German))}
}

// problemWords is what is wrong, set.
func problemWords(p *work.Problem) notation.Text { return notation.Words(told(p)) }
