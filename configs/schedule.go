package configs

import (
	"fmt"
	"os"
	"slices"
	"strconv"
	"strings"

	"sashlog/configs/schedule"
)

// ScheduleColumns are the columns of a trial's schedule; the first five are
// needed. Design, seed, change, zones and untouched are the same on every row,
// so that the table survives a spreadsheet.
var ScheduleColumns = []string{"date", "block", "week", "setting", "design", "weekday", "ran", "note", "seed", "change", "zones", "untouched"}

// Words of the columns setting and ran.
const (
	SettingTrial = "trial"
	SettingUsual = "usual"
)

// ReadSchedule reads the schedule of a trial. Mistakes are [Problems].
func ReadSchedule(path string) (*schedule.Schedule, error) {
	raw, err := os.ReadFile(path)
	if err != nil {
		return nil, fmt.Errorf("cannot read the schedule: %w; hint: it is the schedule.csv that sashlog trial wrote", err)
	}
	return parseSchedule(path, raw)
}

func parseSchedule(file string, raw []byte) (*schedule.Schedule, error) {
	var ps Problems
	out := &schedule.Schedule{}
	t := openTable(file, raw, ScheduleColumns, 5, &ps)
	if t == nil || len(ps) > 0 {
		return nil, ps.tidy()
	}
	var lines []row
	for {
		r, ok := t.next()
		if !ok {
			break
		}
		if len(lines) == 0 {
			scheduleHead(out, &r)
		} else {
			sameAsFirst(&r, &lines[0])
		}
		out.Days = append(out.Days, scheduledDay(&r))
		lines = append(lines, r)
	}
	if len(ps) == 0 {
		for _, p := range out.Check() {
			if p.Day < 0 {
				t.add(1, 1, p.Text, "")
				continue
			}
			lines[p.Day].at("date", "a schedule is only of use as it was drawn; write what was really run into the column ran", "%s", p.Text)
		}
	}
	if len(ps) > 0 {
		return nil, ps.tidy()
	}
	return out, nil
}

// scheduleHead reads what all rows share.
func scheduleHead(out *schedule.Schedule, r *row) {
	out.Design = schedule.Design(strings.ToLower(r.cell("design")))
	if !slices.Contains(schedule.Designs(), out.Design) {
		r.at("design", didYouMean(string(out.Design), words(schedule.Designs())), "unknown design %q", r.cell("design"))
	}
	out.Setting = r.cell("change")
	if text := r.cell("seed"); text != "" {
		n, err := strconv.ParseUint(text, 10, 64)
		if err != nil {
			r.at("seed", "", "seed is %q: not a whole number", text)
		}
		out.Seed = n
	}
	out.Zones, out.Untouched = parted(r.cell("zones")), parted(r.cell("untouched"))
}

// parted splits ids parted by semicolons.
func parted(text string) []string {
	var out []string
	for id := range strings.SplitSeq(text, ";") {
		if id = strings.TrimSpace(id); id != "" {
			out = append(out, id)
		}
	}
	return out
}

// sameAsFirst holds the columns that all rows share against the first row.
func sameAsFirst(r, first *row) {
	for _, c := range []string{"design", "seed", "change", "zones", "untouched"} {
		if r.cell(c) != first.cell(c) {
			r.at(c, "one schedule is one trial", "%s is %q, on line %d it is %q", c, r.cell(c), first.line, first.cell(c))
		}
	}
}

func scheduledDay(r *row) schedule.Day {
	var d schedule.Day
	var ok bool
	if d.Date, ok = parseDate(r.cell("date")); !ok {
		r.at("date", "write 2026-05-11; a spreadsheet that turns days round is told to keep the column as text", "date is %q: not a day", r.cell("date"))
	}
	number := func(column string, most int) int {
		n, err := strconv.Atoi(r.cell(column))
		if err != nil || n < 1 || n > most {
			r.at(column, "", "%s is %q: not a number from 1 to %d", column, r.cell(column), most)
			return 1
		}
		return n
	}
	d.Block, d.Week = number("block", 10000), number("week", 2)-1
	settings := []string{SettingTrial, SettingUsual}
	switch s := strings.ToLower(r.cell("setting")); s {
	case SettingTrial:
		d.Trial = true
	case SettingUsual:
	default:
		r.at("setting", didYouMean(s, settings), "unknown setting %q", r.cell("setting"))
	}
	notes := []schedule.Ran{schedule.RanTrial, schedule.RanUsual, schedule.Stopped}
	d.Ran, d.Note = schedule.Ran(strings.ToLower(r.cell("ran"))), r.cell("note")
	if d.Ran != schedule.NotNoted && !slices.Contains(notes, d.Ran) {
		r.at("ran", didYouMean(string(d.Ran), words(notes))+", or leave it empty", "unknown word %q", r.cell("ran"))
	}
	return d
}
