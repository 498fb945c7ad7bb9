//go:build cgo && !nowindow

package window

import (
	"sync/atomic"

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
func say(key string, arguments ...any) string {
	texts := spoken.Load()
	if texts == nil {
		english := assets.TextsIn(assets.English)
		texts = &english
	}
	return texts.Say(key, arguments...)
}
