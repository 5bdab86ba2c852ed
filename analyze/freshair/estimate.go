package freshair

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/stat"
	"gonum.org/v1/gonum/stat/distuv"

	"sashlog/analyze/running"
)

// measured is the rate of one event: a decay, a build-up, or a day's balance.
type measured struct {
	perH  float64
	logSE float64
	// offLow and offHigh are how far ln A moves down and up when what is common
	// to all events is off by its doubt; both are positive.
	offLow, offHigh float64
	span            span // steps
}

// estimate is the typical rate of events with its interval: the spread over
// events and, in quadrature, the doubt they share.
func estimate(way Way, events []measured, need int, why string) Estimate {
	nan := math.NaN()
	e := Estimate{Way: way, MedianPerH: nan, LowPerH: nan, HighPerH: nan, FromPerH: nan, ToPerH: nan, Events: len(events)}
	if len(events) < need {
		e.NotMeasurable = why
		return e
	}
	var rates, logs, low, high, se []float64
	for _, m := range events {
		rates = append(rates, m.perH)
		logs, se = append(logs, math.Log(m.perH)), append(se, m.logSE*m.logSE)
		low, high = append(low, m.offLow), append(high, m.offHigh)
	}
	slices.Sort(logs)
	e.MedianPerH = median(rates)
	typical := math.Log(e.MedianPerH)
	sampleLow, sampleHigh := MedianInterval(logs, math.Sqrt(mean(se)))
	e.OffsetLogLow, e.OffsetLogHigh = median(low), median(high)
	e.LowPerH = math.Exp(typical - math.Hypot(typical-sampleLow, e.OffsetLogLow))
	e.HighPerH = math.Exp(typical + math.Hypot(sampleHigh-typical, e.OffsetLogHigh))
	e.FromPerH, e.ToPerH = math.Exp(logs[0]), math.Exp(logs[len(logs)-1])
	if e.HighPerH > widestRatio*e.LowPerH {
		e.NotMeasurable = fmt.Sprintf("%d events disagree too much: anything between %.2g and %.2g per hour", e.Events, e.LowPerH, e.HighPerH)
		e.MedianPerH, e.LowPerH, e.HighPerH, e.FromPerH, e.ToPerH = nan, nan, nan, nan, nan
	}
	return e
}

// widestRatio is the ratio of the ends of an interval beyond which a rate is not
// worth stating; our assumption.
const widestRatio = 10

// orderedMin is the least number whose extremes hold the median 95 times in
// 100: 1 - 2/2^6.
const orderedMin = 6

// MedianInterval bounds the median of sorted values, at least one, at 95 %: by order statistics
// (binomial; Conover, Practical Nonparametric Statistics, from memory), with
// fewer than six by Student's t with the larger of the spread and the error of
// one event (eventSE, 0 where not known).
func MedianInterval(sorted []float64, eventSE float64) (low, high float64) {
	n := len(sorted)
	mid := quantile(sorted, 0.5)
	if n >= orderedMin {
		b := distuv.Binomial{N: float64(n), P: 0.5}
		k := 0 // values left out at each end
		for b.CDF(float64(k+1)) <= 0.025 {
			k++
		}
		return sorted[k], sorted[n-1-k]
	}
	spread := eventSE
	if n > 1 {
		spread = math.Max(spread, stat.StdDev(sorted, nil))
	}
	half := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: math.Max(1, float64(n-1))}.Quantile(0.975) * spread / math.Sqrt(float64(n))
	return mid - half, mid + half
}

