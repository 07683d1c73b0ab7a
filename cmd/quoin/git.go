package main

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"time"
)

// git runs git in a folder and gives its output; nothing where git is missing or
// refuses. See askGit.
func git(folder string, args ...string) (out []byte, ok bool) {
	out, err := askGit(folder, args...)
	return out, err == nil
}

// harmless is what keeps git from running what a repository names: watchers, hooks,
// helpers, and programs that fetch what a clone left out.
var harmless = []string{"-c", "core.fsmonitor=false", "-c", "core.hooksPath=" + os.DevNull, "-c", "core.pager=cat", "-c", "protocol.allow=never",
	"-c", "log.showSignature=false", "-c", "core.quotePath=true", "--no-replace-objects", "--literal-pathspecs"}

// gitPatience is how long git may take to answer, so that a stuck one does not hold a
// build.
var gitPatience = 5 * time.Second

// askGit runs git on the repository whose work tree has its top in folder. Of the
// environment it sees no variable that names another repository or index, as they are
// set inside hooks. It never asks and takes no lock. Commands are to be of those that
// read objects only: what compares files with an index runs the filters that the
// repository names.
func askGit(folder string, args ...string) ([]byte, error) {
	ctx, cancel := context.WithTimeout(context.Background(), gitPatience)
	defer cancel()
	cmd := exec.CommandContext(ctx, "git", append(append([]string{}, harmless...), args...)...)
	cmd.Dir = folder
	cmd.WaitDelay = time.Second
	for _, e := range os.Environ() {
		if name, _, _ := strings.Cut(e, "="); !misleads(name) {
			cmd.Env = append(cmd.Env, e)
		}
	}
	cmd.Env = append(cmd.Env, "LC_ALL=C", "GIT_TERMINAL_PROMPT=0", "GIT_OPTIONAL_LOCKS=0", "GIT_NO_LAZY_FETCH=1", "GIT_CEILING_DIRECTORIES="+filepath.Dir(folder))
	var said bytes.Buffer
	cmd.Stderr = &said
	out, err := cmd.Output()
	var exit *exec.ExitError
	switch first, _, _ := strings.Cut(strings.TrimSpace(said.String()), "\n"); {
	case err != nil && ctx.Err() != nil:
		return nil, gitSilent(gitPatience)
	case errors.Is(err, exec.ErrNotFound):
		return nil, errors.New(gitMissing)
	case errors.As(err, &exit) && first != "":
		return nil, fmt.Errorf("git: %s (exit %w)", strings.TrimPrefix(first, "fatal: "), exitError(exit.ExitCode()))
	case errors.As(err, &exit):
		return nil, fmt.Errorf("git: exit %w", exitError(exit.ExitCode()))
	case err != nil:
		return nil, err
	}
	return out, nil
}

// gitSilent is that git gave no answer, for so long.
type gitSilent time.Duration

func (e gitSilent) Error() string {
	return fmt.Sprintf("git gave no answer within %s", time.Duration(e))
}

// exitError is the exit code of git.
type exitError int

func (e exitError) Error() string { return fmt.Sprint(int(e)) }

// misleads tells whether a variable of the environment may make git look elsewhere
// than asked. Settings of the user's own stay: they say whose folders are trusted.
func misleads(name string) bool {
	return strings.HasPrefix(name, "GIT_") && name != "GIT_EXEC_PATH" && (!strings.HasPrefix(name, "GIT_CONFIG_") || name == "GIT_CONFIG_PARAMETERS")
}
