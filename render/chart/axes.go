package chart

import (
	"slices"

	"github.com/go-echarts/go-echarts/v2/opts"

	"quoin/calc/exhibit"
)

func kindOf(s span) string {
	if s.log {
		return "log"
	}
	return "value"
}

func extraOf(a exhibit.Axis, s span) extra {
	e := extra{Unit: a.Unit.Pretty(), Label: clean(a.Label), NameTextStyle: written(ink, false)}
	for _, n := range a.Names {
		if at := a.Unit.From(n.At); s.holds(at) {
			e.Names = append(e.Names, [2]any{at, clean(n.Name)})
		}
	}
	slices.SortStableFunc(e.Names, func(a, b [2]any) int {
		switch x, y := a[0].(float64), b[0].(float64); {
		case x < y:
			return -1
		case x > y:
			return 1
		}
		return 0
	})
	return e
}

func axisLabel(show bool) *tickLabel {
	return &tickLabel{AxisLabel: opts.AxisLabel{Show: opts.Bool(show), Color: soft, FontFamily: face, HideOverlap: on(), ShowMinLabel: on(), ShowMaxLabel: on()}, Size: size, Weight: 400}
}

// xAxis is the lower axis, with or without its numbers and its name.
func (p *panel) xAxis(numbered, unnamed bool) axisX {
	a := axisX{extra: extraOf(p.X, p.x)}
	a.Type, a.Min, a.Max, a.GridIndex = kindOf(p.x), p.x.lo, p.x.hi, p.index
	a.AxisLine = &opts.AxisLine{Show: on(), OnZero: off(), LineStyle: &opts.LineStyle{Color: ink, Width: 1}}
	a.AxisTick = &opts.AxisTick{Show: opts.Bool(numbered), LineStyle: &opts.LineStyle{Color: ink, Width: 1}}
	a.Ticks = axisLabel(numbered)
	a.SplitLine = &opts.SplitLine{Show: on(), LineStyle: &opts.LineStyle{Color: grid, Width: 1}}
	if numbered && !unnamed {
		a.Name, a.NameLocation, a.NameGap = named(p.X), "middle", 26
	}
	return a
}

// yAxis is the left axis; its name stands above it as a heading.
func (p *panel) yAxis(numbered bool) axisY {
	a := axisY{extra: extraOf(p.Y, p.y)}
	a.NameTextStyle = nil
	a.Type, a.Min, a.Max, a.GridIndex = kindOf(p.y), p.y.lo, p.y.hi, p.index
	a.AxisLine = &opts.AxisLine{Show: on(), OnZero: off(), LineStyle: &opts.LineStyle{Color: ink, Width: 1}}
	a.Ticks = axisLabel(numbered)
	a.SplitLine = &opts.SplitLine{Show: on(), LineStyle: &opts.LineStyle{Color: grid, Width: 1}}
	return a
}
