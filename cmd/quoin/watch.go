package main

import (
	"context"
	"errors"
	"fmt"
	"net"
	"net/http"
	"os"
	"os/signal"
	"path"
	"path/filepath"
	"slices"
	"strings"
	"sync"
	"syscall"
	"time"

	"github.com/fsnotify/fsnotify"

	"quoin/calc/diag"
	"quoin/calc/document"
	"quoin/calc/exhibit"
	"quoin/render"
)

// watch serves a live page of FILE until it is interrupted.
func (a *app) watch(file string) int {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	defer stop()
	src, err := locate(file, a.flags.root)
	if err != nil {
		return a.fail(file, err)
	}
	l, port, err := listen(a.flags.port)
	if err != nil {
		return a.fail(file, reason(err))
	}
	w := newWatch(a, src, port)
	fmt.Fprint(a.stdout, watching(src.given, w.server.address()))
	if err := w.serve(ctx, l); err != nil {
		return a.fail(file, err)
	}
	fmt.Fprint(a.stdout, watchEnded)
	return exitBuilt
}

// watch is one document under watch.
type watch struct {
	app     *app
	src     source
	cache   *memory
	server  *liveServer
	version int
	asked   []string    // files that the last run asked for, below the root
	stuck   *repository // git gave no answer on it, and is not asked again
	quiet   time.Duration
	left    *draft         // what the last page left to be set
	said    func(w *watch) // of tests: after each page
}

func newWatch(a *app, src source, port string) *watch {
	return &watch{app: a, src: src, cache: newMemory(a.cache), asked: []string{src.main}, quiet: 20 * time.Millisecond,
		server: &liveServer{preview: newPreview(), port: port, token: secret()}}
}

// serve answers and rebuilds until the context ends.
func (w *watch) serve(ctx context.Context, l net.Listener) error {
	w.server.done = ctx.Done()
	eyes, err := fsnotify.NewWatcher()
	if err != nil {
		l.Close()
		return err
	}
	defer eyes.Close()
	w.look(eyes)
	w.build(ctx)
	server := &http.Server{Handler: w.server, ReadHeaderTimeout: 10 * time.Second, MaxHeaderBytes: 1 << 16}
	failed := make(chan error, 1)
	go func() { failed <- server.Serve(l) }()
	defer func() {
		end, cancel := context.WithTimeout(context.Background(), time.Second)
		defer cancel()
		if server.Shutdown(end) != nil {
			server.Close()
		}
	}()
	set := make(chan struct{}, 1) // formulas that were set meanwhile
	seen := w.signature()
	for {
		w.look(eyes)
		if now := w.signature(); now != seen { // between the run and the look
			seen = now
			w.build(ctx)
			continue
		}
		w.typeset(set)
		select {
		case <-ctx.Done():
			return nil
		case err := <-failed:
			return err
		case <-set:
			w.build(ctx)
		case e, ok := <-eyes.Events:
			if !ok {
				return errors.New(watchBlind)
			}
			if e.Op == fsnotify.Chmod || !w.concerns(e.Name) || !w.settle(ctx, eyes) {
				continue
			}
			seen = w.signature()
			w.build(ctx)
		case <-eyes.Errors: // events may have been lost
			seen = w.signature()
			w.build(ctx)
		}
	}
}

// settle waits until nothing more happens for a moment: a save is several events.
func (w *watch) settle(ctx context.Context, eyes *fsnotify.Watcher) bool {
	most := time.After(20 * w.quiet)
	for {
		select {
		case <-ctx.Done():
			return false
		case _, ok := <-eyes.Events:
			if !ok {
				return true
			}
		case <-time.After(w.quiet):
			return true
		case <-most:
			return true
		}
	}
}

// concerns tells whether a path is a file that was asked for, or a folder above one.
func (w *watch) concerns(name string) bool {
	for _, asked := range w.asked {
		full := filepath.Join(w.src.root, filepath.FromSlash(asked))
		for _, f := range []string{full, settled(full)} {
			if f == name || strings.HasPrefix(f, name+string(filepath.Separator)) {
				return true
			}
		}
	}
	return false
}

// look watches the folder of every file that was asked for, or where there is none
// the nearest above it; not the files, which a save replaces.
func (w *watch) look(eyes *fsnotify.Watcher) {
	want := map[string]bool{}
	for _, asked := range w.asked {
		full := filepath.Join(w.src.root, filepath.FromSlash(asked))
		for _, f := range []string{full, settled(full)} {
			dir := filepath.Dir(f)
			for dir != filepath.Dir(dir) {
				if info, err := os.Stat(dir); err == nil && info.IsDir() {
					break
				}
				dir = filepath.Dir(dir)
			}
			want[dir] = true
		}
	}
	for _, have := range eyes.WatchList() {
		if !want[have] {
			eyes.Remove(have)
		}
		delete(want, have)
	}
	for dir := range want {
		eyes.Add(dir) // where this fails, the next look tries again
	}
}

