// Package templates holds what a written page is made of: HTML templates, its
// style sheet, and the bundle of script, fonts and licences.
package templates

import "embed"

// Pages holds the HTML templates of the page, for html/template.
//
//go:embed *.html
var Pages embed.FS

// PageCSS is the page's own style sheet.
//
//go:embed page.css
var PageCSS string
