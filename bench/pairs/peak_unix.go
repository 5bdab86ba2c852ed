//go:build unix

package main

import (
	"os"
	"runtime"
	"syscall"
)

// peakMiB is the most memory a process had resident.
func peakMiB(p *os.ProcessState) float64 {
	u, ok := p.SysUsage().(*syscall.Rusage)
	if !ok {
		return 0
	}
	if runtime.GOOS == "darwin" { // bytes there, kB elsewhere
		return float64(u.Maxrss) / (1 << 20)
	}
	return float64(u.Maxrss) / 1024
}
