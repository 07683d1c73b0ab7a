package exhibit

import "quoin/calc/quantity"

// Figure is one figure with one or more panels; its data also goes to
// tables/ID.csv.
type Figure struct {
	ID      string  `json:"id"` // stem of its CSV file
	Caption string  `json:"caption"`
	Number  int     `json:"number,omitempty"`
	Panels  []Panel `json:"panels"`
	// Beside lays panels side by side (mode shapes, profiles, shared y axis)
	// instead of one under another (histories, shared x axis).
	Beside bool `json:"beside,omitempty"`
	// Alt says in words what is seen: for those who cannot see it.
	Alt string `json:"alt"`
}

// Panel is one pair of axes.
type Panel struct {
	Title  string     `json:"title,omitempty"`
	X      Axis       `json:"x"`
	Y      Axis       `json:"y"`
	Series []FigSerie `json:"series"`
	Lines  []RefLine  `json:"lines"`
	Points []RefPoint `json:"points"`
	// Diagonals are grid lines across a panel with two log axes.
	Diagonals []Diagonal `json:"diagonals,omitempty"`
}

// Diagonal is the line through (X, Y), SI, along which y goes with x to the power
// Rise, 1 or -1.
type Diagonal struct {
	X     float64 `json:"x"`
	Y     float64 `json:"y"`
	Rise  int     `json:"rise"`
	Label string  `json:"label"` // with its unit
}

// Axis is one axis. Limits are SI; nil leaves them to the chart.
type Axis struct {
	Label string        `json:"label"` // "period T": the unit is added
	Unit  quantity.Unit `json:"unit,omitzero"`
	Log   bool          `json:"log,omitempty"`
	Min   *float64      `json:"min,omitempty"`
	Max   *float64      `json:"max,omitempty"`
	// Symmetric about zero (histories, mode shapes).
	Symmetric bool `json:"symmetric,omitempty"`
	// Names put words at values instead of numbers (level names at elevations); SI values.
	Names []TickName `json:"names,omitempty"`
}

// TickName is a word at a place of an axis.
type TickName struct {
	At   float64 `json:"at"`
	Name string  `json:"name"`
}

// Role tells how a series is drawn.
type Role string

const (
	Data      Role = "data"      // ink
	Governing Role = "governing" // thick, in the tie colour: the target
	Secondary Role = "secondary" // thin, soft: one of many
	Limit     Role = "limit"     // the bad colour, dashed
	Bar       Role = "bar"       // a wide bar at one value of y
)

// FigSerie is one curve. X and Y are SI.
type FigSerie struct {
	ID    string    `json:"id"`    // of the results' series, where it is one
	Label string    `json:"label"` // written at the right end of the curve
	X     []float64 `json:"x"`
	Y     []float64 `json:"y"`
	Role  Role      `json:"role"`
	Dash  int       `json:"dash,omitempty"` // 0 solid, 1 long dash, 2 dots, 3 dash-dot; 4 and 5 solid and dashed with marks
	Step  bool      `json:"step,omitempty"` // storey shear: constant over the storey
	Dots  bool      `json:"dots,omitempty"` // marks at the points
}

// RefLine is a dotted line across the panel, named with its value.
type RefLine struct {
	Vertical bool    `json:"vertical"`
	At       float64 `json:"at"` // SI
	Label    string  `json:"label"`
}

// RefPoint is a ringed point, named.
type RefPoint struct {
	X     float64 `json:"x"`
	Y     float64 `json:"y"`
	Label string  `json:"label"`
}
