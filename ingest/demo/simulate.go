package demo

import (
	"math"
	"math/rand/v2"
	"slices"
	"time"
)

// switchEvent is a change of a plant unit's state or of its window release.
type switchEvent struct {
	at    int64
	unit  int16
	state uint8
}

// presenceEvent is a change seen by a presence detector.
type presenceEvent struct {
	at   int64
	zone int16
	on   bool
}

// simulation is the building under way.
type simulation struct {
	rooms   []*room
	units   []*unit
	links   []tie
	weather *weather
	crowd   *crowd
	truth   *Truth
	rngs    []*rand.Rand // people at their windows, by zone
	jitter  *rand.Rand

	windowLog   []windowEvent
	stateLog    []switchEvent
	releaseLog  []switchEvent
	presenceLog []presenceEvent
}

// tie is a link between two rooms that take part.
type tie struct {
	a, b            *room
	wallWK          float64
	doorLs, restsLs float64
}

func newSimulation(seed uint64, zones []zoneSpec, w *weather, t *Truth) *simulation {
	s := &simulation{weather: w, truth: t, crowd: newCrowd(seed, zones), jitter: stream(seed, "jitter")}
	byID := map[string]*room{}
	for i := range zones {
		r := newRoom(&zones[i], i)
		rng := stream(seed, "windows/"+zones[i].id)
		r.habit = math.Exp(0.22 * rng.NormFloat64())
		s.rooms, s.rngs = append(s.rooms, r), append(s.rngs, rng)
		byID[zones[i].id] = r
	}
	specs := slices.Clone(plantSpecs) // settings change with time
	for i := range specs {
		u := &unit{spec: &specs[i], index: i, caller: -1, supplyC: 21}
		for _, r := range s.rooms {
			if r.spec.plant == i {
				u.rooms = append(u.rooms, r)
			}
		}
		if len(u.rooms) > 0 {
			u.index = len(s.units)
			s.units = append(s.units, u)
		}
	}
	for _, r := range s.rooms {
		r.through = byID[r.spec.through]
		for _, u := range s.units {
			if u.spec == &specs[r.spec.plant] {
				r.unit = u
			}
		}
	}
	for _, l := range linkSpecs {
		if a, b := byID[l.a], byID[l.b]; a != nil && b != nil {
			s.links = append(s.links, tie{a, b, l.wallWK, l.doorLs, l.alwaysL})
		}
	}
	return s
}

// run simulates the days. Steps before the truth's start only bring the
// building into its season; nothing of them is kept.
func (s *simulation) run(days []day, loc *time.Location, changes []Change) {
	var clock zoneClock
	clock.loc = loc
	step := 0
	for di := range days {
		d := &days[di]
		s.change(d.date, changes)
		s.crowd.plan(d)
		if d.start >= s.truth.StartUTC {
			s.refresh(d.start)
		}
		for range d.steps {
			t := s.weather.start + int64(step)*stepS
			s.step(t, step, d, clock.minuteOfDay(t))
			step++
		}
	}
}

// refresh repeats the state of windows and presence at midnight, as loggers of changes of value do,
// so that a state that never changes is still known to hold.
func (s *simulation) refresh(t int64) {
	for k, r := range s.rooms {
		for i := range r.windows {
			s.windowLog = append(s.windowLog, windowEvent{t, int16(k), int16(i), float32(r.windows[i].open)})
		}
		s.presenceLog = append(s.presenceLog, presenceEvent{t, int16(k), r.people > 0})
	}
}

// refreshUnit repeats a unit's state half a minute past midnight, off the
// minutes at which it can change.
func (s *simulation) refreshUnit(t int64, u *unit) {
	s.stateLog = append(s.stateLog, switchEvent{t + 30, int16(u.index), u.code})
	if u.spec.kind == airHandler {
		s.releaseLog = append(s.releaseLog, switchEvent{t + 30, int16(u.index), bit(u.mode == modeOpen)})
	}
}

// step simulates five minutes.
func (s *simulation) step(t int64, step int, d *day, minuteOfDay int) {
	w := s.weather
	out := outdoorNow{tempC: float64(w.tempC[step]), ratio: float64(w.ratio[step]), co2: float64(w.co2PPM[step]),
		windMS: float64(w.windMS[step]), windDeg: float64(w.windDeg[step]), rainMMh: float64(w.rainMMh[step]),
		dewC: float64(w.dewC[step]), globalWm2: float64(w.globalWm2[step])}
	out.guard = out.rainMMh > 0 || out.windMS > 9
	outside := outdoorAir{out.tempC, out.ratio, out.co2}
	i := int((t - s.truth.StartUTC) / stepS) // index into the truth, negative during the lead-in
	slot := minuteOfDay / 5
	open := d.working && minuteOfDay >= occupiedFromMin && minuteOfDay < occupiedToMin
	doors := d.working && minuteOfDay >= 450 && minuteOfDay < 1110

	for k, r := range s.rooms {
		before := r.people
		r.people = int(s.crowd.counts[k][slot])
		if (before > 0) != (r.people > 0) && t >= s.truth.StartUTC {
			s.presenceLog = append(s.presenceLog, presenceEvent{t + int64(s.jitter.IntN(240)), int16(k), r.people > 0})
		}
		s.gains(r, step, doors, out.globalWm2)
		u := r.unit
		l := lampNone
		if u.spec.kind == airHandler && d.working {
			if l = lampRed; u.mode == modeOpen {
				l = lampGreen
			}
		}
		r.decide(s.rngs[k], t, &out, l, before, minuteOfDay, u.code != codeOff)
		r.clean(t, d, minuteOfDay)
	}
	acc := accumulator{}
	for m := range 5 {
		now := t + int64(60*m)
		s.minute(now, minuteOfDay+m, d, &out, outside, doors, &acc)
	}
	if i >= 0 && i < s.truth.N {
		s.record(i, &acc, open, &out)
	}
}

