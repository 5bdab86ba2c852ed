package climate

import (
	"math"
	"strconv"

	"sashlog/analyze/comfort"
	"sashlog/analyze/cores"
	"sashlog/analyze/outdoor"
	"sashlog/configs/criteria"
)

// Names of the ways that settings of their own move.
const (
	plainBand    = "plain band"
	adaptiveEN   = "adaptive EN 16798-1"
	adaptive55   = "adaptive ASHRAE 55"
	heatBalance  = "heat balance"
	nightCooling = "heat balance and night cooling"
)

// wayStep is one setting of a published way other than the headline, and how
// it is moved. Our choice of steps, of the size that practice argues about.
type wayStep struct {
	way, key, words, unit string
	at                    func(*criteria.Settings) *float64
	by                    []float64
	least                 float64
}

var waySteps = []wayStep{
	{plainBand, "band_low_c", "coldest outdoor air of the band", "°C", func(c *criteria.Settings) *float64 { return &c.BandLowC }, []float64{-2, 2}, -50},
	{plainBand, "band_high_c", "warmest outdoor air of the band", "°C", func(c *criteria.Settings) *float64 { return &c.BandHighC }, []float64{-2, 2}, -50},
	{heatBalance, "climate_gains_w_m2", "heat from people, sun and equipment", "W/m²", func(c *criteria.Settings) *float64 { return &c.ClimateGainsWm2 }, []float64{-10, 10}, 0},
	{heatBalance, "climate_loss_w_m2_k", "heat the envelope passes", "W/(m² K)", func(c *criteria.Settings) *float64 { return &c.ClimateLossWm2K }, []float64{-0.4, 0.4}, 0},
	{heatBalance, "climate_min_air_change_per_h", "air change the people need", "per h", func(c *criteria.Settings) *float64 { return &c.ClimateMinAirChangePerH }, []float64{-0.5, 0.5}, 0},
	{heatBalance, "climate_max_air_change_per_h", "most air change the openings bring", "per h", func(c *criteria.Settings) *float64 { return &c.ClimateMaxAirChangePerH }, []float64{-5, 5}, 0.1},
	{heatBalance, "climate_heating_c", "heating set-point", "°C", func(c *criteria.Settings) *float64 { return &c.ClimateHeatingC }, []float64{-1, 1}, 0},
	{heatBalance, "climate_cooling_c", "cooling set-point", "°C", func(c *criteria.Settings) *float64 { return &c.ClimateCoolingC }, []float64{-1, 1}, 0},
	{heatBalance, "dew_point_max_c", "dampest outdoor air that is used (dew point)", "°C", func(c *criteria.Settings) *float64 { return &c.DewPointMaxC }, []float64{-1, 1}, -50},
	{nightCooling, "night_store_c", "temperature of the mass that stores the cold", "°C", func(c *criteria.Settings) *float64 { return &c.NightStoreC }, []float64{-1, 1}, 0},
	{nightCooling, "climate_max_air_change_per_h", "most air change the openings bring", "per h", func(c *criteria.Settings) *float64 { return &c.ClimateMaxAirChangePerH }, []float64{-5, 5}, 0.1},
}

// WayMoved is a published way with one of its own settings moved.
type WayMoved struct {
	Way string
	Moved
}

// waySensitivity counts the published ways other than the headline anew with
// each of their own settings moved, one at a time, on measured weather. The
// published band shares its settings with the headline.
func waySensitivity(in *Input, r *record, balance HeatBalance) []WayMoved {
	type job struct {
		moved WayMoved
		votes func() []vote
	}
	var jobs []job
	byBalance := func(way string, c criteria.Settings) func() []vote {
		return func() []vote {
			b := balanceBy(c, balance.HeightM)
			needs := make([]Need, r.g.N)
			for i := range needs {
				if r.occ[i] > 0 { // nothing else is counted
					needs[i] = b.Need(float64(r.out.TempC[i]), r.dew(i))
				}
			}
			votes := make([]vote, len(needs))
			var credited []bool
			if way == nightCooling {
				credited = make([]bool, len(needs))
				nights(r, b, c.NightStoreC, c.PurgeDifferenceK, needs, credited)
			}
			needVotes(votes, needs, credited)
			return votes
		}
	}
	for _, s := range waySteps {
		if s.key == "dew_point_max_c" && r.out.DewPointC == nil {
			continue
		}
		for _, by := range s.by {
			c := in.Criteria
			at := s.at(&c)
			from := *at
			to := math.Max(s.least, from+by)
			if to == from {
				continue
			}
			*at = to
			j := job{moved: WayMoved{s.way, Moved{Key: s.key, Words: s.words, From: unit(from, s.unit), To: unit(to, s.unit)}}}
			if s.way == plainBand {
				j.votes = func() []vote {
					return r.within(c, func(*outdoor.Day) comfort.Band { return comfort.Band{LowC: c.BandLowC, HighC: c.BandHighC} })
				}
			} else {
				j.votes = byBalance(s.way, c)
			}
			jobs = append(jobs, j)
		}
	}
	inForce, ok := comfort.ParseCategory(in.Criteria.Category)
	if !ok {
		inForce = comfort.CategoryII
	}
	for _, cat := range []comfort.Category{comfort.CategoryI, comfort.CategoryII, comfort.CategoryIII} {
		if cat != inForce {
			jobs = append(jobs, job{WayMoved{adaptiveEN, Moved{Key: "category", Words: "category of the adaptive limits", From: inForce.String(), To: cat.String()}},
				func() []vote {
					return r.within(in.Criteria, func(d *outdoor.Day) comfort.Band { return comfort.EN16798Adaptive(d.RunningMeanENC, cat) })
				}})
		}
	}
	jobs = append(jobs, job{WayMoved{adaptive55, Moved{Key: "acceptability", Words: "share of people the limits are drawn for", From: "80 %", To: "90 %"}},
		func() []vote {
			return r.within(in.Criteria, func(d *outdoor.Day) comfort.Band {
				return comfort.ASHRAE55Adaptive(d.RunningMeanASHRAEC, comfort.Accept90)
			})
		}})
	out := make([]WayMoved, len(jobs))
	cores.Each(len(jobs), func(k int) {
		m := countOf(way{votes: jobs[k].votes()}, r)
		out[k] = jobs[k].moved
		out[k].SuitedH, out[k].UnknownH = m.SuitedH, m.UnknownH
	})
	return out
}

// changes fills in by how much each way moved from the hours it counts with
// the settings in force.
func changes(list []WayMoved, inForce []Method) {
	for k := range list {
		for i := range inForce {
			if inForce[i].Name == list[k].Way {
				list[k].ChangeH = list[k].SuitedH - inForce[i].SuitedH
			}
		}
	}
}

// unit writes a value of a setting with its unit.
func unit(v float64, u string) string {
	return strconv.FormatFloat(math.Round(v*1e6)/1e6, 'g', -1, 64) + " " + u
}
