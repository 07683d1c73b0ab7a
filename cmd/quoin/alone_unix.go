//go:build unix

package main

import (
	"os/exec"
	"syscall"
)

// alone gives a program and all that it starts a group of their own, so that they
// end together where it is made to end.
func alone(cmd *exec.Cmd) {
	cmd.SysProcAttr = &syscall.SysProcAttr{Setpgid: true}
	cmd.Cancel = func() error { return syscall.Kill(-cmd.Process.Pid, syscall.SIGKILL) }
}
