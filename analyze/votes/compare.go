package votes

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/stat"

	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// joined is a vote with what was measured at the time.
type joined struct {
	vote  *site.Vote
	tempC float64
	pmv   float64 // NaN outside ISO 7730's range
	state running.State
}

// Compare holds the votes against the measured conditions; nil without votes.
func Compare(in Input) *Result {
	if len(in.Site.Votes) == 0 {
		return nil
	}
	r := &Result{Given: len(in.Site.Votes)}
	var all []joined
	byState := make([][]joined, running.NumStates)
	for k := range in.Site.Votes {
		v := &in.Site.Votes[k]
		i := in.Grid.Index(v.UnixS)
		if i < in.Grid.PeriodFrom || i >= in.Grid.PeriodTo {
			r.OutsidePeriod++
			continue
		}
		if !voted(v) {
			continue // only a complaint
		}
		j := joined{vote: v, tempC: in.tempAt(v.Zone, i), state: in.Running.Zones[v.Zone].State[i]}
		if math.IsNaN(j.tempC) {
			r.NoTemperature++
			continue
		}
		j.pmv = in.Predicted.Zones[v.Zone].VoteAt(i)
		all = append(all, j)
		if j.state == running.Unknown {
			r.StateUnknown++
		}
		byState[j.state] = append(byState[j.state], j)
	}
	r.All = groupOf(all)
	for s := range byState {
		r.States[s] = groupOf(byState[s])
	}
	r.complaints(&in)
	return r
}

func voted(v *site.Vote) bool {
	return !math.IsNaN(v.Sensation) || v.Acceptable != site.NotAsked || v.Preference != site.NotAsked
}

func (in *Input) tempAt(z, i int) float64 {
	if t := in.Indoor[z].OperativeC; t != nil {
		return float64(t[i])
	}
	return math.NaN()
}

func groupOf(list []joined) Group {
	nan := math.NaN()
	g := Group{Votes: len(list), MeanVote: nan, MeanPMV: nan, Difference: nan, DiffLow: nan, DiffHigh: nan, MeanTempC: nan,
		WithinOne: ShareOf(0, 0), Acceptable: ShareOf(0, 0), Neutral: Regress(nil, nil), Griffiths: GriffithsNeutral(nil, nil)}
	if len(list) < LeastForShares {
		g.TooFew = fmt.Sprintf("%d votes, at least %d are needed", len(list), LeastForShares)
		return g
	}
	var temps, votes, all, predicted, differences []float64
	within, yes, asked := 0, 0, 0
	for _, j := range list {
		all = append(all, j.tempC)
		if s := j.vote.Sensation; !math.IsNaN(s) {
			temps, votes = append(temps, j.tempC), append(votes, s)
			if math.Abs(s) <= 1 {
				within++
			}
			if !math.IsNaN(j.pmv) {
				predicted, differences = append(predicted, j.pmv), append(differences, s-j.pmv)
			}
		}
		if j.vote.Acceptable != site.NotAsked {
			asked++
			yes += int(j.vote.Acceptable)
		}
		switch j.vote.Preference {
		case -1:
			g.PreferCooler++
		case 0:
			g.NoChange++
		case 1:
			g.PreferUp++
		}
	}
	g.MeanTempC = stat.Mean(all, nil)
	g.Sensations = len(votes)
	if len(votes) >= LeastForShares {
		g.MeanVote = stat.Mean(votes, nil)
		g.WithinOne = ShareOf(within, len(votes))
		g.Griffiths = GriffithsNeutral(temps, votes)
	}
	if len(predicted) >= LeastForShares {
		g.MeanPMV = stat.Mean(predicted, nil)
		g.Difference, g.DiffLow, g.DiffHigh = meanInterval(differences)
	}
	g.Neutral = Regress(temps, votes)
	if asked >= LeastForShares {
		g.Acceptable = ShareOf(yes, asked)
	}
	return g
}

// complaints counts complaints by kind and state.
func (r *Result) complaints(in *Input) {
	personH, known := 0.0, true
	for z := range in.Site.Zones {
		h := 0.0
		for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
			if in.Running.Zones[z].Occupied[i] == running.Occupied {
				h += in.Grid.StepH()
			}
		}
		personH += h * in.Site.Zones[z].People
		known = known && in.Site.Zones[z].People > 0
	}
	if !known {
		personH = math.NaN()
	}
	for _, kind := range []site.Complaint{site.TooWarmComplaint, site.TooCoolComplaint, site.StuffyComplaint, site.DraughtComplaint, site.NoiseComplaint, site.OtherComplaint} {
		c := ComplaintCount{Kind: kind}
		for k := range in.Site.Votes {
			v := &in.Site.Votes[k]
			i := in.Grid.Index(v.UnixS)
			if v.Complaint != kind || i < in.Grid.PeriodFrom || i >= in.Grid.PeriodTo {
				continue
			}
			c.Count++
			c.ByState[in.Running.Zones[v.Zone].State[i]]++
			t, lim := in.tempAt(v.Zone, i), &in.Exceedance.Zones[v.Zone].Limits
			limit := float64(lim.HighC[i])
			if kind == site.TooCoolComplaint {
				limit = float64(lim.LowC[i])
			}
			if (kind == site.TooWarmComplaint || kind == site.TooCoolComplaint) && !math.IsNaN(t) && !math.IsNaN(limit) {
				c.Known++
				if kind == site.TooWarmComplaint && t > limit || kind == site.TooCoolComplaint && t < limit {
					c.Explained++
				}
			}
		}
		if c.Count > 0 {
			c.Per1000PersonH, c.Low, c.High = rate(c.Count, personH)
			r.Complaints = append(r.Complaints, c)
		}
	}
}
