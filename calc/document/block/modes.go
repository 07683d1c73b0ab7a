package block

import (
	"math"
	"strconv"

	"quoin/calc/cite"
	"quoin/calc/document/field"
	"quoin/calc/exhibit"
	"quoin/calc/modal"
	"quoin/calc/quantity"
	"quoin/calc/structure"
)

var modesKind = Kind{
	Name:    "modes",
	Doc:     "periods and mode shapes of a structure",
	Makes:   "modes",
	New:     func() Body { return &modes{} },
	Product: func() any { return &modal.Modes{} },
	Exports: []Export{
		{"T", "periods, longest first", "s"},
		{"omega", "circular frequencies", "1/s"},
		{"gamma", "participation factors, belonging to phi", ""},
		{"mass_ratio", "effective mass of each mode as a fraction of the total mass", ""},
		{"mass_sum", "running sum of the mass ratios", ""},
		{"phi", "mode shapes: one row a mode, lowest level first, largest component +1", ""},
	},
}

func chopra() cite.Ref { return cite.To("Chopra", "") }

type modes struct {
	common
	Structure field.Field `name:"structure" is:"block" of:"structure" doc:"the name of a structure block; or give modes from elsewhere, by the fields below"`
	Count     field.Field `name:"count" is:"number" must:"whole" doc:"number of modes; all, if not given"`
	Table     field.Field `name:"table" is:"file" doc:"modes from elsewhere: a CSV file with a row a mode, longest period first: a column T [s], then a column a level, lowest first"`
	Periods   field.Field `name:"periods" is:"time" many:"yes" must:"positive" doc:"modes from elsewhere: their periods, longest first, in place of the table"`
	Shapes    []rowFields `name:"shapes" doc:"modes from elsewhere: one row a mode, lowest level first, of any scale"`
	Elevation field.Field `name:"elevation" is:"length" many:"yes" doc:"modes from elsewhere: elevation of each level above the base, lowest first"`
	Levels    field.Field `name:"levels" is:"text" many:"yes" doc:"modes from elsewhere: names of the levels; those of the table, else L1, L2, ... if not given"`
	Mass      field.Field `name:"mass" is:"mass" many:"yes" must:"positive" hint:"a mass is in t or kg; for forces (kN, kip) use the field weight" doc:"modes from elsewhere: mass at each level"`
	Weight    field.Field `name:"weight" is:"force" many:"yes" must:"positive" hint:"a weight is a force (kN, kip); for masses (t, kg) use the field mass" doc:"modes from elsewhere: weight at each level, in place of its mass"`
}

// elsewhere tells whether any field of modes from elsewhere is given.
func (b *modes) elsewhere() bool {
	return b.Table.Given || b.Periods.Given || len(b.Shapes) > 0 || b.Elevation.Given || b.Levels.Given || b.Mass.Given || b.Weight.Given
}

// Run solves the eigenproblem, or takes the modes given.
func (b *modes) Run(r *Run) {
	var s *modal.Modes
	if b.elsewhere() {
		s = b.imported(r)
	} else {
		s = b.solved(r)
	}
	if s != nil {
		b.results(r, s)
	}
}

// of names what the modes are those of.
func (b *modes) of(r *Run) string {
	if b.Structure.Given {
		return b.Structure.Text()
	}
	return r.Name + ", imported"
}

// solved are the modes of a structure; nil where there is a fault.
func (b *modes) solved(r *Run) *modal.Modes {
	m := r.Product(b.Structure.Text()).(*structure.Model)
	count := int(b.Count.SI())
	if count > m.Freedoms() {
		r.Fail(b.Count, "bounds", "count is %d, %s has %d modes", count, b.Structure.Text(), m.Freedoms())
		return nil
	}
	if count == 0 {
		r.Echo.Rows = append(r.Echo.Rows, exhibit.EchoRow{Field: "count", Label: "count", Value: plain(strconv.Itoa(m.Freedoms())), Default: true})
	}
	s, err := modal.Solve(m, count)
	if err != nil {
		r.Fail(b.Structure, "modes", "%s", err)
		return nil
	}
	return s
}

