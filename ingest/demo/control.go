package demo

import "math"

// mode is what a unit's programme is doing.
type mode uint8

const (
	modeIdle   mode = iota // outside its programme
	modeRun                // unit conditions, windows locked
	modeLocked             // unit stopped, windows not yet released
	modeOpen               // windows released
)

// outdoorNow is the weather of the current step as plant and people meet it.
type outdoorNow struct {
	tempC, ratio, co2 float64
	windMS, windDeg   float64
	rainMMh, dewC     float64
	globalWm2         float64
	guard             bool // rain or wind: automatic windows shut
}

// unit is one plant unit at work.
type unit struct {
	spec    *plantSpec
	index   int
	rooms   []*room
	mode    mode
	code    uint8 // site.PlantState
	reason  Reason
	caller  int // index of the calling zone
	runFor  int // minutes since the unit last started
	lockFor int
	coil    bool // heating coil on while ventilating
	supplyC float64
	powerKW float64
	outside bool // outdoor air taken in
	purging bool
}

const (
	codeOff  = 0
	codeVent = 2
	codeHeat = 3
	codeCool = 4
)

// command runs one minute of the unit's programme.
func (u *unit) command(d *day, minuteOfDay int, out *outdoorNow) {
	s := u.spec
	coldest, warmest := math.Inf(1), math.Inf(-1)
	anyHeat, anyCool, caller := false, false, -1
	worst := math.Inf(-1)
	for _, r := range u.rooms {
		coldest, warmest = math.Min(coldest, r.airC), math.Max(warmest, r.airC)
		r.coolCall = r.airC > r.spec.coolOnC-pick(r.coolCall, 0.8, 0) && (!r.spec.meeting || r.people > 0)
		r.heatCall = r.airC < 20.3+pick(r.heatCall, 0.8, 0)
		anyHeat = anyHeat || r.heatCall
		if r.coolCall && !r.ignored {
			anyCool = true
			if above := r.airC - r.spec.coolOnC; above > worst {
				worst, caller = above, r.index
			}
		}
	}
	start := 7 * 60
	if s.clockStart >= 0 {
		start = s.clockStart
	}
	inHours := d.working && minuteOfDay >= start && minuteOfDay < s.stopMin
	// Two to three hours of warm-up on cold mornings.
	lead := clamp((20.6-coldest)*55, 0, 175)
	warmUp := d.working && float64(minuteOfDay) >= 480-lead && minuteOfDay < 480 && coldest < 20.4
	u.outside = inHours && s.kind == airHandler && minuteOfDay >= max(start, 390)
	u.purging = false
	if s.kind == ceilingUnit {
		u.ceiling(inHours, warmUp, anyHeat, anyCool, coldest)
		u.caller = caller
		return
	}
	switch {
	case !inHours:
		u.idle(d, minuteOfDay, out, warmUp, coldest, warmest)
		return
	case s.clockStart >= 0 && minuteOfDay < s.clockHold:
		u.run(ReasonClockStart, -1)
	case anyHeat:
		u.run(ReasonHeating, -1)
	case out.tempC < s.naturalLowC+pick(u.mode == modeOpen, -0.5, 0) || out.tempC > s.naturalHighC+pick(u.mode == modeOpen, 0.5, 0):
		u.run(ReasonOutdoorLimit, -1)
	case anyCool:
		u.run(ReasonIndoorLimit, caller)
	case u.mode == modeRun && u.runFor < s.minRunMin:
		u.runFor++
	case u.mode == modeRun:
		u.mode, u.code, u.lockFor, u.reason, u.coil = modeLocked, codeOff, 0, ReasonSlowReopen, false
	case u.mode == modeLocked && u.lockFor < s.reopenMin:
		u.lockFor++
	default:
		u.mode, u.code, u.reason = modeOpen, codeOff, ReasonNone
	}
	if u.mode == modeRun {
		u.code = codeVent
		if anyCool {
			u.code = codeCool
		} else if anyHeat || u.coil {
			u.code = codeHeat
		}
	}
}

// run keeps or starts the unit for a reason.
func (u *unit) run(why Reason, caller int) {
	if u.mode != modeRun {
		u.runFor = 0
	}
	u.mode, u.reason, u.caller = modeRun, why, caller
	u.runFor++
}

