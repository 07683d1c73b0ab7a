package block

import (
	"errors"
	"strconv"
	"strings"

	"quoin/calc/diag"
	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/quantity"
	"quoin/calc/structure"
)

var structureKind = Kind{
	Name:    "structure",
	Doc:     "a planar building, lowest level first: by storeys that deform in shear between rigid floors, or by its mass and stiffness matrices",
	Makes:   "structure",
	New:     func() Body { return &building{} },
	Product: func() any { return &structure.Model{} },
	Exports: []Export{
		{"weight", "seismic weight, the sum over the levels", "N"},
		{"mass", "seismic mass, the sum over the levels", "kg"},
		{"h_n", "elevation of the highest level above the base", "m"},
		{"w", "seismic weight at each level", "N"},
		{"m", "seismic mass at each level", "kg"},
		{"h", "elevation of each level above the base", "m"},
		{"h_s", "height of each storey", "m"},
		{"k_s", "lateral stiffness of each storey; not for a model by matrices", "N/m"},
		{"damping", "damping ratio, where given", ""},
	},
}

type building struct {
	common
	Storeys   []storeyFields  `name:"storeys" doc:"the storeys, lowest first; or a CSV file with these columns"`
	Elevation field.Field     `name:"elevation" is:"length" many:"yes" doc:"of a model by matrices: elevation of each level above the base, lowest first"`
	Levels    field.Field     `name:"levels" is:"text" many:"yes" hint:"levels are names alone; storeys with height, weight and stiffness are the field storeys" doc:"of a model by matrices: names of the levels; L1, L2, ... if not given"`
	Mass      massFields      `name:"mass" doc:"of a model by matrices: mass at each level, or a mass matrix; one freedom a level"`
	Weight    weightFields    `name:"weight" doc:"of a model by matrices: seismic weight at each level, in place of its mass"`
	Stiffness stiffnessFields `name:"stiffness" doc:"of a model by matrices: the lateral stiffness matrix"`
	Damping   field.Field     `name:"damping" is:"number" must:"fraction" show:"%" doc:"damping ratio of the modes"`
}

type storeyFields struct {
	File      field.Field `name:"file" is:"file" short:"yes" doc:"a CSV file of storeys: head row with  level, height [m], weight [kN], stiffness [kN/m]"`
	Level     field.Field `name:"level" is:"text" doc:"name of the level on top of the storey"`
	Height    field.Field `name:"height" is:"length" must:"positive" doc:"height of the storey"`
	Weight    field.Field `name:"weight" is:"force" must:"positive" hint:"a weight is a force (kN, kip); for a mass (t, kg) use the field mass" doc:"seismic weight at the level"`
	Mass      field.Field `name:"mass" is:"mass" must:"positive" hint:"a mass is in t or kg; for a force (kN, kip) use the field weight" doc:"seismic mass at the level, in place of its weight"`
	Stiffness field.Field `name:"stiffness" is:"stiffness" must:"positive" doc:"lateral stiffness of the storey"`
}

// Check sees that the model is given in one way, and that every storey has its fields.
func (b *building) Check(c *Checks) {
	if b.byMatrices() {
		b.checkMatrices(c)
		return
	}
	if len(b.Storeys) == 0 {
		c.Diags.Errorf("missing-field", c.Place, "the structure block needs the field storeys, or elevation, mass and stiffness").WithHint("list the storeys, lowest first:  - {level: L1, height: 3.5 m, weight: 2000 kN, stiffness: 90 MN/m}")
	}
	for i := range b.Storeys {
		s := &b.Storeys[i]
		if s.File.Given {
			continue
		}
		for _, need := range []struct {
			name  string
			given bool
		}{{"level", s.Level.Given}, {"height", s.Height.Given}, {"weight or mass", s.Weight.Given || s.Mass.Given}, {"stiffness", s.Stiffness.Given}} {
			if !need.given {
				c.Fail(s.Level, "missing-field", "storey %d needs the field %s", i+1, need.name)
			}
		}
		if s.Weight.Given && s.Mass.Given {
			c.Fail(s.Mass, "weight-and-mass", "storey %d has both a weight and a mass", i+1).WithHint("give one; the other follows by g = 9.80665 m/s²")
		}
	}
}

