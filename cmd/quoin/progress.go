package main

import (
	"os"
	"sync"

	"github.com/schollz/progressbar/v3"
	"golang.org/x/term"
)

// progress shows how far long work has come, on a terminal only.
type progress struct {
	mu    sync.Mutex
	file  *os.File // the terminal, or nil
	bar   *progressbar.ProgressBar
	words string
}

// progress is one for stderr.
func (a *app) progress() *progress {
	if f, ok := a.stderr.(*os.File); ok && term.IsTerminal(int(f.Fd())) {
		return &progress{file: f}
	}
	return &progress{}
}

// stage is what work reports to; nil where nothing is shown.
func (p *progress) stage(words string) func(done, total int, what string) {
	if p.file == nil {
		return nil
	}
	return func(done, total int, what string) {
		p.mu.Lock()
		defer p.mu.Unlock()
		if p.bar == nil || p.words != words {
			p.bar = progressbar.NewOptions(total, progressbar.OptionSetWriter(p.file), progressbar.OptionClearOnFinish(),
				progressbar.OptionSetWidth(24), progressbar.OptionSetPredictTime(false))
			p.words = words
		}
		p.bar.ChangeMax(total)
		p.bar.Describe(words + " " + what)
		p.bar.Set(done)
	}
}

// done takes the bar away.
func (p *progress) done() {
	p.mu.Lock()
	defer p.mu.Unlock()
	if p.bar != nil {
		p.bar.Clear()
		p.bar = nil
	}
}
