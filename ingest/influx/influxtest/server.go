package influxtest

import (
	"bufio"
	"fmt"
	"io"
	"net/http"
	"net/url"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strings"
	"sync"
	"testing"
	"time"
)

// Server is one server process that tests of one binary share. The zero value
// is ready; Stop it when all tests are done.
type Server struct {
	// Auth asks for a token; the only one is Token.
	Auth bool

	mu   sync.Mutex
	why  string // it cannot be had
	dir  string
	addr string
	cmd  *exec.Cmd
	done chan struct{}
}

// Token is the only token of a server with Auth.
const Token = "keeper:open-sesame"

// Address starts the server if need be and returns its address. The test is
// skipped in -short runs and when the server cannot be built.
func (s *Server) Address(t testing.TB) string {
	t.Helper()
	if testing.Short() {
		t.Skip("needs a database server: not in -short runs")
	}
	s.mu.Lock()
	defer s.mu.Unlock()
	if s.why == "" && s.cmd == nil {
		if err := s.start(); err != nil {
			s.why = "no database server for the test: " + err.Error()
		} else if s.Auth {
			s.command(t, "CREATE USER keeper WITH PASSWORD 'open-sesame' WITH ALL PRIVILEGES")
		}
	}
	if s.why != "" {
		without(t, s.why)
	}
	return "http://" + s.addr
}

var listening = regexp.MustCompile(`Listening on HTTP.*addr=(127\.0\.0\.1:\d+)`)

func (s *Server) start() error {
	bin, err := binary()
	if err != nil {
		return err
	}
	if s.dir == "" {
		if s.dir, err = os.MkdirTemp("", "sashlog-influxd-"); err != nil {
			return err
		}
	}
	bind := s.addr // the same again after Kill
	if bind == "" {
		bind = "127.0.0.1:0"
	}
	cmd := exec.Command(bin, "run", "-config", os.DevNull)
	cmd.Env = append(os.Environ(), "INFLUXDB_REPORTING_DISABLED=true", "INFLUXDB_MONITOR_STORE_ENABLED=false", "INFLUXDB_BIND_ADDRESS=127.0.0.1:0",
		"INFLUXDB_HTTP_BIND_ADDRESS="+bind, "INFLUXDB_HTTP_FLUX_ENABLED=true", "INFLUXDB_HTTP_LOG_ENABLED=false", fmt.Sprintf("INFLUXDB_HTTP_AUTH_ENABLED=%v", s.Auth),
		"INFLUXDB_META_DIR="+filepath.Join(s.dir, "meta"), "INFLUXDB_DATA_DIR="+filepath.Join(s.dir, "data"), "INFLUXDB_DATA_WAL_DIR="+filepath.Join(s.dir, "wal"))
	endWithParent(cmd)
	out, err := cmd.StderrPipe()
	if err != nil {
		return err
	}
	if err := cmd.Start(); err != nil {
		return err
	}
	up, done := make(chan string, 1), make(chan struct{})
	go func() {
		defer close(done)
		lines := bufio.NewScanner(out)
		lines.Buffer(nil, 1<<20)
		for lines.Scan() {
			if m := listening.FindStringSubmatch(lines.Text()); m != nil {
				select {
				case up <- m[1]:
				default:
				}
			}
		}
		_, _ = io.Copy(io.Discard, out)
		_ = cmd.Wait()
	}()
	select {
	case s.addr = <-up:
	case <-done:
		return fmt.Errorf("it ended at once")
	case <-time.After(2 * time.Minute):
		_ = cmd.Process.Kill()
		return fmt.Errorf("it did not start within two minutes")
	}
	s.cmd, s.done = cmd, done
	return nil
}

// Restart starts the server after Kill, at its old address and with its data.
func (s *Server) Restart() error {
	s.mu.Lock()
	defer s.mu.Unlock()
	if s.cmd != nil {
		return nil
	}
	return s.start()
}

// Kill ends the server at once, as a power cut would.
func (s *Server) Kill() {
	s.mu.Lock()
	defer s.mu.Unlock()
	if s.cmd != nil {
		s.end()
	}
}

func (s *Server) end() {
	_ = s.cmd.Process.Kill()
	<-s.done
	s.cmd = nil
}

// Stop ends the server and removes its data.
func (s *Server) Stop() {
	s.mu.Lock()
	defer s.mu.Unlock()
	if s.cmd != nil {
		s.end()
	}
	if s.dir != "" {
		_ = os.RemoveAll(s.dir)
	}
}

// Database makes a database of the name, which is the bucket.
func (s *Server) Database(t testing.TB, name string) {
	t.Helper()
	s.Address(t)
	s.command(t, `CREATE DATABASE "`+name+`"`)
}

func (s *Server) command(t testing.TB, q string) {
	t.Helper()
	who := url.Values{"u": {"keeper"}, "p": {"open-sesame"}}
	res, err := http.PostForm("http://"+s.addr+"/query?"+who.Encode(), url.Values{"q": {q}})
	if err != nil {
		t.Fatal(err)
	}
	defer res.Body.Close()
	body, _ := io.ReadAll(res.Body)
	if res.StatusCode != http.StatusOK || strings.Contains(string(body), `"error"`) {
		t.Fatalf("%s: %s", q, body)
	}
}

// Write puts lines of readings, with times in seconds, into a database by the
// server's older way of writing, so that what is read was not written by the
// code under test.
func (s *Server) Write(t testing.TB, database, lines string) {
	t.Helper()
	at := s.Address(t) + "/write?precision=s&u=keeper&p=" + url.QueryEscape("open-sesame") + "&db=" + url.QueryEscape(database)
	const most = 8 << 20 // the server takes 25 MB at once
	for len(lines) > 0 {
		part := lines
		if len(part) > most {
			part = part[:strings.LastIndexByte(part[:most], '\n')+1]
		}
		lines = lines[len(part):]
		res, err := http.Post(at, "text/plain", strings.NewReader(part))
		if err != nil {
			t.Fatal(err)
		}
		body, _ := io.ReadAll(res.Body)
		res.Body.Close()
		if res.StatusCode != http.StatusNoContent {
			t.Fatalf("writing: %d %s", res.StatusCode, body)
		}
	}
}
