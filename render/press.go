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
// on all cores. What the page will want is read from the package and made before the
// page is laid out; but the page alone decides. Should it ask for what was not
// foreseen, that is made too, and the page laid out a second time. Where the cache
// holds all of it, no script is started.
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
	made bool
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
		TeX: r.formula}
	if p.Office == nil || page.CheckOffice(p) == nil { // else the page says at once what is wrong
		r.foresee(p)
		if err := r.make(p, files, o); err != nil {
			return nil, err
		}
	}
	asked := len(r.jobs)
	out, err := page.Render(p, options)
	if err := ofOffice(err); err != nil {
		return nil, err
	}
	if err != nil || len(r.jobs) == asked {
		return out, err
	}
	if err := r.make(p, files, o); err != nil {
		return nil, err
	}
	return page.Render(p, options)
}

// make makes what was asked for: the formulas first, and no picture where one of them
// is faulty.
func (r *press) make(p *exhibit.Package, files map[string][]byte, o Options) error {
	isFormula := func(j *job) bool { return j.name == equation }
	r.run(o.Progress, isFormula)
	if err := r.faults(p, files); err != nil {
		return err
	}
	r.run(o.Progress, func(j *job) bool { return !isFormula(j) })
	return nil
}

// foresee asks for the formulas of the prose and the pictures of the figures, as the
// page will. The options of the figures are made on all cores.
func (r *press) foresee(p *exhibit.Package) {
	walk(p, func(n exhibit.Prose) { r.formula(n.Text, n.Kind == exhibit.MathBlock) })
	var figures []*exhibit.Figure
	for _, c := range p.Chapters {
		for _, piece := range c.Pieces {
			if piece.Block == nil {
				continue
			}
			for _, part := range piece.Block.Parts {
				for _, it := range part.Items {
					if it.Figure != nil {
						figures = append(figures, it.Figure)
					}
				}
			}
		}
	}
	made := make([]option, len(figures))
	inParallel(len(figures), func(i int) { made[i].text, made[i].height, made[i].err = chart.Option(*figures[i]) })
	for i, f := range figures {
		if _, again := r.options[f.ID]; !again {
			r.options[f.ID] = made[i]
			r.picture(*f, page.Prefix(f)) // what is wrong, the page will hear
		}
	}
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

// formula sets a formula of the prose.
func (r *press) formula(src string, display bool) (string, error) {
	return r.ask(formulaKey(src, display), equation, func() (string, error) { return script.TeX(src, display) })
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

// run makes what was asked for and is not made yet, of the kind wanted.
func (r *press) run(progress func(done, total int, what string), wanted func(*job) bool) {
	var todo []*job
	for _, j := range r.jobs {
		if !j.made && wanted(j) {
			todo = append(todo, j)
		}
	}
	var mu sync.Mutex
	inParallel(len(todo), func(i int) {
		j := todo[i]
		j.do(r.cache)
		mu.Lock()
		defer mu.Unlock()
		if r.done++; progress != nil {
			progress(r.done, len(r.jobs), j.name)
		}
	})
}

// inParallel does work 0 to n-1 on all cores. A panic on one of them comes out here,
// when all have ended.
func inParallel(n int, work func(i int)) {
	var mu sync.Mutex
	var group sync.WaitGroup
	var fault any
	guarded := func(i int) {
		defer func() {
			if f := recover(); f != nil {
				mu.Lock()
				defer mu.Unlock()
				if fault == nil {
					fault = f
				}
			}
		}()
		work(i)
	}
	next := make(chan int)
	for range min(n, runtime.GOMAXPROCS(0)) {
		group.Go(func() {
			for i := range next {
				guarded(i)
			}
		})
	}
	for i := range n {
		next <- i
	}
	close(next)
	group.Wait()
	if fault != nil {
		panic(fault)
	}
}

// do makes the thing and keeps it. A panic says what was being made.
func (j *job) do(c Cache) {
	defer func() {
		if f := recover(); f != nil {
			panic(fmt.Sprintf("%v, making %s", f, j.name))
		}
	}()
	j.made = true
	if j.text, j.err = j.make(); j.err == nil && c != nil {
		c.Put(j.key, []byte(j.text))
	}
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