func (b *modes) results(r *Run, s *modal.Modes) {
	m := s.Model
	r.Made = s
	r.Export("T", quantity.List(s.T, seconds, nil))
	r.Export("omega", quantity.List(s.Omega, perTime, nil))
	r.Export("gamma", quantity.List(s.Gamma, pure, nil))
	r.Export("mass_ratio", quantity.List(s.MassRatio, pure, nil))
	r.Export("mass_sum", quantity.List(s.MassSum, pure, nil))
	phi := quantity.Value{Shape: quantity.Rows, Width: m.Freedoms(), Labels: m.Levels}
	for _, row := range s.Phi {
		phi.SI = append(phi.SI, row...)
	}
	r.Export("phi", phi)

	if s.Imported {
		r.Caution("imported-modes")
		r.Explain("Periods and mode shapes were imported from " + b.source() + " and not computed here. Participation factors and mass ratios follow from them and the masses stated, lumped at the levels.")
	} else {
		r.Explain("Undamped free vibration.")
	}
	r.Explain("Shapes are scaled so that the component of largest magnitude is +1; participation factors belong to that scale. Mass ratios are fractions of the total mass of the model.")
	if s.Imported {
		r.importedSymbols()
	} else {
		r.modeSymbols()
		r.Equation(`K\phi_n = \omega_n^2 M\phi_n,\qquad T_n = 2\pi/\omega_n`, "natural frequencies and shapes", chopra())
	}
	r.Equation(`\Gamma_n = \frac{L_n}{M_n},\quad L_n = \phi_n^\mathrm{T} M r,\quad M_n = \phi_n^\mathrm{T} M \phi_n,\quad \frac{M_n^*}{\sum m} = \frac{L_n^2}{M_n \sum m}`, "participation factor and effective mass ratio; r is the displacement of the levels for a unit displacement of the ground", chopra())

	t := exhibit.Table{ID: r.Name + "-modes", Caption: Lines(&b.common, "Modes of "+b.of(r)), Columns: []exhibit.Column{Words("mode"), Col("period T", seconds), Col("frequency", hertz), Col("omega", perTime),
		Col("participation factor", pure), Col("mass ratio", percent), Col("sum", percent)}}
	for i := range s.T {
		id := func(name string) string { return r.ID(name) + "[" + strconv.Itoa(i+1) + "]" }
		num := func(name string, x float64, u quantity.Unit) exhibit.Cell {
			return exhibit.Cell{Numbers: []exhibit.Number{{Value: x, Unit: u, ID: id(name)}}}
		}
		t.Rows = append(t.Rows, []exhibit.Cell{{Text: strconv.Itoa(i + 1)}, num("T", s.T[i], seconds), Cell(1/s.T[i], hertz), num("omega", s.Omega[i], perTime),
			num("gamma", s.Gamma[i], pure), num("mass_ratio", s.MassRatio[i], percent), num("mass_sum", s.MassSum[i], percent)})
	}
	r.Table(t)
	shapes := exhibit.Table{ID: r.Name + "-shapes", Caption: "Mode shapes, highest level on top", Columns: []exhibit.Column{Words("level"), Col("elevation", unitsOf(r.System()).length)}}
	if s.Count() > widest {
		shapes.Caption = "Shapes of the first " + strconv.Itoa(widest) + " modes, highest level on top; all are in results.json"
	}
	for i := range min(s.Count(), widest) {
		shapes.Columns = append(shapes.Columns, Col("mode "+strconv.Itoa(i+1), pure))
	}
	for l := len(m.Levels) - 1; l >= 0; l-- {
		row := []exhibit.Cell{{Text: m.Levels[l]}, Cell(m.H[l], unitsOf(r.System()).length)}
		for i := range min(s.Count(), widest) {
			row = append(row, Cell(s.Phi[i][l], pure))
		}
		shapes.Rows = append(shapes.Rows, row)
	}
	r.Table(shapes)
	b.figure(r, s)
	if s.Imported {
		if s.Orthogonality <= modal.ImportedLimit { // else a doubt, below
			r.Crosscheck("orthogonality of the imported shapes with respect to mass", s.Orthogonality, modal.ImportedLimit)
		}
	} else {
		r.Crosscheck("residual of the eigenproblem", s.Residual, 1e-9)
		r.Crosscheck("orthogonality of the shapes with respect to mass", s.Orthogonality, 1e-9)
		r.Crosscheck("the first period found again by inverse iteration differs by", relative(s.RayleighT1, s.T[0]), 1e-6)
	}
	for _, w := range s.Doubts() {
		r.Warn(w.Code, "%s", w.Text)
	}
	if last := s.MassSum[len(s.MassSum)-1]; last < modal.MassNeeded {
		hold := "modes hold"
		if s.Count() == 1 {
			hold = "mode holds"
		}
		r.Warn("mass-sum", "the %d %s %s %% of the mass, less than %g %%", s.Count(), hold, quantity.Format(100*last, 3), 100*modal.MassNeeded)
		r.Caution("mass-sum")
	}
}

