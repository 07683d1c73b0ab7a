package page_test

import (
	"fmt"
	"math"
	"strings"

	"quoin/calc/cite"
	"quoin/calc/exhibit"
	"quoin/calc/expr"
	"quoin/calc/quantity"
)

const hostile = `<script>alert(1)</script> {{ .Secret }} "quoted" 'single' </style> <!-- & ]]>`

var (
	metre, second, kilonewton = quantity.MustUnit("m"), quantity.MustUnit("s"), quantity.MustUnit("kN")
	millimetre, g             = quantity.MustUnit("mm"), quantity.MustUnit("g")
)

func text(s string) exhibit.Prose { return exhibit.Prose{Kind: exhibit.Text, Text: s} }

func node(k exhibit.ProseKind, children ...exhibit.Prose) exhibit.Prose {
	return exhibit.Prose{Kind: k, Children: children}
}

func para(s string) exhibit.Prose { return node(exhibit.Paragraph, text(s)) }

func name(path string, v quantity.Value, digits int) *expr.Node {
	return &expr.Node{Op: expr.Name, Text: path, ID: path, Value: &v, Digits: digits}
}

func lit(s, unit string) *expr.Node { return &expr.Node{Op: expr.Literal, Text: s, Unit: unit} }

func op(o expr.Op, args ...*expr.Node) *expr.Node { return &expr.Node{Op: o, Args: args} }

func sym(path string) *expr.Node { return &expr.Node{Op: expr.Name, Text: path} }

func ratio(x float64) *float64 { return &x }

func number(x float64, u quantity.Unit) exhibit.Number {
	return exhibit.Number{Value: x, Unit: u, Digits: 3}
}

// sample is a package with every kind of exhibit.
func sample() *exhibit.Package {
	p := &exhibit.Package{System: quantity.SI}
	p.Meta = exhibit.Meta{
		Title: "Lateral analysis of the four-storey archive block", Number: "QN-021-S-04", Project: "Harrow Quay Depository", Client: "Harrow Quay Trust",
		Subject: "Base shear, storey forces, drift and stability under design earthquake motion", Location: "Harrow Quay, plot 7",
		Contract: "HQ-26-114", Discipline: "structural", Authority: "Harrow Quay building office", Independence: "other team",
		Basis: []string{"ASCE/SEI 7-22, chapters 11, 12 and 16", "Local amendments of the invented county"}, Paper: "A4", Status: "draft",
		Prepared: exhibit.Sign{Initials: "RT", Date: "2026-03-02"},
		Revision: []exhibit.Revision{
			{Rev: "A", Date: "2026-01-15", Note: "first issue for comment", Prepared: "RT", Checked: "KM"},
			{Rev: "B", Date: "2026-03-02", Note: "roof plant heavier; drift rows by direction", Prepared: "RT", Checked: "RT"},
		},
	}
	p.Provenance = exhibit.Provenance{Tool: "quoin 0.1.0", Source: "package.md", Commit: "4be1c09a77f0d1122", CommitDate: "2026-03-01", Dirty: true,
		Overrides: []exhibit.Override{{Name: "h_n", Text: "15.6 m", Was: "15.24 m"}}}
	asce := func(clause string) *cite.Ref {
		return &cite.Ref{Key: "ASCE/SEI 7-22", Clause: clause, Memory: true}
	}
	p.Chapters = []exhibit.Chapter{
		{Anchor: "before", Pieces: []exhibit.Piece{{Prose: []exhibit.Prose{para("This package gives the lateral forces of the block and checks its drift. It does not cover foundations.")}}}},
		{Title: []exhibit.Prose{text("Ground motion")}, Anchor: "ground-motion", Pieces: []exhibit.Piece{
			{Prose: groundProse()}, {Block: recordBlock()}, {Block: spectrumBlock()},
		}},
		{Title: []exhibit.Prose{text("Design base shear")}, Anchor: "design-base-shear", Pieces: []exhibit.Piece{
			{Prose: []exhibit.Prose{para("The equivalent lateral force procedure is used in both directions.")}}, {Block: formulaBlock(asce)}, {Block: tableBlock()},
		}},
		{Title: []exhibit.Prose{text("Conclusions")}, Anchor: "conclusions", Pieces: []exhibit.Piece{{Prose: []exhibit.Prose{para("The frame is too flexible at level 2."), proseKinds()}}}},
	}
	p.Checks = checks(asce)
	p.Values = []exhibit.Entry{
		{ID: "T_a", Value: quantity.Scalar(0.5433, second), Tree: sym("x"), Place: exhibit.Place{File: "package.md", Line: 113}, Anchor: "base_shear", Doc: "approximate period"},
		{ID: "V", Value: quantity.Scalar(1586e3, kilonewton), Tree: op(expr.Mul, sym("C_s"), sym("W")), Place: exhibit.Place{File: "package.md", Line: 118}, Anchor: "base_shear", Doc: "design base shear"},
		{ID: "east.pga", Value: quantity.Scalar(3.334, g), Place: exhibit.Place{File: "package.md", Line: 41}, Anchor: "east", Doc: "largest acceleration"},
	}
	p.Assumptions = []exhibit.Assumption{
		{ID: "A1", Text: "Floors act as rigid diaphragms in their plane", Basis: "concrete slabs, 200 mm", Status: "verified", By: "KM", When: "2026-02-11", Anchor: "base_shear"},
		{ID: "A3", Text: "Columns are fixed at the foundation", Basis: "to be confirmed by the geotechnical report", Status: "open", By: "", Anchor: "base_shear"},
	}
	p.Comments = []exhibit.Comment{{ID: "C1", By: "AB", Date: "2026-02-12", Text: "Which site class?", Response: "That of the report", Where: "V", Status: "closed", Anchor: "base_shear"}}
	p.Checking = []exhibit.Checking{{By: "RV", Date: "2026-02-13", Scope: "all but the foundation", Method: "by hand", Anchor: "base_shear"}}
	p.References = []exhibit.Reference{{Key: "ASCE/SEI 7-22", Text: "Minimum Design Loads and Associated Criteria for Buildings and Other Structures. American Society of Civil Engineers, 2022.",
		Clauses: []string{"Eq. 12.8-8", "12.8.2", "12.12.1"}, Memory: true}}
	p.Inputs = []exhibit.Input{{Path: "package.md", SHA256: strings.Repeat("0f1e2d3c", 8), Bytes: 8123, Role: "document"}, {Path: "records/east.txt", SHA256: strings.Repeat("a1b2c3d4", 8), Bytes: 40960, Role: "record"}}
	p.Cautions = []exhibit.Caution{
		{Key: "aid", Text: "Prepared as a calculation aid; adequacy and use are the responsibility of the licensed engineer in responsible charge."},
		{Key: "law", Text: "Law, the adopted code with local amendments and the authority's decisions govern over anything here."},
		{Key: "scope", Text: "Covers only the scope stated; anything not listed was not checked."},
		{Key: "linear", Text: "Elastic response scaled by code factors; inelastic demand, collapse and residual drift are not evaluated.", Blocks: []string{"base_shear", "forces"}},
		{Key: "demonstration", Text: "Sample data in the package: not a project record.", Blocks: []string{"east"}},
	}
	p.Footnotes = []exhibit.Footnote{{Index: 1, Body: []exhibit.Prose{para("Recorded in the invented network of the county.")}}}
	return p
}

