package main

// What the reference says that stands in no list of the code.

const (
	refTitle = "The language of a package"
	refHead  = "Every block kind with its fields and values, and the rest of the language. This page is made from the program (`quoin blocks`), and a test keeps it current. " +
		"Messages are explained in [diagnostics.md](diagnostics.md)."
	refKinds  = "block kinds, opened by ```calc KIND NAME"
	refOthers = "and the rest of the language"
	refMore   = "quoin blocks NAME shows one in full"

	refFields    = "fields"
	refValues    = "values, used as NAME.value"
	refFunctions = "functions"
	refLines     = "lines"
	refOperators = "operators, the loosest first"
	refBinding   = "-2^2 is -4; a unit stands behind its number and binds more tightly than all operators"
	refSpectrum  = "which spectrum of the standard"

	refEvery       = "fields that every block but formula takes"
	refFront       = "the head of the document, between two lines ---"
	refFormula     = "formula lines and checks, each typeset with its numbers"
	refProse       = "values in the text, each a pipeline between double braces"
	refOffice      = "a folder with an office's own cover, head, palette and wording, named in the front matter"
	refRefers      = "references"
	refOfficeFiles = "files of the folder, each of which may be missing"
	refPalette     = "colours as #rrggbb; ink, soft, tie and bad must stand out from paper by 4.5 to 1 (WCAG 2.2 AA); for the screen, charts included: paper stays black on white"
	refWording     = "words of up to 40 characters, no two alike, and cautions_added, a list of sentences printed after the standing cautions; those of the program cannot be changed"
	refParts       = "parts of the cover"
	refPartsIntro  = "drawn by the program; each stands by itself in cover.html, in no element and no branch; what is not placed follows in this order"
	refStyles      = "markup and styles"
	refUnits       = "the units of the language and what one of each is; a weight is a force, a mass is a mass"
)

var (
	refers = []row{
		{Name: "[Eq. V]", Doc: "the number of the equation of a value, linked: Eq. (12); [Eq. elf.C_s] of a block's"},
		{Name: "[Fig. elf]", Doc: "of a figure, by the name of its file in tables/, or of its block where that has but one"},
		{Name: "[Table elf-forces]", Doc: "of a table, likewise"},
	}
	headsFields = []string{"field", "takes", "meaning"}
	headsValues = []string{"value", "is", "meaning"}
	headsForms  = []string{"form", "meaning"}
	headsOwn    = []string{"name", "of the program", "is"}
	headsUnits  = []string{"unit", "is"}

	officeFiles = []row{
		{Name: "cover.html", Doc: "the top of the cover"},
		{Name: "head.html", Doc: "the head of every sheet; below it stands a line of revision, status, open state and sheet number, and the mark of invented data"},
		{Name: "palette.yaml", Doc: "colours"},
		{Name: "wording.yaml", Doc: "standard wording, and cautions that are added"},
		{Name: "office.yaml", Doc: "name of the office; height of its head"},
		{Name: "logo.svg", Doc: "pictures of any name: SVG of shapes and text alone, PNG, JPEG, GIF, WebP; up to 512 KiB each"},
		{Name: "README.md", Doc: "is not read; no other file may lie there"},
	}
	formulaLines = []row{
		{Name: "V = C_s * W", Doc: "sets V; each name is set once, and may be used above"},
		{Name: "V = C_s * W as kip", Doc: "the same, shown in kip"},
		{Name: "V = C_s * W   # [ASCE/SEI 7-22 Eq. 12.8-1] base shear", Doc: "the same, with its source and a description that the registers print"},
		{Name: "check a <= b   # description", Doc: "a check; also <, >= and >; of vectors, one row an item"},
		{Name: "check a == b within 2 %", Doc: "a check of equality; the tolerance is of the right side, or absolute if it has a unit"},
		{Name: "v = [300 kip, 280 kip]", Doc: "a vector, lowest level first; arithmetic goes item by item"},
		{Name: "x = v[1]", Doc: "an item; they count from 1"},
		{Name: "# a remark", Doc: "is printed as text"},
	}
	formulaOperators = []row{
		{Name: "within", Doc: "the tolerance of a check of equality"},
		{Name: "or, and, not", Doc: "join comparisons in the condition of an if, nowhere else"},
		{Name: "<= < >= > ==", Doc: "comparisons, in checks and in the condition of an if; they make no chains"},
		{Name: "+ -", Doc: "of quantities of one kind"},
		{Name: "* /", Doc: "of any quantities"},
		{Name: "-x", Doc: "the opposite"},
		{Name: "^", Doc: "a power, from right to left; of a quantity with a unit by one pure number"},
	}
)

const (
	diagTitle = "Messages"
	diagHead  = "Every message of the program ends with its code in parentheses; with `--json` it is the field `code`. Here each code has its cause, " +
		"what to do, and an example as the terminal shows it: the place, the line with the part at fault marked, a hint where there is one. An error stops " +
		"the build; a warning is printed with the block it is about, too. This page is made from the program, and a test keeps it current."
)
