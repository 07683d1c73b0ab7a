package render

import (
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
// needs, the second time it gets it. So the page alone decides what is drawn.
type press struct {
	jobs  []*job // in the order the page asked
	byKey map[string]*job
	done  int // jobs made
}

// job is one thing to make, once.
type job struct {
	name string // for progress
	make func() (string, error)
	text string
	err  error
}

// index is index.html. Formulas are set before any picture is drawn, and what is
// wrong with them is told at once, as [*Faults].
func index(p *exhibit.Package, files map[string][]byte, digest string, progress func(done, total int, what string)) ([]byte, error) {
	assets, err := assets()
	if err != nil {
		return nil, err
	}
	r := &press{byKey: map[string]*job{}}
	options := page.Options{Digest: digest, Assets: assets, Chart: chart.Option,
		Picture: func(f exhibit.Figure, prefix string) (string, error) {
			return r.ask("picture "+f.ID+"\x00"+prefix, f.ID, func() (string, error) { return chart.Pictures(f, prefix) })
		},
		TeX: func(src string, display bool) (string, error) {
			return r.ask(formulaKey(src, display), equation, func() (string, error) { return script.TeX(src, display) })
		}}
	if _, err := page.Render(p, options); err != nil {
		return nil, err
	}
	isFormula := func(j *job) bool { return j.name == equation }
	r.run(progress, isFormula)
	if err := r.faults(p, files); err != nil {
		return nil, err
	}
	r.run(progress, func(j *job) bool { return !isFormula(j) })
	return page.Render(p, options)
}

// equation is the name of the jobs that set formulas.
const equation = "an equation"

func formulaKey(src string, display bool) string { return fmt.Sprintf("tex %t %s", display, src) }

// ask gives what was made for a key, or notes that it is wanted and gives nothing.
func (r *press) ask(key, name string, make func() (string, error)) (string, error) {
	j := r.byKey[key]
	if j == nil {
		j = &job{name: name, make: make}
		r.byKey[key] = j
		r.jobs = append(r.jobs, j)
	}
	return j.text, j.err
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
				f := j.do()
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

// do makes the thing and gives back a panic, with what was being made.
func (j *job) do() (fault any) {
	defer func() {
		if f := recover(); f != nil {
			fault = fmt.Sprintf("%v, making %s", f, j.name)
		}
	}()
	j.text, j.err = j.make()
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
