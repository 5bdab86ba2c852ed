package ingest

import (
	"context"
	"math"
	"os"
	"path/filepath"
	"runtime"
	"slices"
	"sync"

	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/ingest/reading"
	"sashlog/ingest/sources"
)

// reader feeds the sources of a site to a builder, sources that share points
// one after the other, others side by side.
type reader struct {
	site    *site.Site
	builder *grid.Builder
	set     *sources.Set
	groups  [][]int // of sources that share points, in order of their first reading
	errs    []error
	notes   []*notes
	meter   meter
}

// plan groups the sources and puts those of a group into the order of their
// first readings, so that logs split over several files need no sorting.
func (r *reader) plan(ctx context.Context, progress func(done, total int64)) {
	n := len(r.set.Sources)
	r.errs, r.notes = make([]error, n), make([]*notes, n)
	owner := make([]int, len(r.site.Points)) // 1 + group of the point
	var groups [][]int
	for i, src := range r.set.Sources {
		mine := len(groups)
		groups = append(groups, []int{i})
		for _, p := range src.Points() {
			if g := owner[p] - 1; g >= 0 && g != mine {
				// The two groups become one.
				groups[mine] = append(groups[mine], groups[g]...)
				groups[g] = nil
				for k := range owner {
					if owner[k]-1 == g {
						owner[k] = mine + 1
					}
				}
			}
			owner[p] = mine + 1
		}
	}
	for _, g := range groups {
		if g == nil {
			continue
		}
		slices.Sort(g)
		if len(g) > 1 {
			first := map[int]int64{}
			for _, i := range g {
				first[i] = firstInstant(ctx, r.set.Sources[i])
			}
			slices.SortStableFunc(g, func(a, b int) int {
				switch {
				case first[a] < first[b]:
					return -1
				case first[a] > first[b]:
					return 1
				}
				return 0
			})
		}
		r.groups = append(r.groups, g)
	}
	slices.SortFunc(r.groups, func(a, b []int) int { return slices.Min(a) - slices.Min(b) })
	r.meter.report = progress
	for _, src := range r.set.Sources {
		r.meter.total += r.size(src)
	}
}

// size is roughly how many bytes a source holds; only progress depends on it.
func (r *reader) size(src reading.Source) int64 {
	if fi, err := os.Stat(filepath.Join(r.site.Dir, filepath.FromSlash(src.Name()))); err == nil {
		return fi.Size() + 1
	}
	return 1 << 20
}

// pass reads the sources that hold one of the points, or all when nil.
func (r *reader) pass(ctx context.Context, points []int) {
	var wg sync.WaitGroup
	next := make(chan []int)
	for range min(runtime.GOMAXPROCS(0), len(r.groups)) {
		wg.Add(1)
		go func() {
			defer wg.Done()
			for g := range next {
				for _, i := range g {
					r.one(ctx, i, points)
				}
			}
		}()
	}
	for _, g := range r.groups {
		next <- g
	}
	close(next)
	wg.Wait()
}

func (r *reader) one(ctx context.Context, i int, points []int) {
	src := r.set.Sources[i]
	if ctx.Err() != nil || r.errs[i] != nil {
		return
	}
	if points != nil && !slices.ContainsFunc(src.Points(), func(p int) bool { return slices.Contains(points, p) }) {
		return
	}
	n := &notes{Builder: r.builder, unmapped: map[string]int64{}, meter: &r.meter, belt: newBelt(r.builder, len(r.site.Points))}
	n.meter.again(points != nil, r.size(src))
	if some, ok := src.(interface {
		ReadSome(context.Context, reading.Sink, []int) error
	}); ok && points != nil {
		r.errs[i] = some.ReadSome(ctx, n, points)
	} else {
		r.errs[i] = src.Read(ctx, n)
	}
	n.belt.end()
	r.meter.add(r.size(src) - n.told)
	if points == nil {
		if d, ok := src.(sources.Source); ok {
			n.file, n.clock = d.Describe(), d.ClockNotes()
		}
		r.notes[i] = n
	}
}

