// Package daydata answers: what must stand inside a report so that any day of
// any zone can be looked at again? It packs the steps of the period by zone and
// local month, small enough to travel inside one HTML file, and computes no
// figure.
//
// A block is a month of one zone, or of the weather: its series one after the
// other, each value as the difference from the last known one (pack.go), then
// zlib, then base64. Temperatures are kept to 0.1 K, humidity to 1 %, CO2 to
// 10 ppm. Rooms the privacy rule protects have no steps: they are told by day,
// by week where their presence is measured, without counts, windows and CO2,
// as the hourly record tells them.
package daydata

import (
	"errors"
	"math"
	"time"

	"sashlog/analyze"
	"sashlog/analyze/cores"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/report/privacy"
)

// Input is what the data are taken from.
type Input struct {
	Site     *site.Site
	Criteria criteria.Settings
	Grid     *grid.Grid
	Results  *analyze.Results
	Rule     privacy.Rule
	// Outcome gives the number an outcome of a step is kept as, from 0 to
	// Outcomes-1.
	Outcome  func(zone, step int) int
	Outcomes int
	// Label is what the report calls a zone.
	Label func(zone int) string
	// Budget is the most the blocks may take, in bytes of base64; zero means
	// DefaultBudget.
	Budget int
}

// DefaultBudget leaves a report of 60 zones and a year under 10 MB.
const DefaultBudget = 6_500_000

// ErrTooMuch says that the period does not fit the budget at any step.
var ErrTooMuch = errors.New("the period is too long, or has too many zones, to be looked at by day in one file")

// Data is everything the day browser knows. Step i begins at
// StartUTC + i·StepS; Days and Months hold the first step of each, and the
// count of all steps at the end.
type Data struct {
	StepS    int64  `json:"step_s"`
	StartUTC int64  `json:"start_utc"`
	FirstDay string `json:"first_day"`
	Days     []int  `json:"days"`
	Months   []int  `json:"months"`
	// Offsets are the clock's offsets: from this instant, so many seconds ahead
	// of universal time.
	Offsets [][2]int64 `json:"offsets"`
	// Zone, Outdoor and Span name the series of the blocks in their order.
	Zone    []Series `json:"zone_series"`
	Outdoor []Series `json:"outdoor_series"`
	Span    []Series `json:"span_series"`
	Weather []string `json:"weather"` // a block per month
	Zones   []Zone   `json:"zones"`
	// OutdoorLowC and RiseK say when the weather is neither too cold nor too warm.
	OutdoorLowC float64 `json:"outdoor_low_c"`
}

// Series is a quantity in a block: its value is the packed number times Scale.
type Series struct {
	Key   string  `json:"key"`
	Scale float64 `json:"scale"`
}

// Zone is one zone's blocks: a block per month, or, of a protected room, one
// block of spans of days.
type Zone struct {
	Label     string   `json:"label"`
	Blocks    []string `json:"blocks,omitempty"`
	Protected bool     `json:"protected,omitempty"`
	Weekly    bool     `json:"weekly,omitempty"`
	Spans     string   `json:"spans,omitempty"`
	SpanCount int      `json:"span_count,omitempty"`
}

// Bytes is the length of all blocks.
func (d *Data) Bytes() int {
	n := 0
	for _, b := range d.Weather {
		n += len(b)
	}
	for _, z := range d.Zones {
		n += len(z.Spans)
		for _, b := range z.Blocks {
			n += len(b)
		}
	}
	return n
}

// Make packs the period at the grid's own step where it fits the budget, else
// at the first of 15, 30 and 60 minutes that does.
func Make(in Input) (*Data, error) {
	if in.Budget == 0 {
		in.Budget = DefaultBudget
	}
	for _, every := range widths(in.Grid.StepS) {
		p := newPacker(in, every)
		if p.hopeless() {
			continue
		}
		if d := p.pack(); d != nil {
			return d, nil
		}
	}
	return nil, ErrTooMuch
}

