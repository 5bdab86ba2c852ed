package page

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"time"

	"sashlog/analyze/hours"
	"sashlog/analyze/lost"
	"sashlog/analyze/running"
	"sashlog/configs/site"
	"sashlog/report/chart"
	"sashlog/report/words"
)

const (
	mostStrips  = 6
	mostListed  = 15
	stripMargin = 3 * time.Hour
	stripMost   = 48 * time.Hour
)

func (b *builder) lost() section {
	s := section{ID: "missed", Title: "What was missed, and why"}
	sum, r := b.in.Results.Summary.Building, b.in.Results.Lost
	if !(sum.Missed.Value > 0) && len(r.Episodes) == 0 {
		if b.w.CanSay() == words.Full || b.w.CanSay() == words.NeverSuited {
			s.Blocks = append(s.Blocks, text("No hour that could have been open was missed."))
		} else {
			s.Blocks = append(s.Blocks, note("Whether hours were missed cannot be said from these logs."))
		}
		return s
	}
	s.Blocks = append(s.Blocks, text("The average occupant's zone could have been open for "+b.perDay(sum.Missed)+" more per working day ("+b.span.PerYearBetween(sum.Missed)+" "+b.span.Words+"). During that time, per working day: "+words.LostTo(b.w)+"."))
	if sum.Both.Value > 0 {
		s.Blocks = append(s.Blocks, text("Windows stood open while plant ran for "+b.perDay(sum.Both)+" per working day, weather suitable or not: heating "+words.Duration(b.span.PerDay(sum.H[hours.CBothHeat]))+", cooling "+words.Duration(b.span.PerDay(sum.H[hours.CBothCool]))+", ventilating "+words.Duration(b.span.PerDay(sum.H[hours.CBothVent]))+", type unknown "+words.Duration(b.span.PerDay(sum.H[hours.CBothUntyped]))+"."))
	}
	if sum.IllTimed.Value > 0 {
		s.Blocks = append(s.Blocks, text("Windows were open outside limits (the weather did not suit, and for longer than a short airing) for "+b.perDay(sum.IllTimed)+" per working day."))
	}
	s.Blocks = append(s.Blocks, b.causes(), b.episodes())
	s.Blocks = append(s.Blocks, b.missedModel()...)
	s.Blocks = append(s.Blocks, b.cost()...)
	s.Blocks = append(s.Blocks, b.strips()...)
	return s
}

func (b *builder) causes() block {
	r := b.in.Results.Lost
	rule := map[lost.Cause]lost.Test{}
	for _, t := range r.Tests {
		rule[t.Cause] = t
	}
	t := table{ID: "causes", Caption: "Missed hours of the average occupant by first cause, and how each cause is recognised",
		Head: []column{col("Cause"), num("Per working day"), num("Hours " + b.span.Words), num("Share"), col("Recognised by")}}
	total := 0.0
	for _, h := range r.BuildingH {
		total += h
	}
	var list []lost.Cause
	for c := range r.BuildingH {
		if _, known := rule[lost.Cause(c)]; known || r.BuildingH[c] > 0 {
			list = append(list, lost.Cause(c))
		}
	}
	slices.SortStableFunc(list, func(a, c lost.Cause) int {
		switch x, y := r.BuildingH[a], r.BuildingH[c]; {
		case x > y:
			return -1
		case x < y:
			return 1
		}
		return 0
	})
	for _, c := range list {
		h := r.BuildingH[c]
		share := math.NaN()
		if total > 0 {
			share = h / total
		}
		how := b.w.Foreign(rule[c].Rule)
		if st := rule[c].Standing; st != "" {
			how += " (" + words.Clean(st) + ")"
		}
		t.Rows = append(t.Rows, row(c.String(), words.Duration(b.span.PerDay(h)), words.HoursNumber(h*b.span.PerYear), words.Share(share), words.Sentence(how)))
	}
	t.Foot = []string{"Causes are tested in a fixed order and the first sufficient one takes the hours; others may have contributed. Causes name clocks, limits, thermostats and settings, never people."}
	return b.table(t)
}

