package ingest

import "sashlog/ingest/reading"

// belt carries the readings of one source to a builder that works beside the
// reader. Parsing and building take about as long, so that two cores are used
// even when there is one large file. The builder gets the readings of a batch
// point by point, those of one point in the order they came, so that what it
// knows of a point stays in the cache.
type belt struct {
	batch      []carried
	full, free chan []carried
	done       chan struct{}
}

type carried struct {
	t     int64
	v     float64
	point int
}

// pointSink takes readings of one point, in order.
type pointSink interface {
	Readings(point int, list []reading.At)
}

const (
	beltBatch = 8192 // readings, about 200 kB: stays in the cache
	beltDepth = 4    // batches under way
)

func newBelt(to pointSink, points int) *belt {
	b := &belt{batch: make([]carried, 0, beltBatch), full: make(chan []carried, beltDepth), free: make(chan []carried, beltDepth), done: make(chan struct{})}
	go func() {
		defer close(b.done)
		s := sorter{list: make([]reading.At, beltBatch), from: make([]int, points+1)}
		for batch := range b.full {
			s.each(batch, to)
			select {
			case b.free <- batch[:0]:
			default:
			}
		}
	}()
	return b
}

func (b *belt) put(point int, t int64, v float64) {
	b.batch = append(b.batch, carried{t, v, point})
	if len(b.batch) == beltBatch {
		b.full <- b.batch
		select {
		case b.batch = <-b.free:
		default:
			b.batch = make([]carried, 0, beltBatch)
		}
	}
}

// end hands over what is left and waits until it is built.
func (b *belt) end() {
	b.full <- b.batch
	close(b.full)
	<-b.done
}

// sorter parts batches by point.
type sorter struct {
	list []reading.At
	from []int // where each point's readings begin, then end, in list
}

func (s *sorter) each(batch []carried, to pointSink) {
	clear(s.from)
	for i := range batch {
		s.from[batch[i].point+1]++
	}
	for p := 1; p < len(s.from); p++ {
		s.from[p] += s.from[p-1]
	}
	for i := range batch {
		c := &batch[i]
		at := &s.from[c.point]
		s.list[*at] = reading.At{UnixS: c.t, Value: c.v}
		*at++
	}
	begin := 0
	for p, end := range s.from[:len(s.from)-1] {
		if end > begin {
			to.Readings(p, s.list[begin:end])
			begin = end
		}
	}
}
