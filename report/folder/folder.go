// Package folder writes a set of outputs so that a reader never meets half of
// one: everything goes to temporary names first and is renamed at the end.
package folder

import (
	"bufio"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"sync"
)

// Folder is an output folder being filled. Write may be called from several
// goroutines at once, Commit and Discard only when none is under way.
type Folder struct {
	dir     string
	mu      sync.Mutex
	pending []*pendingFile
}

type pendingFile struct {
	name, temp string
	earlier    string // where an earlier file of the name waits during Commit
	file       *os.File
	buffered   *bufio.Writer
}

// Open makes the folder if need be.
func Open(dir string) (*Folder, error) {
	if err := os.MkdirAll(dir, 0o755); err != nil {
		return nil, fmt.Errorf("cannot make the output folder %q: %w; hint: name another with --into", dir, err)
	}
	return &Folder{dir: dir}, nil
}

// Path returns where an output will stand after Commit.
func (f *Folder) Path(name string) string { return filepath.Join(f.dir, name) }

// Write fills one output through fill. The file appears under its own name
// only at Commit; an earlier file of that name stays until then.
func (f *Folder) Write(name string, fill func(io.Writer) error) error {
	file, err := os.CreateTemp(f.dir, "."+name+".*.part")
	if err != nil {
		return fmt.Errorf("cannot write %q: %w", f.Path(name), err)
	}
	p := &pendingFile{name: name, temp: file.Name(), file: file, buffered: bufio.NewWriterSize(file, 1<<18)}
	f.mu.Lock()
	f.pending = append(f.pending, p)
	f.mu.Unlock()
	if err := fill(p.buffered); err != nil {
		return fmt.Errorf("cannot write %q: %w", f.Path(name), err)
	}
	if err := errors.Join(p.buffered.Flush(), file.Chmod(0o644), file.Close()); err != nil {
		return fmt.Errorf("cannot write %q: %w", f.Path(name), err)
	}
	p.file = nil
	return nil
}

// Commit gives every output its own name: all of them, or, where one cannot be
// named, none, and earlier files stand as they were.
func (f *Folder) Commit() error {
	for i, p := range f.pending {
		err := p.takePlace(f.Path(p.name))
		if err != nil {
			for _, done := range f.pending[:i] {
				err = errors.Join(err, done.giveBack(f.Path(done.name)))
			}
			return fmt.Errorf("cannot write %q: %w", f.Path(p.name), err)
		}
	}
	for _, p := range f.pending {
		if p.earlier != "" {
			os.Remove(p.earlier)
		}
	}
	f.pending = nil
	return nil
}

// takePlace moves an earlier file aside and the new one to its name.
func (p *pendingFile) takePlace(path string) error {
	if fi, err := os.Lstat(path); err == nil && fi.IsDir() {
		return errors.New("a folder has this name")
	}
	aside := p.temp + ".earlier"
	switch err := os.Rename(path, aside); {
	case err == nil:
		p.earlier = aside
	case !errors.Is(err, os.ErrNotExist):
		return err
	}
	if err := os.Rename(p.temp, path); err != nil {
		if p.earlier != "" {
			err = errors.Join(err, os.Rename(p.earlier, path))
			p.earlier = ""
		}
		return err
	}
	return nil
}

// giveBack undoes takePlace.
func (p *pendingFile) giveBack(path string) error {
	err := os.Rename(path, p.temp)
	if p.earlier != "" {
		err = errors.Join(err, os.Rename(p.earlier, path))
	}
	p.earlier = ""
	return err
}

// Discard removes whatever was not committed; it does nothing after Commit.
func (f *Folder) Discard() {
	for _, p := range f.pending {
		if p.file != nil {
			p.file.Close()
		}
		if p.temp != "" {
			os.Remove(p.temp)
		}
	}
	f.pending = nil
}
