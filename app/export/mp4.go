package export

import (
	"bytes"
	"context"
	"fmt"
	"image"
	"io"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"

	"lobewright/symmetry/message"
)

// CheckMP4 tells beforehand whether this computer can write MP4.
func CheckMP4() error {
	if _, err := exec.LookPath("ffmpeg"); err != nil {
		return message.Errorf("MP4 is written by the program ffmpeg, which is not installed here; GIF, APNG and GLB need nothing")
	}
	return nil
}

// EncodeMP4 has a film written as MP4 (H.264) by the program ffmpeg, at a
// number of pictures a second; study, which may be empty, is carried in a box
// of its own. Such a film does not begin again by itself.
func (f *Film) EncodeMP4(ctx context.Context, w io.Writer, rate float64, study []byte) error {
	if err := CheckMP4(); err != nil {
		return err
	}
	if !f.Opaque {
		return message.Errorf("MP4 knows no transparent ground; choose another")
	}
	// The writer of this format goes back in its file, so it needs a real one.
	folder, err := os.MkdirTemp("", "lobewright-")
	if err != nil {
		return err
	}
	defer os.RemoveAll(folder)
	path := filepath.Join(folder, "film.mp4")
	if err := f.feed(ctx, path, rate); err != nil {
		return err
	}
	file, err := os.Open(path)
	if err != nil {
		return err
	}
	defer file.Close()
	if _, err := io.Copy(w, file); err != nil {
		return err
	}
	if len(study) > 0 {
		_, err = w.Write(uuidBox(study))
	}
	return err
}

// feed pipes the pictures to ffmpeg.
func (f *Film) feed(ctx context.Context, path string, rate float64) error {
	command := exec.CommandContext(ctx, "ffmpeg", "-nostdin", "-v", "error",
		"-f", "rawvideo", "-pix_fmt", "rgba", "-s", fmt.Sprintf("%dx%d", f.Width, f.Height),
		"-r", strconv.FormatFloat(rate, 'g', -1, 64), "-i", "-",
		// Sides must be even: the last row or column is dropped. Colours are marked as those of HDTV.
		"-vf", "crop=trunc(iw/2)*2:trunc(ih/2)*2:0:0,scale=out_color_matrix=bt709:out_range=tv,format=yuv420p",
		"-colorspace", "bt709", "-color_primaries", "bt709", "-color_trc", "bt709",
		"-c:v", "libx264", "-preset", "medium", "-crf", "16", "-movflags", "+faststart",
		"-map_metadata", "-1", "-fflags", "+bitexact", "-flags:v", "+bitexact", path)
	var said bytes.Buffer
	command.Stderr = &said
	in, err := command.StdinPipe()
	if err != nil {
		return err
	}
	if err := command.Start(); err != nil {
		return message.Errorf("ffmpeg cannot be started: %w", err)
	}
	feeding := f.each(ctx, func(k int, img *image.RGBA) error {
		for range max(1, int(math.Round(f.Seconds[k]*rate))) {
			if _, err := in.Write(img.Pix); err != nil {
				return err
			}
		}
		return nil
	})
	in.Close()
	err = command.Wait()
	switch {
	case ctx.Err() != nil:
		return ctx.Err()
	case err != nil:
		line, _, _ := strings.Cut(strings.TrimSpace(said.String()), "\n")
		return message.Errorf("ffmpeg says: %s", oneLine(line))
	}
	return feeding
}
