package export

import (
	"bytes"
	"compress/zlib"
	"encoding/binary"
	"encoding/json"
	"encoding/xml"
	"io"
	"slices"
	"strconv"
	"strings"

	"lobewright/symmetry/message"
)

// findInGIF walks from block to block (CompuServe, Graphics Interchange
// Format, version 89a, 1990).
func findInGIF(r io.ReaderAt, size int64) ([]byte, error) {
	g := &gifWalk{r: r, size: size, at: 13}
	g.skipColours(10)
	for g.err == nil {
		switch g.byte() {
		case 0x21: // an extension
			if label := g.byte(); label != 0xfe {
				g.blocks(0)
				continue
			}
			comment := g.blocks(len(studyKeyword) + 1 + maxStudy)
			if data, ok := bytes.CutPrefix(comment, []byte(studyKeyword+"\n")); ok {
				if g.overfull {
					return nil, message.Errorf("the study is larger than %d bytes", maxStudy)
				}
				return data, g.err
			}
		case 0x2c: // a picture
			g.at += 9
			g.skipColours(g.at - 1)
			g.at++ // the width of codes
			g.blocks(0)
		case 0x3b:
			return nil, g.err
		default:
			return nil, errCutOff
		}
	}
	return nil, g.err
}

// A gifWalk is a place in a GIF; after an error it stands still.
type gifWalk struct {
	r        io.ReaderAt
	size, at int64
	overfull bool // a comment was longer than wanted
	err      error
	window   [4096]byte
	from     int64 // of the window
	filled   int
}

func (g *gifWalk) byteAt(at int64) byte {
	if g.err != nil {
		return 0
	}
	if at < g.from || at >= g.from+int64(g.filled) {
		n, err := g.r.ReadAt(g.window[:], at)
		g.from, g.filled = at, n
		if n == 0 {
			if err != nil {
				g.err = errCutOff
			}
			return 0
		}
	}
	return g.window[at-g.from]
}

func (g *gifWalk) byte() byte {
	b := g.byteAt(g.at)
	g.at++
	return b
}

// skipColours skips a table of colours if the flags at a place say that one
// follows.
func (g *gifWalk) skipColours(flags int64) {
	if f := g.byteAt(flags); f&0x80 != 0 {
		g.at += 3 << (f&7 + 1)
	}
}

// blocks reads blocks up to the empty one and returns what they hold, up to a
// number of bytes.
func (g *gifWalk) blocks(most int) []byte {
	var out []byte
	g.overfull = false
	for g.err == nil {
		n := int64(g.byte())
		if n == 0 {
			break
		}
		if most > 0 {
			if len(out)+int(n) > most {
				g.overfull = true
			} else if g.at+n <= g.size {
				block := make([]byte, n)
				if _, err := g.r.ReadAt(block, g.at); err != nil && err != io.EOF {
					g.err = errCutOff
				}
				out = append(out, block...)
			}
		}
		g.at += n
	}
	return out
}

// findInMP4 walks from box to box (ISO/IEC 14496-12:2022, section 4.2).
func findInMP4(r io.ReaderAt, size int64) ([]byte, error) {
	var head [16]byte
	for at := int64(0); at+8 <= size; {
		if _, err := r.ReadAt(head[:8], at); err != nil {
			return nil, errCutOff
		}
		n, begin := int64(binary.BigEndian.Uint32(head[:])), int64(8)
		switch n {
		case 0: // to the end of the file
			n = size - at
		case 1: // a size of eight bytes follows
			if _, err := r.ReadAt(head[8:], at+8); err != nil {
				return nil, errCutOff
			}
			long := binary.BigEndian.Uint64(head[8:])
			if long > uint64(size) {
				return nil, errCutOff
			}
			n, begin = int64(long), 16
		}
		if n < begin || n > size-at {
			return nil, errCutOff
		}
		if string(head[4:8]) == "uuid" && n >= begin+16 {
			var id [16]byte
			if _, err := r.ReadAt(id[:], at+begin); err != nil {
				return nil, errCutOff
			}
			if id == studyUUID {
				return held(r, at+begin+16, n-begin-16, int64(maxStudy))
			}
		}
		at += n
	}
	return nil, nil
}

// studyUUID marks the box of a study: a random UUID (RFC 9562, version 4)
// drawn once for this purpose.
var studyUUID = [16]byte{0x6b, 0x1f, 0x0d, 0x52, 0x9c, 0x3e, 0x4a, 0x47, 0x8d, 0x21, 0xe5, 0x70, 0x3a, 0xb4, 0x96, 0xcf}