// worstEpisodes sorts the episodes by person-hours, or hours where people are
// not given.
func (b *builder) worstEpisodes() []lost.Episode {
	list := slices.Clone(b.in.Results.Lost.Episodes)
	size := func(e lost.Episode) float64 {
		if e.PersonH >= 0 {
			return e.PersonH
		}
		return e.Hours
	}
	slices.SortStableFunc(list, func(a, c lost.Episode) int {
		switch x, y := size(a), size(c); {
		case x > y:
			return -1
		case x < y:
			return 1
		case a.FromStep != c.FromStep:
			return a.FromStep - c.FromStep
		}
		return a.Zone - c.Zone
	})
	return list
}

func (b *builder) episodes() block {
	list := b.worstEpisodes()
	t := table{ID: "episodes", Caption: "The worst missed episodes",
		Head: []column{col("Zone"), {Text: "When", Words: true}, num("Missed (h)"), num("person-h"), num("Outdoors (°C)"), num("Indoors (limit), °C"), num("CO2 (ppm)"), col("First cause and evidence")}}
	for _, e := range list[:min(mostListed, len(list))] {
		when, co2 := b.when(e), words.Number(e.CO2PPM, 0)
		protected := b.rule.Protected(e.Zone)
		if protected {
			when, co2 = b.day(e), words.Dash
		}
		why := words.Sentence(e.Cause.String())
		if e.Evidence != "" && !protected {
			why += " " + words.Sentence(b.w.Foreign(beforeMeans(e.Evidence)))
		}
		if len(e.Contributing) > 0 {
			var names []string
			for _, c := range e.Contributing {
				names = append(names, c.String())
			}
			why += " Contributing: " + words.List(names, 0) + "."
		}
		t.Rows = append(t.Rows, row(b.w.Zone(e.Zone), when, words.HoursNumber(e.Hours), words.HoursNumber(e.PersonH),
			words.Number(e.OutdoorTempC, 1), words.Number(e.IndoorTempC, 1)+" ("+words.Number(e.ComfortHighC, 1)+")", co2, why))
	}
	t.Foot = []string{fmt.Sprintf("%s in all; those with most person-hours first. Temperatures and CO2 are means over the missed time. All are in episodes.csv.", words.Plural(len(list), "episode", "episodes"))}
	if p, _ := b.rule.Count(); p > 0 {
		t.Foot = append(t.Foot, "Rooms for one to three people are shown by day only, without CO2.")
	}
	return b.table(t)
}

// beforeMeans cuts from an evidence the mean conditions at its end, which have
// columns of their own.
func beforeMeans(evidence string) string {
	before, _, _ := strings.Cut(evidence, "; outdoors ")
	return before
}

// when writes the local start and end of an episode.
func (b *builder) when(e lost.Episode) string {
	from, to := b.in.Grid.Time(e.FromStep), b.in.Grid.Time(e.ToStep)
	if site.DateOf(from) == site.DateOf(to) {
		return oneLine(from.Format("Mon 2 Jan 2006,")) + " " + oneLine(from.Format("15:04")+" to "+to.Format("15:04"))
	}
	return oneLine(from.Format("Mon 2 Jan 2006, 15:04")) + " to " + oneLine(to.Format("Mon 2 Jan, 15:04"))
}

// oneLine keeps a text from breaking at its spaces.
func oneLine(s string) string { return strings.ReplaceAll(s, " ", "\u00a0") }

func (b *builder) day(e lost.Episode) string {
	return oneLine(b.in.Grid.Time(e.FromStep).Format("Mon 2 Jan 2006"))
}

func (b *builder) date(e lost.Episode) site.Date { return site.DateOf(b.in.Grid.Time(e.FromStep)) }

// strips draws the worst episodes of zones that may be shown, one per zone (two
// in a building of few zones) and at most two of one day.
func (b *builder) strips() []block {
	var out []block
	perZone, perDay := map[int]int{}, map[site.Date]int{}
	held := 0
	most := 2
	if len(b.in.Results.Summary.Zones) >= mostStrips {
		most = 1
	}
	for _, e := range b.worstEpisodes() {
		if b.rule.Protected(e.Zone) {
			held++
			continue
		}
		if len(out) == mostStrips || perZone[e.Zone] == most || perDay[b.date(e)] == 2 {
			continue
		}
		perZone[e.Zone]++
		perDay[b.date(e)]++
		out = append(out, b.strip(e, len(out)+1))
	}
	if len(out) > 0 {
		out = append([]block{heading("The worst episodes, drawn"), text("Each strip shows one missed episode with three hours either side: indoor and outdoor temperature with the comfort band, window, plant, and CO2 where logged. The shaded time is what was missed.")}, out...)
	}
	if held > 0 {
		out = append(out, note(privacyNote+" "+words.Plural(held, "episode", "episodes")+" in such rooms "+isAre(held)+" not drawn."))
	}
	return out
}

