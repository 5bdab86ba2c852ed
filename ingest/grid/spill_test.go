package grid

import (
	"cmp"
	"math/rand/v2"
	"slices"
	"testing"
)

// However little may be sorted at once, everything comes, each point in order.
func TestSpillPartsWhatIsTooMuch(t *testing.T) {
	defer func(n int64) { sortMost = n }(sortMost)
	sortMost = 50
	s, err := newSpill(t.TempDir())
	if err != nil {
		t.Fatal(err)
	}
	rng := rand.New(rand.NewPCG(1, 2))
	var want []spilled
	for range 5000 {
		r := spilled{point: int32(rng.IntN(3)), t: 1_750_000_000 + rng.Int64N(40*86400), q: rng.Int64N(5)}
		want = append(want, r)
		s.put(int(r.point), r.t, r.q)
	}
	var got []spilled
	last := map[int]int64{}
	if err := s.replay(func(point int, t2, q int64) {
		if t2 < last[point] {
			t.Fatalf("point %d: %d after %d", point, t2, last[point])
		}
		last[point] = t2
		got = append(got, spilled{t2, q, int32(point)})
	}); err != nil {
		t.Fatal(err)
	}
	order := func(a, b spilled) int {
		return cmp.Or(cmp.Compare(a.point, b.point), cmp.Compare(a.t, b.t), cmp.Compare(a.q, b.q))
	}
	slices.SortFunc(want, order)
	slices.SortFunc(got, order)
	if !slices.Equal(got, want) {
		t.Fatalf("%d of %d readings came back, or others did", len(got), len(want))
	}
	if err := s.close(); err != nil {
		t.Fatal(err)
	}
}
