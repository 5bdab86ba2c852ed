package page

import (
	"maps"
	"math"
	"slices"
	"strings"

	"sashlog/analyze/freshair"
	"sashlog/analyze/running"
	"sashlog/report/chart"
	"sashlog/report/words"
)

// stateWords are the running states as a reader meets them.
var stateWords = [running.NumStates]string{"unknown", "open", "mechanical", "open with plant", "shut"}

// statesShown is the order in which states are listed.
var statesShown = []running.State{running.Open, running.Mech, running.Both, running.Shut}

func (b *builder) air() section {
	s := section{ID: "air", Title: "Fresh air"}
	fa := b.in.Results.FreshAir
	if !b.anyCO2() {
		s.Blocks = append(s.Blocks, note("CO2 is not logged in any zone, so whether the air was fresh enough cannot be said. A CO2 logger per zone for four weeks in each season answers it."))
		return s
	}
	s.Blocks = append(s.Blocks, text("People breathe out CO2, so its level above outdoors shows how much outdoor air each of them gets. EN 16798-1 sorts rooms into categories by that level: I (best), II (usual for new buildings), III (acceptable for existing ones)."))
	if fa.Sentence != "" {
		s.Blocks = append(s.Blocks, note(words.Sentence(b.w.Foreign(fa.Sentence))))
	}
	if fa.OutdoorNote != "" {
		s.Blocks = append(s.Blocks, text(words.Sentence(b.w.Foreign(fa.OutdoorNote))))
	}
	if t := b.offsets(); t != "" {
		s.Blocks = append(s.Blocks, text(t))
	}
	s.Blocks = append(s.Blocks, b.co2Curves(), b.co2Table())
	if t, ok := b.airChanges(); ok {
		s.Blocks = append(s.Blocks, heading("Air change rates"), text("How often per hour the air of a zone was replaced, in each running state by itself: from how fast CO2 falls after the room empties, or from whole days with people counted. L/s is litres of outdoor air per second."), b.airChangeChart(), b.table(t))
	} else {
		s.Blocks = append(s.Blocks, note("No air change rate could be measured: too few times when a room emptied with CO2 well above outdoors. "+airNote(fa)))
	}
	s.Blocks = append(s.Blocks, b.airBeside()...)
	return s
}

func airNote(fa *freshair.Result) string {
	for _, z := range fa.Zones {
		for _, a := range z.AirChange {
			if a.NotMeasurable != "" {
				return words.Sentence("for example: " + a.NotMeasurable)
			}
		}
	}
	return ""
}

func (b *builder) anyCO2() bool {
	for _, z := range b.in.Results.FreshAir.Zones {
		if z.HasCO2 && z.All.KnownH > 0 {
			return true
		}
	}
	return false
}

// co2Worst are the zones with CO2, highest 95th percentile first.
func (b *builder) co2Worst() []int {
	var out []int
	for z, x := range b.in.Results.FreshAir.Zones {
		if x.HasCO2 && x.All.KnownH > 0 {
			out = append(out, z)
		}
	}
	zones := b.in.Results.FreshAir.Zones
	slices.SortStableFunc(out, func(a, c int) int {
		switch x, y := zones[a].All.P95PPM, zones[c].All.P95PPM; {
		case x > y:
			return -1
		case x < y:
			return 1
		}
		return 0
	})
	return out
}

func (b *builder) co2Curves() block {
	fa := b.in.Results.FreshAir
	d := chart.CO2DurationData{Caption: chart.Caption{Title: "CO2 duration curves by zone and running state", Desc: "Share of occupied time above each CO2 level."}}
	worst := b.co2Worst()
	const most = 9
	for _, z := range worst {
		if len(d.Zones) == most {
			break
		}
		p := chart.CO2Zone{Zone: b.w.Zone(z)}
		for _, st := range statesShown {
			curve := fa.Zones[z].Curve[st]
			if len(curve) == 0 || len(curve) != len(fa.CurvePPM) || !(fa.Zones[z].State[st].KnownH > 0) {
				continue
			}
			c := chart.CO2Curve{State: stateLook[st]}
			for i := len(curve) - 1; i >= 0; i-- {
				if i > 0 && curve[i] == 0 && curve[i-1] == 0 {
					continue // never so high: the curve begins at the highest level met
				}
				c.Points = append(c.Points, chart.XY{X: curve[i] * 100, Y: fa.CurvePPM[i]})
			}
			p.Curves = append(p.Curves, c)
		}
		if len(p.Curves) > 0 {
			d.Zones = append(d.Zones, p)
		}
	}
	out := b.in.Results.Outdoor.CO2DefaultPPM
	for i, name := range []string{"I", "II", "III"} {
		if l := fa.LimitsPPM[i] + out; l > 0 && !math.IsNaN(l) {
			d.Limits = append(d.Limits, chart.Limit{Value: l, Label: "category " + name})
		}
	}
	caption := "For how much of the occupied time CO2 lay above a level, by running state. A curve that lies high on the left is a state that runs short of air"
	if len(worst) > len(d.Zones) {
		caption += "; the " + words.Count(int64(len(d.Zones))) + " zones with the highest CO2"
	}
	return b.draw("co2-duration", caption+".", "There is no CO2 curve to draw.",
		func(o chart.Options) (chart.SVG, error) { return chart.CO2Duration(d, o) })
}

