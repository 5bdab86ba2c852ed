package page

import (
	"cmp"
	"math"
	"slices"

	"sashlog/analyze/comfort"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/hours"
	"sashlog/report/chart"
)

// fieldC is how wide a field of temperatures is, K.
const fieldC = 0.5

// againstRunningMean shows the hours in which the adaptive model applied, with
// its limits.
func (b *builder) againstRunningMean() block {
	r := b.in.Results.Hours
	type field struct{ x, y int }
	sum := map[field]float64{}
	n := len(r.Hours)
	for z := range r.ZoneIDs {
		w := b.in.Results.Summary.Weights[z]
		if !(w > 0) {
			continue
		}
		for h := range n {
			i := r.Row(z, h)
			mean, temp := float64(r.Values[hours.VRunningMeanENC][i]), float64(r.Values[hours.VTempC][i])
			occupied := float64(r.Seconds[hours.COccupied][i]) / 3600
			if occupied == 0 || math.IsNaN(mean) || math.IsNaN(temp) || exceedance.Model(r.ComfortModel[i]) != exceedance.ENAdaptive {
				continue
			}
			sum[field{int(math.Floor(mean / fieldC)), int(math.Floor(temp / fieldC))}] += occupied * w * b.span.PerYear
		}
	}
	d := chart.RunningMeanData{Caption: chart.Caption{Title: "Indoor temperature against the running mean of the outdoor temperature", Desc: "Fields are darker the more hours fell into them; lines are the limits of the adaptive model."}, StepC: fieldC}
	for f, h := range sum {
		d.Hours = append(d.Hours, chart.RunningMeanField{MeanC: float64(f.x) * fieldC, IndoorC: float64(f.y) * fieldC, Hours: h})
	}
	slices.SortFunc(d.Hours, func(a, b chart.RunningMeanField) int {
		return cmp.Or(cmp.Compare(a.MeanC, b.MeanC), cmp.Compare(a.IndoorC, b.IndoorC))
	})
	for _, name := range []string{"I", "II", "III"} {
		category, ok := comfort.ParseCategory(name)
		if !ok {
			continue
		}
		band := chart.RunningMeanBand{Name: "category " + name, Highlights: name == b.in.Criteria.Category}
		// The model holds between the two.
		for _, x := range []float64{10.01, 15, 20, 25, 29.99} {
			limits := comfort.EN16798Adaptive(x, category)
			band.Low, band.High = append(band.Low, chart.XY{X: x, Y: limits.LowC}), append(band.High, chart.XY{X: x, Y: limits.HighC})
		}
		d.Bands = append(d.Bands, band)
	}
	return b.draw("running-mean", "Hours of the average occupant "+b.span.Words+" without plant running, by indoor temperature and the running mean of the outdoor temperature, with the limits of EN 16798-1. Dark fields above the upper line are overheating, below the lower line cold rooms.",
		"No occupied hour was judged by the adaptive model, so its limits are not drawn.",
		func(o chart.Options) (chart.SVG, error) { return chart.RunningMean(d, o) })
}
