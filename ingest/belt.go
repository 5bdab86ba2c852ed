package ingest

import "sashlog/ingest/reading"

// belt carries the readings of one source to a builder that works beside the
// reader, in the order they came. Parsing and building take about as long, so
// that two cores are used even when there is one large file.
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

const (
	beltBatch = 4096 // readings, about 100 kB: stays in the cache
	beltDepth = 8    // batches under way
)

func newBelt(to reading.Sink) *belt {
	b := &belt{batch: make([]carried, 0, beltBatch), full: make(chan []carried, beltDepth), free: make(chan []carried, beltDepth), done: make(chan struct{})}
	go func() {
		defer close(b.done)
		for batch := range b.full {
			for i := range batch {
				to.Reading(batch[i].point, batch[i].t, batch[i].v)
			}
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
