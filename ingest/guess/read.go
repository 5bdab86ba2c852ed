package guess

import (
	"context"
	"errors"
	"fmt"
	"math"
	"sort"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/cell"
)

// read fills the tracks of a log from all its files.
func (p *Proposal) read(ctx context.Context, l *Log) error {
	l.tracks = map[string]*Track{}
	for _, s := range l.shapes {
		if err := p.readShape(ctx, l, s); err != nil {
			if ctx.Err() != nil {
				return ctx.Err()
			}
			p.note(s.file.Name, "read in part only: "+cause(err))
			l.Doubts = append(l.Doubts, s.file.Name+" could be read in part only: "+cause(err))
		}
	}
	var list []*Track
	for _, t := range l.tracks {
		t.finish()
		if t.number+len(t.words) > 0 {
			list = append(list, t)
		} else {
			l.Blank = append(l.Blank, t.Column)
		}
	}
	sort.Strings(l.Blank)
	sort.Slice(list, func(i, j int) bool { return list[i].index < list[j].index })
	p.Tracks = append(p.Tracks, list...)
	l.findMissing(list)
	return nil
}

// readShape reads one file or sheet.
func (p *Proposal) readShape(ctx context.Context, l *Log, s *shape) error {
	ts, err := newTimes(s)
	if err != nil {
		return err
	}
	fr := s.rows.Frame()
	adders := map[string][]*adder{}
	open := func(key string) []*adder {
		var out []*adder
		for _, v := range s.values {
			out = append(out, newOrOld(l, s, key, v))
		}
		adders[key] = out
		return out
	}
	var wide []*adder
	if len(s.keys) == 0 {
		wide = open("")
	}
	var joined []byte
	tooMany := false
	err = s.rows.Rows(ctx, func(_ int64, cells [][]byte) bool {
		at, ok := ts.at(cells)
		if !ok && !s.undated {
			return true
		}
		row := wide
		if len(s.keys) > 0 {
			joined = joined[:0]
			for i, k := range s.keys {
				if k >= len(cells) {
					return true
				}
				if i > 0 {
					joined = append(joined, '/')
				}
				joined = append(joined, cells[k]...)
			}
			if row, ok = adders[string(joined)]; !ok {
				if len(l.tracks) > maxTracks {
					tooMany = true
					return true
				}
				row = open(cell.Text(joined, s.style.Latin))
				adders[string(joined)] = row
				if s.unitCol >= 0 && s.unitCol < len(cells) {
					for _, a := range row {
						a.t.unitText = strings.TrimSpace(cell.Text(cells[s.unitCol], s.style.Latin))
					}
				}
			}
		}
		for i, v := range s.values {
			if v < len(cells) {
				row[i].add(trimCell(cells[v]), at, !s.undated)
			}
		}
		return true
	})
	if tooMany {
		l.Doubts = append(l.Doubts, fmt.Sprintf("more than %d points; the rest was not looked at", maxTracks))
	}
	name := ""
	if t := max(fr.Time, fr.Date); t >= 0 {
		name = fr.Names[t]
	}
	if l.Clock == "" {
		l.Clock, l.ClockWhy = ts.clockOf(name)
	}
	if err != nil && !errors.Is(err, context.Canceled) {
		return err
	}
	return ctx.Err()
}

// maxTracks bounds the points of one log.
const maxTracks = 20_000

func trimCell(b []byte) []byte {
	for len(b) > 0 && b[0] == ' ' {
		b = b[1:]
	}
	for len(b) > 0 && b[len(b)-1] == ' ' {
		b = b[:len(b)-1]
	}
	return b
}

// newOrOld finds the track of a key and a value column, or begins one.
func newOrOld(l *Log, s *shape, key string, v int) *adder {
	fr := s.rows.Frame()
	name := fr.Names[v]
	t := &Track{Log: l, Source: l.Name, name: name}
	switch {
	case l.Setting.Layout == site.PerPoint:
		t.Column, t.around = s.file.Stem(), ""
		t.name = s.file.Stem()
		if fr.HeaderLine > 0 {
			t.around = name
		}
	case l.Setting.Layout == site.Long && len(s.values) > 1:
		t.Column, t.around = key+"/"+name, key
	case l.Setting.Layout == site.Long:
		t.Column, t.name, t.around = key, key, name
	default:
		t.Column, t.unitText = name, s.said[name]
		if w, ok := s.rows.(interface{ StampedAtEnd(string) bool }); ok && w.StampedAtEnd(name) {
			t.Stamp = site.StampEnd
		}
		if l.bySource {
			t.Source = s.file.Base
		}
	}
	id := t.Source + "\x00" + t.Column
	if old := l.tracks[id]; old != nil {
		return &adder{t: old, style: s.style, dec: newAdder(&Track{}, s.style).dec}
	}
	t.index = len(l.tracks)
	l.tracks[id] = t
	return newAdder(t, s.style)
}

// findMissing finds numbers that stand for a missing value: met often, whole,
// far outside all others.
func (l *Log) findMissing(list []*Track) {
	votes := map[float64]int{}
	for _, t := range list {
		if len(t.sample) < 50 || t.textual() || t.binary() {
			continue
		}
		lo, hi := t.q(0.02), t.q(0.98)
		width := math.Max(hi-lo, 1)
		for _, c := range []struct {
			v float64
			n int
		}{{t.min, t.minN}, {t.max, t.maxN}} {
			if c.n >= 3 && isMarker(c.v) && (c.v < lo-5*width || c.v > hi+5*width) {
				votes[c.v]++
				t.dropped(c.v)
			}
		}
	}
	var out []float64
	for v := range votes {
		out = append(out, v)
	}
	sort.Float64s(out)
	for _, v := range out {
		l.Missing = append(l.Missing, strings.TrimSuffix(fmt.Sprintf("%.4f", v), ".0000"))
	}
}

// isMarker reports numbers that loggers write where they have none: rows of
// nines, limits of number types.
func isMarker(v float64) bool {
	switch math.Abs(v) {
	case 99, 999, 9999, 99999, 999999, 99.9, 999.9, 127, 255, 32767, 32768, 65535, 3276.7, 3276.8, 327.67, 327.68, 6553.5, 655.35, 1000, 1e6, 850:
		return true
	}
	return false
}

// dropped takes a marker out of what is known of the values.
func (t *Track) dropped(v float64) {
	kept := t.sample[:0]
	for _, x := range t.sample {
		if x != v {
			kept = append(kept, x)
		}
	}
	t.sample = kept
	delete(t.distinct, v)
	if len(kept) > 0 {
		t.min, t.max = kept[0], kept[len(kept)-1]
	}
	for i, x := range t.bins.mean {
		if math.Abs(float64(x)) > math.Abs(v)/4 {
			t.bins.mean[i] = float32(math.NaN())
		}
	}
}
