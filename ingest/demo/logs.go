package demo

import (
	"bufio"
	"compress/gzip"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"
	"strconv"
)

// writeFile creates dir/name, gzipped if the name says so, and lets fill write
// it through a buffer.
func writeFile(dir, name string, fill func(w *bufio.Writer) error) (err error) {
	f, err := os.Create(filepath.Join(dir, filepath.FromSlash(name)))
	if err != nil {
		return fmt.Errorf("demo: write %s: %w", name, err)
	}
	defer func() {
		if e := f.Close(); err == nil && e != nil {
			err = fmt.Errorf("demo: write %s: %w", name, e)
		}
	}()
	var out io.Writer = f
	var zw *gzip.Writer
	if filepath.Ext(name) == ".gz" {
		zw, _ = gzip.NewWriterLevel(f, gzip.BestSpeed)
		out = zw
	}
	w := bufio.NewWriterSize(out, 1<<18)
	if err := fill(w); err != nil {
		return err
	}
	if err := w.Flush(); err != nil {
		return fmt.Errorf("demo: write %s: %w", name, err)
	}
	if zw != nil {
		return zw.Close()
	}
	return nil
}

// floorColumn is one column of a floor's trend export.
type floorColumn struct {
	zone     int
	kind     byte // t, h, c, p, r (return duct)
	sensor   sensor
	held     float64 // frozen value
	isHeld   bool
	ductC    float64
	digits   int
	name     string
	quantity string
	unit     string
}

// floorColumns lists the columns of a floor in file order.
func (b *building) floorColumns(floor int) []floorColumn {
	var out []floorColumn
	for i := range b.zones {
		z := &b.zones[i]
		if z.floor != floor || z.id == ownLoggerZone {
			continue
		}
		room := "F" + z.id[1:2] + "_R" + z.id[3:]
		temp := floorColumn{i, 't', b.sensor(z.id+"/t", 0.06, 0.05, 0.1), 0, false, 22, 1, room + "_TMP [°C]", "air_temp", "degC"}
		if z.id == returnDuctZone && b.options.Faults {
			temp.kind, temp.name = 'r', room+"_RTN_TMP [°C]"
		}
		out = append(out, temp,
			floorColumn{i, 'h', b.sensor(z.id+"/h", 0.8, 0.4, 1), 0, false, 0, 0, room + "_RH [%]", "humidity", "%"},
			floorColumn{i, 'c', b.sensor(z.id+"/c", 8, 6, 1), 0, false, 0, 0, room + "_CO2 [ppm]", "co2", "ppm"})
		if z.id == counterZone {
			out = append(out, floorColumn{i, 'p', sensor{}, 0, false, 0, 0, room + "_PERS", "people", ""})
		}
	}
	return out
}

// Zones with something special in the logs.
const (
	ownLoggerZone  = "L2.06"
	returnDuctZone = "L3.02"
	counterZone    = "L2.01"
)

// value is what a column shows for step i at instant t.
func (b *building) value(c *floorColumn, i int, t int64) float64 {
	z := &b.truth.Zones[c.zone]
	switch c.kind {
	case 'h':
		return math.Min(100, c.sensor.read(float64(z.RHPct[i])))
	case 'p':
		return float64(z.People[i])
	case 'c':
		x := c.sensor.read(float64(z.CO2PPM[i]))
		if f := b.faultAt(FaultCO2Drift, z.ID, t); f != nil {
			x = math.Round(x + 1.0*float64(t-f.FromUTC)/86400)
		}
		return x
	case 'r':
		// With the fan on the duct carries room air; with the fan off it drifts
		// towards the void above the ceiling.
		room, void := float64(z.AirC[i])+0.3, 0.55*float64(z.AirC[i])+0.45*26
		if z.Plant[i] != codeOff {
			c.ductC += (room - c.ductC) * 0.8
		} else {
			c.ductC += (void - c.ductC) * 0.12
		}
		return c.sensor.read(c.ductC)
	}
	x := c.sensor.read(z.wallSensorC(i))
	if b.faultAt(FaultFahrenheit, z.ID, t) != nil {
		return math.Round(10*(x*1.8+32)) / 10
	}
	if b.faultAt(FaultFrozen, z.ID, t) != nil {
		if !c.isHeld {
			c.held, c.isHeld = x, true
		}
		return c.held
	}
	c.isHeld = false
	return x
}

