package grid

import (
	"bufio"
	"cmp"
	"encoding/binary"
	"errors"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"
	"slices"
	"sync"
	"time"
)

// spill keeps readings that came out of order on disk, one file per month and
// group of points, parted further where one
// is large, so that sorting needs bounded memory.
type spill struct {
	dir   string
	mu    sync.Mutex
	files map[spillKey][]byte // what is not yet written
	err   error
}

type spillKey struct{ group, month int }

type spilled struct {
	t, q  int64
	point int32
}

const (
	spillGroup  = 64 // points per file
	spillRecord = 20
	spillBuffer = 1 << 16
)

func newSpill(dir string) (*spill, error) {
	d, err := os.MkdirTemp(dir, "sashlog-sort-")
	if err != nil {
		return nil, fmt.Errorf("readings are out of order and there is no folder to sort them in: %w", err)
	}
	return &spill{dir: d, files: map[spillKey][]byte{}}, nil
}

func monthOf(t int64) int {
	u := time.Unix(t, 0).UTC()
	return u.Year()*12 + int(u.Month()) - 1
}

// put keeps one reading. An error shows at the end.
func (s *spill) put(point int, t, q int64) {
	s.mu.Lock()
	defer s.mu.Unlock()
	k := spillKey{point / spillGroup, monthOf(t)}
	buf := s.files[k]
	if buf == nil {
		buf = make([]byte, 0, 50*spillRecord)
	}
	buf = binary.LittleEndian.AppendUint64(buf, uint64(t))
	buf = binary.LittleEndian.AppendUint64(buf, uint64(q))
	buf = binary.LittleEndian.AppendUint32(buf, uint32(point))
	if len(buf)+spillRecord > spillBuffer {
		s.write(k, buf)
		buf = buf[:0]
	}
	s.files[k] = buf
}

func (s *spill) path(k spillKey) string {
	return filepath.Join(s.dir, fmt.Sprintf("%d-%d", k.group, k.month))
}

func (s *spill) write(k spillKey, buf []byte) {
	if s.err != nil {
		return
	}
	f, err := os.OpenFile(s.path(k), os.O_CREATE|os.O_APPEND|os.O_WRONLY, 0o600)
	if err == nil {
		_, err = f.Write(buf)
		err = errors.Join(err, f.Close())
	}
	if err != nil {
		s.err = fmt.Errorf("sorting readings that are out of order: %w", err)
	}
}

// replay hands over everything, each point in order of time and value.
func (s *spill) replay(take func(point int, t, q int64)) error {
	keys := make([]spillKey, 0, len(s.files))
	for k, buf := range s.files {
		if len(buf) > 0 {
			s.write(k, buf)
		}
		s.files[k] = nil
		keys = append(keys, k)
	}
	if s.err != nil {
		return s.err
	}
	slices.SortFunc(keys, func(a, b spillKey) int {
		return cmp.Or(cmp.Compare(a.group, b.group), cmp.Compare(a.month, b.month))
	})
	for _, k := range keys {
		if err := sorted(s.path(k), take); err != nil {
			return fmt.Errorf("sorting readings that are out of order: %w", err)
		}
	}
	return nil
}

// sortMost bounds the readings that are sorted at once: 48 MB.
var sortMost int64 = 2 << 20

// sorted hands over one file in order and removes it. What is too much at once
// is parted by time first.
func sorted(path string, take func(point int, t, q int64)) error {
	fi, err := os.Stat(path)
	if err != nil {
		return err
	}
	n := fi.Size() / spillRecord
	if n > sortMost {
		parts, err := partByTime(path, n/sortMost+1)
		if err != nil || parts == nil {
			return err
		}
		for _, part := range parts {
			if err := sorted(part, take); err != nil {
				return err
			}
		}
		return nil
	}
	all := make([]spilled, 0, n)
	if err := eachSpilled(path, func(r spilled) { all = append(all, r) }); err != nil {
		return err
	}
	slices.SortFunc(all, func(a, b spilled) int {
		return cmp.Or(cmp.Compare(a.point, b.point), cmp.Compare(a.t, b.t), cmp.Compare(a.q, b.q))
	})
	for _, r := range all {
		take(int(r.point), r.t, r.q)
	}
	return os.Remove(path)
}

// partByTime parts a file into files of later and later readings, and removes
// it. Readings of one instant stay together, however many there are.
func partByTime(path string, parts int64) ([]string, error) {
	lo, hi := int64(math.MaxInt64), int64(math.MinInt64)
	if err := eachSpilled(path, func(r spilled) { lo, hi = min(lo, r.t), max(hi, r.t) }); err != nil {
		return nil, err
	}
	parts = min(parts, hi-lo+1)
	if parts < 2 {
		return nil, fmt.Errorf("more than %d readings of one instant", sortMost)
	}
	names, files := make([]string, parts), make([]*os.File, parts)
	writers := make([]*bufio.Writer, parts)
	var err error
	for i := range names {
		names[i] = fmt.Sprintf("%s.%d", path, i)
		if files[i], err = os.OpenFile(names[i], os.O_CREATE|os.O_EXCL|os.O_WRONLY, 0o600); err != nil {
			break
		}
		writers[i] = bufio.NewWriterSize(files[i], spillBuffer)
	}
	if err == nil {
		var buf []byte
		width := (hi-lo)/parts + 1
		err = eachSpilled(path, func(r spilled) {
			buf = binary.LittleEndian.AppendUint64(buf[:0], uint64(r.t))
			buf = binary.LittleEndian.AppendUint64(buf, uint64(r.q))
			buf = binary.LittleEndian.AppendUint32(buf, uint32(r.point))
			writers[(r.t-lo)/width].Write(buf) // an error shows at Flush
		})
	}
	for i, f := range files {
		if f != nil {
			err = errors.Join(err, writers[i].Flush(), f.Close())
		}
	}
	return names, errors.Join(err, os.Remove(path))
}

func eachSpilled(path string, f func(spilled)) error {
	file, err := os.Open(path)
	if err != nil {
		return err
	}
	defer file.Close()
	r := bufio.NewReaderSize(file, spillBuffer)
	var rec [spillRecord]byte
	for {
		if _, err := io.ReadFull(r, rec[:]); err != nil {
			if errors.Is(err, io.EOF) {
				return nil
			}
			return err
		}
		f(spilled{
			t:     int64(binary.LittleEndian.Uint64(rec[0:])),
			q:     int64(binary.LittleEndian.Uint64(rec[8:])),
			point: int32(binary.LittleEndian.Uint32(rec[16:])),
		})
	}
}

func (s *spill) close() error {
	s.files = nil
	return os.RemoveAll(s.dir)
}
