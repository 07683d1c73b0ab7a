package chart

import (
	"math"
	"strconv"

	"github.com/go-echarts/go-echarts/v2/charts"
	"github.com/go-echarts/go-echarts/v2/opts"
	"github.com/go-echarts/go-echarts/v2/types"
)

// The option has members that the option library does not know. These types carry
// them beside the members it does.

// axisX and axisY add what the drawing script needs: the names at values.
type axisX struct {
	opts.XAxis
	extra
	Ticks *tickLabel `json:"axisLabel"`
}

type axisY struct {
	opts.YAxis
	extra
	Ticks *tickLabel `json:"axisLabel"`
}

type extra struct {
	NameTextStyle *textStyle `json:"nameTextStyle,omitempty"`
	Names         [][2]any   `json:"names,omitempty"`
	Unit          string     `json:"unit,omitempty"`
	Label         string     `json:"label,omitempty"` // the axis without its unit
}

// tickLabel is an axis label with a size that need not be whole.
type tickLabel struct {
	opts.AxisLabel
	Size   float64 `json:"fontSize"`
	Weight int     `json:"fontWeight"`
}

type textStyle struct {
	Color       string    `json:"color,omitempty"`
	Weight      int       `json:"fontWeight,omitempty"`
	Family      string    `json:"fontFamily,omitempty"`
	Size        float64   `json:"fontSize,omitempty"`
	Align       string    `json:"align,omitempty"`
	BorderColor string    `json:"textBorderColor,omitempty"`
	BorderWidth float64   `json:"textBorderWidth,omitempty"`
	LineHeight  float64   `json:"lineHeight,omitempty"`
	Padding     []float64 `json:"padding,omitempty"`
}

func written(color string, strong bool) *textStyle {
	t := &textStyle{Color: color, Weight: 400, Family: face, Size: size, LineHeight: leading}
	if strong {
		t.Weight = 600
	}
	return t
}

// heading is a text outside the axes. Panel -1 stands for all panels together.
type heading struct {
	Text      string     `json:"text"`
	Left      float64    `json:"left"`
	Top       float64    `json:"top"`
	Padding   int        `json:"padding"`
	Align     string     `json:"textAlign,omitempty"`
	Style     *textStyle `json:"textStyle"`
	Panel     int        `json:"panel"`
	Over      string     `json:"over,omitempty"` // "plot": begins where the plot begins
	Triggered bool       `json:"triggerEvent"`
}

// curve is a series with all its members.
type curve struct {
	charts.SingleSeries
	Sampling   string     `json:"sampling,omitempty"`
	Clip       bool       `json:"clip"`
	Silent     bool       `json:"silent,omitempty"`
	Z          int        `json:"z"`
	LineStyle  *lineStyle `json:"lineStyle,omitempty"`
	ItemStyle  *itemStyle `json:"itemStyle,omitempty"`
	Label      *label     `json:"label,omitempty"`
	Emphasis   switched   `json:"emphasis"`
	LegendIcon string     `json:"legendIcon,omitempty"`
	Units      []string   `json:"units,omitempty"` // of x and y, for the values at the pointer
	Axis       string     `json:"axis,omitempty"`  // the label of the value axis
	Rise       int        `json:"rise,omitempty"`  // names along a diagonal that rises (1) or falls (-1)
}

type lineStyle struct {
	Color string  `json:"color"`
	Width float64 `json:"width"`
	Type  any     `json:"type,omitempty"`
	Cap   string  `json:"cap,omitempty"`
	Join  string  `json:"join,omitempty"`
}

type itemStyle struct {
	Color       string  `json:"color"`
	BorderColor string  `json:"borderColor,omitempty"`
	BorderWidth float64 `json:"borderWidth,omitempty"`
	Opacity     float64 `json:"opacity"`
}

type switched struct {
	Disabled bool `json:"disabled"`
}

// label is the text at the items of a series: the item's name.
type label struct {
	Show      bool   `json:"show"`
	Formatter string `json:"formatter"`
	*textStyle
}

// spot is one item with its name.
type spot struct {
	Name   string     `json:"name"`
	Value  numbers    `json:"value"`
	Label  spotLabel  `json:"label"`
	Style  *itemStyle `json:"itemStyle,omitempty"`
	Symbol string     `json:"symbol,omitempty"`
}

