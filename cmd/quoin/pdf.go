package main

import (
	"bytes"
	"regexp"
	"time"

	"quoin/calc/exhibit"
)

// What is read and set of a PDF as browsers write it: the objects of its pages,
// and the dates of its information dictionary, both in plain text.

const pdfMark = "%PDF-"

var (
	pdfPage = regexp.MustCompile(`/Type\s*/Page[\s/<>\[]`)
	pdfDate = regexp.MustCompile(`/(Creation|Mod)Date\s*\(D:\d{14}[+-]\d\d'\d\d'?\)`)
)

// whole tells whether data is a PDF to its end.
func whole(data []byte) bool {
	return bytes.HasPrefix(data, []byte(pdfMark)) && bytes.HasSuffix(bytes.TrimRight(data, "\r\n "), []byte("%%EOF"))
}

// countPages is how many pages a PDF has; 0 where its objects are packed.
func countPages(data []byte) int { return len(pdfPage.FindAll(data, -1)) }

// setDates puts a day, YYYY-MM-DD, in the place of the time at which the browser
// wrote, or blanks where none is known: no date of ours comes from the clock. No
// byte moves, so that all the places noted in the PDF stay right.
func setDates(data []byte, day string) {
	for _, at := range pdfDate.FindAllIndex(data, -1) {
		old := data[at[0]:at[1]]
		text := bytes.Repeat([]byte(" "), len(old))
		if t, err := time.Parse(time.DateOnly, day); err == nil {
			stamp := bytes.Index(old, []byte("D:")) + 2
			copy(text, old)
			copy(text[stamp:], t.Format("20060102")+"000000+00'00")
		}
		copy(old, text)
	}
}

// date is the date of a package, as its sheets have it: of its revision, else of
// the commit, else "".
func date(m exhibit.Meta, from exhibit.Provenance) string {
	if n := len(m.Revision); n > 0 && m.Revision[n-1].Date != "" {
		return m.Revision[n-1].Date
	}
	return from.CommitDate
}
