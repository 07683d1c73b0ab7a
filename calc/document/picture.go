package document

import (
	"bytes"
	"encoding/binary"
	"encoding/xml"
	"hash/crc32"
	"io"
)

// pictures are the types of picture that a page can show, each with a test of
// whether the file is whole. The picture itself is not decoded.
var pictures = map[string]func([]byte) bool{
	"image/png": wholePNG, "image/jpeg": wholeJPEG, "image/gif": wholeGIF, "image/webp": wholeWebP, "image/svg+xml": wholeSVG,
}

// wholePNG follows the chunks, each with its check sum, to IEND (ISO/IEC 15948).
func wholePNG(data []byte) bool {
	for rest := data[8:]; len(rest) >= 12; {
		n := uint64(binary.BigEndian.Uint32(rest))
		if n+12 > uint64(len(rest)) || crc32.ChecksumIEEE(rest[4:8+n]) != binary.BigEndian.Uint32(rest[8+n:]) {
			return false
		}
		if string(rest[4:8]) == "IEND" {
			return true
		}
		rest = rest[12+n:]
	}
	return false
}

// wholeJPEG follows the segments to the first scan and looks for the end of the
// image behind it (ISO/IEC 10918-1, annex B): a small picture within a segment
// has an end of its own.
func wholeJPEG(data []byte) bool {
	for rest := data[2:]; len(rest) >= 4 && rest[0] == 0xFF; {
		if rest[1] == 0xFF { // a fill byte
			rest = rest[1:]
			continue
		}
		n := 2 + int(binary.BigEndian.Uint16(rest[2:]))
		if n > len(rest) {
			return false
		}
		if rest[1] == 0xDA {
			return bytes.Contains(rest[n:], []byte{0xFF, 0xD9})
		}
		rest = rest[n:]
	}
	return false
}

// wholeGIF asks for the trailer.
func wholeGIF(data []byte) bool {
	return bytes.HasSuffix(bytes.TrimRight(data, "\x00"), []byte{0x3B})
}

// wholeWebP compares the size that the file states with its own.
func wholeWebP(data []byte) bool {
	return uint64(binary.LittleEndian.Uint32(data[4:]))+8 <= uint64(len(data))
}

// wholeSVG reads the elements to the end of the root.
func wholeSVG(data []byte) bool {
	d := xml.NewDecoder(bytes.NewReader(data))
	d.CharsetReader = func(_ string, r io.Reader) (io.Reader, error) { return r, nil }
	elements := 0
	for {
		token, err := d.Token()
		switch {
		case err == io.EOF:
			return elements > 0
		case err != nil:
			return false
		}
		if _, ok := token.(xml.StartElement); ok {
			elements++
		}
	}
}