// account puts what the sources said about themselves into the ledger, in the
// order of the site file.
func (r *reader) account() {
	l := r.builder.Ledger()
	for _, p := range r.set.Problems {
		if !p.Kind.Fatal() {
			r.builder.Issue(reading.Issue{Where: p.Where, Point: p.Point, Text: p.Text, Hint: p.Hint})
		}
	}
	for _, n := range r.notes {
		if n == nil {
			continue
		}
		if n.file.Path != "" {
			l.Files = append(l.Files, n.file)
		}
		l.Clock = append(l.Clock, n.clock...)
		for name, c := range n.unmapped {
			l.Unmapped[name] += c
		}
		for _, is := range n.issues {
			r.builder.Issue(is)
		}
		l.IssuesDropped += n.dropped
	}
}

// unmet adds the points of long logs that no row named; which these are is
// known only once the rows are counted, after the builder's Flush.
func (r *reader) unmet() {
	l := r.builder.Ledger()
	for _, p := range sources.Unmet(r.site, l) {
		l.Issues = append(l.Issues, reading.Issue{Where: p.Where, Point: p.Point, Text: p.Text, Hint: p.Hint})
	}
}

func (r *reader) failure() error {
	names := make([]string, len(r.set.Sources))
	for i, src := range r.set.Sources {
		names[i] = src.Name()
	}
	return failures(r.site, r.set, r.errs, names)
}

// notes is the sink of one source: readings go to the builder, what concerns the source as a whole is kept until all are read.
type notes struct {
	*grid.Builder
	issues   []reading.Issue
	dropped  int64
	unmapped map[string]int64
	file     reading.FileLedger
	clock    []reading.ClockNote
	meter    *meter
	belt     *belt
	readings int64
	told     int64
}

const (
	issuesOfOneSource = 100
	tellEach          = 1 << 18 // readings between two notes of progress
	bytesOfAReading   = 6       // roughly, in a wide file
)

func (n *notes) Reading(point int, unixS int64, v float64) {
	n.readings++
	if n.readings%tellEach == 0 {
		n.told += n.meter.add(tellEach * bytesOfAReading)
	}
	n.belt.put(point, unixS, v)
}

// Block takes rows of a wide file at once.
func (n *notes) Block(rows *reading.Block) *reading.Block {
	before := n.readings
	n.readings += int64(len(rows.UnixS) * len(rows.Points))
	if told := n.readings/tellEach - before/tellEach; told > 0 {
		n.told += n.meter.add(told * tellEach * bytesOfAReading)
	}
	return n.belt.block(rows)
}

// Gap takes its place among the readings of the point.
func (n *notes) Gap(point int, unixS int64) { n.belt.put(point, unixS, math.NaN()) }

func (n *notes) Reject(point int, why reading.Reason, at reading.Where, text string) {
	if point < 0 {
		n.unmapped[text]++
		return
	}
	n.Builder.Reject(point, why, at, text)
}

func (n *notes) Issue(i reading.Issue) {
	if len(n.issues) < issuesOfOneSource {
		n.issues = append(n.issues, i)
		return
	}
	n.dropped++
}

// meter reports progress from several goroutines.
type meter struct {
	mu          sync.Mutex
	report      func(done, total int64)
	done, total int64
}

// add notes bytes done and returns how many it counted: never more than the
// total.
func (m *meter) add(bytes int64) int64 {
	if m.report == nil {
		return 0
	}
	m.mu.Lock()
	defer m.mu.Unlock()
	before := m.done
	m.done = min(m.done+bytes, m.total)
	m.report(m.done, m.total)
	return m.done - before
}

// again makes room for a source that is read a second time.
func (m *meter) again(second bool, bytes int64) {
	if second {
		m.mu.Lock()
		m.total += bytes
		m.mu.Unlock()
	}
}

// firstInstant reads a source up to its first reading.
func firstInstant(ctx context.Context, src reading.Source) int64 {
	ctx, cancel := context.WithCancel(ctx)
	defer cancel()
	f := &firstOnly{t: math.MaxInt64, stop: cancel}
	// An error comes again when the source is read.
	_ = src.Read(ctx, f)
	return f.t
}

type firstOnly struct {
	t    int64
	stop func()
}

func (f *firstOnly) Reading(_ int, t int64, _ float64) {
	if f.t == math.MaxInt64 {
		f.t = t
		f.stop()
	}
}
func (f *firstOnly) Reject(int, reading.Reason, reading.Where, string) {}
func (f *firstOnly) Issue(reading.Issue)                               {}
