//go:build cgo && !nowindow

package window

import (
	"bytes"
	"os"
	"strconv"
	"time"
)

// processStart is when this process was started: field 22 of its stat, in
// hundredths of a second since the machine was (proc(5)).
func processStart() time.Time {
	now := time.Now()
	stat, err := os.ReadFile("/proc/self/stat")
	up, err2 := os.ReadFile("/proc/uptime")
	if err != nil || err2 != nil {
		return now
	}
	_, rest, _ := bytes.Cut(stat, []byte(") "))
	fields := bytes.Fields(rest)
	uptime, _, _ := bytes.Cut(up, []byte(" "))
	if len(fields) < 20 {
		return now
	}
	began, err := strconv.ParseFloat(string(fields[19]), 64)
	since, err2 := strconv.ParseFloat(string(uptime), 64)
	if err != nil || err2 != nil {
		return now
	}
	const perSecond = 100
	return now.Add(-time.Duration((since - began/perSecond) * float64(time.Second)))
}
