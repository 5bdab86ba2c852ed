package configs

import "testing"

func TestSampleLoads(t *testing.T) {
	l, err := Load("sample/site.yaml", nil)
	if err != nil {
		t.Fatal(err)
	}
	if len(l.Warnings) > 0 {
		t.Error(l.Warnings)
	}
	if len(l.Site.Points) != 11 || len(l.Site.Diary) != 4 || len(l.Files) != 3 {
		t.Errorf("points %d, diary %d, files %d", len(l.Site.Points), len(l.Site.Diary), len(l.Files))
	}
}