func groundProse() []exhibit.Prose {
	value := func(id string, x float64, u quantity.Unit) exhibit.Prose {
		return exhibit.Prose{Kind: exhibit.Value, Live: &exhibit.Live{ID: id, Numbers: []exhibit.Number{number(x, u)}}}
	}
	return []exhibit.Prose{
		{Kind: exhibit.Heading, Level: 3, Anchor: "records", Children: []exhibit.Prose{text("Records")}},
		node(exhibit.Paragraph, text("The east component peaks at "), value("east.pga", 3.334, g), text(" and gives, in the end, a base shear of "), value("V", 1586e3, kilonewton),
			text(". Its spectrum is compared with the design target"), exhibit.Prose{Kind: exhibit.FootnoteRef, Level: 1}, text(" of "),
			exhibit.Prose{Kind: exhibit.Cite, Target: "ASCE/SEI 7-22", Text: "ASCE/SEI 7-22 11.4.5"}, text(" below.")),
		{Kind: exhibit.Heading, Level: 5, Anchor: "processing", Children: []exhibit.Prose{text("Processing of "), node(exhibit.Emphasis, text("east"))}},
		para("A linear baseline was removed; nothing was filtered."),
	}
}

func proseKinds() exhibit.Prose {
	link := func(target string) exhibit.Prose {
		return exhibit.Prose{Kind: exhibit.Link, Target: target, Children: []exhibit.Prose{text("link")}}
	}
	cell := func(s, align string) exhibit.Prose {
		return exhibit.Prose{Kind: exhibit.TableCell, Align: align, Children: []exhibit.Prose{text(s)}}
	}
	return node(exhibit.BulletList,
		node(exhibit.ListItem, node(exhibit.Strong, text("stiffer")), text(" columns at level 1, "), exhibit.Prose{Kind: exhibit.Code, Text: "k_s"}, text(", "), exhibit.Prose{Kind: exhibit.Math, Text: "k_s"}),
		node(exhibit.ListItem, link("#records"), text(" "), link("#nowhere"), text(" "), link("javascript:alert(1)"), text(" "), link("records/east.txt"), text(" "), link("https://example.org/a?b=c")),
		node(exhibit.ListItem, node(exhibit.Quote, para("quoted")), exhibit.Prose{Kind: exhibit.CodeBlock, Text: "a = 1\nb = 2"}, exhibit.Prose{Kind: exhibit.OrderedList, Level: 3, Children: []exhibit.Prose{node(exhibit.ListItem, text("third"))}}),
		node(exhibit.ListItem, node(exhibit.ProseTable, node(exhibit.TableRow, cell("mark", "left"), cell("size", "right")), node(exhibit.TableRow, cell("C1", "left"), cell("400", "right")))),
		node(exhibit.ListItem, node(exhibit.DefinitionList, node(exhibit.Term, text("SDOF")), node(exhibit.Description, text("one degree of freedom"))), exhibit.Prose{Kind: exhibit.Rule}),
		node(exhibit.ListItem, exhibit.Prose{Kind: exhibit.Image, Target: "plan.png", MediaType: "image/png", Data: []byte{0x89, 0x50}, Children: []exhibit.Prose{text("Key plan")}}, exhibit.Prose{Kind: exhibit.Break}, exhibit.Prose{Kind: exhibit.MathBlock, Text: "V = C_s W"}),
	)
}

