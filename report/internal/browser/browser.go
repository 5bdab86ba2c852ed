// Package browser drives a Chromium for the tests of the report through its
// remote debugging pipe: it opens a document, presses keys, asks the page, and
// keeps what the page logged and tried to fetch.
package browser

import (
	"bufio"
	"encoding/base64"
	"encoding/json"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"
)

// patience is how long one command may take.
const patience = 3 * time.Minute

// Names are the programs looked for.
var Names = []string{"chromium", "chromium-browser", "google-chrome"}

// Need skips a test without its tools, or fails it where they are required.
func Need(t testing.TB, tools ...string) {
	t.Helper()
	for _, tool := range tools {
		if _, err := exec.LookPath(tool); err != nil {
			Missing(t, fmt.Sprintf("%s is not installed (Debian: apt-get install chromium poppler-utils fonts-liberation)", tool))
		}
	}
}

// Missing skips a test for want of a tool, or fails it where tools are
// required.
func Missing(t testing.TB, what string) {
	t.Helper()
	if os.Getenv("SASHLOG_REQUIRE_TOOLS") == "1" {
		t.Fatal(what + ", and SASHLOG_REQUIRE_TOOLS=1 asks for it")
	}
	t.Skip(what + ": not tested")
}

// Browser is a running Chromium.
type Browser struct {
	cmd     *exec.Cmd
	to      *os.File
	profile string

	mu      sync.Mutex
	last    int
	waiting map[int]chan reply
	pages   map[string]*Page // by session
	ended   error
}

type reply struct {
	ID        int             `json:"id"`
	Method    string          `json:"method"`
	SessionID string          `json:"sessionId"`
	Params    json.RawMessage `json:"params"`
	Result    json.RawMessage `json:"result"`
	Error     *struct {
		Message string `json:"message"`
	} `json:"error"`
}

// Start starts a Chromium; the caller closes it.
func Start() (*Browser, error) {
	profile, err := os.MkdirTemp("", "sashlog-browser-*")
	if err != nil {
		return nil, err
	}
	var program string
	for _, name := range Names {
		if program, err = exec.LookPath(name); err == nil {
			break
		}
	}
	if err != nil {
		return nil, err
	}
	theirIn, to, err := os.Pipe()
	if err != nil {
		return nil, err
	}
	from, theirOut, err := os.Pipe()
	if err != nil {
		return nil, err
	}
	b := &Browser{to: to, profile: profile, waiting: map[int]chan reply{}, pages: map[string]*Page{}}
	b.cmd = exec.Command(program, "--headless", "--no-sandbox", "--disable-gpu", "--disable-dev-shm-usage", "--hide-scrollbars", "--disable-extensions", "--no-first-run",
		"--disable-background-networking", "--host-resolver-rules=MAP * ~NOTFOUND", "--user-data-dir="+profile, "--remote-debugging-pipe")
	b.cmd.ExtraFiles = []*os.File{theirIn, theirOut} // 3: commands to it, 4: answers of it
	if err := b.cmd.Start(); err != nil {
		return nil, err
	}
	theirIn.Close()
	theirOut.Close()
	go b.read(bufio.NewReaderSize(from, 1<<20))
	return b, nil
}

// Close ends the browser.
func (b *Browser) Close() {
	b.call("", "Browser.close", nil)
	done := make(chan struct{})
	go func() { b.cmd.Wait(); close(done) }()
	select {
	case <-done:
	case <-time.After(5 * time.Second):
		b.cmd.Process.Kill()
		<-done
	}
	b.to.Close()
	os.RemoveAll(b.profile)
}

// read takes answers and events, each ended by a zero byte.
func (b *Browser) read(r *bufio.Reader) {
	for {
		text, err := r.ReadBytes(0)
		b.mu.Lock()
		if err != nil {
			b.ended = fmt.Errorf("the browser has ended: %w", err)
			for id, c := range b.waiting {
				close(c)
				delete(b.waiting, id)
			}
			b.mu.Unlock()
			return
		}
		var m reply
		if err := json.Unmarshal(text[:len(text)-1], &m); err == nil {
			if c := b.waiting[m.ID]; m.ID > 0 && c != nil {
				c <- m
				delete(b.waiting, m.ID)
			} else if p := b.pages[m.SessionID]; p != nil {
				p.event(m.Method, m.Params)
			}
		}
		b.mu.Unlock()
	}
}

