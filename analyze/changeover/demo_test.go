package changeover_test

import (
	"context"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"sashlog/analyze"
	"sashlog/analyze/lost"
	"sashlog/configs"
	"sashlog/ingest"
	"sashlog/ingest/demo"
)

// The demo building's settings and causes are known; its physics and control
// are not of any form the analyses fit.

// audited reads and analyses a demo building.
func audited(t *testing.T, o demo.Options) (analyze.Input, *analyze.Results, *demo.Truth) {
	t.Helper()
	dir := t.TempDir()
	truth, err := demo.Write(dir, o)
	if err != nil {
		t.Fatal(err)
	}
	l, err := configs.Load(filepath.Join(dir, "site.yaml"), func(string) string { return "" })
	if err != nil {
		t.Fatal(err)
	}
	g, _, err := ingest.Read(context.Background(), l.Site, ingest.Options{})
	if err != nil {
		t.Fatal(err)
	}
	in := analyze.Input{Site: l.Site, Criteria: l.Criteria, Grid: g}
	return in, analyze.Run(in), &truth
}

// Which cause of the analysis answers to which reason of the simulation. The
// room's own thermostat is a limit indoors; where one room calls, it is also a
// few-room changeover.
var causeOf = map[demo.Reason][]lost.Cause{
	demo.ReasonClockStart:   {lost.ClockStart},
	demo.ReasonOutdoorLimit: {lost.LimitTooTight},
	demo.ReasonIndoorLimit:  {lost.LimitTooTight, lost.FewRoom},
	demo.ReasonCalledBy:     {lost.FewRoom, lost.LimitTooTight},
	demo.ReasonSlowReopen:   {lost.SlowToReopen},
	demo.ReasonNotOpened:    {lost.NotOpened, lost.SlowToReopen},
	demo.ReasonNeverUsed:    {lost.NeverUsed},
	demo.ReasonWeatherGuard: {lost.LockedOut},
}

func TestDemoBuilding(t *testing.T) {
	if testing.Short() {
		t.Skip("audits whole years; left out of -short")
	}
	seeds := 1
	if os.Getenv("SASHLOG_LONG") != "" {
		seeds = 6
	}
	reasons := []demo.Reason{demo.ReasonClockStart, demo.ReasonOutdoorLimit, demo.ReasonIndoorLimit, demo.ReasonCalledBy, demo.ReasonHeating,
		demo.ReasonSlowReopen, demo.ReasonNotOpened, demo.ReasonNeverUsed, demo.ReasonNotWarm, demo.ReasonWeatherGuard, demo.ReasonNone}
	table := map[demo.Reason]*[lost.NumCauses]float64{}
	for _, r := range reasons {
		table[r] = new([lost.NumCauses]float64)
	}
	// Limits of the demo's site: unit, opening, above, °C.
	type limit struct {
		unit           string
		opening, above bool
		truth          float64
	}
	limits := []limit{{"AHU-1", true, false, 15}, {"AHU-2", true, false, 14}, {"AHU-3", true, false, 13}, {"AHU-2", true, true, 24.5}, {"AHU-3", true, true, 25.5}, {"AHU-3", false, true, 26}}
	found, close := map[limit]int{}, map[limit]int{}
	core, first, shifts := 0, 0, 0
	for seed := range seeds {
		o := demo.Defaults()
		o.Seed, o.Faults = uint64(seed+1), false
		in, r, truth := audited(t, o)
		shifts += len(r.Changeover.Shifts())
		for _, w := range limits {
			for _, u := range r.Changeover.Units {
				if u.ID != w.unit {
					continue
				}
				for _, l := range u.Limits() {
					if l.Zone < 0 && l.Undetermined == "" && l.Opening == w.opening && l.Above == w.above {
						found[w]++
						if math.Abs(l.LevelC-w.truth) <= 0.5 {
							close[w]++
						}
					}
				}
			}
		}
		lead := int((truth.StartUTC - in.Grid.StartUTC) / in.Grid.StepS)
		took := map[string]float64{} // what each room's calls truly took from the others
		for z := range in.Site.Zones {
			zt := truth.Zone(in.Site.Zones[z].ID)
			for i := range truth.N {
				if c := zt.CalledBy[i]; c >= 0 && r.Hours.Class[z][i+lead].Missed() {
					took[truth.Zones[c].ID] += in.Grid.StepH()
				}
			}
		}
		worst, listed := "", map[string]int{}
		for id, h := range took {
			if worst == "" || h > took[worst] {
				worst = id
			}
		}
		line := ""
		for k, l := range r.Leaders.Leaders {
			id := in.Site.Zones[l.Zone].ID
			listed[id] = k + 1
			line += fmt.Sprintf("  %s %.0f h (true %.0f)", id, l.LostH, took[id])
		}
		t.Logf("seed %d leaders:%s", seed, line)
		if listed["L1.03"] > 0 && listed["L2.03"] > 0 {
			core++
		}
		if k := listed[worst]; k > 0 && k <= 2 {
			first++
		}
		for _, ep := range r.Lost.Episodes {
			zt := truth.Zone(in.Site.Zones[ep.Zone].ID)
			hours := map[demo.Reason]int{}
			for i := ep.FromStep; i < ep.ToStep; i++ {
				if k := i - lead; k >= 0 && k < truth.N && r.Hours.Class[ep.Zone][i].Missed() {
					hours[zt.Reason[k]]++
				}
			}
			most := demo.ReasonNone
			for _, why := range reasons {
				if hours[why] > hours[most] {
					most = why
				}
			}
			table[most][ep.Cause] += ep.Hours
		}
	}
	t.Logf("hours of missed episodes over %d seeds: true reason of most of the episode × cause given", seeds)
	right, all := 0.0, 0.0
	for _, why := range reasons {
		row, sum := table[why], 0.0
		for _, h := range row {
			sum += h
		}
		if sum == 0 {
			continue
		}
		var b strings.Builder
		hit := 0.0
		for c, h := range row {
			if h >= 0.005*sum {
				b.WriteString("  " + lost.Cause(c).String() + " " + percent(h/sum))
			}
		}
		for _, c := range causeOf[why] {
			hit += row[c]
		}
		t.Logf("%-28s %7.0f h%s", why, sum, b.String())
		if causeOf[why] != nil {
			right, all = right+hit, all+sum
		}
	}
	t.Logf("an answering cause given: %s of the hours with one", percent(right/all))
	if right < 0.75*all {
		t.Errorf("only %s of hours have a cause that answers to their reason", percent(right/all))
	}
	for _, w := range limits {
		t.Logf("%s opening %v above %v: true %.1f °C, found in %d, within half a kelvin in %d of %d", w.unit, w.opening, w.above, w.truth, found[w], close[w], seeds)
		if w.opening && !w.above && close[w] < seeds {
			t.Errorf("%s: lower limit within half a kelvin in %d of %d", w.unit, close[w], seeds)
		}
		if 2*(found[w]-close[w]) > seeds {
			t.Errorf("%s: %d of %d limits found are off by more than half a kelvin", w.unit, found[w]-close[w], found[w])
		}
	}
	t.Logf("both core rooms that call are listed in %d of %d, the room that truly took most is first or second in %d; false changes of behaviour: %d", core, seeds, first, shifts)
	if core < max(1, seeds-1) || first < max(1, seeds-1) {
		t.Errorf("core rooms listed in %d, worst room first or second in %d of %d", core, first, seeds)
	}
	if shifts > 1 {
		t.Errorf("%d changes of behaviour told where nothing was changed", shifts)
	}
}

func percent(v float64) string { return fmt.Sprintf("%.0f %%", 100*v) }
