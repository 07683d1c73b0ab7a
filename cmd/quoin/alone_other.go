//go:build !unix

package main

import "os/exec"

// alone is for systems with groups of programs; here what a browser started ends
// by itself when the browser does.
func alone(*exec.Cmd) {}