// writeFloors writes one wide export per floor: semicolons, decimal comma, day
// first, the site's wall clock. The first floor's has date and time apart, the
// top floor's is compressed. Each row is stamped with the start of its five
// minutes.
func (b *building) writeFloors(dir string) error {
	for floor := 1; floor <= 3; floor++ {
		cols := b.floorColumns(floor)
		if len(cols) == 0 {
			continue
		}
		err := writeFile(dir, floorFile(floor), func(w *bufio.Writer) error { return b.writeFloor(w, floor, cols) })
		if err != nil {
			return err
		}
	}
	return nil
}

func floorFile(floor int) string {
	name := "logs/floor" + strconv.Itoa(floor) + ".csv"
	if floor == 3 {
		name += ".gz"
	}
	return name
}

func (b *building) writeFloor(w *bufio.Writer, floor int, cols []floorColumn) error {
	split := floor == 2
	head := "Timestamp"
	if split {
		head = "Date;Time"
	}
	w.WriteString(head)
	for i := range cols {
		w.WriteString(";" + cols[i].name)
	}
	w.WriteString("\r\n")
	missing := stream(b.options.Seed, "missing/"+strconv.Itoa(floor))
	clock := zoneClock{loc: b.loc}
	var date civil
	buf := make([]byte, 0, 512)
	for i := range b.truth.N {
		t := b.truth.StartUTC + int64(i)*stepS
		local := t + clock.offset(t)
		gap := floor == 1 && b.anyMissing(t)
		date.at(local)
		buf = append(buf[:0], date.dmy[:]...)
		if split {
			buf = append(buf, ';')
		} else {
			buf = append(buf, ' ')
		}
		buf = appendClock(buf, local, false)
		for k := range cols {
			x := b.value(&cols[k], i, t)
			buf = append(buf, ';')
			if missing.Uint32()>>16 < 20 { // about 0.03 %: a reading lost on the bus
				buf = append(buf, "---"...)
				continue
			}
			buf = appendFixed(buf, x, cols[k].digits, ',')
		}
		if gap {
			continue
		}
		if _, err := w.Write(append(buf, '\r', '\n')); err != nil {
			return fmt.Errorf("demo: write floor %d: %w", floor, err)
		}
	}
	return nil
}

func (b *building) anyMissing(t int64) bool {
	for i := range b.truth.Faults {
		f := &b.truth.Faults[i]
		if f.Kind == FaultMissing && t >= f.FromUTC && t < f.ToUTC {
			return true
		}
	}
	return false
}

// writeOwnLogger writes the small office's own logger: its own file, commas,
// instants; an hour ahead for a month. It was stopped for 70 minutes when its
// clock was put right.
func (b *building) writeOwnLogger(dir string) error {
	k := -1
	for i := range b.zones {
		if b.zones[i].id == ownLoggerZone {
			k = i
		}
	}
	if k < 0 {
		return nil
	}
	z := &b.truth.Zones[k]
	ts, hs, cs := b.sensor(z.ID+"/t", 0.06, 0.05, 0.1), b.sensor(z.ID+"/h", 0.8, 0.4, 1), b.sensor(z.ID+"/c", 8, 6, 1)
	return writeFile(dir, "logs/logger206.csv", func(w *bufio.Writer) error {
		w.WriteString("datetime,temperature,humidity,co2\n")
		clock := zoneClock{loc: b.loc}
		var date civil
		var buf []byte
		for i := range b.truth.N {
			t := b.truth.StartUTC + int64(i)*stepS
			j := max(0, i-1) // an instant lies between two step means
			mid := func(x []float32) float64 { return float64(x[i]+x[j]) / 2 }
			temp := ts.read((z.wallSensorC(i) + z.wallSensorC(j)) / 2)
			rh, co2 := math.Min(100, hs.read(mid(z.RHPct))), cs.read(mid(z.CO2PPM))
			local := t + clock.offset(t)
			if f := b.faultAt(FaultClock, z.ID, t); f != nil {
				if t >= f.ToUTC-70*60 && f.ToUTC < b.truth.StartUTC+int64(b.truth.N)*stepS {
					continue
				}
				local += 3600
			}
			buf = date.appendYMD(buf[:0], local, ' ')
			buf = appendFixed(append(buf, ','), temp, 1, '.')
			buf = appendFixed(append(buf, ','), rh, 0, '.')
			buf = appendFixed(append(buf, ','), co2, 0, '.')
			if _, err := w.Write(append(buf, '\n')); err != nil {
				return fmt.Errorf("demo: write the own logger: %w", err)
			}
		}
		return nil
	})
}

