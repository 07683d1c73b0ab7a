package block

import (
	"fmt"
	"math"
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/quantity"
	"quoin/calc/structure"
)

// byMatrices tells whether any field of a model by matrices is given.
func (b *building) byMatrices() bool {
	return b.Elevation.Given || b.Levels.Given || b.hasWeight() || b.hasMass() || b.hasStiffness()
}

func (b *building) hasMass() bool      { return b.Mass.Unit.At.Line > 0 }
func (b *building) hasWeight() bool    { return b.Weight.Columns.At.Line > 0 }
func (b *building) hasStiffness() bool { return b.Stiffness.Unit.At.Line > 0 }

// checkMatrices sees that a model by matrices is whole and given once.
func (b *building) checkMatrices(c *Checks) {
	if len(b.Storeys) > 0 {
		c.Diags.Errorf("structure-form", c.Place, "the structure is given twice: by storeys and by matrices").WithHint("give storeys, or elevation, mass and stiffness")
		return
	}
	if b.Levels.Given && len(b.Levels.List) == 0 && !b.Elevation.Given && !b.hasMass() && !b.hasWeight() && !b.hasStiffness() {
		return // storeys under a wrong name, as said
	}
	if !b.Elevation.Given {
		c.Diags.Errorf("missing-field", c.Place, "a structure by matrices needs the field elevation").WithHint("the elevation of each level above the base, lowest first:  elevation: [4 m, 7.5 m]")
	}
	switch mass := b.hasMass(); {
	case mass && b.hasWeight():
		c.Fail(b.Weight.place(), "weight-and-mass", "the structure has both a weight and a mass").WithHint("give one; the other follows by g = 9.80665 m/s²")
	case !mass && !b.hasWeight():
		c.Diags.Errorf("missing-field", c.Place, "a structure by matrices needs the field mass, or weight").WithHint("mass: [200 t, 180 t]  or  mass: {unit: t, rows: [[200, 0], [0, 180]]}")
	case !mass:
		b.Weight.check(c)
	default:
		b.Mass.once(c, "mass", "diagonal, rows, triplets and file", b.Mass.File, b.Mass.Diagonal)
	}
	if !b.hasStiffness() {
		c.Diags.Errorf("missing-field", c.Place, "a structure by matrices needs the field stiffness").WithHint("stiffness: {unit: kN/m, rows: [[300, -120], [-120, 120]]}  or  stiffness: {unit: kN/m, file: K.csv}")
		return
	}
	b.Stiffness.once(c, "stiffness", "rows, triplets and file", b.Stiffness.File)
}

// matrixPair is the two matrices as the document gives them.
type matrixPair struct{ mass, stiffness *grid }

// fromMatrices is the model of the matrices; nil where they are at fault.
func (b *building) fromMatrices(r *Run) (*structure.Model, *matrixPair) {
	n := len(b.Elevation.Value.SI)
	if n > 500 { // said by the engine, before files are read
		_, err := structure.Matrices(structure.Assembled{Elevation: b.Elevation.Value.SI})
		r.faults(err, nil, b.Elevation)
		return nil, nil
	}
	p := &matrixPair{b.massGrid(r, n), r.matrix(&b.Stiffness.matrixFields, b.Stiffness.File, n, stiffnesses)}
	if p.mass == nil || p.stiffness == nil {
		return nil, nil
	}
	given := structure.Assembled{Elevation: b.Elevation.Value.SI, Mass: p.mass.si, Stiffness: p.stiffness.si, Damping: b.Damping.SI()}
	if b.Levels.Given {
		given.Levels = b.Levels.Texts()
	}
	m, err := structure.Matrices(given)
	if err != nil {
		r.faults(err, map[structure.Part]*grid{structure.InElevation: vector(b.Elevation), structure.InLevels: vector(b.Levels), structure.InMass: p.mass, structure.InStiffness: p.stiffness}, b.Damping)
		return nil, nil
	}
	r.Used("stiffness", "stiffness", plain(p.stiffness.sized()), p.stiffness.source)
	if !b.hasWeight() {
		r.Used("mass", "mass", plain(p.mass.sized()), p.mass.source)
	}
	r.Caution("matrices")
	return m, p
}

