package document

// sentence is one caution: a key that blocks trigger it by, what is printed on the
// cover in a few words, and what is printed in full.
type sentence struct{ key, short, text string }

// standing statements are printed in every package; nothing turns them off.
var standing = []sentence{
	{"responsibility", "A calculation aid: the licensed engineer in responsible charge answers for its use and results.", "This is a calculation aid. The licensed engineer in responsible charge answers for its use and for the adequacy of the design; no result relieves anyone of that."},
	{"law", "The adopted code with its amendments and the authority govern.", "The law, the adopted code with its local amendments, and the decisions of the authority having jurisdiction govern over anything printed here. The editions used are listed on the cover and in the references."},
	{"scope", "Only what is stated was calculated, for the inputs echoed and this revision; it is to be verified by independent means.", "Only what is stated was calculated. Anything not listed was not checked."},
	{"inputs", "", "Results hold only for the inputs echoed in this package and for this revision. A printed copy may be superseded: ask the holder of the record."},
	{"program", "", "The program and its version are named in the register of software. That its own tests pass does not prove it fit for this structure: verify results by independent means."},
	{"open", "", ""}, // what is open, made by assembly.openText
	{"not-for", "Never the only basis of construction; not for emergencies or placarding.", "Not for decisions in an emergency, for placarding occupancy, for nuclear or dam safety without a qualifying quality programme, nor as the only basis of construction."},
}

// triggered sentences are printed where a calculation gives cause, in this order.
var triggered = []sentence{
	{"demonstration", "invented data", "Invented data: this package contains data that were made up for demonstration. It must not be used for any project."},
	{"open-assumption", "open assumptions", "Assumptions are open. Until each is verified the results depending on them are not for construction."},
	{"open-comment", "open comments", "Comments on this calculation are not closed. What they are about is not for construction until each is answered and its answer accepted."},
	{"not-met", "checks not met", "Checks are NOT OK. What they compare does not satisfy the criterion stated with them; the design that rests on them is not for construction."},
	{"sourceless", "inputs without a source", "Inputs name no source. A result is no better than they are: each must be traced to a document and its revision before the result is relied on."},
	{"earlier-edition", "earlier edition of a standard", "A standard is used of which a later edition has been published. The calculation holds only where the edition named on the cover is the adopted one."},
	{"mixed-editions", "more than one standard", "Spectra of more than one standard or edition are used in one calculation. Factors, combinations and limits of one do not belong to the spectrum of another: confirm that nothing was carried over."},
	{"what-if", "what-if results", "Results of vary blocks are what-if results: they hold for values that the document does not have. No design value may be taken from them; bars and curves say nothing about what happens between the values taken, or when several change together."},
	{"linear", "linear elastic", "Linear elastic analysis. Cracking, yielding, uplift and pounding are not represented."},
	{"reduced", "response divided by a code factor", "The elastic response is divided by a code factor (R/I_e or the like). Inelastic demand, residual drift and collapse are not evaluated."},
	{"fixed-base", "fixed base", "The base is fixed. Flexibility of the foundation and interaction with the soil are not modelled; periods and drifts may differ."},
	{"planar", "planar model, no torsion", "A planar model with one freedom a level and rigid floors. Torsion, flexibility of the floors in their plane and local modes are not captured; neither inherent nor accidental torsion is included."},
	{"matrices", "matrices assembled elsewhere", "Mass and stiffness matrices assembled elsewhere are used as they stand: how they were modelled, condensed and supported was not checked here."},
	{"imported-modes", "modes imported", "Periods and mode shapes were imported and not computed here. Only their orthogonality with respect to the masses was checked; no stiffness is known."},
	{"second-order", "no second-order effects in the modes", "Second-order (P-delta) effects are not included in the modal response."},
	{"damping", "viscous damping assumed", "Viscous damping stands for all dissipation. The ratio is an assumption of the author, and results scale with it."},
	{"combined", "combined values without sign", "Modal combinations are estimates of maxima. Combined values carry no sign and do not act at one time; never derive one combined quantity from another (drifts are combined mode by mode)."},
	{"drift", "drifts of the centre only", "Drifts are those of the centre of each floor in a planar model: torsion adds to the drift of an edge, and residual drift is not evaluated. Amplification by C_d or q_d is a code estimate of inelastic drift."},
	{"no-theta", "stability of storeys not evaluated", "Second-order (P-delta) effects are not evaluated for drifts whose vertical loads are not given."},
	{"drift-scaling", "drifts not scaled", "Drifts of a modal combination are not scaled to the static base shear. Where the static coefficient C_s is governed by 0.5 S_1/(R/I_e) the standard requires it (field scale_drifts)."},
	{"close-modes", "close modes combined by squares", "Square-root-of-sum-of-squares combination is used although modes lie within 10 % of each other in frequency: the result may be unsafe. Use the complete quadratic combination."},
	{"mass-sum", "mass below 90 %", "The modes used hold less than 90 % of the mass: storey forces, mainly low in the structure, are underestimated."},
	{"residual", "residual mass taken as rigid", "Mass that the modes used do not move is taken as rigid: it follows the ground at the zero-period acceleration. Modes left out that are amplified above it are underestimated."},
	{"static", "conditions of the static procedure", "Static lateral forces: that the procedure is permitted and the structure regular enough for it is the author's statement. Redundancy, overstrength, vertical motion and the combination of directions are not included."},
	{"accidental-torsion", "no accidental torsion", "Accidental torsion is not included in the static lateral forces, nor is torsion from the eccentricity of mass: forces of frames and walls away from the centre, and drifts at the edges, are larger."},
	{"unprocessed", "records not processed here", "Records are used as given, with the scale stated: no baseline correction and no filter was applied here. Velocity, displacement and long periods depend on the processing they had before."},
	{"processed", "records filtered here", "Records were conditioned here (baseline, taper, filter or resampling, as echoed with each). A filter removes motion beyond its corners for good, that of long periods and any permanent displacement among it; nothing outside the usable band may be read from such a record, and the choices made affect velocity, displacement and long periods."},
	{"usable-period", "beyond the usable period", "A period beyond the usable range of a record is used: ordinates of that record are unreliable there."},
	{"coarse-step", "coarse sampling", "The sampling of a record is coarse for the shortest periods (period below ten steps): high-frequency response is not resolved."},
	{"short-record", "short record", "A record is short for the longest periods: their response may not have built up."},
	{"scaled", "large scale factor", "A record is scaled by a factor outside 0.25 to 4: its character is no longer that of the recorded motion."},
	{"few-motions", "few motions", "Response to single records is shown. A few motions do not give a statistical basis; codes ask for a suite of them."},
	{"two-period", "two-period spectrum", "The two-period design spectrum of ASCE/SEI 7-22 is permitted where the multi-period one is not available, within the limits of its chapter 11; confirm that it may be used at this site and for this procedure."},
	{"site-specific", "site-specific study open", "ASCE/SEI 7-16 11.4.8 asks for a site-specific ground motion study for a spectrum used here, or could not be evaluated, and neither a study nor an exception is stated. The spectrum must not be used for design until that is settled."},
	{"site-exception", "exception to the site-specific study", "An exception to the site-specific study of ASCE/SEI 7-16 11.4.8 is claimed. It holds only while its conditions do, and they bind the whole design: confirm them, and what the supplements of the standard say, with the authority."},
	{"table-target", "spectrum from a table", "A design spectrum was read from a table: it is interpolated linearly between its points and never used beyond them. Its source and damping are the author's statement."},
}