func (b *Browser) call(session, method string, params any) (json.RawMessage, error) {
	if params == nil {
		params = struct{}{}
	}
	b.mu.Lock()
	if b.ended != nil {
		b.mu.Unlock()
		return nil, b.ended
	}
	b.last++
	id, answer := b.last, make(chan reply, 1)
	b.waiting[id] = answer
	m := map[string]any{"id": id, "method": method, "params": params}
	if session != "" {
		m["sessionId"] = session
	}
	text, err := json.Marshal(m)
	if err == nil {
		_, err = b.to.Write(append(text, 0))
	}
	b.mu.Unlock()
	if err != nil {
		return nil, err
	}
	select {
	case r, ok := <-answer:
		switch {
		case !ok:
			return nil, b.ended
		case r.Error != nil:
			return nil, fmt.Errorf("%s: %s", method, r.Error.Message)
		}
		return r.Result, nil
	case <-time.After(patience):
		return nil, fmt.Errorf("%s: no answer within %v", method, patience)
	}
}

// Page is one open document.
type Page struct {
	b       *Browser
	target  string
	session string
	loaded  chan struct{}
	// Logged holds errors and warnings of the console and exceptions; Asked the
	// addresses the document asked for beside itself. Use Noise.
	logged, asked []string
}

// event runs with the browser's lock held.
func (p *Page) event(method string, params json.RawMessage) {
	switch method {
	case "Page.loadEventFired":
		select {
		case p.loaded <- struct{}{}:
		default:
		}
	case "Runtime.exceptionThrown", "Runtime.consoleAPICalled":
		p.logged = append(p.logged, fmt.Sprintf("%.600s", params))
	case "Log.entryAdded":
		p.logged = append(p.logged, fmt.Sprintf("%.600s", params))
	case "Network.requestWillBeSent":
		var r struct {
			Request struct{ URL string }
			Type    string
		}
		if json.Unmarshal(params, &r) == nil && r.Type != "Document" && !strings.HasPrefix(r.Request.URL, "data:") {
			p.asked = append(p.asked, r.Request.URL)
		}
	}
}

// Open opens a document in a window of a width and height, after before, if
// any, has prepared it.
func (b *Browser) Open(t testing.TB, document string, width, height int, before func(*Page)) *Page {
	t.Helper()
	file := filepath.Join(t.TempDir(), "document.html")
	if err := os.WriteFile(file, []byte(document), 0o600); err != nil {
		t.Fatal(err)
	}
	var target struct{ TargetID string }
	b.must(t, "", "Target.createTarget", map[string]any{"url": "about:blank"}, &target)
	var session struct{ SessionID string }
	b.must(t, "", "Target.attachToTarget", map[string]any{"targetId": target.TargetID, "flatten": true}, &session)
	p := &Page{b: b, target: target.TargetID, session: session.SessionID, loaded: make(chan struct{}, 1)}
	b.mu.Lock()
	b.pages[p.session] = p
	b.mu.Unlock()
	for _, domain := range []string{"Page", "Runtime", "Log", "Network"} {
		p.Call(t, domain+".enable", nil, nil)
	}
	p.Resize(t, width, height)
	if before != nil {
		before(p)
	}
	p.Call(t, "Page.navigate", map[string]any{"url": "file://" + filepath.ToSlash(file)}, nil)
	select {
	case <-p.loaded:
	case <-time.After(patience):
		t.Fatal("the document was not loaded in time")
	}
	t.Cleanup(func() { b.call("", "Target.closeTarget", map[string]any{"targetId": p.target}) })
	return p
}

func (b *Browser) must(t testing.TB, session, method string, params, into any) {
	t.Helper()
	r, err := b.call(session, method, params)
	if err == nil && into != nil {
		err = json.Unmarshal(r, into)
	}
	if err != nil {
		t.Fatal(err)
	}
}

