package main

import (
	"context"
	"errors"
	"fmt"
	"net/url"
	"os"
	"os/exec"
	"os/signal"
	"path/filepath"
	"regexp"
	"runtime"
	"strings"
	"syscall"
	"time"
)

// browserVariable names a browser, by path or by name.
const browserVariable = "QUOIN_CHROMIUM"

// browserNames are looked for on PATH, in this order.
var browserNames = []string{"chromium", "chromium-browser", "google-chrome", "google-chrome-stable", "chrome", "microsoft-edge", "microsoft-edge-stable", "msedge"}

// browserPlaces are where they stand on a system when they are not on PATH.
func browserPlaces(system string, env func(string) string) []string {
	var out []string
	switch system {
	case "darwin":
		for _, top := range []string{"/Applications", env("HOME") + "/Applications"} {
			for _, name := range []string{"Chromium", "Google Chrome", "Microsoft Edge"} {
				out = append(out, top+"/"+name+".app/Contents/MacOS/"+name)
			}
		}
	case "windows":
		for _, top := range []string{env("ProgramFiles"), env("ProgramFiles(x86)"), env("LocalAppData")} {
			for _, name := range []string{`Chromium\Application\chrome.exe`, `Google\Chrome\Application\chrome.exe`, `Microsoft\Edge\Application\msedge.exe`} {
				if top != "" {
					out = append(out, top+`\`+name)
				}
			}
		}
	}
	return out
}

// findBrowser is the path of a browser of the Chromium family: the one that
// QUOIN_CHROMIUM names and no other, else the first on PATH, else one in its
// usual place.
func findBrowser() (string, error) {
	if name := os.Getenv(browserVariable); name != "" {
		path, err := exec.LookPath(name)
		if err != nil {
			return "", fmt.Errorf(browserNamed, browserVariable, name)
		}
		return filepath.Abs(path)
	}
	places := browserPlaces(runtime.GOOS, os.Getenv)
	for _, name := range append(browserNames[:len(browserNames):len(browserNames)], places...) {
		if path, err := exec.LookPath(name); err == nil {
			return path, nil
		}
	}
	return "", errors.New(noBrowser(browserNames, places, browserVariable))
}

// browserTime is how long a browser may take.
var browserTime = 5 * time.Minute

// browserFlags run a browser without a window, a network, or anything of its
// user's, to print the page at its address.
func browserFlags(profile, pdf, address string) []string {
	flags := []string{
		"--headless", "--disable-gpu", "--user-data-dir=" + profile,
		"--no-first-run", "--no-default-browser-check", "--disable-extensions", "--disable-default-apps", "--disable-sync",
		"--disable-background-networking", "--disable-component-update", "--disable-domain-reliability", "--disable-quic", "--no-pings",
		"--disable-breakpad", "--disable-crash-reporter", "--mute-audio", "--password-store=basic", "--use-mock-keychain",
		"--host-resolver-rules=MAP * ~NOTFOUND", "--proxy-server=127.0.0.1:9", // a port where nobody listens
		"--user-agent=" + versionLine(), // stands in the PDF as what made it
		"--no-pdf-header-footer", "--generate-pdf-document-outline", "--print-to-pdf=" + pdf,
	}
	if runtime.GOOS == "linux" && os.Geteuid() == 0 {
		flags = append(flags, "--no-sandbox") // it has none for root
	}
	return append(flags, address)
}

// paper prints a page with a browser, in a temporary folder that holds all that
// the browser writes, and gives the PDF.
func paper(browser string, html []byte) ([]byte, error) {
	dir, err := os.MkdirTemp("", "quoin-print-")
	if err != nil {
		return nil, err
	}
	defer removeAll(dir)
	file, pdf := filepath.Join(dir, "index.html"), filepath.Join(dir, "page.pdf")
	if err := os.WriteFile(file, html, 0o600); err != nil {
		return nil, err
	}
	interrupted, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	defer stop()
	ctx, cancel := context.WithTimeout(interrupted, browserTime)
	defer cancel()
	cmd := exec.CommandContext(ctx, browser, browserFlags(filepath.Join(dir, "profile"), pdf, fileURL(file))...)
	var words strings.Builder
	cmd.Stdout, cmd.Stderr, cmd.Dir = &words, &words, dir
	cmd.WaitDelay = 5 * time.Second // for what the browser started and left
	alone(cmd)
	err = cmd.Run()
	data, missing := os.ReadFile(pdf)
	switch {
	case interrupted.Err() != nil:
		return nil, errors.New(browserInterrupted)
	case ctx.Err() != nil:
		return nil, fmt.Errorf(browserSlow, browser, browserTime)
	case err != nil:
		return nil, fmt.Errorf(browserFailed, browser, err, lastWords(words.String()))
	case missing != nil:
		return nil, fmt.Errorf(browserSilent, browser, lastWords(words.String()), os.TempDir())
	case !whole(data):
		return nil, fmt.Errorf(browserSpoilt, browser, lastWords(words.String()))
	}
	return data, nil
}

// removeAll removes a folder into which a dying browser may still write.
func removeAll(dir string) {
	for range 20 {
		if os.RemoveAll(dir) == nil {
			return
		}
		time.Sleep(50 * time.Millisecond)
	}
}

// fileURL is the address of a file.
func fileURL(path string) string {
	path = filepath.ToSlash(path)
	if !strings.HasPrefix(path, "/") { // C:/...
		path = "/" + path
	}
	return (&url.URL{Scheme: "file", Path: path}).String()
}

// logged is what browsers begin a line of their log with.
var logged = regexp.MustCompile(`^\[[\d:/.]+:[A-Z]+:[^\]]*\] *`)

// lastWords is the end of what a browser said; its complaints about a desktop
// that is not there are left out.
func lastWords(text string) string {
	var out []string
	for line := range strings.Lines(text) {
		if strings.Contains(line, ":dbus/") {
			continue
		}
		if line = strings.TrimSpace(logged.ReplaceAllString(line, "")); line != "" {
			out = append(out, line)
		}
	}
	if len(out) == 0 {
		return browserMute
	}
	return strings.Join(out[max(0, len(out)-3):], " / ")
}
