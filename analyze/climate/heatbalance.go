package climate

import "math"

// airDensity and airHeat are those of the published worked values: kg/m³ and
// J/(kg K).
const (
	airDensity = 1.2
	airHeat    = 1006
)

// HeatBalance is the steady heat balance of one zone per square metre of floor
// (Axley & Emmerich 2002; Emmerich, Polidoro & Axley 2011).
type HeatBalance struct {
	GainsWm2         float64 // people, sun, equipment, at least 0
	LossWm2K         float64 // conductance of the envelope, at least 0
	MinAirChangePerH float64 // for the people
	MaxAirChangePerH float64 // the most that openings bring
	HeightM          float64 // of the room, more than 0
	HeatingC         float64 // set-point that fixes the balance point
	CoolingC         float64 // set-point that fixes the air change
	DewPointMaxC     float64 // dampest outdoor air that is used
}

// Need is what a room needs of outdoor air.
type Need uint8

// Needs, from cold to warm. Air at the cooling set-point or above, or too damp,
// cools no room; beyond reach is what would need more air than openings bring.
const (
	NeedNone    Need = iota // below the balance point: no cooling, perhaps heating
	NeedMinimum             // the minimum air change keeps the room in its band
	NeedMore                // more air cools the room
	NeedBeyond              // more air than the openings bring
	NeedTooWarm
	NeedTooHumid
	NeedUnknown
	NumNeeds
)

var needWords = [NumNeeds]string{"no cooling needed", "least air change is enough", "more outdoor air cools", "more air than openings bring", "too warm", "too humid", "unknown"}

func (n Need) String() string { return needWords[n] }

// Suited reports whether outdoor air alone could serve the room.
func (n Need) Suited() bool { return n == NeedMinimum || n == NeedMore }

// PerAirChangeWm2K is the heat one air change per hour carries per kelvin and
// square metre of floor: ρ c_p h.
func (b HeatBalance) PerAirChangeWm2K() float64 { return airDensity * airHeat * b.HeightM / 3600 }

// BalancePointC is the outdoor temperature at which gains balance losses at the
// heating set-point and the minimum air change: T_heat - q / (m_min c_p + K).
// NaN for a room that loses no heat at all.
func (b HeatBalance) BalancePointC() float64 {
	loss := b.MinAirChangePerH*b.PerAirChangeWm2K() + b.LossWm2K
	if !(loss > 0) {
		return math.NaN()
	}
	return b.HeatingC - b.GainsWm2/loss
}

// MinimumEnoughToC is the outdoor temperature up to which the minimum air
// change keeps the room below the cooling set-point.
func (b HeatBalance) MinimumEnoughToC() float64 {
	return b.BalancePointC() + b.CoolingC - b.HeatingC
}

// RequiredAirChangePerH is the air change that holds the cooling set-point at
// an outdoor temperature: (q / (T_cool - T_out) - K) / (ρ c_p h), never less
// than the minimum; infinite at the cooling set-point and above.
func (b HeatBalance) RequiredAirChangePerH(outdoorC float64) float64 {
	if math.IsNaN(outdoorC) {
		return math.NaN()
	}
	if outdoorC >= b.CoolingC {
		return math.Inf(1)
	}
	return math.Max(b.MinAirChangePerH, (b.GainsWm2/(b.CoolingC-outdoorC)-b.LossWm2K)/b.PerAirChangeWm2K())
}

// Need judges outdoor air. A dew point of NaN is unknown where humidity is
// tested; give -Inf where it is not logged.
func (b HeatBalance) Need(outdoorC, dewPointC float64) Need {
	switch {
	case math.IsNaN(outdoorC):
		return NeedUnknown
	case outdoorC < b.BalancePointC():
		return NeedNone
	case outdoorC >= b.CoolingC:
		return NeedTooWarm
	case dewPointC > b.DewPointMaxC:
		return NeedTooHumid
	case b.RequiredAirChangePerH(outdoorC) > b.MaxAirChangePerH:
		return NeedBeyond // whatever the dew point
	case math.IsNaN(dewPointC):
		return NeedUnknown
	case outdoorC <= b.MinimumEnoughToC():
		return NeedMinimum
	}
	return NeedMore
}

// LeftoverWm2 is the heat that outdoor air could not carry off while holding
// the cooling set-point, W/m², with the most air the need allows.
func (b HeatBalance) LeftoverWm2(outdoorC float64, n Need) float64 {
	change := b.MinAirChangePerH
	switch n {
	case NeedBeyond:
		change = b.MaxAirChangePerH
	case NeedTooWarm, NeedTooHumid:
	default:
		return 0
	}
	return math.Max(0, b.GainsWm2-(change*b.PerAirChangeWm2K()+b.LossWm2K)*(b.CoolingC-outdoorC))
}

// StorageCreditWm2PerAirChange is the cooling a night stores, spread over the
// hours of the day that use it, per unit of air change at night: the night's
// air differenceK cooler than the mass for storedH hours, used within usedH.
func (b HeatBalance) StorageCreditWm2PerAirChange(differenceK, storedH, usedH float64) float64 {
	if !(usedH > 0) {
		return math.NaN()
	}
	return b.PerAirChangeWm2K() * math.Max(0, differenceK) * storedH / usedH
}
