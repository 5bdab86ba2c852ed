package words_test

import "fmt"

func sscan(s string, a, b *float64) (int, error) { return fmt.Sscanf(s, "%g to %g)", a, b) }
