// Package climate answers: what could this climate have offered, by the
// published ways of counting, in the year that was logged and in a typical one?
//
// Steps:
//
//  1. record: measured weather on the grid, and a typical year as a grid of its own
//  2. ways: each published way judges every step of a record
//  3. offer: hours by each way, air change a heat balance asks for, nights
//  4. agreement: on which share of hours do the ways say the same?
//  5. sensitivity: how far does the headline move with each of its settings?
//  6. airspeed: how many hours would moving air add, zone by zone?
//  7. fields: occupied hours by temperature and humidity, and how comfortable they were
//  8. normal: was this a normal year, month by month?
package climate

import "sashlog/analyze/method"

// HeatBalanceDoc documents [HeatBalance].
var HeatBalanceDoc = method.Doc{
	Title:    "Suitable hours by the heat balance (Axley & Emmerich 2002; Emmerich, Polidoro & Axley 2011)",
	Question: "At which outdoor temperatures could outdoor air carry off the heat of a room, and how much of it would be needed?",
	Formula: "T_hbp = T_heat - q / (m_min c_p + K); below it no cooling is needed; up to T_hbp + (T_cool - T_heat) the minimum air change is enough; " +
		"from there to T_cool: m c_p = q / (T_cool - T_out) - K; suited when that air change is within reach; q gains, K conductance, m air flow, each per floor area",
	Limits: []string{
		"steady state of one zone with constant gains: no mass, no sun by the hour",
		"air change 0 to the most the openings bring; hours beyond it are counted apart and not as suited",
		"dew point of the outdoor air at most the site's limit; without logged humidity it is not tested",
		"the heating set-point fixes the balance point, the cooling set-point the air change",
		"air of 1.2 kg/m³ and 1006 J/(kg K)",
	},
	Sources: []string{
		method.Memory("Axley & Emmerich 2002; Emmerich, Polidoro & Axley 2011, Energy and Buildings 43:2101: equations from memory, derived anew from the heat balance, dew point limit 17 °C"),
	},
	Standing: method.FromMemory,
}

// NightDoc documents [ClimaticCoolingPotentialKh] and the storage credit.
var NightDoc = method.Doc{
	Title:    "Night cooling: climatic cooling potential and storage credit (Artmann, Manz & Heiselberg 2007; Emmerich et al. 2011)",
	Question: "How much heat could the air of a night carry off, and would it last through the next day?",
	Formula: "CCP = Σ m (T_b - T_out) over the night from 19:00 to 07:00, T_b = 24.5 + 2.5 cos(2π (h - 19)/24), m = 1 where the difference is at least the critical one, else 0; " +
		"credit: Σ ρ c_p h (T_store - T_out) Δt per unit of air change, set against the heat that air could not carry off by day",
	Limits: []string{
		"12 hours from 19:00 to 06:00, each with T_b at its beginning; with 07:00 as a 13th sample each night gains up to 22 °C - T_out where that is at least the critical difference: publications leave it open",
		"nights with an hour of unknown temperature are left out and counted",
		"the mass is assumed to take up and give back all the heat; security, rain and wind at night are not tested",
		"a day is credited only when the night's air change stays within the most the openings bring",
	},
	Sources: []string{
		method.Memory("Artmann, Manz & Heiselberg 2007, Applied Energy 84:187"),
		method.Memory("Emmerich, Polidoro & Axley 2011, Energy and Buildings 43:2101, storage credit"),
	},
	Standing: method.FromMemory,
}

// WaysDoc documents the bands, the agreement and the sensitivity.
var WaysDoc = method.Doc{
	Title:    "Suitable hours by several ways: bands, adaptive limits, their agreement and sensitivity",
	Question: "Does the number of suitable hours depend on the building or on how one counts?",
	Formula: "published band: outdoor_low ≤ T_out ≤ adaptive upper limit of the day, dew point within its limit; adaptive: outdoor air itself within both limits of the day " +
		"(EN 16798-1, ASHRAE 55 80 %); agreement of two ways: share of occupied hours, known by both, in which both say suited or both say not; " +
		"sensitivity: the headline, and each way by its own settings, counted anew with one setting moved by a stated step and all others kept",
	Limits: []string{
		"EN 16798-1 adaptive limits: running mean between 10 and 30 °C; ASHRAE 55: prevailing mean 10 to 33.5 °C, calculation only in a building with cooling; hours outside are shown apart, never counted as suited",
		"air from outdoors warms up in the room: limits on outdoor air itself leave no margin for gains",
		"high agreement by chance is possible where nearly all hours fall on one side",
	},
	Sources: []string{
		method.Memory("Chen, Tong & Malkawi 2017, Building and Environment 122:386, lower limit 12.8 °C and dew point 17 °C"),
		method.Recomputed("EN 16798-1:2019 Annex B; ASHRAE 55-2023"),
	},
	Standing: method.FromMemory,
}

// AirSpeedDoc documents the hours that air movement adds.
var AirSpeedDoc = method.Doc{
	Title:    "Hours that air movement would add (ASHRAE 55, EN 16798-1 increments; cooling effect by SET)",
	Question: "How many more hours could be open, or would be comfortable, with fans or a breeze that people control?",
	Formula: "upper limit raised by 0, 1.2, 1.8, 2.2 K at 0.3, 0.6, 0.9, 1.2 m/s where the raised limit is above 25 °C; beside it the temperature T with T - CE(T, v) = limit, " +
		"CE the cooling effect of SET at 50 % humidity, 0.5 clo and the site's activity, radiant as air temperature",
	Limits: []string{
		"air movement that the occupants control",
		"the increments apply to free-running steps only and take 0.3 m/s as their base: that step adds nothing by definition",
		"the cooling effect is counted from still air (0.1 m/s), so that 0.3 m/s does add hours",
	},
	Sources: []string{
		method.Public("ASHRAE 55-2020 Table 5-13, air speed; EN 16798-1:2019 Table B.4 alike"),
		method.Recomputed("ASHRAE 55-2023 Appendix D, cooling effect"),
	},
	Standing: method.Published,
}

// NormalDoc documents the comparison with a typical year.
var NormalDoc = method.Doc{
	Title:    "Was this a normal year? Measured weather against a typical year",
	Question: "Would the climate usually have offered as many suitable hours?",
	Formula: "the same rule (lower limit, adaptive limit of the day less the rise, dew point) on each measured step and on the same hour, by standard time, of the typical year, both only where both are known; " +
		"a month within 1.5 K of the typical one is as usual; a year within 1 K and 10 % of the suitable hours is normal",
	Limits: []string{
		"a typical year is put together from months of past decades and shows no spread between years; the limits of 1.5 K, 1 K and 10 % are our assumption",
		"its station may lie elsewhere and higher or lower than the site",
		"wind, rain and pollution are left out on both sides",
		"the running mean of the first days of a typical year uses its own last days",
		"a typical year is kept in standard time; its days, nights and occupied hours follow the site's clock with the daylight saving of the period's first common year",
	},
	Sources:  []string{"a comparison of this project; weather file format after the data dictionary of the US Department of Energy"},
	Standing: method.OurAssumption,
}

// Docs lists the documentation of the package's methods.
func Docs() []method.Doc {
	return []method.Doc{WaysDoc, HeatBalanceDoc, NightDoc, AirSpeedDoc, NormalDoc}
}
