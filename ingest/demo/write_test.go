package demo

import "testing"

func BenchmarkWriteYear(b *testing.B) {
	for b.Loop() {
		if _, err := Write(b.TempDir(), Defaults()); err != nil {
			b.Fatal(err)
		}
	}
}
