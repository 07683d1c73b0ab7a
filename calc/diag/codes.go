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
var Codes = []Code{
	{"design-category", "The seismic design category is D by the tables of ASCE/SEI 7, and S_1, which could make it E or F, is not stated.", "State S_1."},
	{"long-period", "T_L of a multi-period spectrum lies below its last period, 10 s.", "See that T_L is right; the ordinates beyond 10 s are on the safe side."},
	{"low-q", "The behaviour factor q is below 1, so that the design spectrum lies above the elastic one.", "See that q is right."},
	{"short-below-long", "S_MS is less than S_M1, which the International Building Code does not let stand.", "Where that code governs, give S_MS as large as S_M1; the design category is found without that."},
	{"site-coefficient", "S_MS or S_M1 as given does not follow from S_S, S_1 and the site class by the tables of ASCE/SEI 7-16.", "See which of them is right; leave away what does not count, or state site_specific: study where the values come from one."},
	{"site-exception", "An exception to the site-specific study of ASCE/SEI 7-16 11.4.8 is claimed, and its condition binds the design.", "See that the condition named is met throughout the design."},
	{"site-specific", "ASCE/SEI 7-16 11.4.8 asks for a site-specific study of the ground motion, or cannot be evaluated, and nothing is said about it.", "State site_specific: study with the values of the study, or site_specific: exception; state the site class and S_1."},
	{"vertical-q", "The behaviour factor of a vertical design spectrum is above 1.5.", "Use q up to 1.5, or justify the larger one by analysis (EN 1998-1 3.2.2.5)."},
}
