// Command logs writes the invented, deterministic log exports that the speed of
// reading is measured on, and a site file for each:
//
//	w12.csv  wide, a row per minute, 12 months    w1.csv  the July rows of it
//	l12.csv  long, change of value, sorted by time, 12 months
package main

import (
	"bufio"
	"flag"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"sort"
	"strconv"
	"time"
)

type rng uint64

func (r *rng) next() uint64 {
	x := uint64(*r)
	x ^= x << 13
	x ^= x >> 7
	x ^= x << 17
	*r = rng(x)
	return x * 0x2545F4914F6CDD1D
}
func (r *rng) f() float64 { return float64(r.next()>>11) / (1 << 53) }

// roughly normal, unit variance, one draw
func (r *rng) n() float64 {
	x := r.next()
	s := float64(x&0xffff) + float64((x>>16)&0xffff) + float64((x>>32)&0xffff) + float64(x>>48)
	return (s/65536 - 2) * 1.7320508
}

const (
	zoneCount = 60
	unitCount = 8
)
const (
	kT = iota
	kRH
	kCO2
	kState
	kWS
	kWD
)

type point struct {
	wname, lname string
	kind         int
	dec          int
	dead         float64
	maxgap       int // minutes
	last         float64
	lastMin      int
	offUntil     int
	on, off      string
}

func app(b []byte, v float64, dec int) []byte {
	neg := v < 0
	if neg {
		v = -v
	}
	m := 1.0
	for i := 0; i < dec; i++ {
		m *= 10
	}
	u := uint64(v*m + 0.5)
	if neg && u != 0 {
		b = append(b, '-')
	}
	im := uint64(m)
	b = strconv.AppendUint(b, u/im, 10)
	if dec > 0 {
		f := u % im
		b = append(b, '.')
		if dec == 2 {
			b = append(b, byte('0'+f/10))
		}
		b = append(b, byte('0'+f%10))
	}
	return b
}

func check(err error) {
	if err != nil {
		fmt.Fprintln(os.Stderr, "logs:", err)
		os.Exit(1)
	}
}

