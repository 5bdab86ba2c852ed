// Package cores runs independent parts of an analysis on all cores. What each
// part writes must be its own, so that results do not depend on the order.
package cores

import (
	"fmt"
	"runtime"
	"runtime/debug"
	"sync"
	"sync/atomic"
)

// Each calls f for 0 to n-1, several at once, and returns when all are done. A
// panic in one is raised again in the caller, with the stack of its origin.
func Each(n int, f func(i int)) {
	workers := min(runtime.GOMAXPROCS(0), n)
	if workers <= 1 {
		for i := range n {
			f(i)
		}
		return
	}
	var (
		next  atomic.Int64
		wg    sync.WaitGroup
		once  sync.Once
		fault any
	)
	for range workers {
		wg.Go(func() {
			defer func() {
				if r := recover(); r != nil {
					once.Do(func() { fault = fmt.Sprintf("%v\n%s", r, debug.Stack()) })
					next.Store(int64(n))
				}
			}()
			for i := int(next.Add(1)) - 1; i < n; i = int(next.Add(1)) - 1 {
				f(i)
			}
		})
	}
	wg.Wait()
	if fault != nil {
		panic(fault)
	}
}

// Together calls all functions at once and returns when all are done.
func Together(fs ...func()) { Each(len(fs), func(i int) { fs[i]() }) }