type spotLabel struct {
	Position string  `json:"position"`
	Offset   numbers `json:"offset,omitempty"`
	Align    string  `json:"align,omitempty"`
	VAlign   string  `json:"verticalAlign,omitempty"`
	Color    string  `json:"color,omitempty"`
	Weight   int     `json:"fontWeight,omitempty"`
}

// numbers is written at 5 significant digits: enough for drawing, the tables carry all.
type numbers []float64

func (n numbers) MarshalJSON() ([]byte, error) {
	out := append(make([]byte, 0, 16), '[')
	for i, v := range n {
		if i > 0 {
			out = append(out, ',')
		}
		out = short(out, v)
	}
	return append(out, ']'), nil
}

// points is the data of a curve.
type points [][2]float64

func (p points) MarshalJSON() ([]byte, error) {
	out := append(make([]byte, 0, 20*len(p)+2), '[')
	for i, v := range p {
		if i > 0 {
			out = append(out, ',')
		}
		out = append(short(append(short(append(out, '['), v[0]), ','), v[1]), ']')
	}
	return append(out, ']'), nil
}

func short(out []byte, v float64) []byte {
	if v == 0 || math.Abs(v) < 1e-300 {
		return append(out, '0')
	}
	r, _ := strconv.ParseFloat(strconv.FormatFloat(v, 'e', 4, 64), 64)
	return strconv.AppendFloat(out, r, 'g', -1, 64)
}

// visitor replaces parts of the option by our types and drops what only says "nothing".
type visitor struct {
	charts.BaseConfigurationVisitor
	x        []axisX
	y        []axisY
	grids    []gridBox
	headings []heading
	curves   []curve
	legend   any
	beside   bool
	fixed    bool   // log axes that stay so
	thinned  bool   // of a curve not all points stand in the option
	pointer  string // the axis that the pointer runs along
}

type gridBox struct {
	Top    float64 `json:"top"`
	Height float64 `json:"height"`
	Right  float64 `json:"right"`
	Bounds string  `json:"outerBoundsMode"` // "none": the margins are ours
}

func (v *visitor) VisitXAxis([]opts.XAxis) any           { return v.x }
func (v *visitor) VisitYAxis([]opts.YAxis) any           { return v.y }
func (v *visitor) VisitSeriesOpt(charts.MultiSeries) any { return v.curves }
func (v *visitor) VisitTitleOpt(opts.Title) any          { return v.headings }
func (v *visitor) VisitLegendOpt(opts.Legend) any        { return v.legend }
func (v *visitor) VisitTooltipOpt(opts.Tooltip) any {
	return map[string]any{
		"trigger": "axis", "formatter": "fn:tip", "confine": true, "transitionDuration": 0,
		"backgroundColor": paper, "borderColor": rule, "borderWidth": 1, "padding": []int{6, 9}, "extraCssText": "box-shadow:none;border-radius:0",
		"textStyle": written(ink, false),
		"axisPointer": map[string]any{
			"type": "line", "axis": v.pointer, "snap": true, "animation": false,
			"lineStyle": lineStyle{Color: ink, Width: 0.8, Type: "solid"},
			"label":     map[string]any{"show": false},
		},
	}
}

func (v *visitor) Visit(option map[string]any) {
	delete(option, "toolbox")
	delete(option, "color")
	option["grid"] = v.grids
	option["textStyle"] = map[string]any{"fontFamily": face, "fontSize": size}
	link := []any{map[string]any{"xAxisIndex": "all"}}
	if v.pointer == "y" {
		link = []any{map[string]any{"yAxisIndex": "all"}}
	}
	option["axisPointer"] = map[string]any{"link": link}
	if v.fixed {
		option["fixed"] = true
	}
	if v.thinned {
		option["thinned"] = true
	}
	if v.beside {
		option["beside"] = true
	} else if v.pointer == "x" {
		all := make([]int, len(v.x))
		for i := range all {
			all[i] = i
		}
		option["dataZoom"] = []any{map[string]any{
			"type": "inside", "xAxisIndex": all, "filterMode": "none",
			"zoomOnMouseWheel": "ctrl", "moveOnMouseMove": "shift", "moveOnMouseWheel": false, "preventDefaultMouseMove": false,
		}}
	}
}

func off() types.Bool { return opts.Bool(false) }
func on() types.Bool  { return opts.Bool(true) }
