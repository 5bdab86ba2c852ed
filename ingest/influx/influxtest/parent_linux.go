package influxtest

import (
	"os/exec"
	"syscall"
)

// endWithParent ends the server when the test binary is killed.
func endWithParent(cmd *exec.Cmd) { cmd.SysProcAttr = &syscall.SysProcAttr{Pdeathsig: syscall.SIGKILL} }
