package breeze

import (
	"math"

	"sashlog/analyze/outdoor"
	"sashlog/analyze/potential"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Rate is one measured air change rate of a zone in open mode, over the steps
// in open mode of [FromStep, ToStep): a decay of CO2, or a day with the people
// counted.
type Rate struct {
	Zone             int
	Day              bool
	FromStep, ToStep int
	AirChangePerH    float64
}

// Input is what the analysis looks at.
type Input struct {
	Site      *site.Site
	Criteria  criteria.Settings
	Grid      *grid.Grid
	Outdoor   *outdoor.Outdoor
	Running   *running.Result
	Potential *potential.Result
	// Rates are those of open mode.
	Rates []Rate
}

// Result is what the wind did.
type Result struct {
	// Missing says in words what is not logged; empty when speed and direction
	// are. Without a speed everything else is empty.
	Missing                  string
	SpeedLogged, DirectionOK bool
	Speed                    Speed
	// WantedAboveC is the outdoor temperature above which a breeze is wanted,
	// CalmMS the calm limit.
	WantedAboveC, CalmMS float64
	// All counts every hour of the period; Suited and Wanted occupied hours of
	// the average occupant: those the weather suited, and those outdoors was
	// warmer than WantedAboveC. WantedSuitedH of the wanted hours also suited.
	All, Suited, Wanted Rose
	WantedSuitedH       float64
	// Facings are the directions openings face, those that catch most of the
	// wanted wind first; FacesUnknown the zones with openings and no direction.
	Facings      []Facing
	FacesUnknown []int
	Drive        *Drive // nil without rates in open mode
}

// Catch works the answer out.
func Catch(in Input) *Result {
	r := &Result{Speed: speedOf(in.Criteria), WantedAboveC: in.Criteria.BreezeAboveC, CalmMS: in.Criteria.WindCalmMS,
		SpeedLogged: in.Outdoor.WindMS != nil, DirectionOK: in.Outdoor.WindDirDeg != nil}
	r.Facings, r.FacesUnknown = facingsOf(in.Site, in.Running)
	switch {
	case !r.SpeedLogged && !r.DirectionOK:
		r.Missing = "wind is not logged: no rose can be drawn, and nothing can be said about the wind at the openings"
	case !r.SpeedLogged:
		r.Missing = "wind speed is not logged, only its direction: calm cannot be told from wind, so no rose is drawn"
	case !r.DirectionOK:
		r.Missing = "wind direction is not logged: speeds are given, sectors and façades cannot be"
	}
	if !r.SpeedLogged {
		return r
	}
	occupied, suited := shares(&in)
	r.roses(&in, occupied, suited)
	r.Drive = driveOf(&in, r.Speed)
	return r
}

// shares are the shares of the average occupant's time that are occupied, and
// occupied in suited weather, in each step.
func shares(in *Input) (occupied, suited []float32) {
	occupied, suited = make([]float32, in.Grid.N), make([]float32, in.Grid.N)
	for z := range in.Running.Zones {
		w, run := float32(in.Running.Weights[z]), &in.Running.Zones[z]
		if w == 0 || run.NoOpening {
			continue
		}
		suit := in.Potential.Zones[z].Suit
		for i, o := range run.Occupied {
			if o != running.Occupied {
				continue
			}
			occupied[i] += w
			if suit != nil && suit[i] == potential.Suited {
				suited[i] += w
			}
		}
	}
	return occupied, suited
}

// roses fills the three roses and what each facing catches of the wanted wind.
func (r *Result) roses(in *Input, occupied, suited []float32) {
	h := in.Grid.StepH()
	for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
		ms, deg := float64(in.Outdoor.WindMS[i]), math.NaN()
		if r.DirectionOK {
			deg = float64(in.Outdoor.WindDirDeg[i])
		}
		r.All.add(ms, deg, r.CalmMS, h)
		if suited[i] > 0 {
			r.Suited.add(ms, deg, r.CalmMS, float64(suited[i])*h)
		}
		if occupied[i] == 0 {
			continue
		}
		temp := math.NaN()
		if in.Outdoor.TempC != nil {
			temp = float64(in.Outdoor.TempC[i])
		}
		o := float64(occupied[i]) * h
		switch {
		case math.IsNaN(temp):
			r.Wanted.UnknownH += o
		case temp > r.WantedAboveC:
			r.Wanted.add(ms, deg, r.CalmMS, o)
			r.WantedSuitedH += float64(suited[i]) * h
			for k := range r.Facings {
				r.Facings[k].add(ms, deg, r.CalmMS, r.Speed.Factor, o)
			}
		}
	}
	for _, rose := range []*Rose{&r.All, &r.Suited, &r.Wanted} {
		rose.finish()
	}
	r.rank()
}