// Run builds the model.
func (b *building) Run(r *Run) {
	model, read := b.fromStoreys(r)
	var given *matrixPair
	if b.byMatrices() {
		model, given = b.fromMatrices(r)
	}
	if model == nil {
		return
	}
	model.DampingGiven = b.Damping.Given
	r.Made = model
	for _, k := range []string{"linear", "fixed-base", "planar", "second-order"} {
		r.Caution(k)
	}
	b.results(r, model, given)
	b.doubts(r, model, read)
}

// doubts warns of an order of levels and of masses that are likely slips.
func (b *building) doubts(r *Run, m *structure.Model, read []storeyCells) {
	at := func(i int, of func(s *storeyFields) field.Field, in func(c storeyCells) diag.Range) field.Field {
		switch {
		case b.byMatrices() && b.Levels.Given && len(b.Levels.List) == len(m.Levels):
			return field.Field{At: b.Levels.List[i].At}
		case i < len(read) && read[i].level.Line > 0:
			return field.Field{At: in(read[i])}
		case !b.byMatrices():
			return of(&b.Storeys[i])
		}
		return field.Field{At: r.Place}
	}
	if structure.Falling(m.Levels) {
		r.WarnAt(at(0, func(s *storeyFields) field.Field { return s.Level }, func(c storeyCells) diag.Range { return c.level }), "storey-order", "the levels run from %s to %s, and the lowest comes first: they look listed from the roof down", m.Levels[0], m.Levels[len(m.Levels)-1])
	}
	for _, i := range structure.Light(m.Mass) {
		r.WarnAt(at(i, func(s *storeyFields) field.Field {
			if s.Mass.Given {
				return s.Mass
			}
			return s.Weight
		}, func(c storeyCells) diag.Range { return c.load }), "light-level", "the mass at level %s is below 2 %% of the usual one of the other levels: is its unit right?", m.Levels[i])
	}
}

// storeyCells is where a storey read from a file says its level, and its weight or
// mass; nowhere, for a storey of the document.
type storeyCells struct{ level, load diag.Range }

// fromStoreys is the shear building of the storeys, with where they were read; nil
// where they are at fault.
func (b *building) fromStoreys(r *Run) (*structure.Model, []storeyCells) {
	if len(b.Storeys) == 0 {
		return nil, nil
	}
	var read []storeyCells
	var storeys []structure.Storey
	var file field.Field
	for i := range b.Storeys {
		s := &b.Storeys[i]
		if s.File.Given {
			file = s.File
			r.Used("storeys", "storeys", plain(s.File.Text()), "")
			rows, cells := r.storeysFrom(s.File)
			if rows == nil {
				return nil, nil
			}
			storeys, read = append(storeys, rows...), append(read, cells...)
			continue
		}
		read = append(read, storeyCells{})
		storeys = append(storeys, structure.Storey{Level: s.Level.Text(), Height: s.Height.SI(), Weight: s.Weight.SI(), Mass: s.Mass.SI(), Stiffness: s.Stiffness.SI()})
	}
	model, err := structure.Shear(storeys, b.Damping.SI())
	if err != nil {
		at := b.Storeys[0].Level
		if file.Given {
			at = file
		}
		for _, e := range unjoin(err) {
			r.Fail(at, "structure", "%s", e)
		}
		return nil, nil
	}
	return model, read
}

// unjoin splits joined errors.
func unjoin(err error) []error {
	var j interface{ Unwrap() []error }
	if errors.As(err, &j) {
		return j.Unwrap()
	}
	return []error{err}
}

