// Package exhibit is what a calculation package shows, as plain data that
// round-trips through JSON: prose, echoes, equations, tables, figures, checks,
// cautions, and the registry of values behind them. It knows nothing of HTML and
// nothing of earthquakes.
package exhibit

import (
	"strconv"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/diag"
	"quoin/calc/expr"
	"quoin/calc/quantity"
)

// Package is one calculation, computed.
type Package struct {
	Meta       Meta            `json:"meta"`
	System     quantity.System `json:"system"`
	Provenance Provenance      `json:"provenance"`
	Chapters   []Chapter       `json:"chapters"`

	Values []Entry `json:"values"` // the registry, sorted by id
	Series []Curve `json:"series"` // sorted by id
	Checks []Check `json:"checks"` // in document order

	Assumptions []Assumption `json:"assumptions"`
	Comments    []Comment    `json:"comments,omitempty"` // with their responses
	Checking    []Checking   `json:"checking,omitempty"` // records of who checked
	Notation    []Symbol     `json:"notation"`           // Latin letters, then Greek
	References  []Reference  `json:"references"`         // in order of key
	Inputs      []Input      `json:"inputs"`             // files read, sorted by path, the main file first
	Criteria    []Criterion  `json:"criteria"`           // by group
	Given       []Given      `json:"given"`              // what is taken from outside, in document order
	Motions     []Motion     `json:"motions"`            // records, in document order
	Software    Software     `json:"software"`
	Settings    []Setting    `json:"settings"` // fields of blocks as used, in document order
	// Frozen is how the results stand to frozen ones; nil where there are none.
	Frozen    *Frozen    `json:"frozen,omitempty"`
	Cautions  []Caution  `json:"cautions"` // standing ones first, then the triggered
	Footnotes []Footnote `json:"footnotes"`
	Warnings  diag.List  `json:"warnings"`
	Office    *Office    `json:"office,omitempty"` // nil: the program's own look
}

// Meta is the front matter.
type Meta struct {
	Title        string     `json:"title"`
	Number       string     `json:"number"`
	Project      string     `json:"project"`
	Client       string     `json:"client"`
	Contract     string     `json:"contract,omitempty"`
	Discipline   string     `json:"discipline,omitempty"`
	Subject      string     `json:"subject"`
	Location     string     `json:"location"`
	Authority    string     `json:"authority"` // having jurisdiction
	System       string     `json:"system"`    // that resists lateral force, in words
	Basis        []string   `json:"basis"`     // governing documents with edition
	Prepared     Sign       `json:"prepared"`
	Checked      Sign       `json:"checked"`
	Approved     Sign       `json:"approved"`
	Independence string     `json:"independence,omitempty"` // of the check
	Supersedes   string     `json:"supersedes,omitempty"`
	SupersededBy string     `json:"superseded_by,omitempty"`
	Revision     []Revision `json:"revisions"` // oldest first; the last is current
	Status       string     `json:"status"`    // draft, for check, issued, superseded, void
	Paper        string     `json:"paper"`     // A4 or Letter
}

// Sign is a person's initials and a date as written in the front matter.
type Sign struct {
	Initials string `json:"initials"`
	Date     string `json:"date"`
}

// Revision is a row of the revision table.
type Revision struct {
	Rev      string `json:"rev"`
	Date     string `json:"date"`
	Note     string `json:"note"`
	Sheets   string `json:"sheets,omitempty"` // that it changes
	Prepared string `json:"prepared"`
	Checked  string `json:"checked"`
	Approved string `json:"approved,omitempty"`
}

// Provenance is where the package came from. Nothing in it comes from the clock.
type Provenance struct {
	Tool       string     `json:"tool"`        // "quoin 0.1.0"
	Source     string     `json:"source"`      // main file, relative to the root
	Commit     string     `json:"commit"`      // "" outside git
	CommitDate string     `json:"commit_date"` // ISO 8601 date, "" outside git
	Dirty      bool       `json:"dirty"`       // the sources differ from the commit
	Overrides  []Override `json:"overrides"`
	Build      Build      `json:"build"`
}

// Build is how the program itself was made, as far as a package says it: the
// version of the program stands for the rest.
type Build struct {
	Architecture string   `json:"architecture"` // "amd64"
	Modules      []string `json:"modules"`      // "name version", sorted
}

// Override is a value set from outside the document.
type Override struct {
	Name string `json:"name"`
	Text string `json:"text"` // the expression given
	Was  string `json:"was"`  // the source text it replaced
}

// Place is a line of a source file.
type Place struct {
	File string `json:"file"`
	Line int    `json:"line"`
}

// Chapter is what stands under one heading of the highest level used. A chapter
// without a title holds what comes before the first heading.
type Chapter struct {
	Title  []Prose `json:"title"`
	Anchor string  `json:"anchor"`
	Place  Place   `json:"place"`
	Pieces []Piece `json:"pieces"`
}

// Piece is a stretch of prose or a block; exactly one is set.
type Piece struct {
	Prose []Prose `json:"prose,omitempty"`
	Block *Block  `json:"block,omitempty"`
}