// hopeless packs a month in the middle of the period of a few zones and says
// whether the whole would be far beyond the budget, so that time is not spent on
// finding out.
func (p *packer) hopeless() bool {
	var open []int
	for z := range p.in.Site.Zones {
		if !p.in.Rule.Protected(z) {
			open = append(open, z)
		}
	}
	const few = 3
	m := (len(p.data.Months) - 1) / 2
	from, to := p.data.Months[m], p.data.Months[m+1]
	if len(open) <= 4*few || to == from {
		return false
	}
	bytes := 0
	for k := range few {
		bytes += len(block(p.columns(zoneSeries, open[k*(len(open)-1)/(few-1)], from, to)))
	}
	whole := float64(bytes) / few * float64(len(open)) * float64(p.n) / float64(to-from)
	return whole > 1.3*float64(p.in.Budget)
}

// widths lists how many steps of the grid may make one step of the data.
func widths(stepS int64) []int {
	out := []int{1}
	for _, s := range []int64{900, 1800, 3600} {
		if s > stepS && s%stepS == 0 {
			out = append(out, int(s/stepS))
		}
	}
	return out
}

// packer packs at one width.
type packer struct {
	in    Input
	every int // steps of the grid in one of the data
	n     int // steps of the data
	data  *Data
}

func newPacker(in Input, every int) *packer {
	g := in.Grid
	p := &packer{in: in, every: every, n: (g.PeriodTo - g.PeriodFrom + every - 1) / every}
	p.data = &Data{StepS: g.StepS * int64(every), StartUTC: g.StartUTC + int64(g.PeriodFrom)*g.StepS,
		Zone: names(zoneSeries), Outdoor: names(outdoorSeries), Span: spanSeries(in.Outcomes), OutdoorLowC: in.Criteria.OutdoorLowC}
	p.clock()
	return p
}

// clock finds the days, the months and the offsets of the period.
func (p *packer) clock() {
	d, loc := p.data, p.in.Grid.Loc
	end := d.StartUTC + int64(p.n)*d.StepS
	day := site.DateOf(time.Unix(d.StartUTC, 0).In(loc))
	d.FirstDay = day.String()
	month := time.Month(0)
	for at := 0; at < p.n; day = day.Next() {
		if len(d.Days) == 0 || at > d.Days[len(d.Days)-1] {
			d.Days = append(d.Days, at)
		}
		if day.Month != month {
			month = day.Month
			d.Months = append(d.Months, at)
		}
		at = int((day.Next().Start(loc).Unix() - d.StartUTC + d.StepS - 1) / d.StepS)
	}
	d.Days, d.Months = append(d.Days, p.n), append(d.Months, p.n)
	for t := d.StartUTC; t < end; {
		at := time.Unix(t, 0).In(loc)
		_, offset := at.Zone()
		d.Offsets = append(d.Offsets, [2]int64{t, int64(offset)})
		_, until := at.ZoneBounds()
		if until.IsZero() {
			break
		}
		t = until.Unix()
	}
}

// pack makes all blocks, nil when they do not fit the budget.
func (p *packer) pack() *Data {
	d := p.data
	left := budget{}
	left.bytes.Store(int64(p.in.Budget))
	months := len(d.Months) - 1
	d.Weather = make([]string, months)
	for m := range months {
		d.Weather[m] = left.take(block(p.columns(outdoorSeries, 0, d.Months[m], d.Months[m+1])))
	}
	d.Zones = make([]Zone, len(p.in.Site.Zones))
	cores.Each(len(d.Zones), func(z int) {
		zone := &d.Zones[z]
		zone.Label = p.in.Label(z)
		if p.in.Rule.Protected(z) {
			zone.Protected, zone.Weekly = true, p.in.Rule.ByWeek(z)
			zone.Spans, zone.SpanCount = p.spans(z)
			left.take(zone.Spans)
			return
		}
		for m := 0; m < months && !left.spent(); m++ {
			zone.Blocks = append(zone.Blocks, left.take(block(p.columns(zoneSeries, z, d.Months[m], d.Months[m+1]))))
		}
	})
	if left.spent() {
		return nil
	}
	return d
}

func unknown() float64 { return math.NaN() }
