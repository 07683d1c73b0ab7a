// The bundle: scripts, fonts and licences built from the lock file, never committed.

package templates

import (
	"embed"
	"errors"
	"fmt"
	"io/fs"
)

//go:embed all:dist
var dist embed.FS

// PageScript is the script of the page: charts and their controls.
func PageScript() (string, error) { return bundled("page.js") }

// PressScript is the script run without a browser: pictures and TeX.
func PressScript() (string, error) { return bundled("press.js") }

// FontsCSS declares the embedded fonts: families Text, Label and Math.
func FontsCSS() (string, error) { return bundled("fonts.css") }

// TemmlCSS is what MathML made from TeX needs of a stylesheet.
func TemmlCSS() (string, error) { return bundled("temml.css") }

// Licences is the licence texts of all that is bundled.
func Licences() (string, error) { return bundled("licences.txt") }

func bundled(name string) (string, error) { return read(dist, name) }

func read(from fs.FS, name string) (string, error) {
	text, err := fs.ReadFile(from, "dist/"+name)
	if errors.Is(err, fs.ErrNotExist) {
		return "", fmt.Errorf("the page's bundle is missing (%s): make it with `make bundle` and build the program again", name)
	}
	return string(text), err
}