// relative is how far a lies from b, in parts of b.
func relative(a, b float64) float64 {
	if a == b {
		return 0
	}
	return math.Abs((a - b) / b)
}

// figure draws up to four shapes side by side, the base included.
func (b *modes) figure(r *Run, s *modal.Modes) {
	m := s.Model
	u := unitsOf(r.System())
	fig := exhibit.Figure{ID: r.Name, Caption: Lines(&b.common, "Mode shapes of "+b.of(r)), Beside: true, Alt: "Shapes of the first modes over the height of the structure, one panel each."}
	y := levelAxis(m.Levels, m.H, u.length)
	one := 1.0
	minus := -1.0
	for i := range min(len(s.T), 4) {
		shape, h := append([]float64{0}, s.Phi[i]...), append([]float64{0}, m.H...)
		fig.Panels = append(fig.Panels, exhibit.Panel{
			Title: "mode " + strconv.Itoa(i+1) + ": " + quantity.Format(s.T[i], 3) + " s, " + quantity.Format(100*s.MassRatio[i], 3) + " %",
			X:     exhibit.Axis{Label: "shape", Min: &minus, Max: &one, Symmetric: true}, Y: y,
			Series: []exhibit.FigSerie{{X: shape, Y: h, Role: exhibit.Data, Dots: true}},
		})
	}
	r.Figure(fig)
	b.masses(r, s)
}

// masses draws the running sum of the effective masses against what is needed.
func (b *modes) masses(r *Run, s *modal.Modes) {
	if s.Count() < 2 {
		return
	}
	x, y := []float64{0}, []float64{0}
	axis := exhibit.Axis{Label: "mode", Min: zero()}
	one := 1.0
	p := exhibit.Panel{Y: exhibit.Axis{Label: "effective mass of the modes up to this one", Unit: percent, Min: zero(), Max: &one}}
	for i, sum := range s.MassSum {
		x, y = append(x, float64(i+1)), append(y, min(sum, 1))
		axis.Names = append(axis.Names, exhibit.TickName{At: float64(i + 1), Name: strconv.Itoa(i + 1)})
		if sum >= modal.MassNeeded && (i == 0 || s.MassSum[i-1] < modal.MassNeeded) {
			p.Points = []exhibit.RefPoint{{X: float64(i + 1), Y: min(sum, 1), Label: quantity.Format(100*sum, 3) + " % up to mode " + strconv.Itoa(i+1) + ", " + quantity.Format(s.T[i], 3) + " s"}}
		}
	}
	p.X = axis
	needed := short(100 * modal.MassNeeded)
	p.Series = []exhibit.FigSerie{{X: x, Y: y, Role: exhibit.Data, Dots: s.Count() <= mostDots}}
	p.Lines = []exhibit.RefLine{{At: modal.MassNeeded, Label: needed + " %"}}
	r.Figure(exhibit.Figure{ID: r.Name + "-mass", Caption: "Cumulative effective mass of the modes of " + b.of(r) + ", with " + needed + " % marked", Panels: []exhibit.Panel{p},
		Alt: "Running sum of the effective masses over the modes, of the total mass: " + quantity.Format(100*s.MassSum[s.Count()-1], 3) + " % with all " + strconv.Itoa(s.Count()) + "."})
}
