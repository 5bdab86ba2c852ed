package configs

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

const scheduleHeader = "date,block,week,setting,design,weekday,ran,note,seed,change,zones,untouched\n"

// A schedule of two days a week, one fortnight.
func scheduleText(rows ...string) string {
	return scheduleHeader + strings.Join(rows, "\n") + "\n"
}

func TestScheduleIsRead(t *testing.T) {
	good := scheduleText("2026-05-04,1,1,trial,days,Monday,trial,,7,AHU-1/outdoors-above,a; b,c",
		"2026-05-05,1,1,usual,days,Tuesday,,,7,AHU-1/outdoors-above,a; b,c",
		"2026-05-11,1,2,usual,days,Monday,stopped,heat,7,AHU-1/outdoors-above,a; b,c",
		"2026-05-12,1,2,trial,days,Tuesday,,,7,AHU-1/outdoors-above,a; b,c")
	// A spreadsheet saves with semicolons and a byte order mark.
	for name, text := range map[string]string{"comma": good, "semicolon": "\ufeff" + strings.ReplaceAll(strings.ReplaceAll(good, "a; b", `"a; b"`), ",", ";")} {
		s, err := parseSchedule("schedule.csv", []byte(text))
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		if len(s.Days) != 4 || s.Seed != 7 || len(s.Zones) != 2 || s.Zones[1] != "b" || len(s.Untouched) != 1 || !s.Days[0].Trial || s.Days[2].Ran != "stopped" || s.Days[2].Note != "heat" {
			t.Errorf("%s: %+v", name, s)
		}
	}
	path := filepath.Join(t.TempDir(), "schedule.csv")
	if err := os.WriteFile(path, []byte(good), 0o600); err != nil {
		t.Fatal(err)
	}
	if _, err := ReadSchedule(path); err != nil {
		t.Error(err)
	}
	if _, err := ReadSchedule(path + "x"); err == nil || !strings.Contains(err.Error(), "hint") {
		t.Errorf("a missing file: %v", err)
	}
}

func TestScheduleMistakes(t *testing.T) {
	row := func(date, block, week, setting, design, ran, seed string) string {
		return strings.Join([]string{date, block, week, setting, design, "", ran, "", seed, "", "a", ""}, ",")
	}
	second := row("2026-05-11", "1", "2", "usual", "days", "", "1")
	for want, text := range map[string]string{
		"the table is empty":                      "",
		`column "design" is missing`:              "date,block,week,setting\n",
		"the schedule has no days":                scheduleHeader,
		`schedule.csv:2:1: date is "04.05.2026"`:  scheduleText(row("04.05.2026", "1", "1", "trial", "days", "", "1")),
		`block is "0"`:                            scheduleText(row("2026-05-04", "0", "1", "trial", "days", "", "1")),
		`week is "3"`:                             scheduleText(row("2026-05-04", "1", "3", "trial", "days", "", "1")),
		`unknown setting "trail"; hint: allowed`:  scheduleText(row("2026-05-04", "1", "1", "trail", "days", "", "1")),
		`unknown design "hours"`:                  scheduleText(row("2026-05-04", "1", "1", "trial", "hours", "", "1")),
		`unknown word "yes"`:                      scheduleText(row("2026-05-04", "1", "1", "trial", "days", "yes", "1")),
		`seed is "-1"`:                            scheduleText(row("2026-05-04", "1", "1", "trial", "days", "", "-1")),
		`seed is "2", on line 2 it is "1"`:        scheduleText(row("2026-05-04", "1", "1", "trial", "days", "", "1"), row("2026-05-11", "1", "2", "usual", "days", "", "2")),
		"schedule.csv:3:1: 2026-05-04 does not c": scheduleText(second, row("2026-05-04", "1", "1", "trial", "days", "", "1")),
		"block 1 is not as it can have been draw": scheduleText(row("2026-05-04", "1", "1", "usual", "days", "", "1"), second),
		"is not in week 2 of block 1":             scheduleText(row("2026-05-04", "1", "1", "trial", "days", "", "1"), row("2026-05-18", "1", "2", "usual", "days", "", "1")),
	} {
		_, err := parseSchedule("schedule.csv", []byte(text))
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("want %q, got %v", want, err)
		}
	}
}

func FuzzSchedule(f *testing.F) {
	f.Add(scheduleText("2026-05-04,1,1,trial,days,Monday,trial,,7,x,a; b,c"))
	f.Add("date;block;week;setting;design\n2026-05-04;1;1;trial;weeks\n2026-05-11;1;2;usual;weeks\n")
	f.Fuzz(func(t *testing.T, text string) {
		if s, err := parseSchedule("s.csv", []byte(text)); err == nil && (len(s.Days) == 0 || len(s.Check()) > 0) {
			t.Errorf("%+v", s)
		}
	})
}