// gains sets the heat, vapour and CO2 given off in a room, and its blinds.
func (s *simulation) gains(r *room, step int, lit bool, globalWm2 float64) {
	n := float64(r.people)
	used := 0.0
	if r.spec.people > 0 {
		used = math.Min(1, n/float64(r.spec.people))
	}
	sun, peak := 0.0, 0.0
	for _, f := range r.faces {
		g := float64(s.weather.facadeWm2[f][step])
		sun += g / float64(len(r.faces))
		peak = math.Max(peak, g)
	}
	r.blinds = peak > pick(r.blinds, 170, 270)
	sun *= r.glassM2 * 0.52 * pick(r.blinds, 0.22, 0.85)
	light := 0.0
	if lit && n > 0 {
		light = 6 * pick(r.spec.core, 1, 1-ramp(globalWm2, 60, 320))
	}
	if r.spec.core {
		light *= 0.7 // efficient fittings
	}
	equip := r.spec.areaM2 * (r.spec.alwaysWm2 + r.spec.equipWm2*used + light)
	r.heatAirW = n*personW*0.6 + equip*0.6 + sun*0.3
	r.heatMassW = n*personW*0.4 + equip*0.4 + sun*0.7
	r.vapourKgS = n * personKgS
	r.co2Ls = n * personCO2
}

// minute advances plant, windows and air by one minute.
func (s *simulation) minute(now int64, minuteOfDay int, d *day, out *outdoorNow, outside outdoorAir, doors bool, acc *accumulator) {
	logging := now >= s.truth.StartUTC
	for _, u := range s.units {
		code, released := u.code, u.mode == modeOpen
		u.command(d, minuteOfDay, out)
		u.supply(out)
		if u.coil && u.code == codeVent {
			u.code = codeHeat
		}
		if logging && u.code != code {
			s.stateLog = append(s.stateLog, switchEvent{now, int16(u.index), u.code})
		}
		if logging && u.spec.kind == airHandler && released != (u.mode == modeOpen) {
			s.releaseLog = append(s.releaseLog, switchEvent{now, int16(u.index), bit(u.mode == modeOpen)})
		}
		if logging && now == d.start {
			s.refreshUnit(now, u)
		}
		acc.unit(u)
	}
	for _, r := range s.rooms {
		u := r.unit
		r.driveWindows(now, out, u.mode == modeOpen && u.spec.kind == airHandler, u.purging)
		if logging {
			r.settle(now, &s.windowLog)
		} else {
			var none []windowEvent
			r.settle(now, &none)
		}
		r.openLs = r.openingFlowLs(out.tempC, out.windMS, out.windDeg)
		r.leakLs = r.leakFlowLs(out.tempC, out.windMS)
	}
	s.exchange(doors)
	for k, r := range s.rooms {
		r.advance(outside, minuteS)
		acc.room(k, r, r.unit, s.reasonOf(r, out))
	}
}

// exchange sets heat, CO2 and vapour that pass between rooms this minute: what
// one loses the other gains.
func (s *simulation) exchange(doors bool) {
	for _, r := range s.rooms {
		r.linkW, r.linkCO2, r.linkRatio, r.throughLs = 0, 0, 0, 0
		if r.through != nil {
			r.share = r.through.share
			r.throughLs = 380 * math.Sqrt(r.share)
		}
	}
	for k := range s.links {
		l := &s.links[k]
		q := pick(doors, l.doorLs+l.restsLs, l.restsLs)
		if l.b.through == l.a {
			q += l.b.throughLs
		}
		heat := (l.wallWK + airWKPerLs*q) * (l.a.airC - l.b.airC)
		l.a.linkW, l.b.linkW = l.a.linkW-heat, l.b.linkW+heat
		c, w := q*(l.a.co2-l.b.co2), q*(l.a.ratio-l.b.ratio)
		l.a.linkCO2, l.b.linkCO2 = l.a.linkCO2-c, l.b.linkCO2+c
		l.a.linkRatio, l.b.linkRatio = l.a.linkRatio-w, l.b.linkRatio+w
	}
}

// reasonOf names what keeps a room from running open this minute.
func (s *simulation) reasonOf(r *room, out *outdoorNow) Reason {
	if r.spec.drive == noWindows && r.through == nil {
		return ReasonNoOpening
	}
	u := r.unit
	switch {
	case u.code != codeOff && u.reason == ReasonIndoorLimit:
		if r.coolCall {
			return ReasonIndoorLimit
		}
		return ReasonCalledBy
	case u.code != codeOff:
		return u.reason
	case r.share > 0 || u.mode == modeIdle:
		return ReasonNone
	case u.mode == modeLocked:
		return ReasonSlowReopen
	case r.spec.neverOpens:
		return ReasonNeverUsed
	case r.spec.drive == automatic || r.through != nil:
		if out.guard {
			return ReasonWeatherGuard
		}
		return ReasonNotWarm
	}
	return ReasonNotOpened
}

func bit(b bool) uint8 {
	if b {
		return 1
	}
	return 0
}
