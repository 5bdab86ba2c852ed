package configs

// The raw types mirror the site file key by key; pointers tell "not given"
// from zero. Tags in brackets are not keys: they take what was written as a
// single word where a map is allowed too.

type rawSite struct {
	Site      rawHead        `mapstructure:"site"`
	Period    rawPeriod      `mapstructure:"period"`
	StepMin   *float64       `mapstructure:"step_min"`
	Occupancy rawOccupancy   `mapstructure:"occupancy"`
	Zones     []rawZone      `mapstructure:"zones"`
	Plant     []rawPlant     `mapstructure:"plant"`
	Criteria  map[string]any `mapstructure:"criteria"`
	Privacy   rawPrivacy     `mapstructure:"privacy"`
	Logs      []rawLog       `mapstructure:"logs"`
	Points    many           `mapstructure:"points"`
	Diary     string         `mapstructure:"diary"`
	Votes     string         `mapstructure:"votes"`
	Weather   rawWeather     `mapstructure:"weather"`
	Energy    rawEnergy      `mapstructure:"energy"`
	Tolerance rawTolerance   `mapstructure:"tolerance"`
}

// many is a list that may be written as its only member.
type many []string

type rawHead struct {
	Name          string   `mapstructure:"name"`
	Invented      bool     `mapstructure:"invented"`
	TimeZone      string   `mapstructure:"time_zone"`
	Latitude      *float64 `mapstructure:"latitude"`
	Longitude     *float64 `mapstructure:"longitude"`
	ElevationM    *float64 `mapstructure:"elevation_m"`
	OutdoorCO2PPM *float64 `mapstructure:"outdoor_co2_ppm"`
}

type rawPeriod struct {
	From string `mapstructure:"from"`
	To   string `mapstructure:"to"`
}

type rawOccupancy struct {
	Source   string     `mapstructure:"source"`
	Times    []rawTimes `mapstructure:"times"`
	Holidays many       `mapstructure:"holidays"`
}

type rawTimes struct {
	Days many   `mapstructure:"days"`
	From string `mapstructure:"from"`
	To   string `mapstructure:"to"`
}

type rawZone struct {
	ID       string      `mapstructure:"id"`
	Name     string      `mapstructure:"name"`
	Floor    string      `mapstructure:"floor"`
	AreaM2   *float64    `mapstructure:"area_m2"`
	HeightM  *float64    `mapstructure:"height_m"`
	People   *float64    `mapstructure:"people"`
	Place    string      `mapstructure:"place"`
	Faces    many        `mapstructure:"faces"`
	Openings rawOpenings `mapstructure:"openings"`
	Windows  string      `mapstructure:"windows"`
	FanMS    *float64    `mapstructure:"fan_m_s"`
	Scheme   string      `mapstructure:"scheme"`
	Category string      `mapstructure:"category"`
	Use      string      `mapstructure:"use"`
	Occupied rawOccupied `mapstructure:"occupied"`
}

type rawOpenings struct {
	Word    string `mapstructure:"(word)"`
	Through many   `mapstructure:"through"`
}

type rawOccupied struct {
	Source string     `mapstructure:"source"`
	Times  []rawTimes `mapstructure:"times"`
}

type rawPlant struct {
	ID           string   `mapstructure:"id"`
	Name         string   `mapstructure:"name"`
	Serves       many     `mapstructure:"serves"`
	Air          string   `mapstructure:"air"`
	RatedPowerKW *float64 `mapstructure:"rated_power_kw"`
}

type rawPrivacy struct {
	Word  string `mapstructure:"(word)"`
	Show  string `mapstructure:"show"`
	Codes bool   `mapstructure:"codes"`
}

type rawLog struct {
	Name         string    `mapstructure:"name"`
	Path         string    `mapstructure:"path"`
	Layout       string    `mapstructure:"layout"`
	Sheet        string    `mapstructure:"sheet"`
	HeaderRow    *float64  `mapstructure:"header_row"`
	TimeColumn   string    `mapstructure:"time_column"`
	DateColumn   string    `mapstructure:"date_column"`
	ClockColumn  string    `mapstructure:"clock_column"`
	KeyColumns   many      `mapstructure:"key_columns"`
	ValueColumns many      `mapstructure:"value_columns"`
	Separator    string    `mapstructure:"separator"`
	Decimal      string    `mapstructure:"decimal"`
	Encoding     string    `mapstructure:"encoding"`
	DateOrder    string    `mapstructure:"date_order"`
	TimeFormat   string    `mapstructure:"time_format"`
	Missing      many      `mapstructure:"missing"`
	Clock        rawClock  `mapstructure:"clock"`
	Influx       rawInflux `mapstructure:"influx"`
}

type rawInflux struct {
	Address      string   `mapstructure:"address"`
	Organisation string   `mapstructure:"organisation"`
	Bucket       string   `mapstructure:"bucket"`
	TokenEnv     string   `mapstructure:"token_env"`
	Measurement  string   `mapstructure:"measurement"`
	PointTag     string   `mapstructure:"point_tag"`
	Field        string   `mapstructure:"field"`
	TimeOutS     *float64 `mapstructure:"time_out_s"`
	Read         string   `mapstructure:"read"`
}

type rawClock struct {
	Word           string          `mapstructure:"(word)"`
	Is             string          `mapstructure:"is"`
	OverruleOffset bool            `mapstructure:"overrule_offset"`
	ShiftMin       *float64        `mapstructure:"shift_min"`
	Shifts         []rawClockShift `mapstructure:"shifts"`
}

type rawClockShift struct {
	From     string   `mapstructure:"from"`
	To       string   `mapstructure:"to"`
	ShiftMin *float64 `mapstructure:"shift_min"`
	EndMin   *float64 `mapstructure:"end_shift_min"`
}

type rawEnergy struct {
	PricePerKWh    *float64 `mapstructure:"price_per_kwh"`
	Currency       string   `mapstructure:"currency"`
	CarbonKgPerKWh *float64 `mapstructure:"carbon_kg_per_kwh"`
}

type rawWeather struct {
	TypicalYear string `mapstructure:"typical_year"`
}

type rawTolerance struct {
	RejectedShare *float64 `mapstructure:"rejected_share"`
}
