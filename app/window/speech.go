//go:build cgo && !nowindow

package window

import (
	"encoding/json"
	"sync"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/lang"

	"lobewright/app/notation"
	"lobewright/app/session"
	"lobewright/app/work"
	"lobewright/assets"
)

// systemLocale is that of the desktop, as the toolkit finds it. It is asked for
// once, before the toolkit is told anything else.
var systemLocale = sync.OnceValue(func() string { return lang.SystemLocale().LanguageString() })

// languageOf is the language that a person chose, or that of the system.
func languageOf(p session.Preferences) assets.Language {
	system := assets.LanguageOf(systemLocale())
	for _, l := range assets.Languages() {
		if string(l) == p.Language {
			return l
		}
	}
	return system
}

// speakToolkit has the words that the toolkit puts into this window, those of
// the menu of an entry, follow the language in force at once. The toolkit knows
// the system's locale alone, so there these words are put in the place of its
// own.
func speakToolkit() {
	words, err := json.Marshal(map[string]string{
		"Cut": say("toolkit.cut"), "Copy": say("toolkit.copy"), "Paste": say("toolkit.paste"), "Select all": say("toolkit.selectAll"),
		"Undo": say("toolkit.undo"), "Redo": say("toolkit.redo"), "Quit": say("toolkit.quit"),
	})
	if err == nil {
		_ = lang.AddTranslationsForLocale(words, fyne.Locale(systemLocale()))
	}
}

// setLanguage keeps a choice of language, "" for the system's, and has the
// whole window speak it.
func (u *ui) setLanguage(chosen string) {
	u.preferences(func(p *session.Preferences) { p.Language = chosen })
	l := languageOf(u.session.Preferences())
	speak(l)
	speakToolkit()
	u.win.SetMainMenu(u.mainMenu())
	u.menusSaid = ""
	u.oneByOne.SetText(say("ledger.oneByOne"))
	u.sayBasisExample()
	u.forms = formCache{} // with its decimal points
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
