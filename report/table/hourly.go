package table

import (
	"io"
	"time"

	"sashlog/analyze/exceedance"
	"sashlog/analyze/hours"
	"sashlog/report/privacy"
)

// bom leads the CSV files: spreadsheets read UTF-8 by it.
const bom = "\xef\xbb\xbf"

// column is one column of the hourly record.
type column struct {
	name     string
	seconds  hours.Col // when counted
	value    hours.Val // when not
	counted  bool
	decimals int
}

func counted(c hours.Col) column {
	return column{name: hours.ColName(c), seconds: c, counted: true}
}

func valued(v hours.Val, decimals int) column {
	return column{name: hours.ValName(v), value: v, decimals: decimals}
}

// columnsBefore and columnsAfter stand before and after the comfort model, in
// the order of the contract; columns of our own come last.
func columnsBefore() []column {
	var out []column
	for c := hours.COccupied; c <= hours.CBothUntyped; c++ {
		out = append(out, counted(c))
	}
	out = append(out, valued(hours.VOpenShare, 4))
	for c := hours.CSuited; c <= hours.CPurgeAvailable; c++ {
		out = append(out, counted(c))
	}
	return append(out, valued(hours.VTempC, 3), valued(hours.VRHPct, 2), valued(hours.VCO2PPM, 1), valued(hours.VOutdoorTempC, 3),
		valued(hours.VOutdoorRHPct, 2), valued(hours.VRunningMeanENC, 3), valued(hours.VRunningMeanASHRAEC, 3))
}

func columnsAfter() []column {
	return []column{valued(hours.VComfortLowC, 3), valued(hours.VComfortHighC, 3), counted(hours.COver), counted(hours.CUnder),
		valued(hours.VOverKh, 5), valued(hours.VUnderKh, 5), valued(hours.VPeopleH, 5), valued(hours.VPersonH, 5),
		valued(hours.VPersonOverH, 5), valued(hours.VPersonUnderH, 5), valued(hours.VCO2LimitPPM, 1), counted(hours.CCO2Over),
		valued(hours.VCoverage, 5), counted(hours.CSuitedPlantOff), counted(hours.CSuitedPlantUnknown), counted(hours.CSuitedFanUnknown), counted(hours.CPurgeUnknown)}
}

// hourWords are the texts of each hour, the same for every zone.
type hourWords struct{ local, date [][]byte }

func newHourWords(rec *hours.Record) hourWords {
	w := hourWords{make([][]byte, len(rec.Hours)), make([][]byte, len(rec.Hours))}
	for i := range rec.Hours {
		h := &rec.Hours[i]
		local := time.Unix(h.StartUTC, 0).In(time.FixedZone("", h.OffsetS))
		w.local[i] = local.AppendFormat(nil, "2006-01-02T15:04:05-07:00")
		w.date[i] = []byte(h.Date.String())
	}
	return w
}

// modelWords are the names of the comfort models, modelCells the same as text
// cells.
var modelWords, modelCells = func() (words, cells [exceedance.NumModels][]byte) {
	for m := range words {
		words[m] = []byte(exceedance.Model(m).String())
		cells[m] = appendText(nil, exceedance.Model(m).String())
	}
	return words, cells
}()

// WriteHoursCSV writes the hourly record.
func WriteHoursCSV(w io.Writer, in Input) error {
	before, after := columnsBefore(), columnsAfter()
	b := []byte(bom + "start_utc,start_local,local_date,zone,people")
	for _, c := range before {
		b = append(append(b, ','), c.name...)
	}
	b = append(b, ",comfort_model"...)
	for _, c := range after {
		b = append(append(b, ','), c.name...)
	}
	b = append(b, '\n')
	rule := privacy.For(in.Site)
	said := newHourWords(in.Results.Hours)
	zone, last := []byte(nil), -1
	err := in.eachRow(rule, func(r *row) error {
		if r.zone != last {
			zone, last = appendText(nil, rule.ID(r.zone)), r.zone
		}
		b = time.Unix(r.startUTC, 0).UTC().AppendFormat(b, "2006-01-02T15:04:05Z")
		b = append(append(b, ','), said.local[r.hour]...)
		b = append(append(b, ','), said.date[r.hour]...)
		b = append(append(b, ','), zone...)
		b = appendNumber(append(b, ','), in.Results.Hours.People[r.zone], 1)
		for _, c := range before {
			b = r.appendCell(append(b, ','), c)
		}
		b = append(append(b, ','), modelCells[r.model]...)
		for _, c := range after {
			b = r.appendCell(append(b, ','), c)
		}
		b = append(b, '\n')
		if len(b) < 1<<16 {
			return nil
		}
		_, err := w.Write(b)
		b = b[:0]
		return err
	})
	if err != nil {
		return err
	}
	_, err = w.Write(b)
	return err
}

func (r *row) appendCell(b []byte, c column) []byte {
	if c.counted {
		return appendHours(b, r.seconds[c.seconds])
	}
	return appendNumber(b, float64(r.values[c.value]), c.decimals)
}