// Block is a calc block as shown.
type Block struct {
	Kind    string     `json:"kind"`
	Name    string     `json:"name"` // "" for an unnamed formula block
	Anchor  string     `json:"anchor"`
	Place   Place      `json:"place"`
	Caption string     `json:"caption"`
	Note    string     `json:"note"`
	Cites   []cite.Ref `json:"cites"`
	// Parts in order: "inputs", "method", "results"; only those shown. A formula
	// block has one part without a name.
	Parts    []Part   `json:"parts"`
	Warnings []string `json:"warnings"`        // travel with the numbers: footnotes of the block
	Rests    []string `json:"rests,omitempty"` // open assumptions that it rests on
}

// Part is one part of a block.
type Part struct {
	Name  string `json:"name"`
	Items []Item `json:"items"`
}

// Item is one exhibit; exactly one member is set.
type Item struct {
	Echo     *Echo     `json:"echo,omitempty"`
	Equation *Equation `json:"equation,omitempty"`
	Table    *Table    `json:"table,omitempty"`
	Figure   *Figure   `json:"figure,omitempty"`
	Checks   []Check   `json:"checks,omitempty"`
	Text     string    `json:"text,omitempty"`  // a plain paragraph
	Prose    []Prose   `json:"prose,omitempty"` // marked-up paragraphs
}

// Number is a displayed number. Value is SI; it is shown in Unit with Digits
// significant digits (0: quantity.Digits). ID, if set, is its id in the registry.
type Number struct {
	Value  float64       `json:"value"`
	Unit   quantity.Unit `json:"unit,omitzero"`
	Digits int           `json:"digits,omitempty"`
	ID     string        `json:"id,omitempty"`
}

// Text is the number alone, as displayed.
func (n Number) Text() string {
	d := n.Digits
	if d == 0 {
		d = quantity.Digits
	}
	return quantity.Format(n.Unit.From(n.Value), d)
}

// Cell is one cell of an echo or a table: a text, a symbol, or numbers.
type Cell struct {
	Text    string     `json:"text,omitempty"`
	Symbol  *expr.Node `json:"symbol,omitempty"`  // typeset
	Refer   string     `json:"refer,omitempty"`   // what Text leads to: "eq V", "fig elf", "table elf-forces", "value V"
	Numbers []Number   `json:"numbers,omitempty"` // one, or the items of a vector
	Strong  bool       `json:"strong,omitempty"`  // governing or total
	Mark    []int      `json:"mark,omitempty"`    // footnotes, counted from 1
}

// Echo is the inputs of a block as used: after conversion, with defaults.
type Echo struct {
	Rows []EchoRow `json:"rows"`
}

// EchoRow is one input.
type EchoRow struct {
	Field   string     `json:"field"`            // as in the document
	Label   string     `json:"label"`            // in words
	Symbol  *expr.Node `json:"symbol,omitempty"` // typeset in place of the label
	Value   Cell       `json:"value"`
	Written string     `json:"written,omitempty"` // the source text, where it differs from the value shown
	From    string     `json:"from,omitempty"`    // where a value comes from that the document does not state: "from the file"
	Default bool       `json:"default,omitempty"`
	// Overridden: set from outside the document.
	Overridden bool `json:"overridden,omitempty"`
}

// Equation is one typeset line: symbol = tree = substituted = result. A method
// equation has no result: only the tree, and possibly a symbol.
type Equation struct {
	ID          string          `json:"id,omitempty"` // registry id of the result
	Symbol      *expr.Node      `json:"symbol,omitempty"`
	Tree        *expr.Node      `json:"tree"`
	Result      *quantity.Value `json:"result,omitempty"` // Unit set: shown in it
	Digits      int             `json:"digits,omitempty"`
	Description string          `json:"description,omitempty"`
	Ref         *cite.Ref       `json:"ref,omitempty"`
	RefText     string          `json:"ref_text,omitempty"` // a source named in the document that is no listed reference
	Place       Place           `json:"place"`
	Number      int             `json:"number,omitempty"` // counted through the package
	Overridden  bool            `json:"overridden,omitempty"`
	Rests       []string        `json:"rests,omitempty"` // open assumptions that it rests on
	// TeX is set instead of Tree for equations of a method.
	TeX string `json:"tex,omitempty"`
}

// Of is the registry id of the value that the equation gives, in the block of that
// name; "" for an equation of a method.
func (e *Equation) Of(block string) string {
	switch {
	case e.ID != "":
		return e.ID
	case e.Result != nil && e.Symbol != nil && block != "" && strings.HasPrefix(e.Symbol.ID, block+"."):
		return e.Symbol.ID
	}
	return ""
}

// Table is a table; ID is the stem of its CSV file.
type Table struct {
	ID      string   `json:"id"`
	Caption string   `json:"caption"`
	Number  int      `json:"number,omitempty"`
	Columns []Column `json:"columns"`
	Rows    [][]Cell `json:"rows"`
	Notes   []string `json:"notes"` // footnotes, counted from 1
}

