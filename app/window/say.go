//go:build cgo && !nowindow

package window

import (
	"sync/atomic"

	"lobewright/app/notation"
	"lobewright/assets"
	"lobewright/symmetry/message"
)

// A speech is a language in force: the texts of the window by their keys, and
// how messages from below are said; tongue is nil in English.
type speech struct {
	language assets.Language
	texts    assets.Texts
	tongue   *message.Language
}

// spoken is the language in force. There is one window in a process, so there
// is one language.
var spoken atomic.Pointer[speech]

// speak chooses the language of everything that is made from now on.
func speak(l assets.Language) {
	s := speech{language: l, texts: assets.TextsIn(l)}
	if l == assets.German {
		s.tongue = &message.Language{Forms: assets.Sentences(l), Point: ",", Thousands: "."}
	}
	spoken.Store(&s)
}

// say is the text of a key in the language in force; English unless speak was
// called.
func say(key string, arguments ...any) string { return texts().Say(key, arguments...) }

// texts are those of the language in force, for sentences that other packages
// make.
func texts() assets.Texts {
	if s := spoken.Load(); s != nil {
		return s.texts
	}
	return assets.TextsIn(assets.English)
}

// language is the language in force.
func language() assets.Language {
	if s := spoken.Load(); s != nil {
		return s.language
	}
	return assets.English
}

// tongue is how messages from below are said in the language in force.
func tongue() *message.Language {
	if s := spoken.Load(); s != nil {
		return s.tongue
	}
	return nil
}

// told is an error in the language in force.
func told(err error) string { return message.In(err, tongue()) }

// fill puts set texts in the places {} of a sentence, in their order.
func fill(sentence string, parts ...notation.Text) notation.Text {
	return notation.Fill(sentence, parts...)
}
