package privacy_test

import (
	"math"
	"testing"

	"sashlog/configs/site"
	"sashlog/report/privacy"
)

func sample(p site.Privacy) *site.Site {
	return &site.Site{Privacy: p, Zones: []site.Zone{
		{ID: "L1.02", Name: "Room East", People: 2}, {ID: "L1.02 east", People: 12},
		{ID: "hall", Name: "Hall", People: math.NaN()}, {ID: "box", People: 1}, {ID: "store", People: 0},
		{ID: "inner", People: 9, Openings: site.Openings{Through: []string{"box"}}}, {ID: "inner 2", People: 9, Openings: site.Openings{Through: []string{"L1.02 east"}}}}}
}

func TestProtected(t *testing.T) {
	r := privacy.For(sample(site.Privacy{}))
	for i, want := range []bool{true, false, false, true, false, true, false} {
		if got := r.Protected(i); got != want {
			t.Errorf("zone %d: protected %v, want %v", i, got, want)
		}
	}
	if p, u := r.Count(); p != 3 || u != 1 {
		t.Errorf("count: %d protected and %d unstated, want 3 and 1", p, u)
	}
	if !r.ProtectedTogether([]int{0, 3}) || r.ProtectedTogether([]int{0, 1}) || r.ProtectedTogether([]int{0, 2}) {
		t.Error("three people together are protected; fourteen, or an unstated number, are not")
	}
	if privacy.For(sample(site.Privacy{Internal: true})).Protected(0) {
		t.Error("privacy: internal shows all")
	}
}

func TestCodes(t *testing.T) {
	r := privacy.For(sample(site.Privacy{Codes: true}))
	for _, c := range []struct{ in, want string }{
		{"L1.02 was shut", "Z01 was shut"},
		{"in L1.02 east, not L1.020", "in Z02, not L1.020"},
		{"Room East and Hall; whole hallway", "Z01 and Z03; whole hallway"},
		{"", ""},
	} {
		if got := r.Text(c.in); got != c.want {
			t.Errorf("%q: got %q, want %q", c.in, got, c.want)
		}
	}
	if r.ID(2) != "Z03" || r.Name(2) != "" || r.File(0, "east.csv") != "file 1" {
		t.Error("codes must replace ids, names and file names")
	}
	if got := privacy.For(sample(site.Privacy{})).Text("L1.02"); got != "L1.02" {
		t.Errorf("without codes text stays: %q", got)
	}
}
