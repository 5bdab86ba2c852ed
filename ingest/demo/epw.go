package demo

import (
	"bufio"
	"fmt"
	"math"
	"strconv"
	"time"

	"sashlog/internal/physics/air"
)

// typicalSeed separates the typical year's weather from the measured year's.
const typicalSeed = 0x7469706963616c

// writeTypicalYear writes a year of the same invented climate, another draw,
// as an EPW file: hours 1 to 24 in local standard time, missing fields with
// the format's own markers.
func (b *building) writeTypicalYear(dir string) error {
	const year = 2023 // no leap year
	start := time.Date(year, 1, 1, 0, 0, 0, 0, time.UTC).Unix() - 3600
	w := makeWeather(b.options.Seed^typicalSeed, start, 8760*12)
	return writeFile(dir, "typical.epw", func(out *bufio.Writer) error {
		fmt.Fprintf(out, "LOCATION,Quenmarsh (invented),-,-,invented climate,000000,%.2f,%.2f,1.0,%.1f\r\n", latitudeDeg, longitudeDeg, elevationM)
		out.WriteString("DESIGN CONDITIONS,0\r\nTYPICAL/EXTREME PERIODS,0\r\nGROUND TEMPERATURES,0\r\nHOLIDAYS/DAYLIGHT SAVINGS,No,0,0,0\r\n")
		out.WriteString("COMMENTS 1,A year of an invented climate written by sashlog demo; not measured anywhere\r\nCOMMENTS 2,\r\n")
		out.WriteString("DATA PERIODS,1,1,Data,Sunday,1/1,12/31\r\n")
		var buf []byte
		for h := range 8760 {
			at := time.Unix(start+3600+int64(h)*3600, 0).UTC()
			mean := func(x []float32) float64 {
				sum := 0.0
				for _, v := range x[h*12 : h*12+12] {
					sum += float64(v)
				}
				return sum / 12
			}
			temp, dew := mean(w.tempC), mean(w.dewC)
			var east, north float64
			for _, d := range w.windDeg[h*12 : h*12+12] {
				s, c := math.Sincos(float64(d) * math.Pi / 180)
				east, north = east+s, north+c
			}
			dirDeg := math.Mod(math.Atan2(east, north)*180/math.Pi+360, 360)
			global, diffuse := mean(w.globalWm2), mean(w.diffuseWm2)
			rh := air.RelHumidityPct(temp, dew)
			buf = buf[:0]
			num := func(x float64, digits int) { buf = appendFixed(append(buf, ','), x, digits, '.') }
			word := func(s string) { buf = append(append(buf, ','), s...) }
			buf = strconv.AppendInt(buf, year, 10)
			for _, v := range [...]int{int(at.Month()), at.Day(), at.Hour() + 1, 0} {
				num(float64(v), 0)
			}
			word("?9?9?9?9E0?9?9?9?9?9?9?9?9?9?9?9?9?9?9?9*9*9?9?9?9")
			num(temp, 1)
			num(dew, 1)
			num(rh, 0)
			num(w.pressurePa, 0)
			word("9999") // extraterrestrial, twice
			word("9999")
			word("9999") // infrared
			num(global, 0)
			word("9999") // direct normal
			num(diffuse, 0)
			for _, s := range [...]string{"999999", "999999", "999999", "9999"} { // illuminances
				word(s)
			}
			num(dirDeg, 0)
			num(mean(w.windMS), 1)
			cover := math.Round(10 * mean(w.cloud))
			num(cover, 0)
			num(cover, 0)
			word("9999") // visibility
			word("99999")
			word("9")
			word("999999999")
			word("999")
			word(".999")
			word("999")
			word("99")
			word("999")
			num(mean(w.rainMMh), 1)
			word("1")
			if _, err := out.Write(append(buf, '\r', '\n')); err != nil {
				return fmt.Errorf("demo: write the typical year: %w", err)
			}
		}
		return nil
	})
}
