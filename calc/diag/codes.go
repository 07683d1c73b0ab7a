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
	{"drift-basis", "A drift block has no standard to judge drifts by, or another than its analysis follows.", "State the field basis where the analysis has none, and leave it out where it has."},
	{"drift-edge", "A drift block asks for the drift of an edge, which a planar model does not have.", "Leave the field at out, and add torsion by formula lines where the plan calls for it."},
	{"drift-field", "A drift block has a field of another standard or of another kind of analysis, or gives the same thing twice.", "Leave the field out."},
	{"drift-input", "A number of a drift block cannot be: loads that do not grow downwards, a factor below its least value, a row of limits that the structure is too high for.", "Correct the value; the message says which item of a vector it is."},
	{"drift-scaling", "The forces of a combine block were scaled to a base shear, and the drift block does not say whether its drifts must be.", "State scale_drifts: yes where C_s is governed by 0.5 S_1/(R/I_e), no where it is not."},
	{"drift-unreduced", "Drifts are amplified by C_d although the analysis was not divided by R/I_e.", "State R and I_e in the analysis, or C_d: 1 where the response is meant to be elastic."},
	{"gravity-load", "The vertical load P of a drift block is less than the seismic weight at and above a level.", "Sum the loads of the levels from the top down, dead and live, for every level."},
	{"long-period", "T_L of a multi-period spectrum lies below its last period, 10 s.", "See that T_L is right; the ordinates beyond 10 s are on the safe side."},
	{"low-q", "The behaviour factor q is below 1, so that the design spectrum lies above the elastic one.", "See that q is right."},
	{"no-theta", "A drift block has no vertical loads, so that stability is not evaluated.", "Give the field P: the vertical load at and above each level, lowest first."},
	{"second-order-analysis", "The stability coefficient lies between 0.20 and 0.30, where EN 1998-1 asks for a second-order analysis.", "Stiffen the structure, or analyse it with second-order effects elsewhere and say so."},
	{"second-order-factor", "The stability coefficient exceeds 0.10: drifts are multiplied by 1/(1 - theta).", "Multiply member forces by the value second_order of the block too, or stiffen the structure."},
	{"short-below-long", "S_MS is less than S_M1, which the International Building Code does not let stand.", "Where that code governs, give S_MS as large as S_M1; the design category is found without that."},
	{"site-coefficient", "S_MS or S_M1 as given does not follow from S_S, S_1 and the site class by the tables of ASCE/SEI 7-16.", "See which of them is right; leave away what does not count, or state site_specific: study where the values come from one."},
	{"site-exception", "An exception to the site-specific study of ASCE/SEI 7-16 11.4.8 is claimed, and its condition binds the design.", "See that the condition named is met throughout the design."},
	{"site-specific", "ASCE/SEI 7-16 11.4.8 asks for a site-specific study of the ground motion, or cannot be evaluated, and nothing is said about it.", "State site_specific: study with the values of the study, or site_specific: exception; state the site class and S_1."},
	{"unstable", "The stability coefficient exceeds its limit: the structure is potentially unstable.", "Stiffen or lighten the structure; no factor on drifts or forces mends it."},
	{"vertical-q", "The behaviour factor of a vertical design spectrum is above 1.5.", "Use q up to 1.5, or justify the larger one by analysis (EN 1998-1 3.2.2.5)."},
}
