package render

import (
	"errors"
	"fmt"
	"runtime"
	"sync"

	"quoin/calc/exhibit"
	"quoin/render/chart"
	"quoin/render/page"
	"quoin/render/script"
	"quoin/templates"
)

// press makes what is slow to make, the pictures and the equations of the prose,
// on all cores. The page is laid out twice: the first time it says what it
// needs, the second time it gets it. So the page alone decides what is drawn. Where
// the cache holds all of it, the first time is the last, and no script is started.
type press struct {
	cache   Cache  // may be nil
	jobs    []*job // what is to be made, in the order the page asked
	byKey   map[string]*job
	options map[string]option // of figures, by id
	done    int               // jobs made
}

// job is one thing to make, once.
type job struct {
	key  string
	name string // for progress
	make func() (string, error)
	text string
	err  error
}

// option is what a figure becomes before it is drawn.
type option struct {
	text   []byte
	height int
	err    error
}

// index is index.html. Formulas are set before any picture is drawn, and what is
// wrong with them is told at once, as [*Faults].
func index(p *exhibit.Package, files map[string][]byte, digest string, o Options) ([]byte, error) {
	assets, err := assets()
	if err != nil {
		return nil, err
	}
	r := &press{cache: o.Cache, byKey: map[string]*job{}, options: map[string]option{}}
	options := page.Options{Digest: digest, Body: o.body, Assets: assets, Chart: r.chart, Picture: r.picture,
		TeX: func(src string, display bool) (string, error) {
			return r.ask(formulaKey(src, display), equation, func() (string, error) { return script.TeX(src, display) })
		}}
	first, err := page.Render(p, options)
	if err := ofOffice(err); err != nil {
		return nil, err
	}
	if err != nil || len(r.jobs) == 0 {
		return first, err
	}
	isFormula := func(j *job) bool { return j.name == equation }
	r.run(o.Progress, isFormula)
	if err := r.faults(p, files); err != nil {
		return nil, err
	}
	r.run(o.Progress, func(j *job) bool { return !isFormula(j) })
	return page.Render(p, options)
}

// ofOffice is the faults of an office's templates among the errors of a page.
func ofOffice(err error) error {
	var f *page.OfficeFaults
	if errors.As(err, &f) {
		return &Faults{List: f.List}
	}
	return nil
}

// equation is the name of the jobs that set formulas.
const equation = "an equation"

func formulaKey(src string, display bool) string { return fmt.Sprintf("tex %t %s", display, src) }

// chart is the option of a figure, made once: its id is its own.
func (r *press) chart(f exhibit.Figure) ([]byte, int, error) {
	o, ok := r.options[f.ID]
	if !ok {
		o.text, o.height, o.err = chart.Option(f)
		r.options[f.ID] = o
	}
	return o.text, o.height, o.err
}

// picture draws a figure. What is drawn follows from its option and its words.
func (r *press) picture(f exhibit.Figure, prefix string) (string, error) {
	text, height, err := r.chart(f)
	if err != nil {
		return "", err
	}
	key := fmt.Sprintf("picture %q %q %q %d %s", prefix, f.Caption, f.Alt, height, text)
	return r.ask(key, f.ID, func() (string, error) { return chart.Pictures(f, text, height, prefix) })
}

// ask gives what was made for a key, now or on another day, or notes that it is
// wanted and gives nothing.
func (r *press) ask(key, name string, make func() (string, error)) (string, error) {
	j := r.byKey[key]
	if j == nil {
		j = &job{key: key, name: name, make: make}
		r.byKey[key] = j
		if !j.recall(r.cache) {
			r.jobs = append(r.jobs, j)
		}
	}
	return j.text, j.err
}

// recall takes the thing from the cache.
func (j *job) recall(c Cache) bool {
	if c == nil {
		return false
	}
	data, ok := c.Get(j.key)
	j.text = string(data)
	return ok
}

// run makes what was asked for, of the kind wanted. A panic on one of the cores
// comes out here.
func (r *press) run(progress func(done, total int, what string), wanted func(*job) bool) {
	var mu sync.Mutex
	var group sync.WaitGroup
	var fault any
	next := make(chan *job)
	for range runtime.GOMAXPROCS(0) {
		group.Go(func() {
			for j := range next {
				f := j.do(r.cache)
				mu.Lock()
				if f != nil && fault == nil {
					fault = f
				}
				if r.done++; progress != nil {
					progress(r.done, len(r.jobs), j.name)
				}
				mu.Unlock()
			}
		})
	}
	for _, j := range r.jobs {
		if wanted(j) {
			next <- j
		}
	}
	close(next)
	group.Wait()
	if fault != nil {
		panic(fault)
	}
}

// do makes the thing, keeps it, and gives back a panic, with what was being made.
func (j *job) do(c Cache) (fault any) {
	defer func() {
		if f := recover(); f != nil {
			fault = fmt.Sprintf("%v, making %s", f, j.name)
		}
	}()
	if j.text, j.err = j.make(); j.err == nil && c != nil {
		c.Put(j.key, []byte(j.text))
	}
	return nil
}

// assets is the bundle.
func assets() (page.Assets, error) {
	var out page.Assets
	for _, a := range []struct {
		to   *string
		read func() (string, error)
	}{
		{&out.PageScript, templates.PageScript}, {&out.FontsCSS, templates.FontsCSS},
		{&out.TemmlCSS, templates.TemmlCSS}, {&out.Licences, templates.Licences},
	} {
		text, err := a.read()
		if err != nil {
			return page.Assets{}, err
		}
		*a.to = text
	}
	return out, nil
}
