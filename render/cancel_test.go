package render

import (
	"context"
	"errors"
	"image"
	"testing"
)

// A picture that is given up leaves nothing behind that a later one stumbles
// over, however different their sizes are.
func TestAPictureMayBeGivenUpAtAnyTime(t *testing.T) {
	scene, camera := galleryScene(t)
	large, small := image.NewRGBA(image.Rect(0, 0, 900, 700)), image.NewRGBA(image.Rect(0, 0, 70, 40))
	var r Renderer
	for calls := range 40 {
		if err := r.Draw(context.Background(), large, scene, camera, LitLook(RGB(0xFFFFFF)), Quality{}, Band{}); err != nil {
			t.Fatal(err)
		}
		ctx := &endingContext{Context: context.Background(), left: calls}
		if err := r.Draw(ctx, small, scene, camera, LitLook(RGB(0xFFFFFF)), Quality{Workers: 1}, Band{}); err != nil && !errors.Is(err, context.Canceled) {
			t.Fatal(err)
		}
	}
}

// An endingContext is cancelled after it was asked a number of times.
type endingContext struct {
	context.Context
	left int
}

func (c *endingContext) Err() error {
	if c.left--; c.left < 0 {
		return context.Canceled
	}
	return nil
}
