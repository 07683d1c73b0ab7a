package diag

// Code explains one kind of message.
type Code struct {
	Code   string // stable: "unknown-name"
	Cause  string // what the program found, a sentence
	Remedy string // what to do, a sentence
}

// Codes is every code that a diagnostic may carry, in alphabetical order. The
// page of diagnostics is made from it; each is provoked by a case of
// calc/document/testdata/codes.
var Codes = []Code{}
