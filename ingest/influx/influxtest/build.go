// Package influxtest gives tests a real database server: InfluxDB 1.8.10,
// built from its module (testdata/influxd) into a cache folder, asked through
// its v2-compatible API. It also holds a proxy that makes a connection slow or
// cuts it.
package influxtest

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"testing"
	"time"
)

const version = "1.8.10"

// RequireEnv turns a skip for want of the server into a failure; CacheEnv
// names the folder the server is built into instead of the user's cache.
const (
	RequireEnv = "SASHLOG_REQUIRE_TOOLS"
	CacheEnv   = "SASHLOG_CACHE"
)

// binary returns the path of the server, building it when it is not there.
func binary() (string, error) {
	dir := os.Getenv(CacheEnv)
	if dir == "" {
		user, err := os.UserCacheDir()
		if err != nil {
			return "", err
		}
		dir = filepath.Join(user, "sashlog")
	}
	if err := os.MkdirAll(dir, 0o777); err != nil {
		return "", err
	}
	path := filepath.Join(dir, "influxd-"+version)
	if runtime.GOOS == "windows" {
		path += ".exe"
	}
	if _, err := os.Stat(path); err == nil {
		return path, nil
	}
	unlock, err := lock(path + ".lock")
	if err != nil {
		return "", err
	}
	defer unlock()
	if _, err := os.Stat(path); err == nil { // built by another test meanwhile
		return path, nil
	}
	module, err := module()
	if err != nil {
		return "", err
	}
	part := path + ".part"
	cmd := exec.Command("go", "build", "-trimpath", "-ldflags", "-s -w -X main.version="+version, "-o", part, "github.com/influxdata/influxdb/cmd/influxd")
	cmd.Dir = module
	cmd.Env = append(os.Environ(), "CGO_ENABLED=0", "GOFLAGS=-buildvcs=false", "GOWORK=off")
	if out, err := cmd.CombinedOutput(); err != nil {
		return "", fmt.Errorf("building the server: %w: %s", err, out)
	}
	return path, os.Rename(part, path)
}

// module finds the nested module that pins the server.
func module() (string, error) {
	dir, err := os.Getwd()
	for err == nil {
		m := filepath.Join(dir, "testdata", "influxd")
		if _, e := os.Stat(filepath.Join(m, "go.mod")); e == nil {
			return m, nil
		}
		up := filepath.Dir(dir)
		if up == dir {
			return "", errors.New("testdata/influxd is not above the working folder")
		}
		dir = up
	}
	return "", err
}

// lock waits until no other test binary is building.
func lock(path string) (func(), error) {
	const oldest = 15 * time.Minute
	for {
		f, err := os.OpenFile(path, os.O_CREATE|os.O_EXCL, 0o666)
		if err == nil {
			return func() { f.Close(); os.Remove(path) }, nil
		}
		if !errors.Is(err, fs.ErrExist) {
			return nil, err
		}
		if fi, err := os.Stat(path); err == nil && time.Since(fi.ModTime()) > oldest {
			os.Remove(path) // left behind by a test that was killed
			continue
		}
		time.Sleep(500 * time.Millisecond)
	}
}

// without skips a test for want of the server, or fails it where tools are
// required.
func without(t testing.TB, why string) {
	t.Helper()
	if os.Getenv(RequireEnv) != "" {
		t.Fatal(why)
	}
	t.Skip(why)
}
