package exhibit

// Setting is a field of a block as used: what it took from the document, from a
// file, or by default. One that another value of the document decides is none.
type Setting struct {
	ID    string `json:"id"` // NAME.field
	Value Cell   `json:"value"`
}

// Frozen is how the results of a package stand to those that were frozen before.
type Frozen struct {
	File     string  `json:"file"`     // that holds the frozen results, below the root
	Revision string  `json:"revision"` // of the frozen results; "" where they name none
	Current  bool    `json:"current"`  // they are of the revision that the package is at
	Moved    []Moved `json:"moved"`    // against the frozen results, in order of weight
	Files    []Moved `json:"files"`    // read by the document, whose bytes are others
	// Since is the revision that changes are marked against, and Marks what changed
	// since: against the frozen results where the package has gone on to another
	// revision, else against the revision before. "" and none: nothing is marked.
	Since string  `json:"since"`
	Marks []Moved `json:"marks"`
}

// Agrees tells whether nothing has moved against the frozen results.
func (f *Frozen) Agrees() bool { return len(f.Moved) == 0 }

// Moved is one thing that is not what it was.
type Moved struct {
	What  string `json:"what"`            // one of the words below
	ID    string `json:"id"`              // of a value, a check, NAME.field of an input
	Index string `json:"index,omitempty"` // of an item: "2", or "1,2" in rows
	Label string `json:"label,omitempty"` // of an item: its level
	Old   string `json:"old,omitempty"`   // as displayed, with its unit; "": it was not there
	New   string `json:"new,omitempty"`   // "": it is there no more
	// Was is the number that a value or an input was; nil for anything else.
	Was *Number `json:"was,omitempty"`
	// By is what it moved by, as a part of what it was: +0.05; nil where that says nothing.
	By *float64 `json:"by,omitempty"`
	// Flipped is set for a check that is met and was not, or the other way round.
	Flipped bool `json:"flipped,omitempty"`
}

// What can move.
const (
	MovedCheck      = "check"
	MovedInput      = "input"
	MovedValue      = "value"
	MovedSeries     = "series"
	MovedAssumption = "assumption"
	MovedFile       = "file"
	MovedBlock      = "block"
)
