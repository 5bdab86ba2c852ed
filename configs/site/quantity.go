package site

// Quantity names what a point measures. The names are the contract of
// points.csv.
type Quantity string

// The quantities a point can have.
const (
	AirTemp          Quantity = "air_temp"
	OperativeTemp    Quantity = "operative_temp"
	GlobeTemp        Quantity = "globe_temp"
	SurfaceTemp      Quantity = "surface_temp"
	ThermostatTemp   Quantity = "thermostat_temp"
	Humidity         Quantity = "humidity"
	CO2              Quantity = "co2"
	Window           Quantity = "window"
	WindowOpening    Quantity = "window_opening"
	WindowCommand    Quantity = "window_command"
	WindowEnable     Quantity = "window_enable"
	ModeSignal       Quantity = "mode_signal"
	ManualOverride   Quantity = "manual_override"
	PlantStatus      Quantity = "plant_status"
	ZoneAirflow      Quantity = "zone_airflow"
	ZoneDamper       Quantity = "zone_damper"
	HeatingValve     Quantity = "heating_valve"
	CoolingValve     Quantity = "cooling_valve"
	SupplyAirTemp    Quantity = "supply_air_temp"
	ReturnAirTemp    Quantity = "return_air_temp"
	MixedAirTemp     Quantity = "mixed_air_temp"
	OutdoorAirDamper Quantity = "outdoor_air_damper"
	SupplyAirflow    Quantity = "supply_airflow"
	CeilingFan       Quantity = "ceiling_fan"
	AirSpeed         Quantity = "air_speed"
	People           Quantity = "people"
	Presence         Quantity = "presence"
	PM25             Quantity = "pm25"
	OutdoorTemp      Quantity = "outdoor_temp"
	OutdoorHumidity  Quantity = "outdoor_humidity"
	OutdoorDewPoint  Quantity = "outdoor_dew_point"
	WindSpeed        Quantity = "wind_speed"
	WindGust         Quantity = "wind_gust"
	WindDirection    Quantity = "wind_direction"
	Rain             Quantity = "rain"
	Solar            Quantity = "solar"
	OutdoorCO2       Quantity = "outdoor_co2"
	OutdoorPM25      Quantity = "outdoor_pm25"
	ElectricPower    Quantity = "electric_power"
	CoolingPower     Quantity = "cooling_power"
	HeatingPower     Quantity = "heating_power"
	SetpointHeat     Quantity = "setpoint_heat"
	SetpointCool     Quantity = "setpoint_cool"
)

// Kind says how the readings of a quantity are stored on the grid.
type Kind uint8

// Kinds of quantity.
const (
	// Analog is a number in the quantity's canonical unit; the grid holds its
	// time-weighted mean.
	Analog Kind = iota
	// Switch is off or on (0 or 1); the grid holds the share of covered time on.
	Switch
	// Status is a plant state, see PlantState; the grid holds the code of the
	// state that lasted longest within the step (ties: the stronger).
	Status
	// Angle is a direction in degrees; the grid holds the vector mean.
	Angle
)

// PlantState is what a plant unit does, in order of strength: of several
// sources of evidence the strongest counts.
type PlantState uint8

// Plant states; their numbers are the codes in Status columns of the grid.
const (
	PlantOff  PlantState = 0
	PlantOn   PlantState = 1 // running, type unknown
	PlantVent PlantState = 2 // air moved, not conditioned
	PlantHeat PlantState = 3
	PlantCool PlantState = 4
)

// Trait is what is known of a quantity before any reading.
type Trait struct {
	Kind Kind
	// Unit is the canonical unit readings are converted to.
	Unit string
	// Low and High bound what is physically possible, in the canonical unit.
	// Common practice: generous limits, meant to catch faults and not weather.
	Low, High float64
	// Words is what a reader calls it.
	Words string
}

