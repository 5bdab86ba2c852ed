// Package indoor answers: what was it like in each zone, by all its sensors
// together?
package indoor

// Zone holds a zone's conditions on the grid, NaN where unknown, nil when
// never logged. Sensors placed in the room come before sensors elsewhere;
// several of one quantity are averaged.
type Zone struct {
	AirTempC []float32
	// OperativeC is what comfort is judged on; TempNote says how it came about
	// and what was assumed.
	OperativeC []float32
	TempNote   string
	// RadiantC is the mean radiant temperature, known where a globe and the air
	// beside it are.
	RadiantC   []float32
	RHPct      []float32
	CO2PPM     []float32
	People     []float32
	Presence   []float32
	AirSpeedMS []float32
	FanOn      []float32 // share of the step a fan was on
	// ThermostatC is the thermostat's own reading.
	ThermostatC []float32
}
