// Command quoin turns a markdown file into a seismic calculation package.
package main

import (
	"fmt"
	"io"
	"os"
	"path/filepath"
	"runtime"
	"strings"
)

// version is that of the tool; it goes into every package.
const version = "0.1.0"

func main() { os.Exit(run(os.Args[1:], os.Stdin, os.Stdout, os.Stderr)) }

// Exit codes.
const (
	exitBuilt  = 0
	exitErrors = 1
	exitUsage  = 2
	exitStrict = 3 // with --strict: a check is not met
	exitFrozen = 4 // with --frozen: results differ from the frozen ones; with --same: from the others
)

// run is the program: arguments in, exit code out.
func run(args []string, stdin io.Reader, stdout, stderr io.Writer) (code int) {
	defer func() {
		if fault := recover(); fault != nil {
			fmt.Fprint(stderr, internalError(fmt.Sprint(fault), culprit()))
			code = exitErrors
		}
	}()
	a := &app{stdout: stdout, stderr: stderr}
	root := a.commands()
	root.SetArgs(args)
	root.SetIn(stdin)
	root.SetOut(stdout)
	root.SetErr(stderr)
	if err := root.Execute(); err != nil {
		fmt.Fprint(stderr, usageError(err))
		return exitUsage
	}
	return a.code
}

// culprit is the function of ours in which a panic arose, as "calc/modal.Solve, modal.go:41".
func culprit() string {
	pc := make([]uintptr, 64)
	frames := runtime.CallersFrames(pc[:runtime.Callers(0, pc)])
	panicking := false
	for {
		f, more := frames.Next()
		switch {
		case f.Function == "runtime.gopanic":
			panicking = true
		case panicking && strings.HasPrefix(f.Function, "quoin/"), panicking && strings.HasPrefix(f.Function, "main."):
			return fmt.Sprintf("%s, %s:%d", strings.TrimPrefix(f.Function, "quoin/"), filepath.Base(f.File), f.Line)
		}
		if !more {
			return "unknown place"
		}
	}
}
