//go:build !linux

package influxtest

import "os/exec"

func endWithParent(*exec.Cmd) {}
