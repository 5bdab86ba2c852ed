package table

import (
	"strings"
	"testing"
)

func TestFigureCSV(t *testing.T) {
	var b strings.Builder
	if err := WriteFigureCSV(&b, []string{"part", "x"}, [][]string{{"=cmd()", "-1.5"}, {"a,b", "1e-05"}, {"-", "+1"}}); err != nil {
		t.Fatal(err)
	}
	if want := bom + "part,x\n'=cmd(),-1.5\n\"a,b\",1e-05\n'-,'+1\n"; b.String() != want {
		t.Errorf("got %q\nwant %q", b.String(), want)
	}
}
