package document

import (
	"fmt"
	"net/http"
	"path"
	"strings"
)

// images reads every picture named in prose, so that all errors come at once.
func (d *run) images(pt *part) {
	for _, im := range pt.md.Images {
		if _, _, _, err := d.image(pt, im.Path); err != nil {
			d.diags.Errorf("image", im.Range, "%s", err).WithHint("PNG, JPEG, GIF, WebP and SVG pictures can be shown")
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
	switch kind {
	case "image/png", "image/jpeg", "image/gif", "image/webp", "image/svg+xml":
		return data, kind, full, nil
	}
	return nil, "", "", fmt.Errorf("%s is not a picture that a page can show", name)
}
