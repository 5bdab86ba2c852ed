package influxtest

import (
	"io"
	"net"
	"strings"
	"sync"
	"testing"
	"time"
)

// Proxy stands between a client and a server and passes bytes on. What the
// server sends can be delayed or cut.
type Proxy struct {
	listener net.Listener
	to       string

	mu    sync.Mutex
	delay time.Duration // before each piece of at most 4 kB
	left  int64         // bytes until connections are cut; negative: never
	sent  int64
	onCut func()
}

// NewProxy listens in front of a server until the test ends.
func NewProxy(t testing.TB, address string) *Proxy {
	t.Helper()
	l, err := net.Listen("tcp", "127.0.0.1:0")
	if err != nil {
		t.Fatal(err)
	}
	p := &Proxy{listener: l, to: strings.TrimPrefix(address, "http://"), left: -1}
	t.Cleanup(func() { l.Close() })
	go p.serve()
	return p
}

// Address is where the proxy listens.
func (p *Proxy) Address() string { return "http://" + p.listener.Addr().String() }

// Delay sets how long each piece of an answer waits.
func (p *Proxy) Delay(d time.Duration) { p.set(func() { p.delay = d }) }

// CutAfter cuts the connection once the server has sent so many more bytes,
// calls then if it is not nil, and passes everything on again.
func (p *Proxy) CutAfter(bytes int64, then func()) {
	p.set(func() { p.left, p.onCut = bytes, then })
}

// Sent is how many bytes the server has sent so far.
func (p *Proxy) Sent() int64 { p.mu.Lock(); defer p.mu.Unlock(); return p.sent }

func (p *Proxy) set(f func()) { p.mu.Lock(); defer p.mu.Unlock(); f() }

func (p *Proxy) serve() {
	for {
		in, err := p.listener.Accept()
		if err != nil {
			return
		}
		go p.pass(in)
	}
}

func (p *Proxy) pass(in net.Conn) {
	defer in.Close()
	out, err := net.Dial("tcp", p.to)
	if err != nil {
		return
	}
	defer out.Close()
	go func() {
		_, _ = io.Copy(out, in)
		out.Close()
	}()
	buf := make([]byte, 4096)
	for {
		n, err := out.Read(buf)
		p.mu.Lock()
		wait, cut := p.delay, false
		p.sent += int64(n)
		then := p.onCut
		if p.left >= 0 {
			if p.left -= int64(n); p.left < 0 {
				cut, p.left, p.onCut = true, -1, nil
			}
		}
		p.mu.Unlock()
		if cut {
			if then != nil {
				then()
			}
			return
		}
		time.Sleep(wait)
		if _, e := in.Write(buf[:n]); err != nil || e != nil {
			return
		}
	}
}
