package grid

import (
	"bufio"
	"cmp"
	"encoding/binary"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"slices"
	"sync"
	"time"
)

// spill keeps readings that came out of order on disk, one file per month and
// group of points, so that sorting needs the memory of one such file.
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
	var all []spilled
	for _, k := range keys {
		var err error
		if all, err = readSpilled(s.path(k), all[:0]); err != nil {
			return fmt.Errorf("sorting readings that are out of order: %w", err)
		}
		slices.SortFunc(all, func(a, b spilled) int {
			return cmp.Or(cmp.Compare(a.point, b.point), cmp.Compare(a.t, b.t), cmp.Compare(a.q, b.q))
		})
		for _, r := range all {
			take(int(r.point), r.t, r.q)
		}
	}
	return nil
}

func readSpilled(path string, to []spilled) ([]spilled, error) {
	f, err := os.Open(path)
	if err != nil {
		return to, err
	}
	defer f.Close()
	r := bufio.NewReaderSize(f, spillBuffer)
	var rec [spillRecord]byte
	for {
		if _, err := io.ReadFull(r, rec[:]); err != nil {
			if errors.Is(err, io.EOF) {
				return to, nil
			}
			return to, err
		}
		to = append(to, spilled{
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
