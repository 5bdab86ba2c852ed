package demo

import (
	"bytes"
	"math"
	"os"
	"path/filepath"
	"testing"
	"time"
)

// Local clocks skip an hour in spring and repeat one in autumn; UTC and
// standard time do neither.
func TestClockChanges(t *testing.T) {
	dir, tr := wholeYear(t)
	if tr.N != 365*288 {
		t.Errorf("%d steps, want %d", tr.N, 365*288)
	}
	count := func(name, prefix string) int {
		raw, err := os.ReadFile(filepath.Join(dir, name))
		if err != nil {
			t.Fatal(err)
		}
		return bytes.Count(raw, []byte("\n"+prefix))
	}
	for _, c := range []struct {
		file, prefix string
		want         int
	}{
		{"logs/floor1.csv", "30.03.2025 01:", 12}, {"logs/floor1.csv", "30.03.2025 02:", 0}, {"logs/floor1.csv", "30.03.2025 03:", 12},
		{"logs/floor1.csv", "26.10.2025 02:", 24}, {"logs/floor2.csv", "26.10.2025;02:", 24},
		{"logs/logger206.csv", "2025-03-30 02:", 0}, {"logs/logger206.csv", "2025-10-26 02:", 24},
		{"logs/weather.csv", "2025-03-30T01:", 12}, {"logs/weather.csv", "2025-10-26T00:", 12}, {"logs/weather.csv", "2024-12-01T", 288},
		{"logs/plant_temps.csv", "2025-03-30 02:", 6}, {"logs/plant_temps.csv", "2025-10-26 02:", 6},
	} {
		if got := count(c.file, c.prefix); got != c.want {
			t.Errorf("%s: %d rows begin %q, want %d", c.file, got, c.prefix, c.want)
		}
	}
	loc, _ := time.LoadLocation(zoneName)
	clock := zoneClock{loc: loc}
	for i := 0; i < tr.N; i += 7 {
		at := tr.StartUTC + int64(i)*tr.StepS
		local := time.Unix(at, 0).In(loc)
		if got, want := clock.minuteOfDay(at), local.Hour()*60+local.Minute(); got != want {
			t.Fatalf("%v: minute %d, want %d", local, got, want)
		}
	}
}

// The window logs, read back by holding each record until the next, give the
// truth's open shares.
func TestWindowLogsTellTheTruth(t *testing.T) {
	dir, tr := wholeYear(t)
	loc, _ := time.LoadLocation(zoneName)
	share := map[string][]float64{}
	spec := map[string]struct {
		zone  string
		share float64
	}{}
	for _, z := range zoneSpecs {
		if len(z.windows) > 0 {
			share[z.id] = make([]float64, tr.N)
		}
		for _, w := range z.windows {
			spec[w.key] = struct {
				zone  string
				share float64
			}{z.id, w.share}
		}
	}
	for _, f := range []struct {
		name  string
		comma rune
	}{{"logs/windows.csv", ','}, {"logs/window_drives.csv", ';'}} {
		_, rows := table(t, dir, f.name, f.comma)
		last := map[string]struct {
			at   int64
			open float64
		}{}
		hold := func(key string, until int64) {
			l, s := last[key], spec[key]
			for at := l.at; at < until; {
				i := (at - tr.StartUTC) / stepS
				end := min(until, tr.StartUTC+(i+1)*stepS)
				share[s.zone][i] += s.share * l.open * float64(end-at) / stepS
				at = end
			}
		}
		previous := int64(0)
		for _, r := range rows {
			local, err := time.ParseInLocation("2006-01-02 15:04:05", r[0], loc)
			if err != nil {
				t.Fatal(err)
			}
			at := local.Unix()
			if at < previous-1 && previous-at <= 3600 { // second pass of the repeated hour
				at += 3600
			}
			previous = at
			open := 0.0
			switch r[2] {
			case "Open":
				open = 1
			case "Closed":
			default:
				open = number(t, r[2]) / 100
			}
			if _, ok := last[r[1]]; ok {
				hold(r[1], at)
			}
			last[r[1]] = struct {
				at   int64
				open float64
			}{at, open}
		}
		for key := range last {
			hold(key, tr.StartUTC+int64(tr.N)*stepS)
		}
	}
	for id, got := range share {
		z := tr.Zone(id)
		moved, worst := 0.0, 0.0
		for i, x := range got {
			if id == "L2.05" { // wired the wrong way round
				x = 1 - x
			}
			worst = math.Max(worst, math.Abs(x-float64(z.OpenShare[i])))
			moved += x
		}
		if worst > 1e-5 {
			t.Errorf("%s: open share differs by %.3g from the truth", id, worst)
		}
		if moved == 0 {
			t.Errorf("%s never opens, not even for cleaning", id)
		}
	}
	// The reception opens on two days only.
	open := map[int]bool{}
	for i, x := range tr.Zone("L1.04").OpenShare {
		if x > 0 {
			open[i/288] = true
		}
	}
	if len(open) != 2 {
		t.Errorf("L1.04 opens on %d days, want 2", len(open))
	}
}