// signature is what the files that were asked for look like from outside.
func (w *watch) signature() string {
	var b strings.Builder
	for _, asked := range w.asked {
		info, err := os.Stat(filepath.Join(w.src.root, filepath.FromSlash(asked)))
		if err != nil {
			fmt.Fprintf(&b, "%s none\n", asked)
			continue
		}
		fmt.Fprintf(&b, "%s %d %d\n", asked, info.Size(), info.ModTime().UnixNano())
	}
	return b.String()
}

// draft is what the last page left to be set.
type draft struct {
	*render.Draft
	res document.Result
}

// build runs the document and shows what it comes to.
func (w *watch) build(ctx context.Context) {
	if ctx.Err() != nil {
		return
	}
	start := time.Now()
	w.version++
	w.left = nil
	defer func() { // the next save may not lead there
		if fault := recover(); fault != nil {
			w.fails(diag.List{}, document.Result{}, internalError(fmt.Sprint(fault), culprit()))
		}
	}()
	res, err := w.run()
	if len(res.Asked) > 0 {
		w.asked = res.Asked
	}
	if !slices.Contains(w.asked, w.src.main) {
		w.asked = append(w.asked, w.src.main)
	}
	var page *render.Draft
	if err == nil && res.Package != nil {
		page, err = render.Live(res.Package, res.Files, render.Options{Cache: w.cache}, liveScript(w.version, false), watchState)
	}
	switch {
	case err != nil:
		w.fails(diag.List{}, res, err.Error())
	case page == nil:
		w.fails(res.Diagnostics, res, "")
	default:
		tables := sync.OnceValue(func() map[string][]byte {
			all, err := render.Tables(res.Package)
			if err != nil {
				return nil // the build will say why
			}
			return all
		})
		w.server.preview.show(w.version, page.Page, func(name string) []byte {
			if input, ok := strings.CutPrefix(name, "inputs/"); ok {
				return res.Files[input]
			}
			return tables()[name]
		})
		w.left = &draft{page, res}
		list, checks := seenFromHere(w.src, res)
		w.app.writeDiagnostics(w.src, list, res.Files)
		fmt.Fprint(w.app.stdout, shownAgain(w.src.given, checks, time.Since(start)))
	}
	if w.said != nil {
		w.said(w)
	}
}

// fails shows what is wrong in place of a page.
func (w *watch) fails(list diag.List, res document.Result, text string) {
	res.Diagnostics = list
	list, _ = seenFromHere(w.src, res)
	var said strings.Builder
	if text != "" {
		said.WriteString(fileError(w.src.given, text))
	}
	(&app{stderr: &said}).writeDiagnostics(w.src, list, res.Files)
	fmt.Fprint(w.app.stderr, said.String())
	p := w.server.preview
	p.mu.Lock()
	last := p.last != nil
	p.mu.Unlock()
	p.show(w.version, messagesPage(notShown(path.Base(w.src.main), list), said.String(), w.version, last), nil)
}

// run runs the document. What git says of it is asked meanwhile.
func (w *watch) run() (document.Result, error) {
	root, err := os.OpenRoot(w.src.root)
	if err != nil {
		return document.Result{}, reason(err)
	}
	defer root.Close()
	from := exhibit.Provenance{Tool: versionLine(), Source: w.src.main, Build: buildOf()}
	known := make(chan struct{})
	var tree *repository
	go func() {
		defer close(known)
		if tree = w.stuck; tree != nil {
			return
		}
		tree = (*workTrees)(nil).of(filepath.Dir(filepath.Join(w.src.root, filepath.FromSlash(w.src.main))))
		if tree != nil && tree.silent {
			w.stuck = tree
		}
	}()
	o := document.Options{Overrides: slices.Clone(w.app.flags.overrides), Provenance: from, Cache: w.cache}
	res := document.Run(document.Source{FS: root.FS(), Main: w.src.main}, o)
	w.app.thaw(root.FS(), w.src.main, &res)
	<-known
	if p := res.Package; p != nil {
		p.Provenance.Commit, p.Provenance.CommitDate, _ = tree.provenance()
		p.Provenance.Dirty = tree.dirty(w.src.root, res.Files)
	}
	return res, nil
}

// typeset sets, beside everything else, the formulas that the page shows as written.
func (w *watch) typeset(done chan<- struct{}) {
	left := w.left
	w.left = nil
	if left == nil || len(left.Unset) == 0 {
		return
	}
	go func() {
		any, err := left.Set(left.res.Package, left.res.Files)
		var faults *render.Faults
		if errors.As(err, &faults) {
			w.app.writeDiagnostics(w.src, faults.List, left.res.Files)
			return // they stay as they were written
		}
		if any && err == nil {
			select {
			case done <- struct{}{}:
			default:
			}
		}
	}()
}
