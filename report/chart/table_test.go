package chart

import (
	"os"
	"path/filepath"
	"reflect"
	"regexp"
	"strings"
	"testing"
)

func TestTable(t *testing.T) {
	header, rows := Table(ExceedanceData{Caption: Caption{Title: "x"}, XTitle: "y", Zones: []ZoneExceedance{
		{Zone: "a", TooWarm: Bounded{Value: 1, Low: 0.5, High: 2}, TooCool: Bounded{Value: 3}}, {Zone: "b"}}})
	wantHeader := []string{"part", "zones.no", "zones.zone", "zones.too_warm.value", "zones.too_warm.low", "zones.too_warm.high",
		"zones.too_cool.value", "zones.too_cool.low", "zones.too_cool.high"}
	if !reflect.DeepEqual(header, wantHeader) {
		t.Errorf("header %q", header)
	}
	if want := [][]string{{"zones", "1", "a", "1", "0.5", "2", "3", "0", "0"}, {"zones", "2", "b", "0", "0", "0", "0", "0", "0"}}; !reflect.DeepEqual(rows, want) {
		t.Errorf("rows %q", rows)
	}
	// Lists within lists repeat what stands above them.
	header, rows = Table(CO2DurationData{Zones: []CO2Zone{{Zone: "a", Curves: []CO2Curve{{State: Open, Points: []XY{{0, 900}, {1, 500}}}}}}, Limits: []Limit{{1350, "II"}}})
	joined := strings.Join(header, ",")
	if !strings.Contains(joined, "zones.curves.points.x") || !strings.Contains(joined, "zones.curves.points.y") || len(rows) != 3 {
		t.Errorf("header %q, %d rows %q", header, len(rows), rows)
	}
}

// Every figure tells what it is drawn from, so that its data can be exported.
func TestEveryFigureRecords(t *testing.T) {
	figure := regexp.MustCompile(`(?m)^func ([A-Z]\w*)\(d \w+, o Options\) \(SVG, error\) \{\n(.*)$`)
	files, err := filepath.Glob("*.go")
	if err != nil {
		t.Fatal(err)
	}
	found := 0
	for _, f := range files {
		text, err := os.ReadFile(f)
		if err != nil {
			t.Fatal(err)
		}
		for _, m := range figure.FindAllStringSubmatch(string(text), -1) {
			found++
			if strings.TrimSpace(m[2]) != "o.record(d)" {
				t.Errorf("%s: %s does not begin with o.record(d)", f, m[1])
			}
		}
	}
	if found < 10 {
		t.Errorf("only %d figures found", found)
	}
}
