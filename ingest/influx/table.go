package influx

import (
	"encoding/csv"
	"io"
	"math"
	"strconv"

	"sashlog/configs/site"
)

// WritePoints writes the points table that reads back what Load wrote: the
// rows of the site's own table with the database as their source, canonical
// units, and states as the numbers they were written as.
func WritePoints(w io.Writer, s *site.Site, log *site.Log, loaded []Loaded) error {
	out := csv.NewWriter(w)
	rows := [][]string{{"source", "column", "belongs_to", "quantity", "unit", "logging", "stamp", "hold", "open_value", "values", "placement", "share", "note"}}
	for _, l := range loaded {
		p := &s.Points[l.Point]
		t, _ := p.Quantity.Trait()
		unit, values, hold, share := t.Unit, "", "", ""
		if p.Quantity == site.Rain && site.RainPerInterval(p.Unit) {
			unit = "mm" // amounts stay amounts
		}
		switch t.Kind {
		case site.Status:
			values = "0=off;1=on;2=vent;3=heat;4=cool"
		case site.Switch:
			values = "0=off;1=on"
			if p.Quantity == site.Window {
				values = "0=shut;1=open"
			}
		}
		if p.Hold > 0 {
			hold = p.Hold.String()
		}
		if !math.IsNaN(p.Share) {
			share = strconv.FormatFloat(p.Share, 'g', -1, 64)
		}
		rows = append(rows, []string{log.Name, l.Tag, p.BelongsTo, string(p.Quantity), unit, string(p.Logging), string(p.Stamp), hold, "", values,
			string(p.Placement), share, p.Note})
	}
	return out.WriteAll(rows)
}
