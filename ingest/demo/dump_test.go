package demo

import (
	"fmt"
	"os"
	"testing"
)

func TestDumpYear(t *testing.T) {
	dir := os.Getenv("DEMO_DUMP")
	if dir == "" {
		t.Skip("set DEMO_DUMP to a folder")
	}
	o := Defaults()
	fmt.Sscan(os.Getenv("DEMO_SEED"), &o.Seed)
	tr, err := Write(dir, o)
	if err != nil {
		t.Fatal(err)
	}
	report(t, &tr)
}

// report prints the count of suited, achieved, ... hours by a rough rule.
func report(t *testing.T, tr *Truth) {
	o := &tr.Outdoor
	n := tr.N
	days := n / 288
	var sumT, hot, cold, rain, rainT float64
	for i := o.Lead; i < o.Lead+n; i++ {
		x := float64(o.TempC[i])
		sumT += x
		if x > 27 {
			hot++
		}
		if x < 0 {
			cold++
		}
		rain += float64(o.RainMMh[i]) / 12
		if o.RainMMh[i] > 0 {
			rainT++
		}
	}
	fmt.Printf("mean %.1f hot>27 %.3f cold<0 %.3f rain mm/y %.0f share %.3f\n", sumT/float64(n), hot/float64(n), cold/float64(n), rain*365/float64(days), rainT/float64(n))
	for m := 0; m < 12; m++ {
		lo, hi := n*m/12, n*(m+1)/12
		var s, dd, g, w, dmin, dmax, nd float64
		for i := lo; i < hi; i++ {
			k := i + o.Lead
			s += float64(o.TempC[k])
			dd += float64(o.DewC[k])
			g += float64(o.GlobalWm2[k])
			w += float64(o.WindMS[k])
		}
		for d := lo; d+288 <= hi; d += 288 {
			a, b := 99.0, -99.0
			for i := d; i < d+288; i++ {
				x := float64(o.TempC[i+o.Lead])
				a, b = min(a, x), max(b, x)
			}
			dmin += a
			dmax += b
			nd++
		}
		c := float64(hi - lo)
		fmt.Printf("  month %d: T %.1f (min %.1f max %.1f) dew %.1f G %.0f wind %.1f\n", m+1, s/c, dmin/nd, dmax/nd, dd/c, g/c, w/c)
	}
	var total, totalS float64
	weight := map[string]float64{}
	for _, z := range zoneSpecs {
		if z.drive != noWindows || z.through != "" {
			weight[z.id] = float64(z.people)
		}
	}
	for zi := range tr.Zones {
		z := &tr.Zones[zi]
		var occ, suited, ach, both, mech, shut, warm, people, illt, hi1225 float64
		var reasons, sreasons [numReasons]float64
		var tsum float64
		run := 0
		dry := 99
		suit := make([]bool, n)
		why := map[string]float64{}
		for i := 0; i < n; i++ {
			k := i + o.Lead
			if o.RainMMh[k] > 0 {
				dry = 0
			} else {
				dry++
			}
			x := o.TempC[k]
			// upper: rough, cat II with mean of the last days
			var rm float64
			for q := 0; q < 7; q++ {
				rm += float64(o.TempC[max(0, k-288*q-144)])
			}
			up := 0.33*clamp(rm/7, 10, 30) + 18.8 + 3 - 1
			suit[i] = x >= 12.8 && float64(x) <= up && o.DewC[k] <= 17 && o.WindMS[k] <= 10 && dry >= 6
			if z.Occupied[i] == 1 {
				switch {
				case x < 12.8:
					why["cold"]++
				case float64(x) > up:
					why["warm"]++
				case o.DewC[k] > 17:
					why["humid"]++
				case o.WindMS[k] > 10:
					why["wind"]++
				case dry < 6:
					why["rain"]++
				}
			}
		}
		_ = run
		for i := 0; i < n; i++ {
			if z.Occupied[i] == 0 {
				continue
			}
			occ++
			tsum += float64(z.OperativeC[i])
			people += float64(z.People[i])
			open, on := z.OpenShare[i] > 0.05, z.Plant[i] != 0
			if z.CO2PPM[i] > 1225 {
				hi1225++
			}
			switch {
			case open && on:
				both++
			case on:
				mech++
			case !open:
				shut++
			}
			if z.OperativeC[i] > 26 {
				warm++
			}
			if suit[i] {
				suited++
				if open && !on {
					ach++
				} else {
					sreasons[z.Reason[i]]++
				}
			} else if open {
				illt++
			}
			reasons[z.Reason[i]]++
		}
		fmt.Printf("%s occ %.0f suited %.3f ach/suited %.3f both %.3f mech %.3f shut %.3f illt %.3f | warm %.3f T %.1f co2>1225 %.3f people %.1f |", z.ID, occ/12, suited/occ, ach/suited, both/occ, mech/occ, shut/occ, illt/occ, warm/occ, tsum/occ, hi1225/occ, people/occ)
		for r, c := range sreasons {
			if c > 0 {
				fmt.Printf(" %s %.2f", Reason(r), c/suited)
			}
		}
		callers := map[string]int{}
		for i := 0; i < n; i++ {
			if z.Occupied[i] == 1 && suit[i] && z.CalledBy[i] >= 0 {
				callers[tr.Zones[z.CalledBy[i]].ID]++
			}
		}
		fmt.Print(" callers ", callers)
		total += ach * weight[z.ID]
		totalS += suited * weight[z.ID]
		fmt.Println()
	}
	fmt.Printf("building achieved/suited %.3f\n", total/totalS)
	for _, f := range tr.Faults {
		fmt.Println(f)
	}
}
