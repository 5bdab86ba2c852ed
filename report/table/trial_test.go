package table

import (
	"bytes"
	"os"
	"path/filepath"
	"reflect"
	"testing"

	"sashlog/configs"
	"sashlog/configs/schedule"
	"sashlog/configs/site"
)

// What the plan writes is what the verdict reads, hostile notes and names
// included.
func TestScheduleComesBack(t *testing.T) {
	for _, design := range schedule.Designs() {
		s := schedule.Schedule{Design: design, Seed: 1<<64 - 1, Setting: "AHU-1/outdoors-above", Zones: []string{"L1.01", "room, east"}, Untouched: []string{`say "c"`},
			Days: schedule.Draw(design, 5, site.Date{Year: 2026, Month: 5, Day: 4}, 3, 0b0111110, []site.Date{{Year: 2026, Month: 5, Day: 14}})}
		s.Days[2].Ran, s.Days[2].Note = schedule.Stopped, "rain, \"heavy\"\nand wind"
		var b bytes.Buffer
		if err := WriteScheduleCSV(&b, Input{Site: &site.Site{}}, &s); err != nil {
			t.Fatal(err)
		}
		path := filepath.Join(t.TempDir(), "schedule.csv")
		if err := os.WriteFile(path, b.Bytes(), 0o600); err != nil {
			t.Fatal(err)
		}
		got, err := configs.ReadSchedule(path)
		if err != nil {
			t.Fatalf("%v\n%s", err, b.String())
		}
		s.Days[2].Note = got.Days[2].Note // line ends are written as spaces
		if !reflect.DeepEqual(*got, s) {
			t.Errorf("wrote %+v\nread %+v", s, *got)
		}
	}
}
