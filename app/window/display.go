package window

import (
	"fmt"
	"net"
	"os"
	"runtime"
	"strconv"
	"strings"
	"time"
)

// display tells why no window can be opened here; the error wraps
// ErrNoDisplay. It asks whether someone answers at the display's address. The
// connection stays open until release is called: an X server without other
// clients would begin anew when it is closed, and not answer meanwhile.
func display() (release func(), err error) {
	none := func() {}
	switch runtime.GOOS {
	case "windows", "darwin":
		return none, nil
	}
	missing := func(reason string) (func(), error) { return none, fmt.Errorf("%w: %s", ErrNoDisplay, reason) }
	name := os.Getenv("DISPLAY")
	if name == "" {
		if os.Getenv("WAYLAND_DISPLAY") != "" {
			return missing("DISPLAY is not set, and under Wayland the window needs XWayland")
		}
		return missing("DISPLAY is not set")
	}
	host, number := "", ""
	if i := strings.LastIndex(name, ":"); i >= 0 {
		host, number = strings.Trim(name[:i], "[]:"), name[i+1:]
	}
	number, _, _ = strings.Cut(number, ".")
	if number == "" || strings.Trim(number, "0123456789") != "" || len(number) > 5 {
		return missing("DISPLAY is " + strconv.Quote(name) + " and should be like :0")
	}
	connection := answers(host, number)
	if connection == nil {
		return missing("nothing answers at DISPLAY " + strconv.Quote(name))
	}
	return func() { connection.Close() }, nil
}

// answers tries the places where an X server listens (common practice).
func answers(host, number string) net.Conn {
	type place struct{ network, address string }
	places := []place{{"unix", "/tmp/.X11-unix/X" + number}, {"unix", "@/tmp/.X11-unix/X" + number}}
	if strings.HasPrefix(host, "/") { // a socket of its own
		places = []place{{"unix", os.Getenv("DISPLAY")}}
	}
	if host != "" && host != "unix" && !strings.HasPrefix(host, "/") {
		n, _ := strconv.Atoi(number)
		const firstPort = 6000
		places = append(places, place{"tcp", net.JoinHostPort(host, strconv.Itoa(firstPort+n))})
	}
	for _, p := range places {
		if c, err := net.DialTimeout(p.network, p.address, 2*time.Second); err == nil {
			return c
		}
	}
	return nil
}