// writeWeather writes the roof station: UTC, means stamped with the end of
// their five minutes, from the lead-in on.
func (b *building) writeWeather(dir string) error {
	temp, rh := b.sensor("out/t", 0.05, 0.04, 0.1), b.sensor("out/h", 0.6, 0.4, 1)
	wind, sun := b.sensor("out/w", 0.02, 0.05, 0.1), b.sensor("out/g", 1, 2, 1)
	return writeFile(dir, "logs/weather.csv", func(w *bufio.Writer) error {
		w.WriteString("time_utc,temp_c,rh_pct,wind_ms,wind_dir_deg,rain_mm_h,global_wm2\n")
		var date civil
		var buf []byte
		m := b.weather
		for i := range m.n {
			t := m.start + int64(i+1)*stepS
			buf = date.appendYMD(buf[:0], t, 'T')
			buf = append(buf, 'Z')
			buf = appendFixed(append(buf, ','), temp.read(float64(m.tempC[i])), 1, '.')
			buf = appendFixed(append(buf, ','), clamp(rh.read(float64(m.rhPct[i])), 1, 100), 0, '.')
			buf = appendFixed(append(buf, ','), math.Max(0, wind.read(float64(m.windMS[i]))), 1, '.')
			buf = appendFixed(append(buf, ','), math.Mod(float64(m.windDeg[i]), 359.5), 0, '.')
			rain := float64(m.rainMMh[i])
			if rain > 0 {
				rain = math.Max(0.1, rain)
			}
			buf = appendFixed(append(buf, ','), rain, 1, '.')
			global := 0.0
			if m.globalWm2[i] > 0 {
				global = math.Max(0, sun.read(float64(m.globalWm2[i])))
			}
			buf = appendFixed(append(buf, ','), global, 0, '.')
			if _, err := w.Write(append(buf, '\n')); err != nil {
				return fmt.Errorf("demo: write the weather: %w", err)
			}
		}
		return nil
	})
}

// writePlantTemps writes supply air temperatures every ten minutes, on a clock
// that stays at one hour east of UTC all year.
func (b *building) writePlantTemps(dir string) error {
	return writeFile(dir, "logs/plant_temps.csv", func(w *bufio.Writer) error {
		w.WriteString("Time")
		sensors := make([]sensor, len(b.units))
		for k, u := range b.units {
			sensors[k] = b.sensor("plant/"+u.spec.id, 0.1, 0.08, 0.1)
			w.WriteString("\t" + u.spec.id + " SUP")
		}
		w.WriteString("\n")
		var date civil
		var buf []byte
		for i := 0; i < b.truth.N; i += 2 {
			t := b.truth.StartUTC + int64(i)*stepS
			buf = date.appendYMD(buf[:0], t+3600, ' ')
			for k := range b.units {
				buf = appendFixed(append(buf, '\t'), sensors[k].read(float64(b.truth.Plants[k].SupplyC[i])), 1, '.')
			}
			if _, err := w.Write(append(buf, '\n')); err != nil {
				return fmt.Errorf("demo: write plant temperatures: %w", err)
			}
		}
		return nil
	})
}