// storeysFrom reads storeys from a CSV file.
func (r *Run) storeysFrom(f field.Field) ([]structure.Storey, []storeyCells) {
	s := r.readSheet(f, field.Field{}, field.Field{})
	if s == nil {
		return nil, nil
	}
	level := s.find("level")
	for _, c := range s.columns {
		switch strings.ToLower(c.name) {
		case "level", "height", "weight", "mass", "stiffness":
		default:
			r.Diags.Errorf("unknown-column", c.at, "a table of storeys has no column %s", c.name).WithHint("its columns are level, height, weight or mass, stiffness")
			return nil, nil
		}
	}
	if level == nil {
		r.Fail(f, "missing-column", "%s has no column level", s.path).WithHint("%s", s.names())
		return nil, nil
	}
	out := make([]structure.Storey, len(level.cells))
	cells := make([]storeyCells, len(level.cells))
	for i, c := range level.cells {
		out[i].Level, cells[i].level = c.text, c.at
	}
	found := map[string]bool{}
	for _, col := range []struct {
		name string
		dim  quantity.Dim
		set  func(*structure.Storey, float64)
	}{
		{"height", quantity.Length, func(s *structure.Storey, x float64) { s.Height = x }},
		{"weight", quantity.Force, func(s *structure.Storey, x float64) { s.Weight = x }},
		{"mass", quantity.Mass, func(s *structure.Storey, x float64) { s.Mass = x }},
		{"stiffness", quantity.Stiffness, func(s *structure.Storey, x float64) { s.Stiffness = x }},
	} {
		c := s.find(col.name)
		if c == nil {
			continue
		}
		if c.unit != nil && !c.unit.Dim.Is(col.dim) && (c.unit.Dim.Is(quantity.Force) || c.unit.Dim.Is(quantity.Mass)) {
			r.Diags.Errorf("dimension", c.at, "the column %s must be %s, its unit %s is %s", c.name, col.dim.Name(), c.unit.Pretty(), c.unit.Dim.Name()).
				WithHint("a column weight holds forces (kN, kip), a column mass masses (t, kg): rename the column, or correct its unit")
			return nil, nil
		}
		x, _, ok := r.numbers(c, col.dim)
		if !ok {
			return nil, nil
		}
		found[col.name] = true
		for i, v := range x {
			if !(v > 0) {
				r.Diags.Errorf("bounds", c.cells[i].at, "the %s at level %s must be greater than zero", col.name, out[i].Level)
				return nil, nil
			}
			col.set(&out[i], v)
			if col.name == "weight" || col.name == "mass" {
				cells[i].load = c.cells[i].at
			}
		}
	}
	if !found["height"] || !found["stiffness"] || found["weight"] == found["mass"] {
		r.Fail(f, "missing-column", "%s needs the columns level, height, stiffness, and one of weight and mass", s.path).WithHint("%s", s.names())
		return nil, nil
	}
	return out, cells
}

func (b *building) results(r *Run, m *structure.Model, given *matrixPair) {
	u := unitsOf(r.System())
	storeys := len(m.Ks) > 0
	r.Number("weight", m.Weight, u.force)
	r.Number("mass", m.TotalMass, u.mass)
	r.Number("h_n", m.Hn, u.length)
	vector := func(name string, x []float64, unit quantity.Unit) { r.Export(name, quantity.List(x, unit, m.Levels)) }
	vector("w", m.W, u.force)
	vector("m", m.Mass, u.mass)
	vector("h", m.H, u.length)
	vector("h_s", m.Hs, u.length)
	if storeys {
		vector("k_s", m.Ks, u.stiffness)
	}
	if m.DampingGiven {
		r.Number("damping", m.Damping, percent)
		r.Caution("damping")
	}
	t := exhibit.Table{ID: r.Name + "-storeys", Caption: Lines(&b.common, "Storeys of "+r.Name+", highest on top"), Columns: []exhibit.Column{Words("level"), Col("elevation", u.length), Col("storey height", u.length),
		Col("seismic weight", u.force), Col("mass", u.mass)}}
	if storeys {
		t.Columns = append(t.Columns, Col("storey stiffness", u.stiffness))
	}
	for i := len(m.Levels) - 1; i >= 0; i-- {
		item := func(name string, x []float64, unit quantity.Unit) exhibit.Cell {
			return exhibit.Cell{Numbers: []exhibit.Number{{Value: x[i], Unit: unit, ID: r.ID(name) + "[" + strconv.Itoa(i+1) + "]"}}}
		}
		row := []exhibit.Cell{{Text: m.Levels[i]}, item("h", m.H, u.length), item("h_s", m.Hs, u.length), item("w", m.W, u.force), item("m", m.Mass, u.mass)}
		if storeys {
			row = append(row, item("k_s", m.Ks, u.stiffness))
		}
		t.Rows = append(t.Rows, row)
	}
	total := []exhibit.Cell{{Text: "total", Strong: true}, {}, {}, {Numbers: []exhibit.Number{r.Shown("weight", m.Weight, u.force)}, Strong: true}, {Numbers: []exhibit.Number{r.Shown("mass", m.TotalMass, u.mass)}, Strong: true}}
	t.Rows = append(t.Rows, append(total, make([]exhibit.Cell, len(t.Columns)-len(total))...))
	r.Inputs = append(r.Inputs, exhibit.Item{Table: &t})
	if storeys {
		r.Explain("A shear building: rigid floors, one lateral freedom a level in direction x, storey $i$ under level $i$ carrying the shear $k_i (u_i - u_{i-1})$. Mass is weight divided by $g = 9.80665\\;\\mathrm{m/s^2}$. The base is fixed.")
		r.shearSymbols()
		r.Equation(`K_{ii} = k_i + k_{i+1},\quad K_{i,i+1} = -k_{i+1},\quad M_{ii} = m_i`, "stiffness and mass matrices, levels counted from the lowest", chopra())
	} else {
		b.matrices(r, m, given)
	}
	b.drawing(r, m)
}