// Call sends a command of the debugging protocol to the page.
func (p *Page) Call(t testing.TB, method string, params, into any) {
	t.Helper()
	p.b.must(t, p.session, method, params, into)
}

// Resize sets the window.
func (p *Page) Resize(t testing.TB, width, height int) {
	t.Helper()
	p.Call(t, "Emulation.setDeviceMetricsOverride", map[string]any{"width": width, "height": height, "deviceScaleFactor": 1, "mobile": false}, nil)
}

// Noise is what the page logged and what it asked the network for.
func (p *Page) Noise() (logged, asked []string) {
	p.b.mu.Lock()
	defer p.b.mu.Unlock()
	return append([]string(nil), p.logged...), append([]string(nil), p.asked...)
}

// Ask evaluates an expression, waiting for a promise, into a value.
func (p *Page) Ask(t testing.TB, expression string, into any) {
	t.Helper()
	var r struct {
		Result    struct{ Value json.RawMessage }
		Exception *struct {
			Text      string
			Exception struct{ Description string }
		} `json:"exceptionDetails"`
	}
	p.Call(t, "Runtime.evaluate", map[string]any{"expression": expression, "awaitPromise": true, "returnByValue": true}, &r)
	if r.Exception != nil {
		t.Fatalf("%s\n%.120s: %s", r.Exception.Exception.Description, expression, r.Exception.Text)
	}
	if into == nil {
		return
	}
	if err := json.Unmarshal(r.Result.Value, into); err != nil {
		t.Fatalf("%.120s: %v in %.200s", expression, err, r.Result.Value)
	}
}

// Until waits until an expression is true.
func (p *Page) Until(t testing.TB, expression string) {
	t.Helper()
	for end := time.Now().Add(time.Minute); time.Now().Before(end); time.Sleep(10 * time.Millisecond) {
		var yes bool
		if p.Ask(t, "!!("+expression+")", &yes); yes {
			return
		}
	}
	t.Fatalf("never true: %s", expression)
}

// keys are the codes of keys that are no letters.
var keys = map[string]int{"Tab": 9, "Enter": 13, "Escape": 27, "Space": 32, "End": 35, "Home": 36, "ArrowLeft": 37, "ArrowUp": 38, "ArrowRight": 39, "ArrowDown": 40}

// Press presses a key as a person does.
func (p *Page) Press(t testing.TB, key string) {
	t.Helper()
	code, ok := keys[key]
	if !ok {
		t.Fatalf("key %q is not known here", key)
	}
	press := map[string]any{"type": "keyDown", "key": key, "code": key, "windowsVirtualKeyCode": code}
	if key == "Space" {
		press["key"], press["text"] = " ", " "
	}
	if key == "Enter" {
		press["text"] = "\r"
	}
	p.Call(t, "Input.dispatchKeyEvent", press, nil)
	p.Call(t, "Input.dispatchKeyEvent", map[string]any{"type": "keyUp", "key": press["key"], "code": key, "windowsVirtualKeyCode": code}, nil)
}

// Click presses the mouse's button at a place of the window.
func (p *Page) Click(t testing.TB, x, y float64) {
	t.Helper()
	for _, kind := range []string{"mouseMoved", "mousePressed", "mouseReleased"} {
		p.Call(t, "Input.dispatchMouseEvent", map[string]any{"type": kind, "x": x, "y": y, "button": "left", "clickCount": 1}, nil)
	}
}

// Picture writes what the page looks like, the whole of it or what fits the
// window, as PNG.
func (p *Page) Picture(t testing.TB, file string, whole bool) {
	t.Helper()
	var r struct{ Data string }
	p.Call(t, "Page.captureScreenshot", map[string]any{"format": "png", "captureBeyondViewport": whole}, &r)
	png, err := base64.StdEncoding.DecodeString(r.Data)
	if err == nil {
		err = os.WriteFile(file, png, 0o644)
	}
	if err != nil {
		t.Fatal(err)
	}
}
