package logfile

import (
	"context"
	"io"
)

// Ahead reads r in a goroutine of its own, a few blocks ahead, so that
// expanding and hashing run beside the parsing. Close stops it and waits.
func Ahead(ctx context.Context, r io.Reader) io.ReadCloser {
	a := &ahead{ctx: ctx, full: make(chan block, blocks), free: make(chan []byte, blocks), stop: make(chan struct{}), done: make(chan struct{})}
	for i := 0; i < blocks; i++ {
		a.free <- make([]byte, blockSize)
	}
	go a.run(r)
	return a
}

const (
	blockSize = 512 << 10
	blocks    = 3
)

type block struct {
	b   []byte
	err error
}

type ahead struct {
	ctx        context.Context
	full       chan block
	free       chan []byte
	stop, done chan struct{}
	cur        []byte // unread part of held
	held       []byte
	err        error
}

func (a *ahead) run(r io.Reader) {
	defer close(a.done)
	for {
		var b []byte
		select {
		case b = <-a.free:
		case <-a.stop:
			return
		}
		n, err := io.ReadFull(r, b)
		if err == io.ErrUnexpectedEOF && n < len(b) {
			err = io.EOF
		}
		select {
		case a.full <- block{b[:n], err}:
		case <-a.stop:
			return
		}
		if err != nil {
			return
		}
	}
}

// Read implements io.Reader.
func (a *ahead) Read(p []byte) (int, error) {
	for len(a.cur) == 0 {
		if a.err != nil {
			return 0, a.err
		}
		if a.held != nil {
			a.free <- a.held[:cap(a.held)]
			a.held = nil
		}
		select {
		case b := <-a.full:
			a.cur, a.held, a.err = b.b, b.b, b.err
		case <-a.ctx.Done():
			return 0, a.ctx.Err()
		}
	}
	n := copy(p, a.cur)
	a.cur = a.cur[n:]
	return n, nil
}

// Close stops reading and waits for the goroutine.
func (a *ahead) Close() error {
	close(a.stop)
	<-a.done
	return nil
}
