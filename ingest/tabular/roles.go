package tabular

import (
	"fmt"
	"strings"

	"github.com/agnivade/levenshtein"

	"sashlog/configs/site"
	"sashlog/ingest/cell"
)

// findTime finds the column (or the pair) that holds the time.
func (f *Frame) findTime(data []HeadRow, log *site.Log) error {
	named := func(name, key string) (int, error) {
		i := f.Column(name)
		if i < 0 {
			return -1, fmt.Errorf("%s %q is not among the columns%s", key, name, near(name, f.Names))
		}
		return i, nil
	}
	var err error
	switch {
	case log.TimeColumn != "":
		f.Time, err = named(log.TimeColumn, "time_column")
		return err
	case log.DateColumn != "" && log.ClockColumn != "":
		if f.Date, err = named(log.DateColumn, "date_column"); err != nil {
			return err
		}
		f.Clock, err = named(log.ClockColumn, "clock_column")
		return err
	case log.DateColumn != "":
		f.Time, err = named(log.DateColumn, "date_column")
		return err
	}
	if len(data) > 200 {
		data = data[:200]
	}
	count := make([][6]int, len(f.Names))
	unix, serial := make([]int, len(f.Names)), make([]int, len(f.Names))
	for _, r := range data {
		for i, c := range r.Cells {
			if i >= len(count) {
				break
			}
			fm := formOf(c)
			count[i][fm]++
			if fm == formNumber {
				if unixLike(c) {
					unix[i]++
				}
				if serialLike(c) {
					serial[i]++
				}
			}
		}
	}
	// most reports whether nearly all filled cells of a column are so.
	most := func(i, n int) bool {
		filled := len(data) - count[i][formEmpty]
		return n > 0 && n*10 >= filled*9 && filled*2 >= len(data)
	}
	pick := func(is func(i int) bool) int {
		for i := range f.Names {
			if is(i) {
				return i
			}
		}
		return -1
	}
	hinted := func(i int) bool {
		n := cell.Fold(f.Names[i])
		for _, w := range []string{"time", "date", "zeit", "datum", "heure", "horodat", "stamp", "ora", "data", "fecha", "hora"} {
			if strings.Contains(n, w) {
				return true
			}
		}
		return false
	}
	say := func(i int) error {
		f.Time = i
		f.Notes = append(f.Notes, fmt.Sprintf("time in column %q (found by looking)", f.Names[i]))
		return nil
	}
	if i := pick(func(i int) bool { return most(i, count[i][formStamp]) }); i >= 0 {
		return say(i)
	}
	d := pick(func(i int) bool { return most(i, count[i][formDate]) })
	c := pick(func(i int) bool { return most(i, count[i][formClock]) })
	if d >= 0 && c >= 0 {
		f.Date, f.Clock = d, c
		f.Notes = append(f.Notes, fmt.Sprintf("date in column %q and time of day in column %q (found by looking)", f.Names[d], f.Names[c]))
		return nil
	}
	if i := pick(func(i int) bool { return most(i, unix[i]) }); i >= 0 {
		return say(i)
	}
	if i := pick(func(i int) bool { return most(i, serial[i]) && hinted(i) }); i >= 0 {
		return say(i)
	}
	if d >= 0 {
		return say(d)
	}
	if i := pick(func(i int) bool { return i == 0 && most(i, serial[i]) }); i >= 0 {
		return say(i)
	}
	if i := pick(func(i int) bool { return hinted(i) && c != i }); i >= 0 {
		return say(i)
	}
	return fmt.Errorf("no column that holds the time was found among %s; hint: set time_column, or date_column and clock_column", listed(f.Names))
}

// findRoles finds the key and value columns of the long and per-point layouts.
func (f *Frame) findRoles(log *site.Log) error {
	columns := func(names []string, key string) ([]int, error) {
		var out []int
		for _, n := range names {
			i := f.Column(n)
			if i < 0 {
				return nil, fmt.Errorf("%s: %q is not among the columns%s", key, n, near(n, f.Names))
			}
			out = append(out, i)
		}
		return out, nil
	}
	var err error
	if f.Layout == site.Wide {
		return nil
	}
	if f.Layout == site.Long {
		if f.Keys, err = columns(log.KeyColumns, "key_columns"); err != nil {
			return err
		}
		if len(f.Keys) == 0 {
			return fmt.Errorf("a long log needs key_columns: the columns that name the point, of %s", listed(f.Names))
		}
	}
	if f.Values, err = columns(log.ValueColumns, "value_columns"); err != nil {
		return err
	}
	if len(f.Values) > 0 {
		return nil
	}
	var rest []int
	for i, n := range f.Names {
		if i == f.Time || i == f.Date || i == f.Clock || has(f.Keys, i) {
			continue
		}
		switch cell.Fold(n) {
		case "value", "wert", "valeur", "valore", "valor", "reading", "val", "waarde":
			f.Values = []int{i}
			return nil
		}
		rest = append(rest, i)
	}
	if len(rest) == 1 || f.Layout == site.PerPoint && len(rest) > 0 && f.HeaderLine == 0 {
		f.Values = rest[:1]
		return nil
	}
	return fmt.Errorf("the column that holds the values is not plain among %s; hint: set value_columns", listed(f.Names))
}

func has(list []int, x int) bool {
	for _, v := range list {
		if v == x {
			return true
		}
	}
	return false
}

// near proposes the nearest of the names, as the end of a sentence.
func near(name string, names []string) string {
	if n := Nearest(name, names); n != "" {
		return fmt.Sprintf("; did you mean %q", n)
	}
	return " (" + listed(names) + ")"
}

// Nearest is the name most like the one given, empty when none is alike.
func Nearest(name string, names []string) string {
	want := cell.Fold(name)
	best, least := "", len([]rune(want))/2+1
	for _, n := range names {
		if n == "" || len(n) > 200 {
			continue
		}
		if d := levenshtein.ComputeDistance(want, cell.Fold(n)); d < least {
			best, least = n, d
		}
	}
	return best
}

// listed quotes the first few names.
func listed(names []string) string {
	var b strings.Builder
	for i, n := range names {
		if i == 8 {
			fmt.Fprintf(&b, " and %d more", len(names)-i)
			break
		}
		if i > 0 {
			b.WriteString(", ")
		}
		fmt.Fprintf(&b, "%q", n)
	}
	return b.String()
}
