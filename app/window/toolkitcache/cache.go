// Package toolkitcache is imported for its effect alone: the window toolkit
// keeps what it made of widgets, texts and images for a minute after they were
// last seen, which of menus and dialogs that open and close is much. It imports
// nothing but os, so that Go initializes it before the toolkit, which reads the
// environment while it is initialized.
package toolkitcache

import "os"

// Variable is what the toolkit reads, and Kept how long it keeps things: not
// less than 20 s, since it walks through all widgets 10 s before the end.
const (
	Variable = "FYNE_CACHE"
	Kept     = "20s"
)

func init() {
	if os.Getenv(Variable) == "" {
		os.Setenv(Variable, Kept)
	}
}