func (b *builder) strip(e lost.Episode, n int) block {
	g := b.in.Grid
	margin := int(int64(stripMargin/time.Second) / g.StepS)
	from, to := max(0, e.FromStep-margin), min(g.N, e.ToStep+margin)
	if most := int(int64(stripMost/time.Second) / g.StepS); to-from > most {
		to = from + most
	}
	d := chart.EpisodeStripData{Caption: chart.Caption{Title: "Missed episode in " + b.w.Zone(e.Zone) + ", " + b.when(e), Desc: words.Sentence(e.Cause.String()) + " " + b.w.Foreign(e.Evidence)},
		Start: g.Time(from), Step: time.Duration(g.StepS) * time.Second, CO2LimitPPM: math.NaN()}
	res := b.in.Results
	cut := func(v []float32) []float64 {
		if len(v) < to {
			return nil
		}
		out := make([]float64, 0, to-from)
		for _, x := range v[from:to] {
			out = append(out, float64(x))
		}
		return out
	}
	if e.Zone < len(res.Indoor) {
		d.IndoorC = cut(res.Indoor[e.Zone].OperativeC)
		d.CO2PPM = cut(res.Indoor[e.Zone].CO2PPM)
	}
	d.OutdoorC = cut(res.Outdoor.TempC)
	if e.Zone < len(res.Exceedance.Zones) {
		d.ComfortLowC, d.ComfortHighC = cut(res.Exceedance.Zones[e.Zone].Limits.LowC), cut(res.Exceedance.Zones[e.Zone].Limits.HighC)
	}
	for k := range res.Hours.Hours {
		if h := res.Hours.Hours[k]; h.FromStep <= e.FromStep && e.FromStep < h.ToStep {
			d.CO2LimitPPM = float64(res.Hours.Values[hours.VCO2LimitPPM][res.Hours.Row(e.Zone, k)])
		}
	}
	rz := res.Running.Zones[e.Zone]
	if len(rz.State) >= to {
		for i := from; i < to; i++ {
			d.Window = append(d.Window, windowMode(rz, i))
			d.Plant = append(d.Plant, plantMode(rz, i))
		}
	}
	if !rz.HasContacts {
		d.Window = nil
	}
	if !rz.HasPlantEvidence {
		d.Plant = nil
	}
	class := res.Hours.Class[e.Zone]
	for i := from; i < to && i < len(class); i++ {
		if !class[i].Missed() {
			continue
		}
		if k := len(d.Missed); k > 0 && d.Missed[k-1].To == i-from {
			d.Missed[k-1].To++
		} else {
			d.Missed = append(d.Missed, chart.Span{From: i - from, To: i - from + 1})
		}
	}
	caption := "Zone " + b.w.Zone(e.Zone) + ", " + b.when(e) + ": " + words.Hours(e.Hours) + " missed"
	if e.PersonH >= 0 {
		caption += ", " + words.HoursNumber(e.PersonH) + " person-hours"
	}
	caption += ". " + words.Sentence(e.Cause.String())
	if e.Evidence != "" {
		caption += " " + words.Sentence(b.w.Foreign(e.Evidence))
	}
	return b.draw(fmt.Sprintf("episode-%d", n), caption, "Episode of "+b.w.Zone(e.Zone)+", "+b.when(e)+": nothing was logged to draw.",
		func(o chart.Options) (chart.SVG, error) { return chart.EpisodeStrip(d, o) })
}

func windowMode(z running.Zone, i int) chart.WindowMode {
	switch z.State[i] {
	case running.Open, running.Both:
		return chart.WindowOpen
	case running.Mech, running.Shut:
		return chart.WindowShut
	}
	return chart.WindowUnknown
}

func plantMode(z running.Zone, i int) chart.PlantMode {
	switch z.Plant[i] {
	case uint8(site.PlantOff):
		return chart.PlantOff
	case uint8(site.PlantOn):
		return chart.PlantOn
	case uint8(site.PlantVent):
		return chart.PlantVent
	case uint8(site.PlantHeat):
		return chart.PlantHeat
	case uint8(site.PlantCool):
		return chart.PlantCool
	}
	return chart.PlantUnknown
}
