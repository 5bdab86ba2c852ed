package changeover

import "testing"

// BenchmarkRead reads one unit with one room over 230 days.
func BenchmarkRead(b *testing.B) {
	in := simulate(standard, 230, 1)
	for b.Loop() {
		Read(in)
	}
}
