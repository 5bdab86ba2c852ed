package site

import (
	"encoding/json"
	"fmt"
	"strings"
	"testing"
)

func TestSeries(t *testing.T) {
	f := &Influx{Measurement: "readings", Field: "value"}
	for column, want := range map[string][3]string{
		"L1.02 temp":        {"readings", "value", "L1.02 temp"},
		"air|temp|L1.02":    {"air", "temp", "L1.02"},
		"|temp|L1.02":       {"readings", "temp", "L1.02"},
		"air||L1.02":        {"air", "value", "L1.02"},
		"||north|south|top": {"readings", "value", "north|south|top"},
		"north|south":       {"readings", "value", "north|south"},
	} {
		m, fd, v := f.Series(column)
		if got := [3]string{m, fd, v}; got != want {
			t.Errorf("%q: got %q, want %q", column, got, want)
		}
	}
}

func TestSecretStaysHidden(t *testing.T) {
	l := Log{Influx: &Influx{Token: NewSecret("s3cr3t")}}
	j, err := json.Marshal(l)
	if err != nil {
		t.Fatal(err)
	}
	for _, shown := range []string{string(j), fmt.Sprintf("%v", *l.Influx), fmt.Sprintf("%+v", *l.Influx), fmt.Sprintf("%#v", *l.Influx),
		fmt.Sprintf("%s %q %x %d", l.Influx.Token, l.Influx.Token, l.Influx.Token, l.Influx.Token), l.Influx.Token.String()} {
		if strings.Contains(shown, "s3cr3t") || strings.Contains(shown, fmt.Sprintf("%x", "s3cr3t")) {
			t.Errorf("the token shows in %s", shown)
		}
	}
	if l.Influx.Token.Reveal() != "s3cr3t" {
		t.Error("the token is lost")
	}
}
