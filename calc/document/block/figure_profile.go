package block

import (
	"cmp"
	"slices"
	"strings"

	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
	"quoin/calc/structure"
)

// stands says where the values of an exported vector stand over the height: at
// levels, over storeys, or at the feet of storeys.
var stands = map[string]string{
	"w": "levels", "m": "levels", "h": "levels", "F": "levels", "C_v": "levels", "storey_force": "levels", "displacement": "levels", "phi": "levels",
	"diaphragm_force": "levels", "acceleration": "levels",
	"h_s": "storeys", "k_s": "storeys", "storey_shear": "storeys", "drift": "storeys", "drift_ratio": "storeys", "drift_limit": "storeys",
	"theta": "storeys", "theta_limit": "storeys", "drift_shear": "storeys", "drift_first_order": "storeys", "drift_elastic": "storeys", "second_order": "storeys",
	"overturning": "feet",
}

// spoken names the axis of vectors whose name is no word.
var spoken = map[string]string{"w": "seismic weight w", "m": "mass m", "h": "elevation h", "F": "lateral force F", "C_v": "distribution factor", "phi": "mode shape",
	"h_s": "storey height", "k_s": "storey stiffness", "theta": "stability coefficient θ", "overturning": "overturning moment"}

// grounded are vectors of levels that are zero at the base.
var grounded = []string{"displacement", "phi"}

// profile is the curve of a vector over the height: values of levels as points,
// of storeys as steps.
func (b *figure) profile(r *Run, s *seriesFields) []drawn {
	m := r.Product(b.Over.Text()).(*structure.Model)
	v := s.Profile.Value
	if len(v.SI) != len(m.H) {
		r.Fail(s.Profile, "length", "the profile has %s, %s has %s", counted(len(v.SI), "item"), b.Over.Text(), counted(len(m.H), "level"))
		return nil
	}
	if len(v.Labels) > 0 && !slices.Equal(v.Labels, m.Levels) {
		r.Fail(s.Profile, "labels", "the profile runs over %s, %s has the levels %s", listed(v.Labels), b.Over.Text(), listed(m.Levels))
		return nil
	}
	names, plain := r.vectorNames(s.Profile.Tree)
	at := ""
	for i, n := range names {
		if at = stands[n]; i > 0 && at != stands[names[0]] {
			at = ""
			break
		}
	}
	if s.At.Given {
		at = s.At.Text()
	}
	d := drawn{label: s.Profile.Written, role: exhibit.Data, from: s.Profile}
	if t := s.Profile.Tree; t != nil && t.Op == expr.Name {
		first, own, dotted := strings.Cut(t.Text, ".")
		if d.label = first; strings.HasSuffix(own, "_limit") || !dotted && strings.HasSuffix(first, "_limit") {
			d.role, d.label = exhibit.Limit, "limit"
		}
	}
	if len(names) > 0 && !slices.ContainsFunc(names, func(n string) bool { return strings.TrimSuffix(n, "_limit") != strings.TrimSuffix(names[0], "_limit") }) {
		own := strings.TrimSuffix(names[0], "_limit")
		d.name = cmp.Or(spoken[own], strings.ReplaceAll(own, "_", " "))
	}
	x, y := slices.Clone(v.SI), slices.Clone(m.H)
	switch at {
	case "storeys":
		d.step = true
	case "feet":
		d.dots = true
		y = append([]float64{0}, m.H[:len(m.H)-1]...)
	case "levels":
		d.dots = true
		if plain && len(names) > 0 && !slices.ContainsFunc(names, func(n string) bool { return !slices.Contains(grounded, n) }) {
			x, y = append([]float64{0}, x...), append([]float64{0}, y...)
		}
	default:
		r.Fail(s.Profile, "profile-at", "%s does not say whether its values belong to levels or to storeys", s.Profile.Written).WithHint("add  at: levels  or  at: storeys")
		return nil
	}
	d.X = quantity.List(x, v.Unit, nil)
	d.X.Dim = v.Dim
	d.Y = quantity.List(y, unitsOf(r.System()).length, nil)
	return []drawn{d}
}

// vectorNames are the exported vectors that a tree is made of item by item,
// formula names followed to theirs. It knows none where a running sum makes
// another kind of vector. plain tells that the tree adds nothing.
func (r *Run) vectorNames(tree *expr.Node) (names []string, plain bool) {
	plain = true
	known := true
	var walk func(n *expr.Node)
	walk = func(n *expr.Node) {
		if n == nil || n.Value != nil && n.Value.Shape == quantity.Number {
			return
		}
		switch n.Op {
		case expr.Name:
			block, own, dotted := strings.Cut(n.Text, ".")
			if !dotted {
				line, _ := r.Line(block)
				walk(line)
			} else {
				names = append(names, own)
			}
			return
		case expr.Call, expr.List:
			known = known && n.Op == expr.Call && n.Text != "cumsum"
		case expr.Add, expr.Sub:
			plain = false
		}
		for _, a := range n.Args {
			walk(a)
		}
	}
	walk(tree)
	if !known {
		return nil, false
	}
	return names, plain
}

// height makes the y axis of a profile.
func (b *figure) height(r *Run, p *exhibit.Panel, all []drawn) {
	m := r.Product(b.Over.Text()).(*structure.Model)
	label := b.YLabel.Text()
	p.X.Label = cmp.Or(b.XLabel.Text(), agreed(all), axisName(all[0].X.Dim))
	unit := p.Y.Unit
	p.Y = levelAxis(m.Levels, m.H, unit)
	p.Y.Label = cmp.Or(label, p.Y.Label)
}