// drawing shows the model: levels over elevation, weights beside them, and the
// stiffness of storeys where they have one.
func (b *building) drawing(r *Run, m *structure.Model) {
	u := unitsOf(r.System())
	axis := levelAxis(m.Levels, m.H, u.length)
	fig := exhibit.Figure{ID: r.Name, Caption: Lines(&b.common, "Seismic weight at each level of "+r.Name), Beside: true,
		Alt:    "Profile over the height of the building: seismic weight by level.",
		Panels: []exhibit.Panel{{Title: "seismic weight", X: exhibit.Axis{Label: "w", Unit: u.force, Min: zero()}, Y: axis, Series: stems(m)}}}
	if len(m.Ks) > 0 {
		stiff := storeySteps(m.H, m.Ks)
		fig.Caption += " and stiffness of each storey"
		fig.Alt = "Two profiles over the height of the building: seismic weight by level and lateral stiffness by storey."
		fig.Panels = append(fig.Panels, exhibit.Panel{Title: "storey stiffness", X: exhibit.Axis{Label: "k", Unit: u.stiffness, Min: zero()}, Y: axis, Series: []exhibit.FigSerie{{Label: "", X: stiff.x, Y: stiff.y, Role: exhibit.Data}}})
	}
	r.Figure(fig)
}

// levelAxis is the axis of a profile: level names at their elevations h, m, over
// the base.
func levelAxis(levels []string, h []float64, unit quantity.Unit) exhibit.Axis {
	names := []exhibit.TickName{{At: 0, Name: "base"}}
	for i, l := range levels {
		names = append(names, exhibit.TickName{At: h[i], Name: l})
	}
	return exhibit.Axis{Label: "level", Unit: unit, Min: zero(), Names: names}
}

// stems draws the weight of each level by itself: a line from the axis to a dot.
func stems(m *structure.Model) []exhibit.FigSerie {
	out := make([]exhibit.FigSerie, len(m.W))
	for i, w := range m.W {
		out[i] = exhibit.FigSerie{X: []float64{0, w}, Y: []float64{m.H[i], m.H[i]}, Role: exhibit.Data, Dots: true}
	}
	return out
}

// steps are the corners of a profile that is constant over each storey.
type steps struct{ x, y []float64 }

// storeySteps makes a stepped profile from the base up.
func storeySteps(h, v []float64) steps {
	var s steps
	foot := 0.0
	for i := range v {
		s.x = append(s.x, v[i], v[i])
		s.y = append(s.y, foot, h[i])
		foot = h[i]
	}
	return s
}
