package document

import (
	"bytes"
	"encoding/xml"
	"io"
	"strings"

	"quoin/calc/diag"
)

// activeSVG are elements that do something, or bring in what is no drawing.
var activeSVG = []string{"script", "foreignobject", "iframe", "object", "embed", "audio", "video", "animate", "animatemotion", "animatetransform", "set", "handler", "listener", "style", "a", "image", "feimage"}

// inertSVG says what keeps a drawing from being shapes and text alone, and where
// that stands; "" if nothing does.
func inertSVG(data []byte) (at diag.Range, fault string) {
	d := xml.NewDecoder(bytes.NewReader(data))
	depth, elements := 0, 0
	for {
		line, column := d.InputPos()
		at = diag.Range{Line: line, Column: column, EndLine: line, EndColumn: column + 1}
		token, err := d.Token()
		switch {
		case err == io.EOF && elements > 0:
			return at, ""
		case err != nil:
			return at, "the drawing cannot be read: it ends too early, is not UTF-8 or is no XML"
		}
		switch t := token.(type) {
		case xml.Directive:
			return at, "a drawing has no document type"
		case xml.ProcInst:
			if t.Target != "xml" {
				return at, "a drawing has no processing instruction"
			}
		case xml.EndElement:
			depth--
		case xml.StartElement:
			if elements++; elements == 1 && t.Name.Local != "svg" {
				return at, "the file is no drawing: it does not begin with svg"
			}
			if depth++; depth > 64 || elements > 20000 {
				return at, "the drawing has too many parts"
			}
			name := strings.ToLower(t.Name.Local)
			at.EndColumn = at.Column + 1 + len(name)
			for _, a := range activeSVG {
				if a == name {
					return at, "a drawing may not hold " + t.Name.Local
				}
			}
			for _, a := range t.Attr {
				key, value := strings.ToLower(a.Name.Local), strings.ToLower(strings.Join(strings.Fields(a.Value), ""))
				switch {
				case strings.HasPrefix(key, "on"):
					return at, "a drawing may not hold the handler " + a.Name.Local
				case key == "href" && !strings.HasPrefix(value, "#"), key == "src", key == "base":
					return at, "a drawing may not refer to something outside of it"
				case strings.Contains(strings.ReplaceAll(value, "url(#", ""), "url("), strings.Contains(value, "\\"), strings.Contains(value, "javascript:"), strings.Contains(value, "@import"):
					return at, "a drawing may not refer to something outside of it"
				}
			}
		}
	}
}
