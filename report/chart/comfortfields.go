package chart

import (
	"math"
	"strings"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// ComfortFieldsData is hours in fields of temperature and humidity, and how
// comfortable they were.
type ComfortFieldsData struct {
	Caption
	// Columns name the temperature fields from cold to warm, Rows the humidity
	// fields from dry to damp, drawn from the bottom.
	Columns, Rows []string
	// Hours has one row per humidity field, one entry per temperature field.
	Hours [][]FieldHours
}

// FieldHours are the hours of one field, 0 or more.
type FieldHours struct{ TooCool, Comfortable, TooWarm, Unknown float64 }

func (h FieldHours) parts() [4]float64 {
	return [4]float64{h.TooCool, h.Comfortable, h.TooWarm, h.Unknown}
}

func (h FieldHours) sum() (s float64) {
	for _, v := range h.parts() {
		s += known(v)
	}
	return s
}

var fieldClasses = [4]Class{TooCool, AchievedOK, TooWarm, Unknown}

// ComfortFields draws the fields as a table of bars on one scale, each bar
// split by comfort, with its hours written above it.
func ComfortFields(d ComfortFieldsData, o Options) (SVG, error) {
	o.record(d)
	f, err := newFrame("comfort fields", d.Caption, o)
	if err != nil {
		return "", err
	}
	if len(d.Columns) > 5 || len(d.Rows) > 6 || len(d.Hours) != len(d.Rows) {
		return "", f.errorf("%d columns, %d rows, %d rows of hours: at most 5 and 6, and as many hours as rows", len(d.Columns), len(d.Rows), len(d.Hours))
	}
	most := 0.0
	for i, row := range d.Hours {
		if len(row) != len(d.Columns) {
			return "", f.errorf("row %q: %d fields for %d columns", d.Rows[i], len(row), len(d.Columns))
		}
		for _, h := range row {
			for _, v := range h.parts() {
				if outside(v) {
					return "", f.errorf("row %q: %v h: must be 0 to 1e9", d.Rows[i], v)
				}
			}
			most = math.Max(most, h.sum())
		}
	}
	if most == 0 {
		return "", f.noData()
	}
	entries := []legendEntry{{label: "too cool indoors", class: TooCool}, {label: "comfortable", class: AchievedOK}, {label: "too warm indoors", class: TooWarm}, {label: "not known", class: Unknown}}
	_, legendH := layLegend(entries, f.width)
	const rowH, headH = 28, 13
	sty := sans(textSize, inkText)
	left := vg.Length(0)
	for _, name := range d.Rows {
		left = max(left, sty.Width(clean(name)))
	}
	left = min(left, f.width*0.3) + 6
	return f.render(legendH+headH+rowH*vg.Length(len(d.Rows))+2, func(cv *canvas, area draw.Canvas) {
		drawLegend(cv, 0, area.Max.Y, f.width, entries)
		top := area.Max.Y - legendH
		colW := (f.width - left) / vg.Length(max(1, len(d.Columns)))
		for c, name := range d.Columns {
			put(cv, align(sty, -0.5, -1), vg.Point{X: left + colW*(vg.Length(c)+0.5), Y: top}, name, colW-6)
		}
		var bars []bar
		for k, row := range d.Hours {
			y0 := 1 + rowH*vg.Length(k)
			put(cv, align(sty, 0, -0.5), vg.Point{X: 0, Y: y0 + rowH/2}, d.Rows[k], left-6)
			for c, h := range row {
				x := left + colW*vg.Length(c) + 4
				for i, v := range h.parts() {
					w := (colW - 8) * vg.Length(known(v)/most)
					bars = append(bars, bar{class: fieldClasses[i], Rectangle: rect(x, y0+4, x+w, y0+13)})
					x += w
				}
			}
		}
		cv.SetColor(inkGrid)
		cv.SetLineWidth(lineAxis)
		cv.SetLineDash(nil, 0)
		for k := range len(d.Rows) + 1 {
			y := 1 + rowH*vg.Length(k)
			segment(cv, left, y, f.width, y)
		}
		for c := range len(d.Columns) + 1 {
			x := left + colW*vg.Length(c)
			segment(cv, min(x, f.width-0.3), 1, min(x, f.width-0.3), top-headH)
		}
		drawBars(cv, bars)
		for k, row := range d.Hours {
			for c, h := range row {
				if h.sum() > 0 {
					var said []string
					for i, v := range h.parts() {
						if v > 0 {
							said = append(said, entries[i].label+" "+hoursText(v)+" h")
						}
					}
					x, y := left+colW*vg.Length(c), 1+rowH*vg.Length(k)
					cv.say(rect(x, y, x+colW, y+rowH), d.Columns[c]+", "+d.Rows[k]+": "+strings.Join(said, ", "))
					put(cv, align(sans(smallSize, inkFaint), 0, 0), vg.Point{X: left + colW*vg.Length(c) + 4, Y: 1 + rowH*vg.Length(k) + 15}, hoursText(h.sum())+" h", colW-8)
				}
			}
		}
	}), nil
}
