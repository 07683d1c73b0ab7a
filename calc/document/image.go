package document

import (
	"errors"
	"fmt"
	"net/http"
	"path"
	"strings"
)

// images reads every picture named in prose, so that all errors come at once.
func (d *run) images(pt *part) {
	for _, im := range pt.md.Images {
		_, _, _, err := d.image(pt, im.Path)
		switch {
		case errors.Is(err, errNoPicture):
			d.diags.Errorf("image", im.Range, "%s", err).WithHint("PNG, JPEG, GIF, WebP and SVG pictures can be shown")
		case errors.Is(err, errCut):
			d.diags.Errorf("image", im.Range, "%s", err).WithHint("the file was cut short or damaged on its way: take it anew from its source")
		case err != nil:
			d.diags.Errorf("unreadable", im.Range, "%s", err).WithHint("a picture is named relative to the file that shows it")
		}
	}
}

// image is the bytes of a picture, what they are, and its path below the root.
func (d *run) image(pt *part, name string) (data []byte, kind, full string, err error) {
	if full, err = below(path.Dir(pt.name), name); err != nil {
		return nil, "", "", err
	}
	if data, err = d.files.read(full, "image"); err != nil {
		return nil, "", "", err
	}
	kind = http.DetectContentType(data)
	if strings.HasSuffix(strings.ToLower(full), ".svg") && strings.Contains(string(data[:min(len(data), 4096)]), "<svg") {
		kind = "image/svg+xml"
	}
	whole := pictures[kind]
	switch {
	case whole == nil:
		return nil, "", "", fmt.Errorf("%s %w", name, errNoPicture)
	case !whole(data):
		return nil, "", "", fmt.Errorf("%s %w", name, errCut)
	}
	return data, kind, full, nil
}

var (
	errNoPicture = errors.New("is not a picture that a page can show")
	errCut       = errors.New("is no whole picture: it ends too early or is damaged")
)
