package main

import (
	"bufio"
	"context"
	"fmt"
	"io"
	"net/http"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"
)

const watched = "---\nquoin: 1\ntitle: Watched\nparts: [more.md]\ninputs: data/in.yaml\n---\n\n# One\n\nText $\\frac{1}{2}$ and {{ .V }}.\n\n```calc formula\nV = 2 * W   # twice\n```\n"

// underWatch is a document under watch, in a folder of its own.
type underWatch struct {
	t      testing.TB
	dir    string
	server *liveServer
	shown  chan int // versions
	end    func() error
}

func (u *underWatch) write(name, text string) {
	u.t.Helper()
	file := filepath.Join(u.dir, filepath.FromSlash(name))
	os.MkdirAll(filepath.Dir(file), 0o755)
	if err := os.WriteFile(file, []byte(text), 0o644); err != nil {
		u.t.Fatal(err)
	}
}

// saved writes as careful editors do: aside, then renamed into place.
func (u *underWatch) saved(name, text string) {
	u.t.Helper()
	u.write(name+".new", text)
	file := filepath.Join(u.dir, filepath.FromSlash(name))
	if err := os.Rename(file+".new", file); err != nil {
		u.t.Fatal(err)
	}
}

// follow starts watching a file, and waits for its first page.
func follow(t testing.TB, file string) *underWatch {
	t.Helper()
	u := &underWatch{t: t, dir: filepath.Dir(file), shown: make(chan int, 100)}
	src, err := locate(file, u.dir)
	if err != nil {
		t.Fatal(err)
	}
	l, port, err := listen(0)
	if err != nil {
		t.Fatal(err)
	}
	w := newWatch(&app{stdout: io.Discard, stderr: io.Discard}, src, port)
	w.said = func(w *watch) { u.shown <- w.version }
	u.server = w.server
	ctx, cancel := context.WithCancel(context.Background())
	ended := make(chan error, 1)
	go func() { ended <- w.serve(ctx, l) }()
	u.end = sync.OnceValue(func() error { cancel(); return <-ended })
	t.Cleanup(func() {
		if err := u.end(); err != nil {
			t.Error(err)
		}
	})
	<-u.shown
	return u
}

// get is what the server answers, with a header changed.
func (u *underWatch) get(path string, change func(r *http.Request)) (int, string) {
	u.t.Helper()
	r, err := http.NewRequest("GET", "http://127.0.0.1:"+u.server.port+path, nil)
	if err != nil {
		u.t.Fatal(err)
	}
	if change != nil {
		change(r)
	}
	res, err := http.DefaultClient.Do(r)
	if err != nil {
		u.t.Fatal(err)
	}
	defer res.Body.Close()
	body, err := io.ReadAll(res.Body)
	if err != nil {
		u.t.Fatal(err)
	}
	return res.StatusCode, string(body)
}

func (u *underWatch) page() string {
	u.t.Helper()
	code, body := u.get("/"+u.server.token+"/", nil)
	if code != 200 {
		u.t.Fatalf("the page is answered with %d", code)
	}
	return body
}

// until waits for a page that holds a text.
func (u *underWatch) until(want string) {
	u.t.Helper()
	for {
		if strings.Contains(u.page(), want) {
			return
		}
		select {
		case <-u.shown:
		case <-time.After(20 * time.Second):
			u.t.Fatalf("no page holds %q", want)
		}
	}
}

// watchedExample is the document in a folder of its own, under watch.
func watchedExample(t testing.TB) *underWatch {
	dir, err := real(t.TempDir())
	if err != nil {
		t.Fatal(err)
	}
	u := &underWatch{t: t, dir: dir}
	u.write("more.md", "# Two\n\nPart one.\n")
	u.write("data/in.yaml", "W: 3 kN\n")
	u.write("package.md", watched)
	return follow(t, filepath.Join(dir, "package.md"))
}

// TestWatchFollows: each way to save, a part, a data file, a file or its folder
// removed and made again, and a source with errors in between.
func TestWatchFollows(t *testing.T) {
	u := watchedExample(t)
	u.until("6.000")
	u.until("<mfrac") // the formula, once it is set
	u.saved("package.md", strings.Replace(watched, "Text", "Words by rename", 1))
	u.until("Words by rename")
	u.write("package.md", strings.Replace(watched, "Text", "Words in place", 1))
	u.until("Words in place")
	u.write("more.md", "# Two\n\nPart two.\n")
	u.until("Part two")
	u.saved("data/in.yaml", "W: 4 kN\n")
	u.until("8.000")

	u.write("package.md", strings.Replace(watched, "2 * W", "2 * Q <b>", 1))
	u.until("nothing is named Q")
	page := u.page()
	for _, want := range []string{"package.md:13:9: error: nothing is named Q", "    V = 2 * Q &lt;b&gt;", "            ^", `href="last"`} {
		if !strings.Contains(page, want) {
			t.Errorf("the page of messages lacks %q:\n%s", want, page)
		}
	}
	if code, last := u.get("/"+u.server.token+"/last", nil); code != 200 || !strings.Contains(last, "8.000") {
		t.Errorf("the last good page is answered with %d", code)
	}
	u.saved("package.md", watched)
	u.until("8.000")

	os.RemoveAll(filepath.Join(u.dir, "data"))
	u.until("there is no file data/in.yaml")
	u.write("data/in.yaml", "W: 5 kN\n")
	u.until("10.00")
	os.Remove(filepath.Join(u.dir, "package.md"))
	u.until("there is no file package.md")
	u.write("package.md", watched)
	u.until("10.00")

	if names, _ := filepath.Glob(filepath.Join(u.dir, "*")); len(names) != 3 {
		t.Errorf("beside the source stand %v", names)
	}
}

