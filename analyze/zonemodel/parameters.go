package zonemodel

import "math"

// Parameter is one parameter of the model.
type Parameter uint8

// Parameters, per hour and over the heat capacity of the air node (mass terms:
// of the mass).
const (
	MassPerH       Parameter = iota // air to mass
	BackPerH                        // mass to air
	MassOutPerH                     // mass to outdoors
	ShutPerH                        // air to outdoors with everything shut
	OpenPerH                        // air to outdoors, more when fully open
	WindPerHMS                      // the same per m/s of wind
	StackPerHRootK                  // the same per root of the temperature difference
	SunAirKPerH                     // K/h per kW/m², into the air
	SunMassKPerH                    // K/h per kW/m², into the mass
	PeopleKPerH                     // K/h with the usual number of people
	GainKPerH                       // K/h always: equipment, neighbours
	NoiseAirK                       // what the model leaves out, per step
	NoiseMassK
	NoiseSensorK
	NumParameters
)

var parameterWords = [NumParameters]string{"air to mass, 1/h", "mass to air, 1/h", "mass to outdoors, 1/h", "air to outdoors, shut, 1/h",
	"air to outdoors, opening, 1/h", "opening by wind, 1/h per m/s", "opening by temperature difference, 1/h per √K",
	"sun into the air, K/h per kW/m²", "sun into the mass, K/h per kW/m²", "people, K/h", "always, K/h",
	"noise of the air, K a step", "noise of the mass, K a step", "noise of the sensor, K"}

func (p Parameter) String() string { return parameterWords[p] }

// prior keeps what the data do not tell within sense: a normal distribution of
// the parameter, of its natural logarithm where log is true. Our assumptions,
// wide: a factor of three to five either way.
type prior struct {
	middle, sd float64
	log        bool
}

var priors = [NumParameters]prior{
	MassPerH:       {1.5, 1.5, true},
	BackPerH:       {0.1, 1.5, true},
	MassOutPerH:    {0.01, 1.5, true},
	ShutPerH:       {0.05, 1.5, true},
	OpenPerH:       {0.5, 3, false},
	WindPerHMS:     {0, 1, false},
	StackPerHRootK: {0, 1, false},
	SunAirKPerH:    {1, 6, false},
	SunMassKPerH:   {0.5, 3, false},
	PeopleKPerH:    {0.3, 3, false},
	GainKPerH:      {0.1, 3, false},
	NoiseAirK:      {0.05, 1.5, true},
	NoiseMassK:     {0.02, 1.5, true},
	NoiseSensorK:   {0.04, 1, true},
}

// form is which parameters are free; the others are zero.
type form struct {
	twoConstants, massOut, wind, stack, people, sun bool
}

// list names the free parameters in order.
func (f form) list() []Parameter {
	var out []Parameter
	for p := Parameter(0); p < NumParameters; p++ {
		in := true
		switch p {
		case MassPerH, BackPerH, NoiseMassK:
			in = f.twoConstants
		case MassOutPerH:
			in = f.twoConstants && f.massOut
		case SunMassKPerH:
			in = f.twoConstants && f.sun
		case SunAirKPerH:
			in = f.sun
		case PeopleKPerH:
			in = f.people
		case WindPerHMS:
			in = f.wind
		case StackPerHRootK:
			in = f.stack
		}
		if in {
			out = append(out, p)
		}
	}
	return out
}

// at is the place of a parameter in rates.
func (r *rates) at(p Parameter) *float64 {
	return [NumParameters]*float64{&r.mass, &r.back, &r.massOut, &r.shut, &r.open, &r.wind, &r.stack, &r.sunAir, &r.sunMass,
		&r.people, &r.gain, &r.noiseAirK, &r.noiseMassK, &r.noiseSensorK}[p]
}

// ratesOf turns free values (logarithms where the prior says so) into rates.
func (f form) ratesOf(list []Parameter, x []float64) rates {
	r := rates{twoConstants: f.twoConstants, windy: f.wind, tall: f.stack}
	for k, p := range list {
		v := x[k]
		if priors[p].log {
			v = math.Exp(v)
		}
		*r.at(p) = v
	}
	return r
}

// free is a parameter's free value.
func (p Parameter) free(v float64) float64 {
	if priors[p].log {
		return math.Log(v)
	}
	return v
}

// middle is the middle of the prior as a free value.
func (p Parameter) middle() float64 { return p.free(priors[p].middle) }
