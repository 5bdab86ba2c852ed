package influx

import (
	"context"
	"errors"
	"strconv"
	"time"
)

// batchLines is how many readings are written at once.
const batchLines = 5000

// line adds one reading to the batch.
func (w *writer) line(prefix string, r number) {
	if w.err != nil {
		return
	}
	w.batch = append(w.batch, prefix...)
	w.batch = strconv.AppendFloat(w.batch, r.x, 'g', -1, 64)
	w.batch = append(w.batch, ' ')
	w.batch = strconv.AppendInt(w.batch, r.t, 10)
	w.batch = append(w.batch, '\n')
	if w.lines++; w.lines == batchLines {
		w.flush()
	}
}

// flush writes the batch and waits for the answer. The client's asynchronous
// way would not tell of lines that were dropped.
func (w *writer) flush() {
	if w.lines == 0 || w.err != nil {
		return
	}
	text := string(w.batch)
	w.batch, w.lines = w.batch[:0], 0
	c := w.conn
	api := c.client.WriteAPIBlocking(c.in.Organisation, c.in.Bucket)
	w.err = c.steadily(w.ctx, func() error {
		limit := time.Duration(c.in.TimeOutS) * time.Second
		within, cancel := context.WithTimeout(w.ctx, limit)
		defer cancel()
		err := api.WriteRecord(within, text)
		switch {
		case w.ctx.Err() != nil:
			return w.ctx.Err()
		case errors.Is(within.Err(), context.DeadlineExceeded):
			return slow(limit)
		}
		return c.explain(w.ctx, err)
	})
}

func monthOf(t int64) span {
	u := time.Unix(t, 0).UTC()
	return span{time.Date(u.Year(), u.Month(), 1, 0, 0, 0, 0, time.UTC).Unix(), time.Date(u.Year(), u.Month()+1, 1, 0, 0, 0, 0, time.UTC).Unix()}
}
