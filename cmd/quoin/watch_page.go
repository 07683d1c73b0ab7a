package main

import (
	"bytes"
	"crypto/sha256"
	_ "embed"
	"encoding/base64"
	"fmt"
	"html/template"
)

// What the browser shows: the live page, or what is wrong with the source.

//go:embed watch.js
var watchScript string

// script is the page's part of the preview, for one version of it.
func liveScript(version int, broken bool) string {
	return fmt.Sprintf("const version = %d, broken = %t\n%s", version, broken, watchScript)
}

const brokenStyle = `:root { color-scheme: light; }
body { margin: 0; background: #e7e3da; color: #1c1b19; font: 16px/1.5 "IBM Plex Sans Condensed", "Arial Narrow", Arial, sans-serif; }
main { background: #fffdf8; max-width: 900px; margin: 26px auto; padding: 22px 46px; border-top: 6px solid #9c2f1b; }
h1 { font-size: 1.4em; margin: 0 0 .4em; }
pre { white-space: pre-wrap; overflow-wrap: anywhere; font: 14px/1.5 ui-monospace, Menlo, Consolas, monospace; border-top: 1px solid #c9c3b6; padding-top: 1em; }
a { color: #1d5a6c; }`

var brokenPage = template.Must(template.New("").Parse(`<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta http-equiv="Content-Security-Policy" content="{{.Policy}}">
<title>{{.Title}}</title>
<meta name="viewport" content="width=device-width, initial-scale=1">
<style>{{.Style}}</style>
</head>
<body>
<main>
<h1>{{.Title}}</h1>
<p>{{if .Last}}<a id="last" href="last">The last page that could be made</a> (key l).{{else}}No page could be made yet.{{end}} This page goes away by itself once the source is in order.</p>
<pre>{{.Text}}</pre>
</main>
<script>{{.Script}}</script>
</body>
</html>
`))

// messagesPage is the page that takes the place of one that could not be made.
func messagesPage(title, text string, version int, last bool) []byte {
	script := liveScript(version, true)
	sum := func(text string) string {
		h := sha256.Sum256([]byte(text))
		return "'sha256-" + base64.StdEncoding.EncodeToString(h[:]) + "'"
	}
	var out bytes.Buffer
	err := brokenPage.Execute(&out, struct {
		Title, Text, Policy string
		Style               template.CSS
		Script              template.JS
		Last                bool
	}{title, text, "default-src 'none'; script-src " + sum(script) + "; style-src " + sum(brokenStyle) + "; connect-src 'self'; base-uri 'none'; form-action 'none'",
		template.CSS(brokenStyle), template.JS(script), last})
	if err != nil {
		panic(err)
	}
	return out.Bytes()
}