var traits = map[Quantity]Trait{
	AirTemp:          {Analog, "degC", -30, 60, "air temperature"},
	OperativeTemp:    {Analog, "degC", -30, 60, "operative temperature"},
	GlobeTemp:        {Analog, "degC", -30, 70, "globe temperature"},
	SurfaceTemp:      {Analog, "degC", -40, 90, "surface temperature"},
	ThermostatTemp:   {Analog, "degC", -30, 60, "thermostat temperature"},
	Humidity:         {Analog, "%", 0, 100, "relative humidity"},
	CO2:              {Analog, "ppm", 200, 10000, "CO2 concentration"},
	Window:           {Switch, "", 0, 1, "window contact"},
	WindowOpening:    {Analog, "%", 0, 100, "window opening"},
	WindowCommand:    {Analog, "%", 0, 100, "window command"},
	WindowEnable:     {Switch, "", 0, 1, "window enable"},
	ModeSignal:       {Switch, "", 0, 1, "mode signal (1 = open mode)"},
	ManualOverride:   {Switch, "", 0, 1, "manual override"},
	PlantStatus:      {Status, "", 0, 4, "plant status"},
	ZoneAirflow:      {Analog, "m3/h", 0, 1e6, "zone air flow"},
	ZoneDamper:       {Analog, "%", 0, 100, "zone damper position"},
	HeatingValve:     {Analog, "%", 0, 100, "heating valve position"},
	CoolingValve:     {Analog, "%", 0, 100, "cooling valve position"},
	SupplyAirTemp:    {Analog, "degC", -30, 80, "supply air temperature"},
	ReturnAirTemp:    {Analog, "degC", -30, 60, "return air temperature"},
	MixedAirTemp:     {Analog, "degC", -40, 60, "mixed air temperature"},
	OutdoorAirDamper: {Analog, "%", 0, 100, "outdoor air damper position"},
	SupplyAirflow:    {Analog, "m3/h", 0, 1e7, "supply air flow"},
	CeilingFan:       {Switch, "", 0, 1, "ceiling fan"},
	AirSpeed:         {Analog, "m/s", 0, 10, "air speed"},
	People:           {Analog, "", 0, 10000, "people present"},
	Presence:         {Switch, "", 0, 1, "presence"},
	PM25:             {Analog, "ug/m3", 0, 2000, "fine dust PM2.5"},
	OutdoorTemp:      {Analog, "degC", -60, 60, "outdoor temperature"},
	OutdoorHumidity:  {Analog, "%", 0, 100, "outdoor relative humidity"},
	OutdoorDewPoint:  {Analog, "degC", -70, 40, "outdoor dew point"},
	WindSpeed:        {Analog, "m/s", 0, 75, "wind speed"},
	WindGust:         {Analog, "m/s", 0, 115, "wind gust"},
	WindDirection:    {Angle, "deg", 0, 360, "wind direction"},
	Rain:             {Analog, "mm/h", 0, 400, "rain"},
	Solar:            {Analog, "W/m2", -20, 1600, "global solar irradiance"},
	OutdoorCO2:       {Analog, "ppm", 300, 1000, "outdoor CO2 concentration"},
	OutdoorPM25:      {Analog, "ug/m3", 0, 2000, "outdoor fine dust PM2.5"},
	ElectricPower:    {Analog, "kW", -1e5, 1e5, "electric power"},
	CoolingPower:     {Analog, "kW", -1e5, 1e5, "cooling power"},
	HeatingPower:     {Analog, "kW", -1e5, 1e5, "heating power"},
	SetpointHeat:     {Analog, "degC", -10, 60, "heating set-point"},
	SetpointCool:     {Analog, "degC", -10, 130, "cooling set-point"},
}

// Trait returns what is known of q; ok is false for an unknown name.
func (q Quantity) Trait() (t Trait, ok bool) { t, ok = traits[q]; return t, ok }

// Quantities lists every known quantity in the order of the contract.
func Quantities() []Quantity {
	return []Quantity{AirTemp, OperativeTemp, GlobeTemp, SurfaceTemp, ThermostatTemp, Humidity, CO2,
		Window, WindowOpening, WindowCommand, WindowEnable, ModeSignal, ManualOverride, PlantStatus,
		ZoneAirflow, ZoneDamper, HeatingValve, CoolingValve, SupplyAirTemp, ReturnAirTemp, MixedAirTemp,
		OutdoorAirDamper, SupplyAirflow, CeilingFan, AirSpeed, People, Presence, PM25, OutdoorTemp,
		OutdoorHumidity, OutdoorDewPoint, WindSpeed, WindGust, WindDirection, Rain, Solar, OutdoorCO2,
		OutdoorPM25, ElectricPower, CoolingPower, HeatingPower, SetpointHeat, SetpointCool}
}

// IsWeather reports whether q belongs to the site's outdoor conditions.
func (q Quantity) IsWeather() bool {
	switch q {
	case OutdoorTemp, OutdoorHumidity, OutdoorDewPoint, WindSpeed, WindGust, WindDirection, Rain, Solar, OutdoorCO2, OutdoorPM25:
		return true
	}
	return false
}
