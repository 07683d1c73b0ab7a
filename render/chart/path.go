package chart

import (
	"math"
	"regexp"
	"strconv"
	"strings"
)

// A picture says its lines in tenths of a pixel, which no eye and no printer tells
// apart, as steps from point to point; and lines of one pen as one path.

var (
	paths  = regexp.MustCompile(`<path d="([^"]*)"([^>]*)></path>\n?`)
	strung = regexp.MustCompile(`^(?:[ML]-?[\d.]+ -?[\d.]+ ?)+Z?$`)
	places = regexp.MustCompile(`([ML])(-?[\d.]+) (-?[\d.]+)`)
)

// lean is a picture with its paths written so. Paths that are more than straight
// lines, or moved by a transform of their own, stay as they are.
func lean(svg string) string {
	var out, d strings.Builder
	pen := "" // of the path begun, in d
	close := func() {
		if d.Len() > 0 {
			out.WriteString(`<path d="` + d.String() + `"` + pen + "/>\n")
			d.Reset()
		}
	}
	at := 0
	for _, m := range paths.FindAllStringSubmatchIndex(svg, -1) {
		between, line, own := svg[at:m[0]], svg[m[2]:m[3]], svg[m[4]:m[5]]
		at = m[1]
		if own != pen || strings.TrimSpace(between) != "" {
			close()
			out.WriteString(between)
		}
		if pen = own; !strung.MatchString(line) || strings.Contains(own, "transform") {
			close()
			d.WriteString(line)
			close()
			continue
		}
		d.WriteString(stepped(line))
		if !strings.Contains(own, `fill="none"`) || strings.Contains(own, "opacity") { // what overlaps would show
			close()
		}
	}
	close()
	return out.String() + svg[at:]
}

// stepped is a path of straight lines, in steps.
func stepped(line string) string {
	var out strings.Builder
	var part [][2]int // tenths of px
	flush := func() {
		if len(part) > 0 {
			writeSteps(&out, straight(part))
			part = nil
		}
	}
	for _, m := range places.FindAllStringSubmatch(line, -1) {
		if m[1] == "M" {
			flush()
		}
		part = append(part, [2]int{tenths(m[2]), tenths(m[3])})
	}
	flush()
	if strings.HasSuffix(line, "Z") {
		out.WriteByte('Z')
	}
	return out.String()
}

func tenths(text string) int {
	v, _ := strconv.ParseFloat(text, 64)
	return int(math.Round(10 * v))
}

// inTenths is a number rounded to a tenth.
func inTenths(text string) string {
	return strconv.FormatFloat(float64(tenths(text))/10, 'f', -1, 64)
}

// straight leaves out points that lie on the line to the next one, and on their way
// there: no end, no turn and no peak among them.
func straight(points [][2]int) [][2]int {
	out := points[:1:1]
	for i := 1; i < len(points); i++ {
		if i+1 < len(points) {
			a, b, c := out[len(out)-1], points[i], points[i+1]
			ux, uy, vx, vy := b[0]-a[0], b[1]-a[1], c[0]-b[0], c[1]-b[1]
			if ux*vy == uy*vx && ux*vx+uy*vy >= 0 && (ux != 0 || uy != 0 || vx != 0 || vy != 0) {
				continue
			}
		}
		out = append(out, points[i])
	}
	return out
}

// writeSteps writes a run of points: where it begins, then the steps. A space stands
// only where two numbers would run together.
func writeSteps(out *strings.Builder, points [][2]int) {
	open := true // nothing before the next number that it could run into
	dotted := false
	number := func(v int) {
		text := strconv.FormatFloat(float64(v)/10, 'f', -1, 64)
		if -10 < v && v < 10 && v != 0 {
			text = strings.Replace(text, "0.", ".", 1)
		}
		if !open && text[0] != '-' && (text[0] != '.' || !dotted) {
			out.WriteByte(' ')
		}
		out.WriteString(text)
		open, dotted = false, strings.Contains(text, ".")
	}
	command := byte(0)
	begin := func(c byte) {
		if command != c {
			out.WriteByte(c)
			open = true
		}
		command = c
	}
	begin('M')
	number(points[0][0])
	number(points[0][1])
	for i := 1; i < len(points); i++ {
		dx, dy := points[i][0]-points[i-1][0], points[i][1]-points[i-1][1]
		switch {
		case dy == 0:
			begin('h')
			number(dx)
		case dx == 0:
			begin('v')
			number(dy)
		default:
			begin('l')
			number(dx)
			number(dy)
		}
	}
}
