package window

import (
	"errors"
	"net"
	"os"
	"runtime"
	"strconv"
	"strings"
	"time"
)

// Display tells why no window can be opened here; nil if there is a display.
// It asks whether someone answers at the display's address and nothing more.
func Display() error {
	switch runtime.GOOS {
	case "windows", "darwin", "js", "ios", "android":
		return nil
	}
	name := os.Getenv("DISPLAY")
	if name == "" {
		if os.Getenv("WAYLAND_DISPLAY") != "" {
			return errors.New("no X display: DISPLAY is not set, and under Wayland the window needs XWayland")
		}
		return errors.New("no display: DISPLAY is not set")
	}
	host, number, found := strings.Cut(name, ":")
	if i := strings.LastIndex(name, ":"); found && strings.Count(name, ":") > 1 {
		host, number = strings.Trim(name[:i], "[]:"), name[i+1:]
	}
	number, _, _ = strings.Cut(number, ".")
	if !found || number == "" || strings.Trim(number, "0123456789") != "" || len(number) > 5 {
		return errors.New("no display: DISPLAY is " + quoted(name) + " and should be like :0")
	}
	if !answers(host, number) {
		return errors.New("no display: nothing answers at DISPLAY " + quoted(name))
	}
	return nil
}

func quoted(s string) string { return `"` + s + `"` }

// answers tries the places where an X server listens (common practice).
func answers(host, number string) bool {
	type place struct{ network, address string }
	places := []place{{"unix", "/tmp/.X11-unix/X" + number}, {"unix", "@/tmp/.X11-unix/X" + number}}
	if strings.HasPrefix(host, "/") { // a socket of its own
		return true
	}
	if host != "" && host != "unix" {
		n, _ := strconv.Atoi(number)
		const firstPort = 6000
		places = append(places, place{"tcp", net.JoinHostPort(host, strconv.Itoa(firstPort+n))})
	}
	for _, p := range places {
		if c, err := net.DialTimeout(p.network, p.address, 2*time.Second); err == nil {
			c.Close()
			return true
		}
	}
	return false
}