// findInGLB reads the first chunk, which is JSON (Khronos, glTF 2.0, 2021,
// section 4.4).
func findInGLB(r io.ReaderAt, size int64) ([]byte, error) {
	var head [20]byte
	if _, err := r.ReadAt(head[:], 0); err != nil {
		return nil, errCutOff
	}
	n := int64(binary.LittleEndian.Uint32(head[12:]))
	switch {
	case binary.LittleEndian.Uint32(head[4:]) != 2:
		return nil, message.Errorf("this is not GLB of version 2")
	case string(head[16:]) != "JSON":
		return nil, message.Errorf("the first chunk is not JSON")
	case n > size-20:
		return nil, errCutOff
	}
	text, err := held(r, 20, n, maxHeld)
	if err != nil {
		return nil, err
	}
	var document struct {
		Extras json.RawMessage `json:"extras"`
	}
	if err := json.Unmarshal(text, &document); err != nil {
		return nil, message.Errorf("its JSON is damaged")
	}
	var extras map[string]json.RawMessage
	if err := json.Unmarshal(document.Extras, &extras); err != nil {
		return nil, nil // another program's extras
	}
	found := extras[studyKeyword]
	if len(found) > maxStudy {
		return nil, message.Errorf("the study is larger than %d bytes", maxStudy)
	}
	return found, nil
}

// svgSpace is the namespace of the element that holds a study.
const svgSpace = "urn:x-lobewright:study"

// findInSVG reads elements up to the one that holds a study.
func findInSVG(r io.ReaderAt, size int64) ([]byte, error) {
	if size > maxHeld {
		return nil, message.Errorf("the file is larger than %d bytes", maxHeld)
	}
	d := xml.NewDecoder(io.NewSectionReader(r, 0, size))
	d.Strict = true
	const deepest = 256
	depth := 0
	for {
		token, err := d.RawToken()
		switch {
		case err == io.EOF && depth == 0:
			return nil, nil
		case err != nil:
			return nil, message.Errorf("its XML is damaged or cut off")
		}
		switch t := token.(type) {
		case xml.StartElement:
			if depth++; depth > deepest {
				return nil, message.Errorf("its elements stand within each other more than %d deep", deepest)
			}
			if t.Name.Local == "study" && slices.ContainsFunc(t.Attr, func(a xml.Attr) bool { return a.Value == svgSpace }) {
				return studyOfElement(d)
			}
		case xml.EndElement:
			depth--
		}
	}
}

// studyOfElement collects text up to the end of an element.
func studyOfElement(d *xml.Decoder) ([]byte, error) {
	var out []byte
	for {
		token, err := d.RawToken()
		if err != nil {
			return nil, message.Errorf("its XML is damaged or cut off")
		}
		switch t := token.(type) {
		case xml.CharData:
			if out = append(out, t...); len(out) > maxStudy {
				return nil, message.Errorf("the study is larger than %d bytes", maxStudy)
			}
		case xml.EndElement:
			return out, nil
		}
	}
}

// pdfSubtype is the media type of a study as a name in a PDF, where # and two
// digits stand for a character.
const pdfSubtype = "/application#2Fx-lobewright"

// findInPDF searches for the stream of an attached study. It is never within
// another stream, so this also finds it after another program has written the
// file anew, unless that encrypted it (ISO 32000-2:2020, sections 7.3.8 and
// 7.11.4).
func findInPDF(r io.ReaderAt, size int64) ([]byte, error) {
	if size > maxHeld {
		return nil, message.Errorf("the file is larger than %d bytes", maxHeld)
	}
	data, err := held(r, 0, size, maxHeld)
	if err != nil {
		return nil, err
	}
	at := bytes.Index(data, []byte(pdfSubtype))
	if at < 0 {
		at = bytes.Index(data, []byte(strings.ToLower(pdfSubtype)))
	}
	if at < 0 {
		return nil, nil
	}
	damaged := message.Errorf("the study in it is damaged or cut off")
	begin := bytes.Index(data[at:], []byte("stream"))
	if begin < 0 {
		return nil, damaged
	}
	head := data[max(0, bytes.LastIndex(data[:at], []byte(" obj"))) : at+begin]
	body := data[at+begin+len("stream"):]
	body = bytes.TrimPrefix(bytes.TrimPrefix(body, []byte("\r")), []byte("\n"))
	end := bytes.Index(body, []byte("endstream"))
	if n, ok := pdfLength(head); ok && n <= len(body) {
		end = n
	}
	if end < 0 {
		return nil, damaged
	}
	body = body[:end]
	if !bytes.Contains(head, []byte("/FlateDecode")) {
		return body, nil
	}
	z, err := zlib.NewReader(bytes.NewReader(body))
	if err != nil {
		return nil, damaged
	}
	return expanded(z)
}

// pdfLength is the length that the dictionary of a stream tells, if it tells
// it directly.
func pdfLength(dictionary []byte) (int, bool) {
	_, rest, ok := bytes.Cut(dictionary, []byte("/Length "))
	if !ok {
		return 0, false
	}
	digits := 0
	for digits < len(rest) && digits < 9 && rest[digits] >= '0' && rest[digits] <= '9' {
		digits++
	}
	n, err := strconv.Atoi(string(rest[:digits]))
	if err != nil || bytes.HasPrefix(bytes.TrimLeft(rest[digits:], " "), []byte("0 R")) {
		return 0, false
	}
	return n, true
}

// uuidBox is a box with a study.
func uuidBox(study []byte) []byte {
	out := binary.BigEndian.AppendUint32(nil, uint32(8+16+len(study)))
	out = append(append(out, "uuid"...), studyUUID[:]...)
	return append(out, study...)
}
