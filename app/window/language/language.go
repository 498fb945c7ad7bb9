// Package language is imported for its effect alone: in the locale C with an
// encoding ("C.UTF-8") the window toolkit's translations would complain on
// standard error, even in a command that opens no window. It imports nothing
// but os, so that Go initializes it before the toolkit, which reads the
// environment while it is initialized.
package language

import (
	"os"
	"strings"
)

func init() {
	if os.Getenv("LANGUAGE") != "" {
		return
	}
	for _, name := range []string{"LC_ALL", "LC_MESSAGES", "LANG"} {
		if value := os.Getenv(name); value != "" {
			if strings.HasPrefix(value, "C.") {
				os.Setenv("LANGUAGE", "en")
			}
			return
		}
	}
}