// massGrid is the mass matrix as given: a diagonal of masses or weights, or a matrix.
func (b *building) massGrid(r *Run, n int) *grid {
	f, si, source := b.Weight.Each, b.Weight.Each.Value.SI, "the weights written in this document"
	g := &grid{}
	switch {
	case b.Weight.File.Given:
		return b.weightsFrom(r, n)
	case b.hasWeight():
		si = append([]float64(nil), si...)
		for i := range si {
			si[i] /= quantity.Gravity
		}
	case b.Mass.Diagonal.Given:
		unit, ok := r.matrixUnit(b.Mass.Unit, masses)
		if !ok {
			return nil
		}
		if unit != nil {
			g.unit = *unit
		}
		f, source = b.Mass.Diagonal, "the masses written in this document"
		if si, _, ok = r.cells(f, unit, masses); !ok {
			return nil
		}
	default:
		return r.matrix(&b.Mass.matrixFields, b.Mass.File, n, masses)
	}
	g.si, g.source, g.whole = structure.Diagonal(si), source, across(f)
	if at := vector(f).at; len(at) == len(si) {
		g.at = at
	}
	return g
}

// widest is how many columns of a matrix, or of mode shapes, a sheet takes.
const widest = 8

// matrices shows where the matrices came from, and what they are.
func (b *building) matrices(r *Run, m *structure.Model, given *matrixPair) {
	r.Explain(fmt.Sprintf("The model was assembled elsewhere and is used as given: one lateral freedom a level in direction x, the base fixed at elevation 0. The stiffness matrix comes from %s, the mass matrix from %s. Both were found square, finite, symmetric and positive definite.", given.stiffness.source, given.mass.source))
	r.matrixSymbols()
	lumped := true
	for i, row := range m.M {
		for j, x := range row {
			lumped = lumped && (i == j || x == 0)
		}
	}
	if b.hasWeight() {
		r.Explain("Mass is weight divided by $g = 9.80665\\;\\mathrm{m/s^2}$.")
	} else {
		r.Explain("Weight is mass times $g = 9.80665\\;\\mathrm{m/s^2}$.")
	}
	if !lumped {
		r.Equation(`m_i = \sum_j M_{ij}`, "mass at a level: the force there for a unit acceleration of the ground", chopra())
	}
	u := unitsOf(r.System())
	b.shown(r, "stiffness", "K", m.Levels, m.K, stated(given.stiffness.unit, u.stiffness), given.stiffness.source)
	if !lumped {
		b.shown(r, "mass", "M", m.Levels, m.M, stated(given.mass.unit, u.mass), given.mass.source)
	}
}

// stated is the unit that a matrix was given in, where it has one.
func stated(given, other quantity.Unit) quantity.Unit {
	if given.Text == "" {
		return other
	}
	return given
}

// shown echoes a matrix as a table where a sheet takes it, else by what it is.
func (b *building) shown(r *Run, what, symbol string, levels []string, a [][]float64, unit quantity.Unit, source string) {
	n := len(levels)
	if n > widest {
		band, low, high := 0, math.Inf(1), math.Inf(-1)
		for i := range a {
			low, high = min(low, a[i][i]), max(high, a[i][i])
			for j := range i {
				if a[i][j] != 0 {
					band = max(band, i-j)
				}
			}
		}
		spread := ""
		if band < n-1 {
			spread = fmt.Sprintf("; no entry stands more than %d places from the diagonal", band)
		}
		r.Inputs = append(r.Inputs, exhibit.Item{Text: fmt.Sprintf("The %s matrix has %d × %d entries, from %s; on its diagonal they run from %s to %s %s%s. It is not printed here.",
			what, n, n, source, quantity.Format(unit.From(low), 4), quantity.Format(unit.From(high), 4), unit.Pretty(), spread)})
		return
	}
	t := exhibit.Table{ID: r.Name + "-" + what, Caption: strings.ToUpper(what[:1]) + what[1:] + " matrix of " + r.Name + ", lowest level first, from " + source, Columns: []exhibit.Column{Words(symbol)}}
	for _, l := range levels {
		t.Columns = append(t.Columns, Col(l, unit))
	}
	for i, l := range levels {
		row := []exhibit.Cell{{Text: l}}
		for _, x := range a[i] {
			row = append(row, inUnits(x, unit))
		}
		t.Rows = append(t.Rows, row)
	}
	r.Inputs = append(r.Inputs, exhibit.Item{Table: &t})
}
