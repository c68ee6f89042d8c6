package sheet

import (
	"strings"
	"testing"
	"unicode/utf8"
)

// The table of several specs aligns and stays within 80 columns whatever the names; color changes no column.
func TestTableFitsEightyColumns(t *testing.T) {
	rows := []Outcome{
		{Part: "stick-lift", Verdict: "RELEASED", Good: true, Gates: 16, Passed: 16},
		{Part: strings.Repeat("part-", 12), Verdict: "REFUSED", Gates: 7, Passed: 4, Note: strings.Repeat("pressure-angle, ", 9)},
		{Part: "Kreide\tnocken", Verdict: "NOT WRITTEN", Note: "see its message"},
	}
	table := Table(rows, false)
	lines := strings.Split(strings.TrimSpace(table), "\n")
	if len(lines) != 6 || lines[5] != "1 of 3 specs pass" {
		t.Fatalf("table:\n%s", table)
	}
	for _, line := range lines {
		if n := utf8.RuneCountInString(line); n > columns {
			t.Errorf("%d columns: %s", n, line)
		}
	}
	for i, want := range []string{"RELEASED", "REFUSED", "NOT WRITTEN"} {
		if at := strings.Index(lines[2+i], want); at != partWidth+2 {
			t.Errorf("%s stands in column %d", want, at)
		}
	}
	painted := Table(rows, true)
	if painted == table {
		t.Error("color paints nothing")
	}
	for _, code := range []string{failColor, passColor, headColor, noColor} {
		painted = strings.ReplaceAll(painted, code, "")
	}
	if strings.ReplaceAll(painted, " ", "") != strings.ReplaceAll(table, " ", "") {
		t.Errorf("color changes more than color:\n%s", painted)
	}
}
