package render

import (
	"fmt"
	"html"
	"sync"

	"quoin/calc/exhibit"
	"quoin/render/ledger"
	"quoin/render/page"
	"quoin/render/script"
)

// A live page is that of the package without what is slow to make: charts are drawn
// by the page's own script, and a formula of the prose that was never set before
// stands as it was written until it has been.

// Draft is a live page, and the formulas that it shows as written.
type Draft struct {
	Page    []byte
	Unset   []Formula
	options Options
}

// Formula is a formula of the prose in TeX.
type Formula struct {
	TeX     string
	Display bool
}

// Live makes the live page of p. behind is added to the page's script, state to its
// open state; connect lets the page ask the address it came from.
func Live(p *exhibit.Package, files map[string][]byte, o Options, behind string, state ...string) (*Draft, error) {
	a, err := assets()
	if err != nil {
		return nil, err
	}
	a.PageScript += "\n" + behind
	inputs, err := ledger.Inputs(files, p)
	if err != nil {
		return nil, err
	}
	d := &Draft{options: o}
	r := &press{cache: o.Cache, byKey: map[string]*job{}, options: map[string]option{}}
	waiting := map[Formula]bool{}
	d.Page, err = page.Render(p, page.Options{Digest: ledger.Digest(inputs, p.Provenance.Tool), Assets: a, Chart: r.chart, Connect: true, State: state,
		Picture: func(f exhibit.Figure, _ string) (string, error) {
			_, height, err := r.chart(f)
			return fmt.Sprintf(`<svg viewBox="0 0 %d %d" width="100%%" aria-hidden="true"><desc>%s</desc></svg>`, pictureWidth, height, html.EscapeString(f.Alt)), err
		},
		TeX: func(src string, display bool) (string, error) {
			if o.Cache != nil {
				if text, ok := o.Cache.Get(formulaKey(src, display)); ok {
					return string(text), nil
				}
			}
			if f := (Formula{src, display}); !waiting[f] {
				waiting[f] = true
				d.Unset = append(d.Unset, f)
			}
			return "<code>" + html.EscapeString(src) + "</code>", nil
		}})
	if err != nil {
		return nil, err
	}
	return d, nil
}

// Tables are the tables of a package, by path.
func Tables(p *exhibit.Package) (map[string][]byte, error) { return ledger.Tables(p) }

// Set sets the formulas that the page shows as written and keeps them in the cache,
// for the next page. It reports whether there were any, and what the typesetter
// refuses, as [*Faults].
func (d *Draft) Set(p *exhibit.Package, files map[string][]byte) (bool, error) {
	if len(d.Unset) == 0 {
		return false, nil
	}
	setting.Lock()
	defer setting.Unlock()
	r := &press{cache: d.options.Cache, byKey: map[string]*job{}}
	for _, f := range d.Unset {
		r.ask(formulaKey(f.TeX, f.Display), equation, func() (string, error) { return script.TeX(f.TeX, f.Display) })
	}
	r.run(nil, func(*job) bool { return true })
	return true, r.faults(p, files)
}

// pictureWidth is that of static pictures, whose place an empty one keeps.
const pictureWidth = 700

// setting is one at a time: formulas come by the document.
var setting sync.Mutex