func recordBlock() *exhibit.Block {
	cell := func(s string) exhibit.Cell { return exhibit.Cell{Text: s} }
	return &exhibit.Block{Kind: "record", Name: "east", Anchor: "east", Place: exhibit.Place{File: "package.md", Line: 41}, Caption: "east component, as recorded",
		Parts: []exhibit.Part{
			{Name: "inputs", Items: []exhibit.Item{{Echo: &exhibit.Echo{Rows: []exhibit.EchoRow{
				{Field: "file", Label: "file", Value: cell("records/east.txt")},
				{Field: "step", Label: "step", Value: exhibit.Cell{Numbers: []exhibit.Number{number(0.01, second)}}},
				{Field: "unit", Label: "unit in file", Value: cell("cm/s²")},
				{Field: "samples", Label: "samples", Value: exhibit.Cell{Numbers: []exhibit.Number{{Value: 24000}}}, Default: false},
				{Field: "baseline", Label: "baseline", Value: cell("linear")},
				{Field: "scale", Label: "scale", Value: exhibit.Cell{Numbers: []exhibit.Number{{Value: 1}}}, Default: true},
			}}}}},
			{Name: "results", Items: []exhibit.Item{{Figure: figure("east-a", "Acceleration of east, as used", 1, 200)}}},
		}, Warnings: []string{"The record ends before 95 % of the intensity of a longer twin is reached."}}
}

func spectrumBlock() *exhibit.Block {
	return &exhibit.Block{Kind: "spectrum", Name: "east_rs", Anchor: "east_rs", Place: exhibit.Place{File: "parts/spectra.md", Line: 8}, Note: "Spectra are exact at every period shown.",
		Parts: []exhibit.Part{
			{Name: "method", Items: []exhibit.Item{{Text: "The response of an oscillator is stepped exactly for ground acceleration that is linear between samples."},
				{Equation: &exhibit.Equation{TeX: `\ddot u + 2 \zeta \omega \dot u + \omega^2 u = -a_g`, Description: "equation of motion", Number: 1}}}},
			{Name: "results", Items: []exhibit.Item{{Figure: figure("east-rs", "Pseudo-acceleration spectra of east at 2, 5 and 10 % with the design target", 2, 380)}}},
		}}
}

func figure(id, caption string, n, height int) *exhibit.Figure {
	return &exhibit.Figure{ID: id, Caption: caption, Number: n, Alt: "Seen: " + caption, Panels: []exhibit.Panel{{X: exhibit.Axis{Min: ratio(float64(height))}}}}
}

