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
	{"elevation", "The elevations of levels do not rise from the base, or lie senselessly far apart.", "List levels lowest first, each elevation measured from the base; see whether the unit is right."},
	{"figure-profile", "A figure mixes profiles over the height with other curves, or profiles and the field over do not go together.", "Give profiles a figure of their own, with the structure they stand over in the field over."},
	{"figure-range", "The ends of an axis lie the wrong way round, or no curve lies between them.", "Let the axis end beyond where it begins, and let it hold a part of a curve."},
	{"figure-ratio", "A ratio does not name two single series.", "Name two series, the second below the first, each with its damping where a block has several."},
	{"gravity-load", "The vertical load P of a drift block is less than the seismic weight at and above a level.", "Sum the loads of the levels from the top down, dead and live, for every level."},
	{"importance", "The importance factor of a static block is not stated, or is below that of the risk category of its target.", "State I_e in the block, and the risk category in the target."},
	{"labels", "Vectors that stand side by side belong to different levels.", "Take both from the same structure, or show them apart."},
	{"lambda", "The correction factor stated for the lateral force method is below the one that its rule gives.", "Leave lambda out, or say in the prose why a lower one holds."},
	{"level-twice", "Two levels of a model have the same name, or one has none.", "Give each level a name of its own."},
	{"long-period", "T_L of a multi-period spectrum lies below its last period, 10 s.", "See that T_L is right; the ordinates beyond 10 s are on the safe side."},
	{"low-q", "The behaviour factor q is below 1, so that the design spectrum lies above the elastic one.", "See that q is right."},
	{"matrix-entry", "An entry of a matrix lies outside of it, stands twice, or is not row, column and value.", "Count rows and columns from 1, the lowest level, and give each entry once."},
	{"matrix-size", "A matrix or vector does not have the size of the model, or is not square.", "Give one row and one column for each elevation, lowest level first."},
	{"matrix-symmetry", "A mass or stiffness matrix is not symmetric.", "Correct the entry named or its mirror; the two are equal in a linear structure."},
	{"mechanism", "The structure can move without resistance, or a displacement is pushed on: the stiffness matrix is singular or indefinite.", "Look at the levels named for a storey without stiffness, a missing support or a wrong sign."},
	{"minimum-unchecked", "The target of a static block states no S_1, so the least value of C_s for S_1 of 0.6 or more could not be checked.", "State S_1 in the target."},
	{"model-limit", "A model has more freedoms, or a matrix file more bytes, than the program takes.", "Condense the model to one freedom a level, 500 at most."},
	{"modes-form", "The modes are given twice: by a structure and from elsewhere, or by a table and in the document.", "Keep one of the two."},
	{"modes-orthogonality", "Imported mode shapes are not orthogonal with respect to the masses given, or hold more mass than there is.", "See whether shapes and masses belong to one model and direction, and give the shapes with more digits."},
	{"modes-table", "Imported modes have missing, surplus or senseless values, or are out of order.", "Give one shape a period, one value a level, lowest level first, longest period first."},
	{"no-mass", "A freedom has no mass or a negative one, or the mass matrix is not positive definite.", "Give every level a mass; condense freedoms without one before the matrices are given."},
	{"no-theta", "A drift block has no vertical loads, so that stability is not evaluated.", "Give the field P: the vertical load at and above each level, lowest first."},
	{"not-finite", "A number given is too large to compute with, or no number.", "Correct the number, or see whether its unit is right."},
	{"profile-at", "A profile does not say whether its values belong to levels, to storeys or to the feet of storeys.", "Add the field at: levels, storeys or feet."},
	{"ratio-damping", "The two series of a ratio hold for different damping.", "Compare series of one damping, or say in the caption why not."},
	{"ratio-range", "The two series of a ratio have no common range within the ends of the figure.", "Choose series that overlap, or widen the axis; a series is never read beyond its ends."},
	{"ratio-zero", "The lower series of a ratio is zero somewhere.", "Leave that stretch out with from and to."},
	{"record-size", "A record has more samples than a calculation takes.", "Use a stretch of it with from and to, or a longer step."},
	{"reduced-twice", "A spectrum that holds a behaviour factor q already would be divided by R/I_e again.", "Leave R and I_e out, or use the elastic spectrum."},
	{"residual", "The missing mass cannot be added: its acceleration is not known, or the modes have no stiffness matrix.", "State zpa, give the structure by its matrices, or take modes until they hold the mass."},
	{"residual-amplified", "Modes left out that the residual takes as rigid are amplified by the spectrum.", "Use as many modes as the message says, or state a zpa that holds for those left out."},
	{"second-order-analysis", "The stability coefficient lies between 0.20 and 0.30, where EN 1998-1 asks for a second-order analysis.", "Stiffen the structure, or analyse it with second-order effects elsewhere and say so."},
	{"second-order-factor", "The stability coefficient exceeds 0.10: drifts are multiplied by 1/(1 - theta).", "Multiply member forces by the value second_order of the block too, or stiffen the structure."},
	{"short-below-long", "S_MS is less than S_M1, which the International Building Code does not let stand.", "Where that code governs, give S_MS as large as S_M1; the design category is found without that."},
	{"site-coefficient", "S_MS or S_M1 as given does not follow from S_S, S_1 and the site class by the tables of ASCE/SEI 7-16.", "See which of them is right; leave away what does not count, or state site_specific: study where the values come from one."},
	{"site-exception", "An exception to the site-specific study of ASCE/SEI 7-16 11.4.8 is claimed, and its condition binds the design.", "See that the condition named is met throughout the design."},
	{"site-specific", "ASCE/SEI 7-16 11.4.8 asks for a site-specific study of the ground motion, or cannot be evaluated, and nothing is said about it.", "State site_specific: study with the values of the study, or site_specific: exception; state the site class and S_1."},
	{"static", "The inputs of a static procedure, or its conditions of use, are not met.", "Give what the message asks for; where the procedure does not hold, use a combine block."},
	{"static-field", "A field of a static block belongs to another standard than that of its target.", "Leave the field out, or use a target of the standard it belongs to."},
	{"structure-form", "A structure is given in two ways, or a matrix in none or in several.", "Give storeys, or elevation, mass and stiffness; each matrix by one of diagonal, rows, triplets and file."},
	{"table-column", "A column of a table is given one number in place of a vector.", "Put single values into the field values."},
	{"table-input", "A table has no source or more than one, or a field that its source does not take.", "Give one of columns, values and file, and only the fields that go with it."},
	{"table-long", "A data file has more rows than a table shows.", "Show a selection of the file, and keep the whole as data."},
	{"table-sum", "A sum is asked of a column that is not there or that holds texts.", "Name a column of numbers, by its head or its number."},
	{"target-vertical", "A spectrum of vertical motion is asked for lateral response.", "Name the horizontal spectrum."},
	{"treat", "A step of the conditioning of a record does not fit the record, such as a corner at or above half the sampling rate or tapers longer than the record; as a warning, it fits but will not do what it is meant for.", "Change the parameter that is marked, or the steps before it."},
	{"treat-step", "An item of the field treat is not one complete treatment.", "Begin each step with a dash of its own and give what it needs: a length for a taper, a corner for a bandpass."},
	{"unstable", "The stability coefficient exceeds its limit: the structure is potentially unstable.", "Stiffen or lighten the structure; no factor on drifts or forces mends it."},
	{"vertical-q", "The behaviour factor of a vertical design spectrum is above 1.5.", "Use q up to 1.5, or justify the larger one by analysis (EN 1998-1 3.2.2.5)."},
}
