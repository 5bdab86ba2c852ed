package cores

import (
	"strings"
	"sync/atomic"
	"testing"
)

func TestEachCallsEachOnce(t *testing.T) {
	for _, n := range []int{0, 1, 2, 3, 100} {
		calls := make([]atomic.Int32, n)
		Each(n, func(i int) { calls[i].Add(1) })
		for i := range calls {
			if c := calls[i].Load(); c != 1 {
				t.Errorf("n %d: %d was called %d times", n, i, c)
			}
		}
	}
}

func TestAPanicComesBack(t *testing.T) {
	defer func() {
		if r, _ := recover().(string); !strings.Contains(r, "broken") || !strings.Contains(r, "cores_test.go") {
			t.Errorf("recovered %q", r)
		}
	}()
	Together(func() {}, func() { panic("broken") }, func() {})
	t.Error("no panic")
}
