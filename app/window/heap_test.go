//go:build cgo && !nowindow

package window

import (
	"os"
	"os/exec"
	"strings"
	"testing"
)

func TestTheLimitOfTheHeapLeavesRoom(t *testing.T) {
	before := int64(0)
	for _, live := range []int64{0, 40 << 20, 90 << 20, 200 << 20, 2 << 30} {
		limit := heapLimit(live)
		if limit < before || limit < usualHeap || float64(limit) < 1.2*float64(live) {
			t.Errorf("%d MiB in use may become %d MiB", live>>20, limit>>20)
		}
		before = limit
	}
}

// The environment that the toolkit reads while it is initialized has been set by
// then.
func TestTheToolkitIsToldHowLongToKeepThingsBeforeItAsks(t *testing.T) {
	path, err := program()
	if err != nil {
		t.Fatal(err)
	}
	cmd := exec.Command(path, "--version")
	cmd.Env = append(os.Environ(), "GODEBUG=inittrace=1")
	out, err := cmd.CombinedOutput()
	if err != nil {
		t.Fatal(err)
	}
	set := strings.Index(string(out), "init lobewright/app/window/toolkitcache @")
	read := strings.Index(string(out), "init fyne.io/fyne/v2/internal/cache @")
	if set < 0 || read < 0 || set > read {
		t.Errorf("the order is not as wanted:\n%s", out)
	}
}
