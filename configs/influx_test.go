package configs

import (
	"encoding/json"
	"fmt"
	"path/filepath"
	"strings"
	"testing"

	"sashlog/configs/site"
)

func TestInflux(t *testing.T) {
	env := func(name string) string { return map[string]string{"HOUSE_TOKEN": " s3cr3t\n"}[name] }
	l, err := Load(filepath.Join(corpus, "influx.good.yaml"), env)
	if err != nil {
		t.Fatal(err)
	}
	log := l.Site.Logs[0]
	if log.Influx.Token.Reveal() != "s3cr3t" || log.Influx.Address != "https://influx.example:8086" || log.Influx.TimeOutS != 600 ||
		log.Influx.Read != site.InfluxRaw || log.Clock.Kind != site.ClockUTC || log.Clock.ShiftS != -3600 || l.Site.Logs[1].Influx != nil {
		t.Errorf("%+v", log)
	}
	j, err := json.Marshal(l)
	if err != nil && !strings.Contains(err.Error(), "NaN") {
		t.Fatal(err)
	}
	if shown := string(j) + fmt.Sprintf("%+v %+v", *l, *log.Influx) + strings.Join(l.FromEnvironment, " "); strings.Contains(shown, "s3cr3t") {
		t.Error("the token shows")
	}
}

// What an entry leaves out.
func TestInfluxDefaults(t *testing.T) {
	dir := t.TempDir()
	write(t, filepath.Join(dir, "points.csv"), []byte("source,column,belongs_to,quantity\nhouse,x,A,air_temp\nair|temp|L1.02,y,A,co2\n"))
	write(t, filepath.Join(dir, "site.yaml"), []byte(`site: {name: Test House, time_zone: Europe/Zurich}
occupancy: {times: [{days: mon-fri, from: "08:00", to: "18:00"}]}
zones: [{id: A}]
logs: [{influx: {address: "http://127.0.0.1:8086", bucket: house}}]
points: points.csv
`))
	_, err := Load(filepath.Join(dir, "site.yaml"), nil)
	if want := `points.csv:3:1: source is "air|temp|L1.02": no log of the site file has this name`; err == nil || !strings.Contains(err.Error(), want) {
		t.Errorf("got %v, want %s", err, want)
	}
	write(t, filepath.Join(dir, "points.csv"), []byte("source,column,belongs_to,quantity\nhouse,x,A,air_temp\nhouse,air|temp|L1.02,A,co2\n"))
	l, err := Load(filepath.Join(dir, "site.yaml"), nil)
	if err != nil {
		t.Fatal(err)
	}
	in := *l.Site.Logs[0].Influx
	want := site.Influx{Address: "http://127.0.0.1:8086", Bucket: "house", TokenEnv: "SASHLOG_INFLUX_TOKEN", Measurement: "readings", PointTag: "point",
		Field: "value", TimeOutS: 300, Read: site.InfluxMeans}
	if in != want || !in.Token.IsEmpty() || l.Site.Logs[0].Name != "house" || l.Site.Logs[0].Clock.Kind != site.ClockUTC {
		t.Errorf("%+v", l.Site.Logs[0])
	}
}
