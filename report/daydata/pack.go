package daydata

import (
	"bytes"
	"encoding/base64"
	"encoding/binary"
	"errors"
	"fmt"
	"io"
	"math"
	"sync"
	"sync/atomic"

	"github.com/klauspost/compress/zlib"
)

// column is one series of a block in packed units; missing marks the unknown.
// A nil column was never logged.
type column []int32

// missing is no value a quantity can have.
const missing = math.MinInt32

// none stands for an unknown value in the stream; differences follow it.
const none = 0

// block packs columns of one length: a bit per column that is there, then its
// values as varints: 0 unknown, else one more than the zigzag of the
// difference from the last known value (0 before the first).
func block(columns []column) string {
	raw := make([]byte, 0, 1<<16)
	present := uint64(0)
	for i, c := range columns {
		if c != nil {
			present |= 1 << i
		}
	}
	raw = binary.AppendUvarint(raw, present)
	for _, c := range columns {
		last := int64(0)
		for _, v := range c {
			if v == missing {
				raw = append(raw, none)
				continue
			}
			step := int64(v) - last
			raw = binary.AppendUvarint(raw, uint64(step<<1^step>>63)+1)
			last = int64(v)
		}
	}
	w := writers.Get().(*writer)
	defer writers.Put(w)
	w.out.Reset()
	w.z.Reset(&w.out)
	_, err := w.z.Write(raw)
	// Writing to memory cannot fail.
	if err := errors.Join(err, w.z.Close()); err != nil {
		panic(fmt.Sprintf("daydata: %v", err))
	}
	return base64.StdEncoding.EncodeToString(w.out.Bytes())
}

// writer is a compressor used again, since making one costs more than a block.
type writer struct {
	out bytes.Buffer
	z   *zlib.Writer
}

var writers = sync.Pool{New: func() any {
	w := &writer{}
	w.z, _ = zlib.NewWriterLevel(&w.out, 6) // a level that exists
	return w
}}

// Unpack reads a block of so many series and steps back; a series that was
// never logged is nil, an unknown value NaN.
func Unpack(text string, series []Series, steps int) ([][]float64, error) {
	z, err := zlib.NewReader(base64.NewDecoder(base64.StdEncoding, bytes.NewReader([]byte(text))))
	if err != nil {
		return nil, fmt.Errorf("daydata: block: %w", err)
	}
	defer z.Close()
	raw, err := io.ReadAll(z)
	if err != nil {
		return nil, fmt.Errorf("daydata: block: %w", err)
	}
	r := bytes.NewReader(raw)
	present, err := binary.ReadUvarint(r)
	if err != nil {
		return nil, fmt.Errorf("daydata: block: %w", err)
	}
	out := make([][]float64, len(series))
	for i := range out {
		if present>>i&1 == 0 {
			continue
		}
		out[i] = make([]float64, steps)
		last := int64(0)
		for k := range out[i] {
			u, err := binary.ReadUvarint(r)
			if err != nil {
				return nil, fmt.Errorf("daydata: block: %s, step %d: %w", series[i].Key, k, err)
			}
			if u == none {
				out[i][k] = unknown()
				continue
			}
			u--
			last += int64(u>>1) ^ -int64(u&1)
			out[i][k] = float64(last) * series[i].Scale
		}
	}
	if r.Len() > 0 {
		return nil, fmt.Errorf("daydata: block: %d bytes too many", r.Len())
	}
	return out, nil
}

// budget counts down the bytes that are left.
type budget struct{ bytes atomic.Int64 }

func (b *budget) take(s string) string {
	b.bytes.Add(-int64(len(s)))
	return s
}

func (b *budget) spent() bool { return b.bytes.Load() < 0 }
