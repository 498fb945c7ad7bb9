package export

import (
	"bytes"
	"compress/zlib"
	"encoding/binary"
	"hash/crc32"
	"io"

	"lobewright/symmetry/message"
)

// findInPNG walks from chunk to chunk.
func findInPNG(r io.ReaderAt, size int64) ([]byte, error) {
	var head [8]byte
	for at := int64(len(pngSignature)); at+12 <= size; {
		if _, err := r.ReadAt(head[:], at); err != nil {
			return nil, errCutOff
		}
		n := int64(binary.BigEndian.Uint32(head[:]))
		if n > size-at-12 {
			return nil, errCutOff
		}
		switch string(head[4:]) {
		case "iTXt":
			var keyword [len(studyKeyword) + 1]byte
			if _, err := r.ReadAt(keyword[:min(n, int64(len(keyword)))], at+8); err != nil {
				return nil, errCutOff
			}
			if string(keyword[:]) == studyKeyword+"\x00" {
				return studyOfText(r, at, n)
			}
		case "IEND":
			return nil, nil
		}
		at += 12 + n
	}
	return nil, errCutOff
}

// studyOfText reads an iTXt chunk of n bytes that begins at a place.
func studyOfText(r io.ReaderAt, at, n int64) ([]byte, error) {
	chunk, err := held(r, at+4, n+8, int64(maxStudy))
	if err != nil {
		return nil, err
	}
	body, sum := chunk[:4+n], binary.BigEndian.Uint32(chunk[4+n:])
	if crc32.ChecksumIEEE(body) != sum {
		return nil, message.Errorf("the study in it is damaged: its check sum is wrong")
	}
	rest := body[4+len(studyKeyword)+1:]
	if len(rest) < 2 {
		return nil, message.Errorf("the study in it is damaged")
	}
	compressed := rest[0] == 1
	// Behind the method stand a language and a translated keyword, each up to
	// a zero.
	rest = rest[2:]
	for range 2 {
		i := bytes.IndexByte(rest, 0)
		if i < 0 {
			return nil, message.Errorf("the study in it is damaged")
		}
		rest = rest[i+1:]
	}
	if !compressed {
		return rest, nil
	}
	z, err := zlib.NewReader(bytes.NewReader(rest))
	if err != nil {
		return nil, message.Errorf("the study in it is damaged")
	}
	return expanded(z)
}
