package reading

import "testing"

// What a user left out on purpose, what was written twice and what was never
// written do not count against the logs; what was read and refused does.
func TestRejectedShare(t *testing.T) {
	for _, c := range []struct {
		name   string
		counts map[Reason]int64
		want   float64
	}{
		{"nothing", nil, 0},
		{"all accepted", map[Reason]int64{Accepted: 10}, 0},
		{"a period asked for", map[Reason]int64{Accepted: 10, OutsidePeriod: 1000}, 0},
		{"overlapping exports", map[Reason]int64{Accepted: 10, Duplicate: 10}, 0},
		{"empty cells", map[Reason]int64{Accepted: 10, Missing: 90}, 0},
		{"out of range", map[Reason]int64{Accepted: 6, OutOfRange: 2}, 0.25},
		{"conflicts among others", map[Reason]int64{Accepted: 3, Conflict: 1, Duplicate: 5, OutsidePeriod: 7}, 0.25},
		{"all refused", map[Reason]int64{BadTime: 4}, 1},
	} {
		p := PointLedger{}
		for r, n := range c.counts {
			p.Counts[r] += n
			p.RowsRead += n
		}
		l := Ledger{Points: []PointLedger{p}}
		if got := l.RejectedShare(); got != c.want {
			t.Errorf("%s: %v, want %v", c.name, got, c.want)
		}
	}
}
