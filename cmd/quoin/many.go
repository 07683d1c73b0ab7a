package main

import (
	"bytes"
	"fmt"
	"os"
	"runtime"
	"runtime/debug"
	"sync"
	"sync/atomic"

	"quoin/calc/diag"
	"quoin/calc/document"
	"quoin/calc/exhibit"
)

// job is what a command does with one FILE.
type job struct {
	do       func(a *app, file string) int
	together bool // several at once; folders stand for the packages in them
	writes   bool // the folder of a package
}

// tally is what became of a FILE, for the summary of many.
type tally struct {
	errors, ok, failed int
	written, unchanged bool
	run                bool // without errors
	moved              bool // results differ from the frozen ones
}

// count notes what a run came to.
func (t *tally) count(res document.Result, w written) {
	for _, d := range res.Diagnostics {
		if d.Severity == diag.Error {
			t.errors++
		}
	}
	if res.Package != nil {
		t.run, t.written, t.unchanged = true, w.dir != "" && !w.unchanged, w.unchanged
		t.failed = len(exhibit.Failed(res.Checks))
		t.ok = len(res.Checks) - t.failed
		f := res.Package.Frozen
		t.moved = f != nil && f.Current && !f.Agrees()
	}
}

// each runs a command on every FILE, and ends with the worst code: errors weigh more
// than what is not met. Several run at once, at most as many as there are cores, so
// that what they hold in memory is bounded; what they say comes out in the order of
// the files.
func (a *app) each(args []string, j job) error {
	var all []target
	many := false
	if j.together {
		all, many = find(args)
	} else {
		for _, file := range args {
			all = append(all, target{file: file})
		}
	}
	if a.flags.out != "" && len(all) > 1 {
		return errOneFile
	}
	if j.writes && a.flags.out == "" {
		refuseClashes(all)
	}
	if !a.flags.noCache {
		a.cache = openCache()
		defer a.cache.Close()
	}
	a.trees = &workTrees{}
	run := func(one *app, t target) int {
		if t.err != nil {
			return one.fail(t.file, t.err)
		}
		return j.do(one, t.file)
	}
	if len(all) == 1 && (!many || all[0].err != nil) {
		a.code = run(a, all[0])
		return nil
	}
	workers := 1
	if j.together {
		workers = runtime.GOMAXPROCS(0)
	}
	tallies := a.inOrder(len(all), workers, func(one *app, i int) int {
		one.many = many
		return run(one, all[i])
	})
	if many && !a.flags.json {
		fmt.Fprint(a.stdout, manySummary(tallies))
	}
	return nil
}

// inOrder runs n things on several cores, each with an app of its own, and lets them
// speak in order.
func (a *app) inOrder(n, workers int, do func(one *app, i int) int) []tally {
	type said struct {
		out, err bytes.Buffer
		code     int
		tally    tally
		done     chan struct{}
	}
	all := make([]said, n)
	for i := range all {
		all[i].done = make(chan struct{})
	}
	if os.Getenv("GOGC") == "" {
		defer debug.SetGCPercent(debug.SetGCPercent(400)) // a package is soon done with
	}
	bar := a.progress()
	var next, ready atomic.Int64
	var group sync.WaitGroup
	for range min(workers, n) {
		group.Go(func() {
			for i := int(next.Add(1)) - 1; i < n; i = int(next.Add(1)) - 1 {
				s := &all[i]
				one := *a
				one.stdout, one.stderr, one.tally = &s.out, &s.err, &s.tally
				s.code = guarded(&one, func() int { return do(&one, i) })
				if show := bar.stage(progressMany); show != nil {
					show(int(ready.Add(1)), n, "")
				}
				close(s.done)
			}
		})
	}
	tallies := make([]tally, n)
	for i := range all {
		s := &all[i]
		<-s.done
		if s.err.Len()+s.out.Len() > 0 {
			bar.done()
		}
		a.stderr.Write(s.err.Bytes())
		a.stdout.Write(s.out.Bytes())
		a.code = worse(a.code, s.code)
		tallies[i] = s.tally
		s.out, s.err = bytes.Buffer{}, bytes.Buffer{}
	}
	group.Wait()
	bar.done()
	return tallies
}

// guarded runs one of many: a fault of the program in it is told and ends it alone.
func guarded(a *app, do func() int) (code int) {
	defer func() {
		if fault := recover(); fault != nil {
			fmt.Fprint(a.stderr, internalError(fmt.Sprint(fault), culprit()))
			a.tally.errors++
			code = exitErrors
		}
	}()
	return do()
}

// worse is the code that weighs more: errors most, then the higher.
func worse(a, b int) int {
	if a == exitErrors || b == exitErrors {
		return exitErrors
	}
	return max(a, b)
}
