//go:build cgo && !nowindow

package window

import (
	"sync/atomic"

	"lobewright/app/notation"
	"lobewright/assets"
)

// spoken are the texts of the language in force. There is one window in a
// process, so there is one language.
var spoken atomic.Pointer[assets.Texts]

// speak chooses the language of everything that is made from now on.
func speak(l assets.Language) {
	texts := assets.TextsIn(l)
	spoken.Store(&texts)
}

// say is the text of a key in the language in force; English unless speak was
// called.
func say(key string, arguments ...any) string { return texts().Say(key, arguments...) }

// texts are those of the language in force, for sentences that other packages
// make.
func texts() assets.Texts {
	if t := spoken.Load(); t != nil {
		return *t
	}
	return assets.TextsIn(assets.English)
}

// fill puts set texts in the places {} of a sentence, in their order.
func fill(sentence string, parts ...notation.Text) notation.Text {
	return notation.Fill(sentence, parts...)
}
