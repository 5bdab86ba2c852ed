package climate

import (
	"sashlog/analyze/calendar"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/potential"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Input is what the analysis looks at.
type Input struct {
	Site       *site.Site
	Criteria   criteria.Settings
	Grid       *grid.Grid
	Calendar   *calendar.Calendar
	Outdoor    *outdoor.Outdoor
	Indoor     []indoor.Zone
	Running    *running.Result
	Exceedance *exceedance.Result
	Potential  *potential.Result
}

// Result is what the climate offered. All hours are occupied hours of the
// average occupant over the period (a typical year: over that year) unless a
// field says otherwise.
type Result struct {
	// Measured and Typical are nil without measured weather or typical year.
	Measured, Typical *Offer
	// Year compares them, nil without both.
	Year *Year
	// Agreement of the ways on measured weather, in the order of
	// Measured.Methods; nil without it.
	Agreement   [][]Pair
	Sensitivity []Moved
	// WaySensitivity are the other ways with their own settings moved, on
	// measured weather.
	WaySensitivity []WayMoved
	AirSpeed       *AirSpeed // nil without measured weather
	// Outdoors and Indoors sort occupied hours by temperature and humidity.
	Outdoors, Indoors Fields
	Balance           HeatBalance
	// HeightNote says where the room height of the balance came from.
	HeightNote string
}

// Method is one way of counting suitable hours.
type Method struct {
	Name, Words, Source string
	SuitedH, UnknownH   float64
	// OutsideH are hours beyond the method's range of validity, neither suited
	// nor unsuited.
	OutsideH float64
}

// Offer is what one record of weather offered.
type Offer struct {
	Name      string
	OccupiedH float64
	Methods   []Method
	// NeedH are the hours by what the heat balance asks for.
	NeedH [NumNeeds]float64
	// Air change the balance asks for in the hours in which more outdoor air
	// cools, also beyond reach: median and 90th percentile, 1/h; NaN without such
	// hours.
	RequiredMedianPerH, Required90PerH float64
	Night                              Night
}

// Pair is how far two ways agree.
type Pair struct {
	// AgreeShare is the share of the hours both know in which they say the same,
	// NaN without such hours.
	AgreeShare, KnownH float64
	// OnlyFirstH and OnlySecondH are suited by one way alone.
	OnlyFirstH, OnlySecondH float64
}

// Moved is the headline with one setting moved.
type Moved struct {
	Key, Words string
	// From is the value in force, To the one tried, both with their unit.
	From, To          string
	SuitedH, UnknownH float64
	// ChangeH is SuitedH less that of the headline.
	ChangeH float64
}

// Offered works the answer out.
func Offered(in Input) *Result {
	r := &Result{}
	r.Balance, r.HeightNote = balanceOf(in.Site, in.Criteria, in.Running)
	occ := occupiedShare(in.Grid, in.Running)
	r.Outdoors, r.Indoors = fieldsOf(&in)
	typical := typicalRecord(in.Site, in.Criteria, in.Grid, occ, in.Outdoor)
	var typicalBare []vote
	if typical != nil {
		r.Typical, typicalBare = r.offer(in.Criteria, typical)
	}
	if in.Outdoor.TempC == nil {
		return r
	}
	measured := &record{name: "measured", g: in.Grid, out: in.Outdoor, occ: occ}
	r.measure(&in, measured)
	r.Sensitivity = sensitivity(&in)
	r.WaySensitivity = waySensitivity(&in, measured, r.Balance)
	changes(r.WaySensitivity, r.Measured.Methods)
	r.AirSpeed = airSpeed(&in)
	if typical != nil {
		r.Year = compareYears(in.Criteria, measured, typical, typicalBare)
	}
	return r
}