// Column is a column of a table. Numbers in it are shown in Unit.
type Column struct {
	Head   string        `json:"head"`             // "storey shear", for CSV and readers
	Symbol *expr.Node    `json:"symbol,omitempty"` // typeset head, if any, after the words
	Unit   quantity.Unit `json:"unit,omitzero"`
	Right  bool          `json:"right,omitempty"`
	Bare   bool          `json:"bare,omitempty"` // the symbol stands in place of the words
}

// Footnote is a footnote of the prose.
type Footnote struct {
	Index int     `json:"index"`
	Body  []Prose `json:"body"`
}

// Check is one row of a check: demand against limit.
type Check struct {
	ID          string     `json:"id"`   // its text, with [i] for the items of a vector check
	Name        string     `json:"name"` // the text of the check
	Item        string     `json:"item"` // the item's label (level name or index), or ""
	Demand      Number     `json:"demand"`
	Limit       Number     `json:"limit"`
	Tolerance   *Number    `json:"tolerance,omitempty"`
	Relation    string     `json:"relation"` // <= < >= > ==
	Ratio       *float64   `json:"ratio"`    // null: the limit is zero or negative
	OK          bool       `json:"ok"`
	Description string     `json:"description"`
	Ref         *cite.Ref  `json:"ref,omitempty"`
	RefText     string     `json:"ref_text,omitempty"`
	Place       Place      `json:"place"`
	Anchor      string     `json:"anchor"`          // of the block it stands in
	Tree        *expr.Node `json:"tree"`            // the comparison, evaluated
	Rests       []string   `json:"rests,omitempty"` // open assumptions that it rests on
}

// RatioText is the ratio as printed: two decimals, more where a ratio above 1
// would read as 1.00.
func (c Check) RatioText() string {
	if c.Ratio == nil {
		return "none"
	}
	for d := 2; d < 7; d++ {
		text := strconv.FormatFloat(*c.Ratio, 'f', d, 64)
		if v, _ := strconv.ParseFloat(text, 64); v > 1 || *c.Ratio <= 1 {
			return strings.Replace(text, "-", "\u2212", 1)
		}
	}
	return "just above 1"
}

// Entry is one value of the registry.
type Entry struct {
	ID      string         `json:"id"`
	Value   quantity.Value `json:"value"`
	Tree    *expr.Node     `json:"tree,omitempty"` // for formula lines
	Place   Place          `json:"place"`
	Anchor  string         `json:"anchor"`  // where it is shown
	Depends []string       `json:"depends"` // ids, sorted
	Doc     string         `json:"doc"`     // description or export doc
	// Overridden: set from outside the document. Moved: what is so that it rests on.
	Overridden bool     `json:"overridden,omitempty"`
	Moved      []string `json:"moved,omitempty"`
}

// Curve is a series of the results: y over x, SI.
type Curve struct {
	ID string         `json:"id"`
	X  quantity.Value `json:"x"`
	Y  quantity.Value `json:"y"`
}

// Assumption is a row of the register.
type Assumption struct {
	ID     string `json:"id"`
	Text   string `json:"text"`
	Basis  string `json:"basis"`
	Status string `json:"status"` // verified or open
	By     string `json:"by"`
	When   string `json:"when"`
	Place  Place  `json:"place"`
	Anchor string `json:"anchor"`
	// Dependents are the blocks and formula lines that rest on it.
	Dependents []Origin `json:"dependents,omitempty"`
}

// Symbol is a symbol of the package with all that it stands for.
type Symbol struct {
	Name     string    `json:"name"`          // as in formulas, without its block: T_a
	TeX      string    `json:"tex,omitempty"` // set in place of the name
	Meanings []Meaning `json:"meanings"`
}

// Meaning is one thing that a symbol stands for, and where.
type Meaning struct {
	Text   string        `json:"text"`
	Unit   quantity.Unit `json:"unit,omitzero"`
	Places []SymbolPlace `json:"places"`
}

// SymbolPlace is where a symbol is set.
type SymbolPlace struct {
	ID     string `json:"id,omitempty"`    // of the value in the registry
	Block  string `json:"block,omitempty"` // the block whose symbol it is
	Anchor string `json:"anchor"`
}

// Reference is a publication cited in the package.
type Reference struct {
	Key     string   `json:"key"`
	Text    string   `json:"text"`
	Clauses []string `json:"clauses"` // cited, in order of first use
	Memory  bool     `json:"memory"`  // from memory, confirm
	User    bool     `json:"user"`    // given by the document
}

// Input is a file that was read.
type Input struct {
	Path   string `json:"path"` // relative to the root, slashes
	SHA256 string `json:"sha256"`
	Bytes  int    `json:"bytes"`
	Role   string `json:"role"` // "document", "record", "table", "image", ...
}

// Caution is a sentence of the limitations section. Blocks names what triggered
// it; a standing one has none.
type Caution struct {
	Key    string   `json:"key"`
	Short  string   `json:"short"` // in a few words, for the cover
	Text   string   `json:"text"`
	Blocks []string `json:"blocks"` // anchors
}
