package markdown

import (
	"bytes"
	"testing"
)

func FuzzParse(f *testing.F) {
	for _, c := range cases {
		f.Add([]byte(c.source))
	}
	for _, b := range bombs {
		f.Add([]byte(b.head + b.unit + b.unit + b.tail[:min(len(b.tail), 40)]))
	}
	f.Fuzz(func(t *testing.T, source []byte) {
		if len(source) > 4096 {
			return
		}
		file, list := Parse("fuzz.md", source, func(key string) bool { return key == "K" || key == "K L" }, kinds)
		sound(t, source, file, list)
		// Line ends do not matter.
		if !bytes.Contains(source, []byte("\r")) {
			other, more := Parse("fuzz.md", bytes.ReplaceAll(source, []byte("\n"), []byte("\r\n")), func(key string) bool { return key == "K" || key == "K L" }, kinds)
			same(t, "with CRLF", file, other)
			same(t, "with CRLF", list, more)
		}
	})
}
