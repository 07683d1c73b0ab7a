package document

import (
	"bytes"
	"image"
	"image/color"
	"image/gif"
	"image/jpeg"
	"image/png"
	"testing"
	"testing/fstest"
)

// TestWholePictures: a picture is shown when it is whole, and refused when any
// part of its end is missing.
func TestWholePictures(t *testing.T) {
	im := image.NewPaletted(image.Rect(0, 0, 40, 30), color.Palette{color.White, color.Black})
	for i := range im.Pix {
		im.Pix[i] = uint8(i * i % 7 % 2)
	}
	encode := func(f func(b *bytes.Buffer) error) []byte {
		var b bytes.Buffer
		if err := f(&b); err != nil {
			t.Fatal(err)
		}
		return b.Bytes()
	}
	all := map[string][]byte{
		"a.png": encode(func(b *bytes.Buffer) error { return png.Encode(b, im) }),
		"a.jpg": encode(func(b *bytes.Buffer) error { return jpeg.Encode(b, im, nil) }),
		"a.gif": encode(func(b *bytes.Buffer) error { return gif.Encode(b, im, nil) }),
		// A lossless WebP of one dot.
		"a.webp": []byte("RIFF\x1a\x00\x00\x00WEBPVP8L\x0d\x00\x00\x00\x2f\x00\x00\x00\x10\x07\x10\x11\x11\x88\x88\xfe\x07\x00"),
		"a.svg":  []byte(`<?xml version="1.0"?><svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 4 4"><path d="M0 0h4v4z"/></svg>`),
	}
	damaged := bytes.Clone(all["a.png"])
	damaged[len(damaged)/2] ^= 0x10
	if show(damaged, "a.png") {
		t.Error("a damaged PNG is shown")
	}
	for name, data := range all {
		if !show(data, name) {
			t.Errorf("%s is refused", name)
		}
		for cut := 1; cut < len(data)-20; cut += 1 + len(data)/30 {
			if show(data[:len(data)-cut], name) {
				t.Errorf("%s without its last %d bytes is shown", name, cut)
			}
		}
	}
}

func show(data []byte, name string) bool {
	doc := "---\nquoin: 1\ntitle: t\n---\n![a picture](" + name + ")\n"
	res := Run(Source{FS: fstest.MapFS{"package.md": {Data: []byte(doc)}, name: {Data: data}}, Main: "package.md"}, Options{})
	return res.Package != nil
}