// idle is the unit outside its programme: warm-up, frost guard, night purge.
func (u *unit) idle(d *day, minuteOfDay int, out *outdoorNow, warmUp bool, coldest, warmest float64) {
	u.mode, u.reason, u.caller, u.coil = modeIdle, ReasonNone, -1, false
	switch {
	case warmUp || coldest < 15+pick(u.code == codeHeat, 1.5, 0):
		u.code, u.reason = codeHeat, ReasonHeating
	default:
		u.code = codeOff
	}
	season := (d.date.Month == 6 && d.date.Day >= 10) || d.date.Month == 7 || d.date.Month == 8 || (d.date.Month == 9 && d.date.Day < 8)
	u.purging = u.spec.purge && season && u.code == codeOff && (minuteOfDay >= 22*60 || minuteOfDay < 6*60+30) &&
		warmest > 23 && out.tempC < warmest-2.5 && out.tempC > 10
}

// ceiling is the programme of units that only move the room's own air: their
// thermostats, nothing else.
func (u *unit) ceiling(inHours, warmUp, anyHeat, anyCool bool, coldest float64) {
	on := codeOff
	switch {
	case inHours && anyCool && !anyHeat:
		on = codeCool
	case (inHours && anyHeat) || warmUp || coldest < 15+pick(u.code == codeHeat, 1.5, 0):
		on = codeHeat
	case u.code == codeCool && u.runFor < u.spec.minRunMin && inHours:
		on = codeCool
	}
	if uint8(on) != u.code {
		u.runFor = 0
	}
	u.runFor++
	u.code = uint8(on)
	u.mode, u.reason = modeOpen, ReasonNone
	switch on {
	case codeCool:
		u.mode, u.reason = modeRun, ReasonIndoorLimit
	case codeHeat:
		u.mode, u.reason = modeRun, ReasonHeating
	}
	if !inHours {
		u.mode = modeIdle
	}
}

// supply sets the air and heat the unit gives to its rooms for a minute.
func (u *unit) supply(out *outdoorNow) {
	running := u.code != codeOff
	var flow, tret, cret, wret, fresh, heatW, coolW float64
	for _, r := range u.rooms {
		r.supplyLs, r.panels, r.outdoorShare = 0, 0, 0
		if !running {
			continue
		}
		area := r.spec.areaM2
		if u.code == codeHeat && !r.spec.core {
			r.panels = area * 55 * ramp(21.6-r.airC, 0, 1.6)
			heatW += r.panels
		}
		if u.spec.kind == ceilingUnit {
			if u.code == codeCool {
				part := math.Max(0.2, ramp(r.airC, r.spec.coolOnC-1.2, r.spec.coolOnC+0.3))
				q := area * 45 * part
				r.panels = -q
				coolW += q
			}
			continue
		}
		r.supplyLs = area * 1.0
		if u.code == codeCool {
			r.supplyLs = area * (0.9 + 2.1*ramp(r.airC, r.spec.coolOnC-1.0, r.spec.coolOnC+0.6))
		}
		flow += r.supplyLs
		tret += r.supplyLs * r.airC
		cret += r.supplyLs * r.co2
		wret += r.supplyLs * r.ratio
		fresh += area * 0.85 // the code's minimum, common practice
	}
	target := 22.0
	if u.spec.kind == ceilingUnit {
		if u.code == codeCool {
			target = 13.5
		} else if u.code == codeHeat {
			target = 34
		}
		u.supplyC += (target - u.supplyC) * pick(running, 0.2, 0.03)
		u.powerKW = pick(running, 0.08*float64(len(u.rooms)), 0.01) + (coolW/3.0+heatW/3.4)/1000
		return
	}
	if flow == 0 {
		u.supplyC += (target - u.supplyC) * 0.03
		u.powerKW = 0.05
		return
	}
	share := 0.0
	if u.outside {
		share = math.Min(1, fresh/flow)
	}
	tret, cret, wret = tret/flow+0.6, cret/flow, wret/flow
	mixC := share*out.tempC + (1-share)*tret
	mixCO2 := share*out.co2 + (1-share)*cret
	mixW := share*out.ratio + (1-share)*wret
	target = mixC
	if u.code == codeCool {
		target = math.Min(12, mixC) // common practice
		mixW = math.Min(mixW, 0.0086)
		u.coil = false
	} else {
		u.coil = mixC < pick(u.coil, 17.0, 16.0)
		if u.coil || u.code == codeHeat {
			target = math.Max(mixC, 20)
		}
	}
	u.supplyC += (target - u.supplyC) * 0.2
	for _, r := range u.rooms {
		r.supplyC, r.supplyCO2, r.supplyRatio, r.outdoorShare = u.supplyC, mixCO2, mixW, share
	}
	cooling := math.Max(0, (mixC-target)*flow*airWKPerLs) * 1.25 // with the moisture taken out
	heating := heatW + math.Max(0, (target-mixC)*flow*airWKPerLs)
	u.powerKW = flow/1000*1.6 + cooling/3000 + heating/3400
}

func pick(cond bool, yes, no float64) float64 {
	if cond {
		return yes
	}
	return no
}
