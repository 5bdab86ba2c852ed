package tabular

import "bytes"

// splitter cuts rows of delimited text into fields by the rules of RFC 4180 as
// encoding/csv applies them with LazyQuotes, with one difference: a quote that
// is never closed, or not within maxQuoted lines, is an ordinary character, so
// that a stray quote cannot swallow the rows after it.
type splitter struct {
	sep byte
	// Of the row cut last: its fields, where each begins in the row (bytes),
	// and how many lines it took.
	fields [][]byte
	starts []int
	lines  int
	// stray counts quotes taken as ordinary characters; multi counts cells
	// that run over several lines.
	stray, multi int64

	spans   []span
	scratch []byte
}

// span is a field: a piece of the row, or of scratch when own is set.
type span struct {
	a, b int
	own  bool
}

// maxQuoted is how many lines a quoted cell may take.
const maxQuoted = 200

// next cuts the first row of b; blank lines before it are passed over and
// counted in lines. It returns the bytes taken, 0 when b does not hold a whole
// row and is not final. ok is false when there was no row (only blank lines).
func (s *splitter) next(b []byte, final bool) (n int, ok bool) {
	s.lines, s.fields, s.starts = 0, s.fields[:0], s.starts[:0]
	pos := 0
	for {
		end, nl, whole := lineEnd(b, pos, final)
		if !whole {
			return 0, false
		}
		if pos == len(b) {
			return pos, false
		}
		s.lines++
		if end == pos { // blank
			pos = nl
			continue
		}
		n = s.row(b, pos, end, nl, final, true)
		if n < 0 { // the quote is never closed
			s.stray++
			n = s.row(b, pos, end, nl, final, false)
		}
		return n, n > 0
	}
}

// lineEnd finds the end of the line at pos: of its text and of its line end.
func lineEnd(b []byte, pos int, final bool) (end, next int, whole bool) {
	i := bytes.IndexByte(b[pos:], '\n')
	if i < 0 {
		end = len(b)
		if end > pos && b[end-1] == '\r' {
			end--
		}
		return end, len(b), final
	}
	end = pos + i
	next = end + 1
	if end > pos && b[end-1] == '\r' {
		end--
	}
	return end, next, true
}

// row cuts the row whose first line is b[pos:end]. It returns the bytes taken,
// 0 when more are needed, -1 when a quote is never closed (only with quotes).
func (s *splitter) row(b []byte, pos, end, nl int, final, quotes bool) int {
	s.spans, s.scratch, s.starts = s.spans[:0], s.scratch[:0], s.starts[:0]
	rowStart, lines, multi := pos, s.lines, s.multi
	for {
		s.starts = append(s.starts, pos-rowStart)
		if !quotes || pos >= end || b[pos] != '"' {
			i := bytes.IndexByte(b[pos:end], s.sep)
			if i < 0 {
				s.spans = append(s.spans, span{pos, end, false})
				break
			}
			s.spans = append(s.spans, span{pos, pos + i, false})
			pos += i + 1
			continue
		}
		pos++
		own := len(s.scratch)
		from, first := pos, s.lines
		closed, last := false, false
		for !closed {
			i := bytes.IndexByte(b[pos:end], '"')
			if i >= 0 {
				q := pos + i
				switch {
				case q+1 < end && b[q+1] == '"':
					s.scratch = append(append(s.scratch, b[pos:q]...), '"')
					pos = q + 2
				case q+1 < end && b[q+1] == s.sep, q+1 == end:
					if len(s.scratch) == own { // nothing special: a piece of the row
						s.spans = append(s.spans, span{from, q, false})
					} else {
						s.scratch = append(s.scratch, b[pos:q]...)
						s.spans = append(s.spans, span{own, len(s.scratch), true})
					}
					closed, last = true, q+1 == end
					pos = q + 2
				default: // a quote within the field
					s.scratch = append(append(s.scratch, b[pos:q]...), '"')
					pos = q + 1
				}
				continue
			}
			// The field runs on over the line end.
			if nl == len(b) && final || s.lines-first >= maxQuoted {
				s.lines, s.multi = lines, multi
				return -1
			}
			s.scratch = append(append(s.scratch, b[pos:end]...), '\n')
			var whole bool
			pos = nl
			end, nl, whole = lineEnd(b, pos, final)
			if !whole {
				s.lines, s.multi = lines, multi
				return 0
			}
			s.lines++
		}
		if s.lines > first {
			s.multi++
		}
		if last {
			break
		}
	}
	for _, f := range s.spans {
		if f.own {
			s.fields = append(s.fields, s.scratch[f.a:f.b])
		} else {
			s.fields = append(s.fields, b[f.a:f.b])
		}
	}
	return nl
}
