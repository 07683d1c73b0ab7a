package main

import (
	"crypto/rand"
	"encoding/hex"
	"fmt"
	"mime"
	"net"
	"net/http"
	"path"
	"strings"
	"sync"
	"time"
)

// preview is what the browser is shown, and who waits for the next of it. It can be
// read only; nothing that is asked changes anything.
type preview struct {
	mu      sync.Mutex
	version int
	page    []byte                   // the one to show
	last    []byte                   // the last that could be made
	files   func(name string) []byte // tables and inputs of that one
	broken  bool
	changed chan struct{} // closed when version moves on
}

func newPreview() *preview { return &preview{changed: make(chan struct{})} }

// show takes the next page. A page without files is one of messages.
func (p *preview) show(version int, page []byte, files func(name string) []byte) {
	p.mu.Lock()
	defer p.mu.Unlock()
	p.version, p.page, p.broken = version, page, files == nil
	if files != nil {
		p.last, p.files = page, files
	}
	close(p.changed)
	p.changed = make(chan struct{})
}

// state is the version, whether it is broken, and what is closed when that changes.
func (p *preview) state() (version int, broken bool, changed <-chan struct{}) {
	p.mu.Lock()
	defer p.mu.Unlock()
	return p.version, p.broken, p.changed
}

// secret is a path that no other site can know.
func secret() string {
	b := make([]byte, 16)
	rand.Read(b)
	return hex.EncodeToString(b)
}

// liveServer answers on one address of this machine, under one secret path.
type liveServer struct {
	preview *preview
	port    string
	token   string
	done    <-chan struct{} // closed when the program ends
}

// address is where the page is.
func (s *liveServer) address() string { return "http://127.0.0.1:" + s.port + "/" + s.token + "/" }

// ServeHTTP refuses all that does not come from this machine by a name of this
// machine: a site whose name is made to lead here still says its own name.
func (s *liveServer) ServeHTTP(w http.ResponseWriter, r *http.Request) {
	h := w.Header()
	for name, value := range map[string]string{
		"X-Content-Type-Options": "nosniff", "Referrer-Policy": "no-referrer", "Cache-Control": "no-store", "X-Frame-Options": "DENY",
		"Cross-Origin-Resource-Policy": "same-origin", "Cross-Origin-Opener-Policy": "same-origin", "Content-Security-Policy": "frame-ancestors 'none'",
	} {
		h.Set(name, value)
	}
	own := []string{"127.0.0.1:" + s.port, "localhost:" + s.port}
	rest, ok := strings.CutPrefix(r.URL.Path, "/"+s.token+"/")
	origin := r.Header.Get("Origin")
	switch {
	case r.Host != own[0] && r.Host != own[1], origin != "" && origin != "http://"+own[0] && origin != "http://"+own[1]:
		http.Error(w, "forbidden", http.StatusForbidden)
	case r.Method != http.MethodGet && r.Method != http.MethodHead:
		h.Set("Allow", "GET, HEAD")
		http.Error(w, "method not allowed", http.StatusMethodNotAllowed)
	case !ok:
		http.NotFound(w, r)
	case rest == "events":
		s.events(w, r)
	default:
		s.file(w, r, rest)
	}
}

// file is the page, the last good one, or a file that it leads to.
func (s *liveServer) file(w http.ResponseWriter, r *http.Request, name string) {
	p := s.preview
	p.mu.Lock()
	page, last, files := p.page, p.last, p.files
	p.mu.Unlock()
	var data []byte
	kind := mime.TypeByExtension(path.Ext(name))
	switch {
	case name == "":
		data, kind = page, "text/html; charset=utf-8"
	case name == "last":
		data, kind = last, "text/html; charset=utf-8"
	case files != nil: // a file of the user's is shown or saved, never run
		data = files(name)
		if !strings.HasPrefix(kind, "image/") || strings.Contains(kind, "svg") {
			kind = "text/plain; charset=utf-8"
		}
	}
	if data == nil {
		http.NotFound(w, r)
		return
	}
	w.Header().Set("Content-Type", kind)
	w.Header().Set("Content-Length", fmt.Sprint(len(data)))
	if r.Method == http.MethodGet {
		w.Write(data)
	}
}

// events tells the version of the page, now and whenever it changes.
func (s *liveServer) events(w http.ResponseWriter, r *http.Request) {
	out := http.NewResponseController(w)
	w.Header().Set("Content-Type", "text/event-stream")
	if r.Method == http.MethodHead {
		return
	}
	beat := time.NewTicker(20 * time.Second)
	defer beat.Stop()
	for {
		version, broken, changed := s.preview.state()
		word := "good"
		if broken {
			word = "broken"
		}
		if _, err := fmt.Fprintf(w, "data: %d %s\n\n", version, word); err != nil || out.Flush() != nil {
			return
		}
		for waiting := true; waiting; {
			select {
			case <-changed:
				waiting = false
			case <-beat.C: // finds out whether anybody is there
				if _, err := fmt.Fprint(w, ":\n\n"); err != nil || out.Flush() != nil {
					return
				}
			case <-r.Context().Done():
				return
			case <-s.done:
				return
			}
		}
	}
}

// listen opens a port of this machine alone; 0 is any that is free.
func listen(port int) (net.Listener, string, error) {
	l, err := net.Listen("tcp4", fmt.Sprintf("127.0.0.1:%d", port))
	if err != nil {
		return nil, "", err
	}
	_, free, err := net.SplitHostPort(l.Addr().String())
	return l, free, err
}