func main() {
	out := flag.String("out", ".", "folder to write to")
	seed := flag.Uint64("seed", 20250101, "seed")
	days := flag.Int("days", 365, "days from 1 January")
	flag.Parse()
	r := rng(*seed*0x9E3779B97F4A7C15 | 1)
	mk := func(n string) (*os.File, *bufio.Writer) {
		f, err := os.Create(filepath.Join(*out, n))
		check(err)
		return f, bufio.NewWriterSize(f, 1<<20)
	}
	fw, w12 := mk("w12.csv")
	f1, w1 := mk("w1.csv")
	fl, l12 := mk("l12.csv")
	var ps []*point
	for z := 1; z <= zoneCount; z++ {
		id := fmt.Sprintf("Z%02d", z)
		ps = append(ps,
			&point{wname: id + "_T", lname: "BLD1." + id + ".T", kind: kT, dec: 2, dead: 0.066, maxgap: 15},
			&point{wname: id + "_RH", lname: "BLD1." + id + ".RH", kind: kRH, dec: 1, dead: 0.40, maxgap: 15},
			&point{wname: id + "_CO2", lname: "BLD1." + id + ".CO2", kind: kCO2, dec: 0, dead: 6.5, maxgap: 15},
			&point{wname: id + "_WIN", lname: "BLD1." + id + ".WIN", kind: kState, on: "Open", off: "Closed", maxgap: 1440})
	}
	for a := 1; a <= unitCount; a++ {
		ps = append(ps, &point{wname: fmt.Sprintf("AHU%d", a), lname: fmt.Sprintf("BLD1.AHU%d.S", a), kind: kState, on: "On", off: "Off", maxgap: 1440})
	}
	ps = append(ps,
		&point{wname: "OUT_T", lname: "BLD1.OUT.T", kind: kT, dec: 2, dead: 0.05, maxgap: 15},
		&point{wname: "OUT_RH", lname: "BLD1.OUT.RH", kind: kRH, dec: 1, dead: 0.5, maxgap: 15},
		&point{wname: "OUT_WS", lname: "BLD1.OUT.WS", kind: kWS, dec: 1, dead: 0.3, maxgap: 15},
		&point{wname: "OUT_WD", lname: "BLD1.OUT.WD", kind: kWD, dec: 0, dead: 10, maxgap: 15})
	hdr := "timestamp"
	for _, p := range ps {
		hdr += "," + p.wname
		p.lastMin = -1 << 30
	}
	hdr += "\n"
	w12.WriteString(hdr)
	w1.WriteString(hdr)
	l12.WriteString("timestamp,point_id,value\n")

	vals := make([]float64, len(ps))
	var zt, zrh, zco [zoneCount]float64
	var win [zoneCount]bool
	var ahu [unitCount]bool
	for z := range zt {
		zt[z], zrh[z], zco[z] = 21, 40, 450
	}
	oar, ws, wd := 0.0, 3.0, 220.0
	start := time.Date(2025, 1, 1, 0, 0, 0, 0, time.UTC)
	type ev struct {
		sec, p int
		miss   bool
	}
	evs := make([]ev, 0, 256)
	b := make([]byte, 0, 4096)
	var nl, nw int
	for m := 0; m < *days*1440; m++ {
		t := start.Add(time.Duration(m) * time.Minute)
		doy := float64(m) / 1440
		hod := float64(m%1440) / 60
		wk := t.Weekday() >= 1 && t.Weekday() <= 5
		occ := wk && hod >= 8 && hod < 18
		oar = oar*0.9995 + 0.12*r.n()
		ot := 11 - 10*math.Cos(2*math.Pi*(doy-20)/365) - 4.5*math.Cos(2*math.Pi*(hod-3)/24) + oar
		orh := 72 - 1.6*(ot-11) + 1.5*r.n()
		if orh > 99 {
			orh = 99
		}
		if orh < 20 {
			orh = 20
		}
		ws = math.Abs(ws + 0.02*(3-ws) + 0.15*r.n())
		wd += 3 * r.n()
		if wd < 0 {
			wd += 360
		}
		if wd >= 359.5 {
			wd -= 359.5
		}
		for a := range ahu {
			if m%5 == 0 {
				want := wk && hod >= 7 && hod < 19 && !(ot > 15 && ot < 26)
				if want != ahu[a] && r.f() < 0.3 {
					ahu[a] = want
				} else if r.f() < 0.002 {
					ahu[a] = !ahu[a]
				}
			}
		}
		for z := range zt {
			if (m+z)%7 == 0 {
				if win[z] {
					if !occ || ot < 12 || r.f() < 0.04 {
						win[z] = r.f() < 0.5
					}
				} else if occ && ot > 15 && r.f() < 0.08 {
					win[z] = true
				}
			}
			tgt := 21.5 + 0.22*(ot-12)
			if occ {
				tgt += 1.5
			}
			k := 0.004
			ctgt, ck := 430.0, 0.01
			if occ {
				ctgt = 900 + 12*float64(z)
			}
			if win[z] {
				k, tgt = 0.02, 0.6*ot+0.4*tgt
				ctgt, ck = ctgt*0.3+300, 0.06
			} else if ahu[z%unitCount] {
				ctgt, ck = ctgt*0.6+150, 0.03
			}
			zt[z] += k*(tgt-zt[z]) + 0.012*r.n()
			zrh[z] += 0.01*(30+0.35*(orh-40)+0.5*(ot-10)-zrh[z]) + 0.06*r.n()
			zco[z] += ck*(ctgt-zco[z]) + 1.2*r.n()
			i := z * 4
			vals[i] = zt[z] + 0.045*r.n()
			vals[i+1] = zrh[z] + 0.28*r.n()
			vals[i+2] = zco[z] + 4.5*r.n()
			vals[i+3] = 0
			if win[z] {
				vals[i+3] = 1
			}
		}
		for a := range ahu {
			vals[zoneCount*4+a] = 0
			if ahu[a] {
				vals[zoneCount*4+a] = 1
			}
		}
		i := zoneCount*4 + unitCount
		vals[i], vals[i+1], vals[i+2], vals[i+3] = ot, orh, ws, wd

		b = t.AppendFormat(b[:0], "2006-01-02 15:04:05")
		evs = evs[:0]
		for i, p := range ps {
			b = append(b, ',')
			x := r.next()
			if x&0x3fffff < 22 { // offline burst, 2-8 h
				p.offUntil = m + 120 + int(x>>40)%360
			}
			off := m < p.offUntil
			if !off && (x>>22)&0xffff >= 197 { // 0.3 % single empty cells
				if p.kind == kState {
					if vals[i] > 0 {
						b = append(b, p.on...)
					} else {
						b = append(b, p.off...)
					}
				} else {
					b = app(b, vals[i], p.dec)
				}
			}
			if off {
				continue
			}
			d := math.Abs(vals[i] - p.last)
			if (p.kind == kState && d > 0) || (p.kind != kState && d >= p.dead) || m-p.lastMin >= p.maxgap {
				p.last, p.lastMin = vals[i], m
				evs = append(evs, ev{int((x >> 38) % 60), i, (x>>50)&0x3ff < 2})
			}
		}
		b = append(b, '\n')
		w12.Write(b)
		nw++
		if t.Month() == time.July {
			w1.Write(b)
		}
		sort.Slice(evs, func(i, j int) bool {
			if evs[i].sec != evs[j].sec {
				return evs[i].sec < evs[j].sec
			}
			return evs[i].p < evs[j].p
		})
		b = t.AppendFormat(b[:0], "2006-01-02T15:04:05Z")
		for _, e := range evs {
			p := ps[e.p]
			b = b[:20]
			b[17], b[18] = byte('0'+e.sec/10), byte('0'+e.sec%10)
			b = append(b, ',')
			b = append(b, p.lname...)
			b = append(b, ',')
			if !e.miss {
				if p.kind == kState {
					if vals[e.p] > 0 {
						b = append(b, p.on...)
					} else {
						b = append(b, p.off...)
					}
				} else {
					b = app(b, vals[e.p], p.dec)
				}
			}
			b = append(b, '\n')
			l12.Write(b)
			nl++
		}
	}
	for _, w := range []*bufio.Writer{w12, w1, l12} {
		check(w.Flush())
	}
	for _, f := range []*os.File{fw, f1, fl} {
		check(f.Close())
	}
	check(writeSite(*out, "w12", ps, false))
	check(writeSite(*out, "w1", ps, false))
	check(writeSite(*out, "l12", ps, true))
	fmt.Println("wide rows", nw, "long rows", nl)
}
