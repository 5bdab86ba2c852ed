package demo

import (
	"math/rand/v2"
)

// window is the state of one window or group.
type window struct {
	spec *windowSpec
	open float64 // 0 to 1
	// A movement due within the current step.
	due    int64 // unix seconds, 0 when none
	target float64
}

// windowEvent is one movement as the window log sees it.
type windowEvent struct {
	at   int64
	zone int16
	win  int16
	open float32
}

// lamp is what the plant tells the people of a zone.
type lamp uint8

const (
	lampNone  lamp = iota // no signal in the zone
	lampGreen             // windows released
	lampRed               // unit running or windows locked
)

// decide lets the people of a zone think about their windows, once per step.
//
// Opening and closing follow the transition forms of Haldi & Robinson 2009
// with indoor and outdoor temperature, speeded up on arrival and by a signal
// lamp; closing also for cold draughts, rain and leaving. The probabilities
// are per window and 5 minutes.
func (r *room) decide(rng *rand.Rand, t int64, out *outdoorNow, l lamp, before int, minuteOfDay int, running bool) {
	if r.spec.drive != manual && r.spec.drive != mixed {
		return
	}
	// The draws are made whatever happens, so that one zone's plant does not
	// shift another day's luck.
	airing, pause, length := rng.Float64(), 1+rng.IntN(stepS-2), rng.IntN(420)
	openLuck, closeLuck := rng.Float64(), rng.Float64()
	if r.spec.neverOpens {
		return
	}
	stormy := out.rainMMh > 0.4 || out.windMS > 9
	anyOpen := false
	for i := range r.windows {
		w := &r.windows[i]
		if w.spec.position {
			continue
		}
		// One luck per zone, spread over its windows.
		po, pc := openLuck+0.31*float64(i), closeLuck+0.37*float64(i)
		po -= float64(int(po))
		pc -= float64(int(pc))
		if w.open > 0 {
			anyOpen = true
			p := closeChance(r.airC, out.tempC)
			switch {
			case r.airingUntil > 0 && t >= r.airingUntil:
				p = 1
			case r.people == 0 && before > 0: // the last to leave
				p = 0.4
				if minuteOfDay >= 960 {
					p = 0.85
				}
			case r.people == 0 && minuteOfDay >= 1065 && minuteOfDay < 1200:
				p = 0.05 // a colleague or the cleaners; some stay open overnight
			case r.people == 0:
				p = 0
			default:
				if out.tempC < 11 {
					p += 0.12
				}
				if r.airC < 20.6 {
					p += 0.22
				}
				if out.tempC > r.airC+1.5 {
					p += 0.05
				}
				if stormy {
					p += 0.25
				}
				if l == lampRed {
					p += 0.17
				} else if running {
					p += 0.03
				}
			}
			if pc < p {
				w.due, w.target = t+int64(pause), 0
			}
			continue
		}
		if r.people == 0 || stormy {
			continue
		}
		p := r.habit * openChance(r.airC, out.tempC)
		switch {
		case l == lampGreen:
			p *= 13
		case l == lampRed:
			p *= 0.12
		case running:
			p *= 0.8
		default:
			p *= 3
		}
		if before == 0 { // just come in
			p *= 3
		}
		if out.tempC < 8 {
			p *= 0.15
		}
		if out.tempC > r.airC {
			p *= 0.4
		}
		if po < p {
			w.due, w.target = t+int64(pause), 1
		}
	}
	if !anyOpen {
		r.airingUntil = 0
		// Stuffy rooms are aired for some minutes, also in winter.
		if r.people > 0 && !stormy && r.co2 > 1000 && airing < 0.02*r.habit && l != lampRed {
			for i := range r.windows {
				if !r.windows[i].spec.position && r.windows[i].due == 0 {
					r.windows[i].due, r.windows[i].target = t+int64(pause), 1
				}
			}
			r.airingUntil = t + 240 + int64(length)
		}
	}
}

// openChance and closeChance: Haldi & Robinson 2009, transitions with two
// temperatures, per 5 minutes (coefficients read in a public text; the step
// from memory).
func openChance(inC, outC float64) float64  { return logistic(-11.78 + 0.263*inC + 0.039*outC) }
func closeChance(inC, outC float64) float64 { return logistic(-4.14 + 0.026*inC - 0.065*outC) }

// clean opens the windows of a zone that nobody opens otherwise, on two days a
// year, for the cleaning of the panes.
func (r *room) clean(t int64, d *day, minuteOfDay int) {
	if !r.spec.neverOpens || d.weekday != 4 || d.date.Day > 7 || (d.date.Month != 4 && d.date.Month != 10) {
		return
	}
	switch minuteOfDay {
	case 14*60 + 10:
		for i := range r.windows {
			r.windows[i].due, r.windows[i].target = t+42+int64(i)*50, 1
		}
	case 14*60 + 35:
		for i := range r.windows {
			r.windows[i].due, r.windows[i].target = t+95+int64(i)*50, 0
		}
	}
}

// drive moves the automatic windows, once per minute.
func (r *room) driveWindows(now int64, out *outdoorNow, released, purge bool) {
	if r.spec.drive != automatic && r.spec.drive != mixed {
		return
	}
	want := 0.0
	guard := out.guard
	switch {
	case guard:
	case purge:
		want = 0.5
	case released && out.tempC < r.airC+0.5:
		switch demand := (r.airC - 21.6) / 2.4; {
		case demand > 0.75:
			want = 1
		case demand > 0.45:
			want = 0.75
		case demand > 0.2:
			want = 0.5
		case demand > 0 || r.co2 > 780:
			want = 0.25
		}
		if out.tempC < 14 {
			want = min(want, 0.5)
		}
		if r.airC < 20.8 {
			want = 0
		}
	}
	for i := range r.windows {
		w := &r.windows[i]
		if !w.spec.position || w.due != 0 || w.open == want {
			continue
		}
		if want > 0 && now-r.movedMin < 480 { // not restless
			continue
		}
		if want == 0 && released && !guard && now-r.movedMin < 900 {
			continue
		}
		w.due, w.target = now+int64(5+7*i), want
		r.movedMin = now
	}
}

// settle carries out the movements due in the minute from now, gives the open
// share as its mean over the minute, and reports the movements.
func (r *room) settle(now int64, log *[]windowEvent) {
	if len(r.windows) == 0 {
		return
	}
	share := 0.0
	for i := range r.windows {
		w := &r.windows[i]
		if w.due == 0 || w.due >= now+60 {
			share += w.spec.share * w.open
			continue
		}
		at := max(w.due, now)
		share += w.spec.share * (w.open*float64(at-now) + w.target*float64(now+60-at)) / 60
		w.due = 0
		if w.target != w.open {
			w.open = w.target
			*log = append(*log, windowEvent{at, int16(r.index), int16(i), float32(w.open)})
		}
	}
	r.share = share
}