// airChanges measures the rates of zone z in every state by every way, and holds
// them against what is asked for.
func (out *Zone) airChanges(in *Input, z int) {
	var tallies [running.NumStates]tally
	var days, rises [running.NumStates][]measured
	counted := in.Indoor[z].People != nil
	dayWhy, riseWhy := "CO2 is not logged in this zone", "CO2 is not logged in this zone"
	if in.Indoor[z].CO2PPM != nil {
		for _, span := range emptySpans(in, z) {
			tallies[in.Running.Zones[z].State[span.from]].try(in, z, span)
		}
		days, dayWhy = balances(in, z, counted)
		rises, riseWhy = buildUps(in, z)
	}
	need := max(1, in.Criteria.MinDecayEvents)
	for s := range out.AirChange {
		t := &tallies[s]
		a := &out.AirChange[s]
		*a = t.summary()
		var decays []measured
		for _, e := range t.events {
			ln := math.Log(e.fit.AirChangePerH)
			decays = append(decays, measured{e.fit.AirChangePerH, e.fit.LogSE,
				ln - math.Log(e.offLow.AirChangePerH), math.Log(e.offHigh.AirChangePerH) - ln, span{e.from, e.to}})
			out.Decays = append(out.Decays, Event{running.State(s), e.from, e.to, e.fit.AirChangePerH})
		}
		if counted {
			for _, d := range days[s] {
				out.Days = append(out.Days, Event{running.State(s), d.span.from, d.span.to, d.perH})
			}
		}
		way, other := ByScheduled, ByCounted
		if counted {
			way, other = ByCounted, ByScheduled
		}
		enough := func(n int, what, why string) string {
			if why != "" {
				return why
			}
			return fmt.Sprintf("%d usable %s, at least %d needed", n, what, need)
		}
		whyDecay := t.why(in, z, running.State(s), need)
		balance := estimate(way, days[s], need, enough(len(days[s]), "days", dayWhy))
		unused := estimate(other, nil, 1, "people are not counted")
		if counted {
			unused = estimate(other, nil, 1, "people are counted, which is better")
		}
		a.Estimates = []Estimate{estimate(ByDecay, decays, need, whyDecay), balance, estimate(ByBuildUp, rises[s], need, enough(len(rises[s]), "rises", riseWhy)), unused}
		if !counted {
			a.Estimates[1], a.Estimates[3] = unused, balance
		}
		a.take(in, z, running.State(s), len(t.events))
		out.judge(s)
	}
	for _, events := range [][]Event{out.Decays, out.Days} {
		slices.SortStableFunc(events, func(a, b Event) int { return a.FromStep - b.FromStep })
	}
	out.neighbours(in, z)
}

// stands are the ways whose rate may stand for a state. The others are shown
// beside: with usual people the rate is an upper value, and a build-up needs a steep
// rise and is short, so that doors and the mixing of the air weigh more.
var stands = map[Way]bool{ByDecay: true, ByCounted: true}

// take makes the most trusted way that is measurable the state's rate.
func (a *AirChange) take(in *Input, z int, s running.State, decays int) {
	nan := math.NaN()
	a.MedianPerH, a.LowPerH, a.HighPerH, a.FromPerH, a.ToPerH = nan, nan, nan, nan, nan
	a.FlowLs, a.FlowLsPerson, a.AtUsualPeoplePPM = nan, nan, nan
	a.NotMeasurable, a.Events, a.Method = a.Estimates[0].NotMeasurable, decays, wayMethods[ByDecay]
	for i := range a.Estimates {
		e := &a.Estimates[i]
		if e.NotMeasurable != "" || !stands[e.Way] {
			continue
		}
		a.MedianPerH, a.LowPerH, a.HighPerH, a.FromPerH, a.ToPerH = e.MedianPerH, e.LowPerH, e.HighPerH, e.FromPerH, e.ToPerH
		a.NotMeasurable, a.Events, a.Way, a.Method = "", e.Events, e.Way, wayMethods[e.Way]
		break
	}
	a.NeighbourPer10LsPerH = nan
	closed := s == running.Shut && in.Running.Zones[z].NoOpening
	a.UpperOnly = (a.MedianPerH < slowPerH || closed && a.MedianPerH > 0) && len(in.Site.Zones) > 1
	zone := &in.Site.Zones[z]
	volume := zone.AreaM2 * zone.HeightM
	if math.IsNaN(a.MedianPerH) || !(volume > 0) {
		return
	}
	a.FlowLs = a.MedianPerH * volume / 3.6
	if zone.People > 0 {
		a.FlowLsPerson = a.FlowLs / zone.People
		b := Balance{VolumeM3: volume, FlowLs: a.FlowLs, GenerationLs: zone.People * in.Criteria.CO2PerPersonLs, OutdoorPPM: in.Outdoor.CO2DefaultPPM}
		a.AtUsualPeoplePPM = b.After(4, b.OutdoorPPM)
	}
}

