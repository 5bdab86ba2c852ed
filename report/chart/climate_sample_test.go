package chart

import "math"

func sampleWays() HoursByWayData {
	nan := math.NaN()
	return HoursByWayData{Caption: cap1("Suitable hours by way of counting"), XTitle: "suitable hours per year of the average occupant (h)", Second: "typical year", Ways: []WayHours{
		{"headline", Bounded{951, 951, 990}, 1030}, {"published band", Bounded{1140, 1140, 1140}, 1212}, {"plain band, any humidity", Bounded{706, 706, 800}, 783},
		{"adaptive EN 16798-1", Bounded{367, 300, 420}, nan}, {"heat balance and night cooling", Bounded{2229, nan, nan}, 2245}, {"unknown", Bounded{nan, nan, nan}, nan},
	}}
}

func sampleAdded(n int) AddedHoursData {
	d := AddedHoursData{Caption: cap1("Hours that air movement would add"), XTitle: "suitable hours added per year (h)", Steps: []string{"0.3 m/s", "0.6 m/s", "0.9 m/s", "1.2 m/s"}}
	for i := range n {
		z := ZoneAdded{Zone: zoneName(i), Added: []float64{0, 30 + float64(i%7), 12, float64(i % 3)}}
		if i%4 == 1 {
			z.Note = "fan 0.9 m/s"
		}
		d.Zones = append(d.Zones, z)
	}
	return d
}

func sampleRates() GroupRatesData {
	nan := math.NaN()
	d := GroupRatesData{Caption: cap1("Air change by wind sector"), XTitle: "air change, times what is usual in the zone", Usual: 1, UsualLabel: "usual in the zone", Counted: "rates"}
	for s, name := range []string{"N", "NE", "E", "SE", "S", "SW", "W", "NW"} {
		v := 1 + 0.4*math.Cos(float64(s-5)/8*2*math.Pi)
		g := GroupRate{name, Bounded{v, v * 0.8, v * 1.3}, 3 + s}
		if s%5 == 1 {
			g.Rate, g.Count = Bounded{nan, nan, nan}, s%3
		}
		d.Groups = append(d.Groups, g)
	}
	return d
}

func sampleRoses(n int) WindRosesData {
	one := sampleRose()
	d := WindRosesData{Caption: cap1("Wind roses"), Bands: one.Bands, FacesDeg: []float64{0, 180, 270}}
	for i, name := range []string{"all hours", "occupied and suited", "breeze wanted"}[:n] {
		r := NamedRose{Name: name, Note: "8,760 h, mean 2.2 m/s", CalmShare: 7.3 * float64(i)}
		for s := range one.Sectors {
			r.Sectors = append(r.Sectors, one.Sectors[(s+3*i)%16])
		}
		d.Roses = append(d.Roses, r)
	}
	return d
}

func sampleFields() ComfortFieldsData {
	d := ComfortFieldsData{Caption: cap1("Comfort by outdoor air"), Columns: []string{"below 12.8 °C", "12.8 to 26 °C", "above 26 °C"}, Rows: []string{"dew point to 17 °C", "above 17 °C", "humidity not known"}}
	for k := range d.Rows {
		var row []FieldHours
		for c := range d.Columns {
			h := float64((k*7 + c*5) % 9)
			row = append(row, FieldHours{h * 3, h * 90, h * 10, h * 4})
		}
		d.Hours = append(d.Hours, row)
	}
	return d
}
