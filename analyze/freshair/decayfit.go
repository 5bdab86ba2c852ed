package freshair

import (
	"errors"
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// Fit is an air change rate fitted to one decay.
type Fit struct {
	AirChangePerH float64
	// LowPerH and HighPerH bound it at 95 % (Student's t with n-2 degrees of
	// freedom). Readings that follow each other closely are not independent,
	// which makes the interval too narrow; LogSE allows for that.
	LowPerH, HighPerH float64
	R2                float64
	N                 int
	// LogSE is the standard error of ln(AirChangePerH), widened for the
	// correlation of residuals that follow each other.
	LogSE float64
}

// errNoDecay says why readings cannot be fitted.
var errNoDecay = errors.New("a decay needs at least 3 readings above the outdoor level at different times")

// FitDecay fits ln(C - Co) = ln(C0 - Co) - A t by least squares (ASTM E741-11,
// ISO 12569:2017, ASTM D6245-18; equation from ASHRAE Fundamentals ch. 16 eq.
// 18). timeH are hours, ppm the readings of an empty room whose openings and
// plant did not change; all must lie above outdoorPPM.
func FitDecay(timeH, ppm []float64, outdoorPPM float64) (Fit, error) {
	n := float64(len(ppm))
	if len(ppm) < 3 || len(timeH) != len(ppm) {
		return Fit{}, errNoDecay
	}
	logs := make([]float64, len(ppm))
	for i, c := range ppm {
		if !(c > outdoorPPM) {
			return Fit{}, errNoDecay
		}
		logs[i] = math.Log(c - outdoorPPM)
	}
	meanT, meanY := mean(timeH), mean(logs)
	var stt, sty, syy float64
	for i := range logs {
		dt, dy := timeH[i]-meanT, logs[i]-meanY
		stt, sty, syy = stt+dt*dt, sty+dt*dy, syy+dy*dy
	}
	if stt == 0 {
		return Fit{}, errNoDecay
	}
	slope := sty / stt
	residual := math.Max(0, syy-slope*sty)
	f := Fit{AirChangePerH: -slope, N: len(ppm), R2: 1}
	if syy > 0 {
		f.R2 = 1 - residual/syy
	}
	residuals := make([]float64, len(logs))
	for i := range logs {
		residuals[i] = logs[i] - meanY - slope*(timeH[i]-meanT)
	}
	se := math.Sqrt(residual / (n - 2) / stt)
	f.LogSE = se * math.Sqrt(n/independent(n, lag1(residuals))) / math.Abs(slope)
	t := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: n - 2}.Quantile(0.975)
	half := t * se
	f.LowPerH, f.HighPerH = f.AirChangePerH-half, f.AirChangePerH+half
	return f, nil
}

// independent is how many independent readings n readings are worth whose
// errors follow an autoregression of first order: n (1-r)/(1+r). A negative
// correlation is not taken as a gain.
func independent(n, lag1 float64) float64 {
	r := math.Min(math.Max(lag1, 0), correlationMax)
	return n * (1 - r) / (1 + r)
}

// correlationMax keeps a short series with one slow swing from an interval
// without bound; our assumption.
const correlationMax = 0.95

// lag1 is the correlation of residuals with those that follow.
func lag1(r []float64) float64 {
	var sum, squares float64
	for i, x := range r {
		squares += x * x
		if i > 0 {
			sum += x * r[i-1]
		}
	}
	if squares == 0 {
		return 0
	}
	return sum / squares
}
