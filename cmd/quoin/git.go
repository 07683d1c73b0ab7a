package main

import (
	"bytes"
	"os"
	"os/exec"
	"slices"
	"strings"
)

// git runs git in a folder and gives its output; nothing where git is missing or
// refuses. It never asks, writes no index, and runs no watcher of the repository.
func git(folder string, args ...string) (out []byte, ok bool) {
	args = append([]string{"-c", "core.fsmonitor=false", "-c", "log.showSignature=false", "--literal-pathspecs"}, args...)
	cmd := exec.Command("git", args...)
	cmd.Dir = folder
	for _, e := range os.Environ() {
		name, _, _ := strings.Cut(e, "=")
		// Inside a hook these name another work tree or index.
		if !slices.Contains([]string{"GIT_DIR", "GIT_WORK_TREE", "GIT_INDEX_FILE", "GIT_PREFIX", "GIT_COMMON_DIR", "GIT_NAMESPACE"}, name) {
			cmd.Env = append(cmd.Env, e)
		}
	}
	cmd.Env = append(cmd.Env, "LC_ALL=C", "GIT_TERMINAL_PROMPT=0", "GIT_OPTIONAL_LOCKS=0", "GIT_PAGER=cat")
	out, err := cmd.Output()
	return out, err == nil
}

// commit is the commit of the work tree at root, and its date; "" outside git.
func commit(root string) (id, date string) {
	out, ok := git(root, "log", "-1", "--format=%H %cs", "HEAD")
	if !ok {
		return "", ""
	}
	id, date, _ = strings.Cut(strings.TrimSpace(string(out)), " ")
	return id, date
}

// dirty tells whether any of the files, by path below root, differs from the
// commit or is not in it. Outside git nothing is dirty.
func dirty(root string, files []string) bool {
	for batch := range slices.Chunk(files, 200) {
		out, ok := git(root, append([]string{"status", "--porcelain", "-z", "--untracked-files=all", "--ignored", "--"}, batch...)...)
		if ok && len(bytes.TrimSpace(out)) > 0 {
			return true
		}
	}
	return false
}
