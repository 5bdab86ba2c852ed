package climate

import (
	"math"

	"sashlog/analyze/running"
)

// Feel is how comfortable a step was by the headline criterion.
type Feel uint8

// Feels.
const (
	TooCool Feel = iota
	Comfortable
	TooWarm
	FeelUnknown // no indoor temperature, or no limit applies
	NumFeels
)

var feelWords = [NumFeels]string{"too cool", "comfortable", "too warm", "unknown"}

func (f Feel) String() string { return feelWords[f] }

// Humidity limits of indoor air, in per cent: EN 16798-1:2019 Table B.16,
// category II (from memory).
const (
	indoorDryPct  = 25
	indoorDampPct = 60
)

// Fields sorts occupied hours of the average occupant into fields between
// limits of temperature and humidity. A value at a limit of temperature lies in the
// middle field, one at a limit of humidity in the drier one: the limits suit.
type Fields struct {
	TempEdgesC [2]float64
	// Humidity names the measure, with unit; HumidityEdges are its limits, one
	// or two.
	Humidity      string
	HumidityEdges []float64
	// HoursH[h][t] are the hours of humidity field h (from dry to damp, last:
	// humidity unknown) and temperature field t (from cold to warm).
	HoursH [][3][NumFeels]float64
	// UnknownH are hours without a temperature.
	UnknownH float64
}

func newFields(edges [2]float64, name string, humidity ...float64) Fields {
	return Fields{TempEdgesC: edges, Humidity: name, HumidityEdges: humidity, HoursH: make([][3][NumFeels]float64, len(humidity)+2)}
}

func (f *Fields) add(temp, humidity float32, feel Feel, h float64) {
	if temp != temp {
		f.UnknownH += h
		return
	}
	t := 1
	switch v := round3(float64(temp)); {
	case v < round3(f.TempEdgesC[0]):
		t = 0
	case v > round3(f.TempEdgesC[1]):
		t = 2
	}
	row := len(f.HumidityEdges) + 1
	if humidity == humidity {
		row = 0
		for row < len(f.HumidityEdges) && round3(float64(humidity)) > round3(f.HumidityEdges[row]) {
			row++
		}
	}
	f.HoursH[row][t][feel] += h
}

// fieldsOf sorts the occupied hours outdoors by the limits of suitable weather
// and indoors by those of the operative ranges, coloured by comfort in the room.
func fieldsOf(in *Input) (outdoors, indoors Fields) {
	c := &in.Criteria
	outdoors = newFields([2]float64{c.OutdoorLowC, c.BandHighC}, "dew point (°C)", c.DewPointMaxC)
	indoors = newFields([2]float64{c.ClimateHeatingC, c.ClimateCoolingC}, "relative humidity (%)", indoorDryPct, indoorDampPct)
	at := func(series []float32, i int) float32 {
		if series == nil {
			return float32(math.NaN())
		}
		return series[i]
	}
	for z := range in.Running.Zones {
		w := in.Running.Weights[z]
		if w == 0 {
			continue
		}
		h := w * in.Grid.StepH()
		limits, room := &in.Exceedance.Zones[z].Limits, &in.Indoor[z]
		for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
			if in.Running.Zones[z].Occupied[i] != running.Occupied {
				continue
			}
			t := at(room.OperativeC, i)
			feel := feelOf(t, at(limits.LowC, i), at(limits.HighC, i))
			outdoors.add(at(in.Outdoor.TempC, i), at(in.Outdoor.DewPointC, i), feel, h)
			indoors.add(t, at(room.RHPct, i), feel, h)
		}
	}
	return outdoors, indoors
}

func feelOf(tempC, lowC, highC float32) Feel {
	if tempC != tempC || lowC != lowC || highC != highC {
		return FeelUnknown
	}
	switch t := round3(float64(tempC)); {
	case t < round3(float64(lowC)):
		return TooCool
	case t > round3(float64(highC)):
		return TooWarm
	}
	return Comfortable
}
