package compare

import (
	"math"

	"gonum.org/v1/gonum/mat"
)

// bin is the class of like weather of a day.
func (d *day) bin() int { return int(math.Floor(d.tempC / BinK)) }

// matched marks the days that have enough counterparts.
func matched(days []day) (m Matched) {
	counts := map[int][2]int{}
	for i := range days {
		c := counts[days[i].bin()]
		k := 0
		if days[i].after {
			k = 1
		}
		c[k]++
		counts[days[i].bin()] = c
	}
	var used [2]int
	for i := range days {
		d := &days[i]
		if d.after {
			m.AfterDays++
			m.AfterMeanC += d.tempC
		} else {
			m.BeforeDays++
			m.BeforeMeanC += d.tempC
		}
		c := counts[d.bin()]
		if d.alike = c[0] >= LeastInBin && c[1] >= LeastInBin; d.alike {
			if d.after {
				used[1]++
			} else {
				used[0]++
			}
		}
	}
	m.BeforeMeanC /= float64(m.BeforeDays)
	m.AfterMeanC /= float64(m.AfterDays)
	m.BeforeShare, m.AfterShare = float64(used[0])/float64(m.BeforeDays), float64(used[1])/float64(m.AfterDays)
	return m
}

// weigh compares days of like weather: the ratio of the later days and that of
// the earlier ones weighted to the later ones' classes.
func weigh(days []*day, g int, m Measure) (before, after float64) {
	type cell struct {
		sum [2]ratio
		n   [2]float64
	}
	// Called for every resample: no map. Classes of 2 K from -64 to 64 °C.
	const classes = 64
	var cells [classes]cell
	for _, d := range days {
		b := d.bin() + classes/2
		if !d.alike || b < 0 || b >= classes {
			continue
		}
		c := &cells[b]
		k := 0
		if d.after {
			k = 1
		}
		c.n[k]++
		c.sum[k].part += d.of[g][m].part
		c.sum[k].whole += d.of[g][m].whole
	}
	var was, is ratio
	for b := range cells {
		c := &cells[b]
		if c.n[0] == 0 || c.n[1] == 0 {
			continue // a resample may leave a class empty
		}
		w := c.n[1] / c.n[0]
		was.part += w * c.sum[0].part
		was.whole += w * c.sum[0].whole
		is.part += c.sum[1].part
		is.whole += c.sum[1].whole
	}
	return was.part / was.whole, is.part / is.whole
}

// plain is the ratio of all days of one period.
func plain(days []*day, after bool, g int, m Measure) float64 {
	var r ratio
	for _, d := range days {
		if d.after == after {
			r.part += d.of[g][m].part
			r.whole += d.of[g][m].whole
		}
	}
	return r.part / r.whole
}

// regress is the second opinion: daily shares on outdoor temperature, its
// square, suited hours and the period, weighted by the hours behind each. NaN
// when it cannot be told.
func regress(days []*day, g int, m Measure) float64 {
	const terms = 5
	var rows []float64
	var y []float64
	for _, d := range days {
		r := d.of[g][m]
		if !(r.whole > 0) {
			continue
		}
		w := math.Sqrt(r.whole)
		after := 0.0
		if d.after {
			after = 1
		}
		t := (d.tempC - 18) / 5
		rows = append(rows, w, w*t, w*t*t, w*d.suitedH/100, w*after)
		y = append(y, w*r.part/r.whole)
	}
	if len(y) < 3*terms {
		return math.NaN()
	}
	var qr mat.QR
	qr.Factorize(mat.NewDense(len(y), terms, rows))
	if qr.Cond() > 1e8 {
		return math.NaN()
	}
	var b mat.VecDense
	if err := qr.SolveVecTo(&b, false, mat.NewVecDense(len(y), y)); err != nil {
		return math.NaN()
	}
	return b.AtVec(terms - 1)
}
