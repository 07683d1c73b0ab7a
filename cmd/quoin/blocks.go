package main

import (
	"encoding/json"
	"fmt"
	"strings"

	"github.com/spf13/cobra"

	"quoin/calc/diag"
)

// blocks prints the reference: what there is, or one topic in full.
func (a *app) blocks(_ *cobra.Command, args []string) error {
	if len(args) == 0 {
		if a.flags.json {
			return a.encode(topics())
		}
		fmt.Fprint(a.stdout, listText(topics()))
		return nil
	}
	var found []topic
	for _, name := range args {
		t, ok := lookupTopic(name)
		if !ok {
			return errTopic(name, diag.Nearest(name, topicNames()))
		}
		found = append(found, t)
	}
	if a.flags.json {
		return a.encode(found)
	}
	for i, t := range found {
		if i > 0 {
			fmt.Fprintln(a.stdout)
		}
		fmt.Fprint(a.stdout, topicText(t))
	}
	return nil
}

func (a *app) encode(v any) error {
	e := json.NewEncoder(a.stdout)
	e.SetEscapeHTML(false)
	e.SetIndent("", "  ")
	return e.Encode(v)
}

// listText is the table of contents for the terminal.
func listText(all []topic) string {
	var b strings.Builder
	for i, t := range all {
		switch i {
		case 0:
			b.WriteString(refKinds + "\n")
		case kinds():
			b.WriteString("\n" + refOthers + "\n")
		}
		entry(&b, 14, t.Name, t.Doc)
	}
	b.WriteString("\n" + refMore + "\n")
	return b.String()
}

// topicText is a topic for the terminal.
func topicText(t topic) string {
	var b strings.Builder
	fmt.Fprintf(&b, "%s: %s\n\n    %s\n", t.Name, t.Doc, t.Form)
	for _, s := range t.Sections {
		fmt.Fprintf(&b, "\n%s\n", s.Title)
		if s.Intro != "" {
			entry(&b, 0, "", s.Intro)
		}
		width := 0
		for _, r := range s.Rows {
			width = max(width, len([]rune(r.Name))+2*r.Depth)
		}
		for _, r := range s.Rows {
			entry(&b, min(width, 26)+2, strings.Repeat("– ", r.Depth)+r.Name, r.Doc, r.Type)
		}
	}
	return b.String()
}

// entry writes a word and what is said of it, paragraphs under each other, the
// lines broken to fit a terminal.
func entry(b *strings.Builder, width int, name string, paragraphs ...string) {
	const edge = 98
	lead := "  " + name
	for _, p := range paragraphs {
		if p == "" {
			continue
		}
		if len([]rune(lead)) > width+2 {
			b.WriteString(lead + "\n")
			lead = ""
		}
		line := lead + strings.Repeat(" ", width+2-len([]rune(lead)))
		empty := true
		for _, w := range strings.Fields(p) {
			if !empty && len([]rune(line))+1+len([]rune(w)) > edge {
				b.WriteString(line + "\n")
				line, empty = strings.Repeat(" ", width+2), true
			}
			if !empty {
				line += " "
			}
			line += w
			empty = false
		}
		b.WriteString(line + "\n")
		lead = ""
	}
}

// referencePage is the whole reference as a page of markdown.
func referencePage() string {
	var b strings.Builder
	b.WriteString("# " + refTitle + "\n\n" + refHead + "\n\n")
	for i, t := range topics() {
		if i == kinds() {
			b.WriteString("\n")
		}
		fmt.Fprintf(&b, "- [%s](#%s): %s\n", t.Name, t.Name, t.Doc)
	}
	for _, t := range topics() {
		fmt.Fprintf(&b, "\n## %s\n\n%s.\n\n%s\n", t.Name, upperFirst(t.Doc), code(t.Form))
		for _, s := range t.Sections {
			fmt.Fprintf(&b, "\n### %s\n\n", upperFirst(s.Title))
			if s.Intro != "" {
				b.WriteString(upperFirst(s.Intro) + ".\n\n")
			}
			heads := s.Heads
			fmt.Fprintf(&b, "| %s |\n|%s\n", strings.Join(heads, " | "), strings.Repeat("---|", len(heads)))
			for _, r := range s.Rows {
				cells := []string{strings.Repeat("– ", r.Depth) + code(r.Name), plainCell(r.Type), plainCell(r.Doc)}
				if len(heads) == 2 {
					cells = []string{cells[0], cells[2]}
				}
				fmt.Fprintf(&b, "| %s |\n", strings.Join(cells, " | "))
			}
		}
	}
	return b.String()
}

func upperFirst(s string) string {
	if s == "" {
		return s
	}
	return strings.ToUpper(s[:1]) + s[1:]
}

// code is a word of the language in markdown, fit for a table.
func code(s string) string {
	s = strings.ReplaceAll(s, "|", "\\|")
	if strings.Contains(s, "`") {
		return "```` " + s + " ````"
	}
	return "`" + s + "`"
}

func plainCell(s string) string {
	return strings.NewReplacer("|", "\\|", "<", "&lt;", "*", "\\*", "_", "\\_").Replace(s)
}
