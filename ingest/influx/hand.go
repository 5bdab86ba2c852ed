package influx

import (
	"context"
	"crypto/sha256"
	"encoding/binary"
	"encoding/hex"
	"fmt"
	"hash"
	"math"
	"slices"
	"strconv"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/cell"
	"sashlog/ingest/clock"
	"sashlog/ingest/reading"
)

// Read implements reading.Source.
func (s *Source) Read(ctx context.Context, to reading.Sink) error { return s.ReadSome(ctx, to, nil) }

// ReadSome reads those of its points that are listed, or all when nil.
func (s *Source) ReadSome(ctx context.Context, to reading.Sink, only []int) error {
	points := s.points
	if only != nil {
		points = slices.DeleteFunc(slices.Clone(points), func(p *point) bool { return !slices.Contains(only, p.index) })
	}
	h, err := s.hand(to, points)
	if err != nil {
		return err
	}
	jobs, err := s.plan(ctx, points)
	if err == nil {
		err = s.run(ctx, jobs, func(got []fetched) error {
			for i := range got {
				if err := ctx.Err(); err != nil {
					return err
				}
				h.take(&got[i])
			}
			return nil
		})
	}
	s.conn.close()
	if err != nil {
		return at(s.name, err)
	}
	h.finish()
	s.file = reading.FileLedger{Path: s.name, SHA256: hex.EncodeToString(h.sum.Sum(nil)), Rows: h.rows, Dialect: s.dialect()}
	s.notes = h.notes(s.name)
	return nil
}

// hand turns what was fetched into readings, like cells of a file.
type hand struct {
	to       reading.Sink
	file     string
	dec      map[int]*cell.Decoder
	points   []int
	times    *clock.Resolver // nil when instants are right as they are
	sum      hash.Hash
	plain    bool // no missing markers beside the usual ones
	rows     int64
	skipped  int64
	repeated int64
}

func (s *Source) hand(to reading.Sink, points []*point) (*hand, error) {
	h := &hand{to: to, file: s.name, dec: map[int]*cell.Decoder{}, sum: sha256.New(), plain: len(s.log.Missing) == 0}
	if c := s.log.Clock; c.Kind != site.ClockUTC || c.ShiftS != 0 || len(c.Shifts) > 0 {
		r, err := clock.NewResolver(c, s.site.Location)
		if err != nil {
			return nil, err
		}
		h.times = r
	}
	for _, p := range points {
		h.dec[p.index] = cell.NewDecoder(p.index, &s.site.Points[p.index], cell.Style{Mark: '.', Declared: true}, s.log.Missing)
		h.points = append(h.points, p.index)
	}
	slices.Sort(h.points)
	return h, nil
}

// take hands over one point's readings in order of time.
func (h *hand) take(f *fetched) {
	point := f.point.index
	d := h.dec[point]
	plain := d.Numeric() && h.plain
	h.note(f)
	var buf []byte
	j := 0
	for i := 0; i < len(f.numbers) || j < len(f.texts); {
		if j == len(f.texts) || i < len(f.numbers) && f.numbers[i].t <= f.texts[j].t {
			n := f.numbers[i]
			i++
			if plain && n.x > -999 {
				h.reading(point, n.t, d.Scale(n.x))
				continue
			}
			buf = strconv.AppendFloat(buf[:0], n.x, 'f', -1, 64)
			h.cell(point, d, n.t, buf)
			continue
		}
		h.cell(point, d, f.texts[j].t, []byte(f.texts[j].s))
		j++
	}
}

func (h *hand) cell(point int, d *cell.Decoder, t int64, b []byte) {
	v, why, text := d.Decode(b)
	if why != reading.Accepted {
		h.to.Reject(point, why, reading.Where{File: h.file}, text)
		return
	}
	h.reading(point, t, v)
}

func (h *hand) reading(point int, t int64, v float64) {
	if h.times != nil {
		u, verdict := h.times.Resolve(t)
		switch verdict {
		case clock.Skipped:
			h.skipped++
			h.to.Reject(point, reading.SkippedHour, reading.Where{File: h.file}, "")
			return
		case clock.Repeated:
			// The database has room for one showing of the hour only.
			h.repeated++
			h.to.Reject(point, reading.AmbiguousHour, reading.Where{File: h.file}, "")
			return
		}
		t = u
	}
	h.to.Reading(point, t, v)
}

// note adds what came to the checksum.
func (h *hand) note(f *fetched) {
	h.rows += f.rows()
	buf := make([]byte, 0, 1<<12)
	buf = binary.LittleEndian.AppendUint64(buf, uint64(f.point.index))
	for _, n := range f.numbers {
		buf = binary.LittleEndian.AppendUint64(buf, uint64(n.t))
		buf = binary.LittleEndian.AppendUint64(buf, math.Float64bits(n.x))
		if len(buf) > 1<<12-16 {
			h.sum.Write(buf)
			buf = buf[:0]
		}
	}
	for _, x := range f.texts {
		buf = binary.LittleEndian.AppendUint64(buf, uint64(x.t))
		buf = append(append(buf, x.s...), 0)
	}
	h.sum.Write(buf)
}

// finish reports the words nobody gave a meaning.
func (h *hand) finish() {
	for _, p := range h.points {
		d := h.dec[p]
		if len(d.Unknown) == 0 {
			continue
		}
		var list []string
		for w, n := range d.Unknown {
			list = append(list, fmt.Sprintf("%q (%d)", w, n))
		}
		slices.Sort(list)
		h.to.Issue(reading.Issue{Where: reading.Where{File: h.file}, Point: p, Text: "words without a meaning: " + strings.Join(list[:min(len(list), 12)], ", "), Hint: d.Hint()})
	}
}

func (h *hand) notes(file string) []reading.ClockNote {
	if h.skipped == 0 && h.repeated == 0 {
		return nil
	}
	return []reading.ClockNote{{File: file, Skipped: h.skipped, Ambiguous: h.repeated,
		Text: fmt.Sprintf("%d readings in skipped local hours, %d in repeated ones (rejected)", h.skipped, h.repeated)}}
}