// slowPerH is a rate that doors alone can bring: 10 L/s in 70 m3; our
// assumption. In the invented building such rooms came out up to 2.4 times too
// fast.
const slowPerH = 0.5

func (out *Zone) judge(s int) {
	a := &out.AirChange[s]
	for _, r := range out.Required {
		v := Unproven
		if k := a.FlowLs / a.MedianPerH; k > 0 {
			if v = verdict(a.LowPerH*k, a.HighPerH*k, r.Ls); a.UpperOnly && v == Met {
				v = Unproven
			}
		}
		out.Verdicts[s] = append(out.Verdicts[s], v)
	}
}

// summary is what a table of decays says of the fits.
func (t *tally) summary() AirChange {
	nan := math.NaN()
	a := AirChange{MedianR2: nan, OutdoorLowPerH: nan, OutdoorHighPerH: nan}
	var r2, low, high []float64
	for _, e := range t.events {
		r2, low, high = append(r2, e.fit.R2), append(low, e.outdoorLow.AirChangePerH), append(high, e.outdoorHigh.AirChangePerH)
		a.Points += e.fit.N
	}
	if len(r2) > 0 {
		a.MedianR2, a.OutdoorLowPerH, a.OutdoorHighPerH = median(r2), median(low), median(high)
	}
	return a
}

var wayMethods = map[Way]string{
	ByDecay:     decayMethod,
	ByCounted:   "balance of CO2 over whole days with the people counted, one rate per running state and day (Batterman 2017, at second hand)",
	ByBuildUp:   "rise of CO2 with constant people counted (ASHRAE Fundamentals ch. 16, at second hand)",
	ByScheduled: "balance of CO2 over whole days with the usual people in occupied time (Batterman 2017, at second hand): an upper value, since rarely all are there",
}

// neighbours states how far the zones of the same floor stood above outdoors
// in the events behind each state's rate (its decays where none stands), and
// what air exchanged with them adds to the rate.
func (out *Zone) neighbours(in *Input, z int) {
	volume := in.Site.Zones[z].AreaM2 * in.Site.Zones[z].HeightM
	for s := range out.AirChange {
		a := &out.AirChange[s]
		events := out.Decays
		if a.Way == ByCounted {
			events = out.Days
		}
		var shares []float64
		for _, e := range events {
			if e.State != running.State(s) {
				continue
			}
			if share := neighbourShare(in, z, e); !math.IsNaN(share) {
				shares = append(shares, share)
			}
		}
		out.NeighbourShare[s] = median(shares)
		if volume > 0 && a.Way != "" {
			a.NeighbourPer10LsPerH = (1 - out.NeighbourShare[s]) * 10 * 3.6 / volume
		}
	}
}

// neighbourShare is the mean excess of the zones on the same floor over this
// zone's own, in the steps of an event in its state in which both are known.
func neighbourShare(in *Input, z int, d Event) float64 {
	if in.Site.Zones[z].Floor == "" {
		return math.NaN()
	}
	own, others := 0.0, 0.0
	for i := d.FromStep; i < d.ToStep; i++ {
		if in.Running.Zones[z].State[i] != d.State {
			continue
		}
		mine := float64(in.Indoor[z].CO2PPM[i]) - in.Outdoor.OutdoorCO2(i)
		if math.IsNaN(mine) {
			continue
		}
		for k := range in.Site.Zones {
			if k == z || in.Site.Zones[k].Floor != in.Site.Zones[z].Floor || in.Indoor[k].CO2PPM == nil {
				continue
			}
			if c := float64(in.Indoor[k].CO2PPM[i]); !math.IsNaN(c) {
				own, others = own+mine, others+math.Max(0, c-in.Outdoor.OutdoorCO2(i))
			}
		}
	}
	if !(own > 0) {
		return math.NaN()
	}
	return others / own
}