// picture draws a plain curve, for looking at the page.
func picture(f exhibit.Figure, prefix string) (string, error) {
	h := *f.Panels[0].X.Min
	var d strings.Builder
	for i := range 200 {
		x := float64(i) / 199
		fmt.Fprintf(&d, "%c%.1f %.1f", "ML"[min(i, 1)], 60+580*x, h/2-(h/2-30)*math.Sin(40*x)*math.Exp(-3*x))
	}
	return fmt.Sprintf(`<svg viewBox="0 0 700 %g" role="img" aria-label="%s"><defs><clipPath id="%sclip"><rect width="700" height="%g"/></clipPath></defs><path d="M60 10V%gH640" fill="none" stroke="#1c1b19"/><path clip-path="url(#%sclip)" d="%s" fill="none" stroke="#1d5a6c" stroke-width="1.6"/></svg>`,
		h, f.ID, prefix, h, h-30, prefix, d.String()), nil
}

func formulaBlock(asce func(string) *cite.Ref) *exhibit.Block {
	at := func(line int) exhibit.Place { return exhibit.Place{File: "package.md", Line: line} }
	scalar := func(x float64, u quantity.Unit) *quantity.Value { v := quantity.Scalar(x, u); return &v }
	h := name("h_n", quantity.Scalar(15.24, metre), 4)
	pure := &expr.Node{Op: expr.Call, Text: "num", Unit: "m", Args: []*expr.Node{h}}
	T1 := &expr.Node{Op: expr.Item, Args: []*expr.Node{sym("m.T"), lit("1", "")}, Value: scalar(0.642, second), Digits: 3}
	Ta := name("T_a", quantity.Scalar(0.5433, second), 4)
	period := &expr.Node{Op: expr.Call, Text: "min", Taken: []int{1}, Args: []*expr.Node{T1, op(expr.Mul, name("C_u", quantity.Pure(1.4), 2), Ta)}}
	cs := func() *expr.Node {
		return op(expr.Div, name("S_D1", quantity.Pure(0.55), 3), op(expr.Mul, name("T", quantity.Scalar(0.642, second), 3), op(expr.Div, name("R", quantity.Pure(8), 2), name("I_e", quantity.Pure(1), 2))))
	}
	limbs := &expr.Node{Op: expr.Call, Text: "max", Taken: []int{2}, Args: []*expr.Node{lit("0.01", ""),
		{Op: expr.Call, Text: "min", Taken: []int{2}, Args: []*expr.Node{op(expr.Div, name("S_DS", quantity.Pure(1.0), 3), op(expr.Div, name("R", quantity.Pure(8), 2), name("I_e", quantity.Pure(1), 2))), cs(),
			op(expr.Div, op(expr.Mul, name("S_D1", quantity.Pure(0.55), 3), name("T_L", quantity.Scalar(8, second), 2)), op(expr.Mul, op(expr.Pow, name("T", quantity.Scalar(0.642, second), 3), lit("2", "")), op(expr.Div, name("R", quantity.Pure(8), 2), name("I_e", quantity.Pure(1), 2))))}},
		op(expr.Mul, op(expr.Mul, lit("0.044", ""), name("S_DS", quantity.Pure(1.0), 3)), name("I_e", quantity.Pure(1), 2))}}
	levels := []string{"level 1", "level 2", "level 3", "roof"}
	w := name("frame.w", quantity.List([]float64{3900e3, 3800e3, 3800e3, 3300e3}, kilonewton, levels), 4)
	hs := name("frame.h", quantity.List([]float64{3.81, 7.62, 11.43, 15.24}, metre, levels), 4)
	k := op(expr.Pow, hs, name("k", quantity.Pure(1.02), 3))
	forces := op(expr.Mul, op(expr.Div, op(expr.Mul, w, k), &expr.Node{Op: expr.Call, Text: "sum", Args: []*expr.Node{op(expr.Mul, w, k)}}), name("V", quantity.Scalar(1586e3, kilonewton), 4))
	result := quantity.List([]float64{157.1e3, 311.7e3, 471.8e3, 645.3e3}, kilonewton, levels)
	cond := &expr.Node{Op: expr.Call, Text: "if", Taken: []int{2}, Args: []*expr.Node{op(expr.AtMost, name("T", quantity.Scalar(0.642, second), 3), lit("0.5", "s")), lit("1", ""), op(expr.Add, lit("1", ""), op(expr.Div, op(expr.Sub, name("T", quantity.Scalar(0.642, second), 3), lit("0.5", "s")), lit("2", "s")))}}
	eq := func(id string, tree *expr.Node, r *quantity.Value, digits, line, n int, doc string, ref *cite.Ref) exhibit.Item {
		return exhibit.Item{Equation: &exhibit.Equation{ID: id, Symbol: sym(id), Tree: tree, Result: r, Digits: digits, Description: doc, Ref: ref, Place: at(line), Number: n, Overridden: id == "h_n"}}
	}
	return &exhibit.Block{Kind: "formula", Name: "base_shear", Anchor: "base_shear", Place: at(112), Parts: []exhibit.Part{
		{Name: "results", Items: []exhibit.Item{
			eq("h_n", lit("15.24", "m"), scalar(15.24, metre), 4, 112, 2, "structural height", nil),
			eq("T_a", op(expr.Mul, op(expr.Mul, lit("0.0466", ""), op(expr.Pow, pure, lit("0.9", ""))), lit("1", "s")), scalar(0.5433, second), 4, 113, 3, "approximate period, concrete moment frame", asce("Eq. 12.8-8")),
			eq("T", period, scalar(0.642, second), 3, 114, 4, "period used; the modal period governs", asce("12.8.2")),
			eq("k", cond, scalar(1.071, quantity.Unit{}), 4, 115, 5, "exponent of the vertical distribution", asce("12.8.3")),
			eq("C_s", limbs, scalar(0.1071, quantity.Unit{}), 4, 116, 6, "seismic response coefficient", asce("Eqs. 12.8-3 to 12.8-6")),
			eq("V", op(expr.Mul, name("C_s", quantity.Pure(0.10717), 5), name("W", quantity.Scalar(14800e3, kilonewton), 5)), scalar(1586e3, kilonewton), 4, 118, 7, "design base shear", asce("Eq. 12.8-1")),
			eq("F", forces, &result, 4, 119, 8, "storey forces, lowest level first", asce("12.8.3")),
		}},
		{Name: "checks", Items: []exhibit.Item{{Checks: checks(asce)}}},
	}}
}

