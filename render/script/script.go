// Package script runs the page's own scripts without a browser: it draws the
// picture of a chart and sets TeX as MathML. The same input gives the same bytes.
package script

import (
	"errors"
	"fmt"
	"regexp"
	"runtime"
	"strings"
	"sync"
	"time"

	"github.com/dop251/goja"

	"quoin/templates"
)

// Limits of one call. They stop what would run for ever and are far above what
// sound input needs, so they never change a result, only whether there is one.
const (
	drawLimit = 2 * time.Minute
	texLimit  = 20 * time.Second
)

// compiled is the script, read and compiled once in a process.
var compiled = sync.OnceValues(func() (*goja.Program, error) {
	text, err := templates.PressScript()
	if err != nil {
		return nil, err
	}
	return goja.Compile("press.js", text, false)
})

// machine is one runtime with the script loaded. It serves one call at a time.
type machine struct {
	vm       *goja.Runtime
	svg, tex goja.Callable
}

// idle holds machines at rest; slots bounds how many there are: one a core.
var (
	slots = make(chan struct{}, max(1, runtime.GOMAXPROCS(0)))
	idle  = make(chan *machine, max(1, runtime.GOMAXPROCS(0)))
)

func start() (*machine, error) {
	program, err := compiled()
	if err != nil {
		return nil, err
	}
	vm := goja.New()
	vm.SetMaxCallStackSize(2000)
	// No clock and no chance: nothing here may depend on them.
	vm.SetTimeSource(func() time.Time { return time.Unix(0, 0).UTC() })
	vm.SetRandSource(func() float64 { return 0.5 })
	nothing := func(goja.FunctionCall) goja.Value { return goja.Undefined() }
	for _, name := range []string{"setTimeout", "clearTimeout", "setInterval", "clearInterval"} {
		if err := vm.Set(name, nothing); err != nil {
			return nil, err
		}
	}
	console := vm.NewObject()
	for _, name := range []string{"log", "warn", "error", "info", "debug"} {
		if err := console.Set(name, nothing); err != nil {
			return nil, err
		}
	}
	if err := vm.Set("console", console); err != nil {
		return nil, err
	}
	if _, err := vm.RunProgram(program); err != nil {
		return nil, fmt.Errorf("the bundled script does not start: %w", err)
	}
	m := &machine{vm: vm}
	var ok bool
	if m.svg, ok = goja.AssertFunction(vm.Get("svg")); !ok {
		return nil, errors.New("the bundled script has no svg function")
	}
	if m.tex, ok = goja.AssertFunction(vm.Get("tex")); !ok {
		return nil, errors.New("the bundled script has no tex function")
	}
	return m, nil
}

// call runs one function on a machine of the pool, with a limit of time.
func call(limit time.Duration, pick func(*machine) goja.Callable, args ...any) (string, error) {
	slots <- struct{}{}
	defer func() { <-slots }()
	var m *machine
	select {
	case m = <-idle:
	default:
		var err error
		if m, err = start(); err != nil {
			return "", err
		}
	}
	values := make([]goja.Value, len(args))
	for i, a := range args {
		values[i] = m.vm.ToValue(a)
	}
	var late bool
	timer := time.AfterFunc(limit, func() { m.vm.Interrupt("limit") })
	out, err := pick(m)(goja.Undefined(), values...)
	if !timer.Stop() {
		late = true // the interrupt may be still on its way: this machine is not used again
	}
	if err == nil && !late {
		text := out.String()
		idle <- m
		return text, nil
	}
	var interrupted *goja.InterruptedError
	var overflow *goja.StackOverflowError
	switch {
	case errors.As(err, &interrupted):
		return "", errTooLong
	case errors.As(err, &overflow):
		return "", errTooDeep
	case err == nil:
		return out.String(), nil
	}
	idle <- m
	return "", err
}

var (
	errTooLong = errors.New("takes too long")
	errTooDeep = errors.New("is nested too deeply")
)

// SVG draws a chart option (JSON) at a width and height in px. The ids inside the
// SVG begin with prefix, so that pictures of one page do not meet.
func SVG(option []byte, width, height int, prefix string) (string, error) {
	text, err := call(drawLimit, func(m *machine) goja.Callable { return m.svg }, string(option), width, height)
	if err != nil {
		return "", fmt.Errorf("the picture cannot be drawn: %w", err)
	}
	return tidy(text, prefix), nil
}

var (
	drawn    = regexp.MustCompile(`zr\d+-([a-z]*)(\d+)`)
	tag      = regexp.MustCompile(`<[^>]*>`)
	dropped  = regexp.MustCompile(` (?:ecmeta_[a-z_]+|class|pointer-events|xml:space|baseProfile|version)="[^"]*"`)
	emptied  = regexp.MustCompile(`<g>\s*</g>`)
	styleTag = regexp.MustCompile(`(?s)<style[^>]*>.*?</style>`)
)

// tidy makes the SVG depend on the option alone: ids counted from 0 within the
// picture, nothing left that serves only a browser. Text of the SVG stays as it is.
func tidy(svg, prefix string) string {
	svg = styleTag.ReplaceAllString(svg, "")
	known := map[string]string{}
	svg = tag.ReplaceAllStringFunc(svg, func(t string) string {
		t = dropped.ReplaceAllString(t, "")
		return drawn.ReplaceAllStringFunc(t, func(id string) string {
			if known[id] == "" {
				known[id] = fmt.Sprintf("%s-%d", prefix, len(known))
			}
			return known[id]
		})
	})
	return strings.TrimSpace(emptied.ReplaceAllString(svg, ""))
}