func (b *builder) co2Table() block {
	fa := b.in.Results.FreshAir
	t := table{ID: "co2", Caption: "CO2 in occupied time per zone and running state",
		Head: []column{col("Zone"), keep("Running state"), num("Known (h)"), num("Mean (ppm)"), num("95 % below (ppm)"), num("Above outdoors (ppm)"),
			num("Hours above I"), num("II"), num("III"), col("Category held")}}
	k := b.span.PerYear
	worst := b.co2Worst()
	few := false
	shown, foot := b.capped(worst)
	for _, z := range shown {
		x := fa.Zones[z]
		line := func(first, state string, l freshair.Levels) {
			category := l.Category
			if category == "" {
				category = words.Dash
			}
			t.Rows = append(t.Rows, row(first, state, words.HoursNumber(l.KnownH*k), words.Number(l.MeanPPM, 0), words.Number(l.P95PPM, 0), words.Number(l.AboveOutdoorMeanPPM, 0),
				words.HoursNumber(l.AboveCatH[0]*k), words.HoursNumber(l.AboveCatH[1]*k), words.HoursNumber(l.AboveCatH[2]*k), words.Clean(category)))
		}
		name := b.w.Zone(z)
		if x.FewPeople {
			name += "\u00a0*"
			few = true
		}
		line(name, "all", x.All)
		t.Rows[len(t.Rows)-1][1].Strong = true
		for _, st := range statesShown {
			if x.State[st].KnownH > 0 {
				line("", stateWords[st], x.State[st])
			}
		}
	}
	t.Foot = []string{"Hours " + b.span.Words + ". “Category held” is the best category kept for 95 % of the known time; " + words.Dash + " none, or not known."}
	if few {
		t.Foot = append(t.Foot, "* Fewer than half of the usual people were counted on average, or nobody was counted: low CO2 there proves little.")
	}
	if n := len(fa.Zones) - len(worst); n > 0 {
		t.Foot = append(t.Foot, words.Zones(n)+" without usable CO2 "+isAre(n)+" left out.")
	}
	if foot != "" {
		t.Foot = append(t.Foot, foot)
	}
	return b.table(t)
}

func (b *builder) airChanges() (table, bool) {
	fa := b.in.Results.FreshAir
	t := table{ID: "air-change", Caption: "Air change rate per zone and running state",
		Head: []column{col("Zone"), keep("Running state"), num("Median (per h)"), num("95 % interval"), num("Range (per h)"), num("L/s"), num("L/s per person"), num("CO2 at usual people (ppm)"), num("Events"), num("Neighbours’ level"), num("10 L/s of theirs add (per h)")}}
	zones, foot := b.capped(b.order)
	any := false
	methods := map[string]bool{}
	var reasons []string
	for _, z := range zones {
		if z >= len(fa.Zones) || !fa.Zones[z].HasCO2 {
			continue
		}
		name, bare := b.w.Zone(z), true
		for _, st := range []running.State{running.Open, running.Mech, running.Both, running.Shut} {
			a := fa.Zones[z].AirChange[st]
			if math.IsNaN(a.MedianPerH) || a.Events == 0 {
				continue
			}
			any, bare = true, false
			t.Rows = append(t.Rows, row(name, stateWords[st], upperMark(a), spread(a.LowPerH, a.HighPerH), spread(a.FromPerH, a.ToPerH),
				words.Number(a.FlowLs, 0), words.Number(a.FlowLsPerson, 1), words.Number(a.AtUsualPeoplePPM, 0), words.Count(int64(a.Events)), words.Share(fa.Zones[z].NeighbourShare[st]), words.Number(a.NeighbourPer10LsPerH, 2)))
			methods[words.Clean(a.Method)] = a.Method != ""
			name = ""
		}
		if bare {
			why := ""
			for _, st := range statesShown {
				if why = fa.Zones[z].AirChange[st].NotMeasurable; why != "" {
					break
				}
			}
			t.Rows = append(t.Rows, row(name, "none measurable", words.Dash, words.Dash, words.Dash, words.Dash, words.Dash, words.Dash, words.Dash, words.Dash, words.Dash))
			reasons = append(reasons, name+": "+b.w.Foreign(why))
		}
	}
	t.Foot = []string{words.Dash + " not known: too few decays, or floor area, height or people are not given."}
	t.Foot = append(t.Foot, "The interval holds the typical rate 95 times in 100: spread of events, readings that depend on each other, outdoor level, sensor offset and people. In invented buildings of known flows it held 99 of 100 rates stated. “CO2 at usual people” is what the usual number of people would bring the room to within four hours at this rate.",
		"Air from neighbouring rooms looks like outdoor air. “Neighbours’ level”: how far the zones of the same floor stood above outdoors while the rate was measured here, as a share of this zone; the lower it is, the more their air dilutes (above 100 % it holds the level up), and the last column says by how much for each 10 L/s that passes through doors. “≤”: so slow, or so closed off, that their air may be most of it; the outdoor air is then at most that.")
	if open := b.openUnmeasured(); open != "" {
		t.Foot = append(t.Foot, open)
	}
	if len(reasons) > 0 {
		t.Foot = append(t.Foot, "Not measurable: "+words.List(reasons, 6)+".")
	}
	for _, m := range slices.Sorted(maps.Keys(methods)) {
		if methods[m] {
			t.Foot = append(t.Foot, "Method: "+strings.TrimSuffix(m, ".")+".")
		}
	}
	if foot != "" {
		t.Foot = append(t.Foot, foot)
	}
	return t, any
}

// upperMark writes a typical rate, with a sign where it is an upper value.
func upperMark(a freshair.AirChange) string {
	t := rate(a.MedianPerH)
	if a.UpperOnly {
		t = "≤\u00a0" + t
	}
	return t
}

// rate writes a rate per hour: slow ones need the second digit.
func rate(perH float64) string {
	if perH < 1 {
		return words.Number(perH, 2)
	}
	return words.Number(perH, 1)
}

// spread writes a range of rates per hour.
func spread(low, high float64) string {
	if math.IsNaN(low) || math.IsNaN(high) {
		return words.Dash
	}
	return rate(low) + " to " + rate(high)
}
