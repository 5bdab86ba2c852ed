// Command quarters reads a site's logs as an audit does, on a grid of 15
// minutes, and writes what the peers of bench/peers write: one row per zone and
// quarter of an hour with its means and coverage. So the speed of reading is
// compared over the same work, and the means with those of other engines.
//
//	quarters SITE.yaml OUT.csv
package main

import (
	"bufio"
	"context"
	"fmt"
	"math"
	"os"
	"runtime/debug"
	"strconv"
	"time"

	"sashlog/configs"
	"sashlog/configs/site"
	"sashlog/ingest"
	"sashlog/ingest/grid"
)

func main() {
	if len(os.Args) != 3 {
		fmt.Fprintln(os.Stderr, "usage: quarters SITE.yaml OUT.csv")
		os.Exit(2)
	}
	// As the audit does.
	debug.SetGCPercent(10)
	if err := run(os.Args[1], os.Args[2]); err != nil {
		fmt.Fprintln(os.Stderr, "quarters:", err)
		os.Exit(1)
	}
}

func run(siteFile, out string) error {
	loaded, err := configs.Load(siteFile, os.Getenv)
	if err != nil {
		return err
	}
	s := loaded.Site
	step := s.StepS
	g, _, err := ingest.Read(context.Background(), s, ingest.Options{})
	if err != nil {
		return err
	}
	f, err := os.Create(out)
	if err != nil {
		return err
	}
	defer f.Close()
	w := bufio.NewWriterSize(f, 1<<20)
	if step == 900 {
		writeZones(w, s, g)
	}
	if err := w.Flush(); err != nil {
		return err
	}
	return f.Close()
}

func writeZones(w *bufio.Writer, s *site.Site, g *grid.Grid) {
	of := map[string]map[site.Quantity]int{}
	for i := range s.Points {
		p := &s.Points[i]
		if of[p.BelongsTo] == nil {
			of[p.BelongsTo] = map[site.Quantity]int{}
		}
		of[p.BelongsTo][p.Quantity] = i
	}
	unitOf := map[string]string{}
	for _, u := range s.Plant {
		for _, z := range u.Serves {
			unitOf[z] = u.ID
		}
	}
	w.WriteString("zone,bin,t,rh,co2,win,ahu,cov\n")
	inner := []site.Quantity{site.AirTemp, site.Humidity, site.CO2, site.Window}
	for _, z := range s.Zones {
		points := of[z.ID]
		list := make([]int, 0, 5)
		for _, q := range inner {
			list = append(list, points[q])
		}
		list = append(list, of[unitOf[z.ID]][site.PlantStatus])
		writeRows(w, g, z.ID, list, 4)
	}
	writeRows(w, g, "OUT", []int{of["site"][site.OutdoorTemp], of["site"][site.OutdoorHumidity]}, 2)
}

// writeRows writes one zone; the first ofCoverage points count for cov.
func writeRows(w *bufio.Writer, g *grid.Grid, zone string, points []int, ofCoverage int) {
	var b []byte
	for i := g.PeriodFrom; i < g.PeriodTo; i++ {
		b = append(append(b[:0], zone...), ',')
		b = time.Unix(g.StartUTC+int64(i)*g.StepS, 0).UTC().AppendFormat(b, "2006-01-02 15:04:05")
		var covered int
		for k := range 5 {
			b = append(b, ',')
			if k >= len(points) {
				continue
			}
			c := &g.Columns[points[k]]
			if c.Mean == nil || c.CoveredS[i] == 0 {
				continue
			}
			if k < ofCoverage {
				covered += int(c.CoveredS[i])
			}
			v := float64(c.Mean[i])
			if k == 4 && v > 0 { // a status: any running
				v = 1
			}
			if !math.IsNaN(v) {
				b = strconv.AppendFloat(b, v, 'g', 8, 64)
			}
		}
		b = append(b, ',')
		b = strconv.AppendFloat(b, float64(covered)/float64(ofCoverage)/float64(g.StepS), 'g', 6, 64)
		w.Write(append(b, '\n'))
	}
}
