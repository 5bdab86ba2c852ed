package demo

import (
	"bufio"
	"fmt"
	"slices"
	"strconv"
)

// writeWindows writes the change-of-value logs of the windows: contacts with
// text, driven windows with percent, both on the site's wall clock.
func (b *building) writeWindows(dir string) error {
	log := b.sim.windowLog
	slices.SortStableFunc(log, func(x, y windowEvent) int { return int(x.at - y.at) })
	contacts := func(w *bufio.Writer) error {
		w.WriteString("Time,Contact,State\n")
		return b.eachWindow(w, log, false)
	}
	positions := func(w *bufio.Writer) error {
		w.WriteString("Time;Drive;Position\n")
		return b.eachWindow(w, log, true)
	}
	if err := writeFile(dir, "logs/windows.csv", contacts); err != nil {
		return err
	}
	if !b.hasPositions() {
		return nil
	}
	return writeFile(dir, "logs/window_drives.csv", positions)
}

func (b *building) hasPositions() bool {
	for i := range b.zones {
		for _, w := range b.zones[i].windows {
			if w.position {
				return true
			}
		}
	}
	return false
}

func (b *building) eachWindow(w *bufio.Writer, log []windowEvent, position bool) error {
	clock := zoneClock{loc: b.loc}
	var date civil
	var buf []byte
	for _, e := range log {
		spec := &b.zones[e.zone].windows[e.win]
		if spec.position != position {
			continue
		}
		buf = date.appendYMD(buf[:0], e.at+clock.offset(e.at), ' ')
		if position {
			buf = append(append(append(buf, ';'), spec.key...), ';')
			buf = strconv.AppendInt(buf, int64(100*e.open), 10)
		} else {
			open := e.open > 0
			if b.faultAt(FaultInverted, b.zones[e.zone].id, e.at) != nil {
				open = !open
			}
			buf = append(append(append(buf, ','), spec.key...), ',')
			if open {
				buf = append(buf, "Open"...)
			} else {
				buf = append(buf, "Closed"...)
			}
		}
		if _, err := w.Write(append(buf, '\n')); err != nil {
			return fmt.Errorf("demo: write windows: %w", err)
		}
	}
	return nil
}

var stateWords = map[plantKind][5]string{
	airHandler:  {"Off", "On", "Fan only", "Heating", "Cooling"},
	ceilingUnit: {"Stop", "Run", "Fan", "Heat", "Cool"},
}

// writePlantStatus writes states and window releases of the units on one
// change-of-value log, in standard time all year.
func (b *building) writePlantStatus(dir string) error {
	type row struct {
		at   int64
		key  string
		word string
	}
	var rows []row
	for _, e := range b.sim.stateLog {
		u := b.units[e.unit]
		rows = append(rows, row{e.at, u.spec.id, stateWords[u.spec.kind][e.state]})
	}
	for _, e := range b.sim.releaseLog {
		word := "Locked"
		if e.state == 1 {
			word = "Released"
		}
		rows = append(rows, row{e.at, b.units[e.unit].spec.id + " windows", word})
	}
	slices.SortStableFunc(rows, func(x, y row) int { return int(x.at - y.at) })
	return writeFile(dir, "logs/plant_status.csv", func(w *bufio.Writer) error {
		w.WriteString("Timestamp;Object;Value\n")
		var date civil
		var buf []byte
		for _, r := range rows {
			buf = date.appendYMD(buf[:0], r.at+3600, ' ')
			buf = append(append(append(append(append(buf, ';'), r.key...), ';'), r.word...), '\n')
			if _, err := w.Write(buf); err != nil {
				return fmt.Errorf("demo: write plant status: %w", err)
			}
		}
		return nil
	})
}

// presenceZones have a presence detector.
var presenceZones = []string{"L1.03", "L2.05", "L3.06"}

// writePresence writes the presence detectors, changes of value in local time.
func (b *building) writePresence(dir string) error {
	if !b.hasPresence() {
		return nil
	}
	log := b.sim.presenceLog
	slices.SortStableFunc(log, func(x, y presenceEvent) int { return int(x.at - y.at) })
	return writeFile(dir, "logs/presence.csv", func(w *bufio.Writer) error {
		w.WriteString("time,detector,state\n")
		clock := zoneClock{loc: b.loc}
		var date civil
		var buf []byte
		for _, e := range log {
			id := b.zones[e.zone].id
			if !slices.Contains(presenceZones, id) {
				continue
			}
			buf = date.appendYMD(buf[:0], e.at+clock.offset(e.at), ' ')
			buf = append(append(append(buf, ','), "PIR "+id...), ',')
			if e.on {
				buf = append(buf, "Occupied\n"...)
			} else {
				buf = append(buf, "Vacant\n"...)
			}
			if _, err := w.Write(buf); err != nil {
				return fmt.Errorf("demo: write presence: %w", err)
			}
		}
		return nil
	})
}

func (b *building) hasPresence() bool {
	for i := range b.zones {
		if slices.Contains(presenceZones, b.zones[i].id) {
			return true
		}
	}
	return false
}
