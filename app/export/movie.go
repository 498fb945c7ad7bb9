package export

import (
	"context"
	"fmt"
	"io"
	"path/filepath"
	"strings"

	"lobewright/app/files"
	"lobewright/app/picture"
	"lobewright/app/study"
)

// WriteMovie writes a moving picture in the format that the ending of path
// tells: .gif, .apng, .mp4, .glb, or .png for one numbered file a picture. film
// is that of movie, s the study that both were made from, and carried encodes a
// study for the file, or gives nil to leave it out; each numbered file carries
// its own moment. An error is one line, and no file has changed then.
func WriteMovie(ctx context.Context, path string, force bool, movie *picture.Movie, film *Film, s study.Study, carried func(study.Study) ([]byte, error)) error {
	format := strings.ToLower(filepath.Ext(path))
	if format == ".png" {
		return writeStills(ctx, path, force, movie, film, s, carried)
	}
	if format == ".mp4" {
		if err := CheckMP4(); err != nil {
			return err
		}
	}
	if err := files.Check(path, force); err != nil {
		return err
	}
	data, err := carried(s)
	if err != nil {
		return err
	}
	return files.Write(path, files.Options{Force: force}, func(w io.Writer) error {
		switch format {
		case ".apng":
			return film.EncodeAPNG(ctx, w, data)
		case ".mp4":
			rate := s.Animation.Rate
			if rate == 0 {
				rate = picture.DefaultMovieRate
			}
			return film.EncodeMP4(ctx, w, rate, data)
		case ".glb":
			return EncodeGLB(w, movie, data)
		}
		return film.EncodeGIF(ctx, w, data)
	})
}

// writeStills writes each picture as a numbered file.
func writeStills(ctx context.Context, path string, force bool, movie *picture.Movie, film *Film, s study.Study, carried func(study.Study) ([]byte, error)) error {
	n := len(movie.Stills)
	stem := strings.TrimSuffix(path, filepath.Ext(path))
	paths := make([]string, n)
	for k := range paths {
		paths[k] = fmt.Sprintf("%s-%0*d%s", stem, len(fmt.Sprint(n)), k+1, filepath.Ext(path))
		if err := files.Check(paths[k], force); err != nil {
			return err
		}
	}
	return files.WriteAll(paths, files.Options{Force: force}, func(k int, w io.Writer) error {
		s.Moment = movie.Stills[k].Moment
		data, err := carried(s)
		if err != nil {
			return err
		}
		png, err := film.PNG(ctx, k, movie.Resolution, data)
		if err != nil {
			return err
		}
		return png.Encode(w)
	})
}