// TestWatchKeepsOut: other names, other origins, other methods, other paths.
func TestWatchKeepsOut(t *testing.T) {
	u := watchedExample(t)
	home := "/" + u.server.token + "/"
	for _, c := range []struct {
		what, path string
		want       int
		change     func(r *http.Request)
	}{
		{"the page", home, 200, nil},
		{"by the other name", home, 200, func(r *http.Request) { r.Host = "localhost:" + u.server.port }},
		{"of its own origin", home, 200, func(r *http.Request) { r.Header.Set("Origin", "http://127.0.0.1:"+u.server.port) }},
		{"the head alone", home, 200, func(r *http.Request) { r.Method = "HEAD" }},
		{"an input", home + "inputs/data/in.yaml", 200, nil},
		{"a table that is not there", home + "tables/none.csv", 404, nil},
		{"a name that leads here", home, 403, func(r *http.Request) { r.Host = "rebound.example:" + u.server.port }},
		{"a name without the port", home, 403, func(r *http.Request) { r.Host = "127.0.0.1" }},
		{"another port", home, 403, func(r *http.Request) { r.Host = "127.0.0.1:1" }},
		{"another origin", home + "events", 403, func(r *http.Request) { r.Header.Set("Origin", "https://rebound.example") }},
		{"no origin that has a name", home, 403, func(r *http.Request) { r.Header.Set("Origin", "null") }},
		{"a form", home, 405, func(r *http.Request) { r.Method = "POST" }},
		{"a change", home, 405, func(r *http.Request) { r.Method = "DELETE" }},
		{"a question before one", home, 405, func(r *http.Request) { r.Method = "OPTIONS" }},
		{"no token", "/", 404, nil},
		{"a wrong token", "/" + strings.Repeat("0", 32) + "/", 404, nil},
		{"a file that is none of the package", home + "inputs/../secret", 404, nil},
		{"a page that was not made", home + "last/", 404, nil},
	} {
		if code, body := u.get(c.path, c.change); code != c.want {
			t.Errorf("%s: %d, want %d (%.60q)", c.what, code, c.want, body)
		}
	}
	res, err := http.Get(u.server.address())
	if err != nil {
		t.Fatal(err)
	}
	res.Body.Close()
	for name, want := range map[string]string{"Access-Control-Allow-Origin": "", "Cache-Control": "no-store", "X-Content-Type-Options": "nosniff", "Referrer-Policy": "no-referrer", "Content-Security-Policy": "frame-ancestors 'none'"} {
		if got := res.Header.Get(name); got != want {
			t.Errorf("%s is %q, want %q", name, got, want)
		}
	}
	if len(u.server.token) != 32 || secret() == secret() {
		t.Error("the path is no secret")
	}
	if !strings.Contains(u.page(), "; connect-src &#39;self&#39;") || strings.Contains(u.page(), "unsafe-eval") {
		t.Error("the policy of the page")
	}
}

// TestWatchAtOnce: many readers and saves at a time, and an end in the middle.
func TestWatchAtOnce(t *testing.T) {
	u := watchedExample(t)
	stop := make(chan struct{})
	var readers sync.WaitGroup
	for range 4 {
		readers.Go(func() {
			res, err := http.Get(u.server.address() + "events")
			if err != nil {
				t.Error(err)
				return
			}
			defer res.Body.Close()
			for s := bufio.NewScanner(res.Body); s.Scan(); {
				select {
				case <-stop:
					return
				default:
					http.Get(u.server.address())
				}
			}
		})
	}
	for i := range 12 {
		u.saved("package.md", strings.Replace(watched, "Text", fmt.Sprint("Text number ", i), 1))
		time.Sleep(5 * time.Millisecond)
	}
	u.until("Text number 11")
	close(stop)
	if err := u.end(); err != nil {
		t.Error(err)
	}
	readers.Wait() // the streams end with the program
}

// BenchmarkWatch is from a save of the first example to the event that tells the
// page: a word of its prose changed, or a number that much follows from.
func BenchmarkWatch(b *testing.B) {
	for _, c := range []struct{ name, old, new string }{{"prose", "This calculation finds", "This calculation %d finds"}, {"number", "S_DS: ", "S_DS: 1.%d * "}} {
		b.Run(c.name, func(b *testing.B) {
			root, err := real(b.TempDir())
			if err != nil {
				b.Fatal(err)
			}
			if err := os.CopyFS(root, os.DirFS(filepath.Dir(example))); err != nil {
				b.Fatal(err)
			}
			file := filepath.Join(root, "package.md")
			text, err := os.ReadFile(file)
			if err != nil || !strings.Contains(string(text), c.old) {
				b.Fatalf("the example has no %q to change: %v", c.old, err)
			}
			u := follow(b, file)
			res, err := http.Get(u.server.address() + "events")
			if err != nil {
				b.Fatal(err)
			}
			defer res.Body.Close()
			events := bufio.NewScanner(res.Body)
			next := func() {
				for events.Scan() {
					if strings.HasPrefix(events.Text(), "data:") {
						return
					}
				}
				b.Fatal("the stream ended")
			}
			u.until("<math")
			next()
			for quiet := false; !quiet; { // the formulas of the prose are set meanwhile
				select {
				case <-u.shown:
					next()
				case <-time.After(3 * time.Second):
					quiet = true
				}
			}
			for i := 0; b.Loop(); i++ {
				u.saved("package.md", strings.Replace(string(text), c.old, fmt.Sprintf(c.new, i%1000), 1))
				next()
				<-u.shown
			}
		})
	}
}
