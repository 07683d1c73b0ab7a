package exhibit

// Prose is one node of the document's text. It never holds markup: every Text is
// plain text.
type Prose struct {
	Kind     ProseKind `json:"kind"`
	Text     string    `json:"text,omitempty"`  // Text, Code, CodeBlock, Math and MathBlock (TeX)
	Level    int       `json:"level,omitempty"` // Heading: 1-6; OrderedList: first number; FootnoteRef: index
	Anchor   string    `json:"anchor,omitempty"`
	Target   string    `json:"target,omitempty"` // Link: destination; Image: input path; Cite: reference key
	Title    string    `json:"title,omitempty"`  // Link, Image
	Align    string    `json:"align,omitempty"`  // TableCell: left, right, center
	Children []Prose   `json:"children,omitempty"`
	// Live is a computed value: numbers, or a text made of one.
	Live *Live `json:"live,omitempty"`
	// Data is the bytes of an image, MediaType says what they are.
	Data      []byte `json:"data,omitempty"`
	MediaType string `json:"media_type,omitempty"`
	Place     Place  `json:"place,omitzero"`
}

// Live is a value in prose. Numbers are set unless string functions made a text of it.
type Live struct {
	ID      string   `json:"id"`
	Numbers []Number `json:"numbers,omitempty"` // several for a vector
	Text    string   `json:"text,omitempty"`
}

// ProseKind names a node of prose.
type ProseKind string

const (
	Paragraph      ProseKind = "paragraph"
	Heading        ProseKind = "heading"
	Text           ProseKind = "text"
	Emphasis       ProseKind = "emphasis"
	Strong         ProseKind = "strong"
	Code           ProseKind = "code"
	CodeBlock      ProseKind = "code_block"
	Quote          ProseKind = "quote"
	BulletList     ProseKind = "bullet_list"
	OrderedList    ProseKind = "ordered_list"
	ListItem       ProseKind = "list_item"
	ProseTable     ProseKind = "table"
	TableRow       ProseKind = "table_row" // the first row is the head
	TableCell      ProseKind = "table_cell"
	DefinitionList ProseKind = "definition_list"
	Term           ProseKind = "term"
	Description    ProseKind = "description"
	Link           ProseKind = "link"
	Image          ProseKind = "image"
	Break          ProseKind = "break" // hard line break
	Rule           ProseKind = "rule"
	Math           ProseKind = "math"       // $...$
	MathBlock      ProseKind = "math_block" // $$...$$
	FootnoteRef    ProseKind = "footnote_ref"
	Cite           ProseKind = "cite"  // [key]; Text as shown
	Value          ProseKind = "value" // {{ .V }}
	// Refer is a reference to an equation, a figure or a table: Text as shown, Target
	// "eq V", "fig elf", "table elf-forces", or "" where it leads nowhere.
	Refer ProseKind = "refer"
)
