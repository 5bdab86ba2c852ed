package ingest

import "sashlog/ingest/reading"

// belt carries the readings of one source to a builder that works beside the
// reader. Parsing and building take about as long, so that two cores are used
// even when there is one large file. The builder gets the readings of a batch
// point by point, those of one point in the order they came, so that what it
// knows of a point stays in the cache.
type belt struct {
	batch      []carried
	full       chan load
	free       chan []carried
	freeBlocks chan *reading.Block
	done       chan struct{}
}

// load is a batch of readings as they came, or a block of rows.
type load struct {
	batch []carried
	block *reading.Block
}

type carried struct {
	t     int64
	v     float64
	point int
}

// columnSink takes readings of one point, in order.
type columnSink interface {
	Readings(point int, unixS []int64, values []float64)
}

const (
	beltBatch = 8192 // readings, about 200 kB: stays in the cache
	beltDepth = 4    // loads under way
)

func newBelt(to columnSink, points int) *belt {
	b := &belt{full: make(chan load, beltDepth), free: make(chan []carried, beltDepth), freeBlocks: make(chan *reading.Block, beltDepth), done: make(chan struct{})}
	go func() {
		defer close(b.done)
		s := sorter{from: make([]int, points+1)}
		for l := range b.full {
			if l.block != nil {
				for i, p := range l.block.Points {
					to.Readings(p, l.block.UnixS, l.block.Column(i))
				}
				select {
				case b.freeBlocks <- l.block:
				default:
				}
				continue
			}
			s.each(l.batch, to)
			select {
			case b.free <- l.batch[:0]:
			default:
			}
		}
	}()
	return b
}

func (b *belt) put(point int, t int64, v float64) {
	if b.batch == nil {
		select {
		case b.batch = <-b.free:
		default:
			b.batch = make([]carried, 0, beltBatch)
		}
	}
	b.batch = append(b.batch, carried{t, v, point})
	if len(b.batch) == beltBatch {
		b.send()
	}
}

// send hands over the batch.
func (b *belt) send() {
	b.full <- load{batch: b.batch}
	b.batch = nil
}

// block hands over rows, behind the readings put before, and returns an empty
// block for the same points.
func (b *belt) block(rows *reading.Block) *reading.Block {
	if len(b.batch) > 0 {
		b.send()
	}
	b.full <- load{block: rows}
	select {
	case next := <-b.freeBlocks:
		next.UnixS = next.UnixS[:0]
		return next
	default:
		return reading.NewBlock(rows.Points)
	}
}

// end hands over what is left and waits until it is built.
func (b *belt) end() {
	if len(b.batch) > 0 {
		b.send()
	}
	close(b.full)
	<-b.done
}

// sorter parts batches by point.
type sorter struct {
	unixS  []int64
	values []float64
	from   []int // where each point's readings begin, then end
}

func (s *sorter) each(batch []carried, to columnSink) {
	if s.unixS == nil {
		s.unixS, s.values = make([]int64, beltBatch), make([]float64, beltBatch)
	}
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
		s.unixS[*at], s.values[*at] = c.t, c.v
		*at++
	}
	begin := 0
	for p, end := range s.from[:len(s.from)-1] {
		if end > begin {
			to.Readings(p, s.unixS[begin:end], s.values[begin:end])
			begin = end
		}
	}
}