func checks(asce func(string) *cite.Ref) []exhibit.Check {
	drift := op(expr.AtMost, sym("d.drift"), op(expr.Mul, lit("0.020", ""), sym("frame.h_s")))
	row := func(item string, d, l float64) exhibit.Check {
		return exhibit.Check{ID: "d.drift <= 0.020 * frame.h_s [" + item + "]", Name: "d.drift <= 0.020 * frame.h_s", Item: item, Demand: number(d, millimetre), Limit: number(l, millimetre), Relation: "<=",
			Ratio: ratio(d / l), OK: d <= l, Description: "storey drift, x, at the centre of mass", Ref: asce("12.12.1"), Anchor: "base_shear", Tree: drift}
	}
	tolerance := number(20e3, kilonewton)
	return []exhibit.Check{
		row("level 1", 0.0702, 0.0762), row("level 2", 0.0793, 0.0762), row("level 3", 0.0665, 0.0762), row("roof", 0.0411, 0.0762),
		{ID: "x > 0", Name: "x > 0", Demand: number(1, quantity.Unit{}), Limit: number(0, quantity.Unit{}), Relation: ">", OK: true, Anchor: "base_shear", Tree: op(expr.More, sym("x"), lit("0", ""))},
		{ID: "V == W", Name: "modal base shear agrees", Demand: number(1702e3, kilonewton), Limit: number(1710e3, kilonewton), Tolerance: &tolerance, Relation: "==", Ratio: ratio(0.4), OK: true, Anchor: "base_shear", RefText: "hand check"},
	}
}

func tableBlock() *exhibit.Block {
	t := &exhibit.Table{ID: "forces", Caption: "Storey forces in x", Number: 1, Notes: []string{"The roof holds the plant."},
		Columns: []exhibit.Column{{Head: "level"}, {Head: "elevation", Symbol: sym("h"), Unit: metre, Right: true}, {Head: "force", Symbol: sym("F_x"), Unit: kilonewton, Right: true}, {Head: "share", Unit: quantity.Unit{}, Right: true}}}
	for i, l := range []string{"roof", "level 3", "level 2", "level 1"} {
		z := float64(4-i) * 3.81
		t.Rows = append(t.Rows, []exhibit.Cell{{Text: l}, {Numbers: []exhibit.Number{number(z, metre)}}, {Numbers: []exhibit.Number{{Value: 9.87e3 * z * z / 2, Unit: kilonewton, Digits: 3, ID: "F"}}, Strong: i == 0, Mark: []int{1}}, {Numbers: []exhibit.Number{number(0.0371*z, quantity.Unit{})}}})
	}
	t.Rows[3][1].Numbers[0].Unit, t.Rows[3][1].Numbers[0].Value = millimetre, 0.0762 // shown in the column's unit
	return &exhibit.Block{Kind: "table", Name: "forces", Anchor: "forces", Place: exhibit.Place{File: "package.md", Line: 140}, Parts: []exhibit.Part{{Name: "results", Items: []exhibit.Item{{Table: t}}}}}
}
