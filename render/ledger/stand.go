package ledger

import "quoin/calc/exhibit"

// Stand is how the results of a package stand to frozen ones, which file holds.
func Stand(p *exhibit.Package, frozen *Frozen, file string) *exhibit.Frozen {
	now := FrozenOf(p)
	d := Compare(frozen, now, frozen.Tolerance)
	some := func(list []exhibit.Moved) []exhibit.Moved { return append([]exhibit.Moved{}, list...) } // never null
	out := &exhibit.Frozen{File: file, Revision: frozen.Revision, Current: frozen.Revision == now.Revision, Moved: some(d.Results()), Files: some(d.Files), Marks: some(nil)}
	if since, rows := frozen.Base(now.Revision); rows != nil {
		out.Since = since
		out.Marks = some(compare(Head{}, now.Head, rows, now.Sections, frozen.Tolerance).Results())
	}
	return out
}

// frozenFacts is the "frozen" member of results.json.
type frozenFacts struct {
	File     string `json:"file"`
	Revision string `json:"revision"`
	Current  bool   `json:"current"`
	Agrees   bool   `json:"agrees"`
	Moved    int    `json:"moved"`
}
