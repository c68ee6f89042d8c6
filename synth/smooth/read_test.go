package smooth_test

import (
	"fmt"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"lobewright/synth/smooth"
)

// body returns rows of a good table from 0 in steps of 10 degrees, parted by sep.
func body(rows int, sep string) []string {
	var out []string
	for i := range rows {
		out = append(out, fmt.Sprintf("%d%s%.3f", 10*i, sep, float64(i%7)/4))
	}
	return out
}

func text(header string, rows ...string) []byte {
	return []byte(header + "\n" + strings.Join(rows, "\n") + "\n")
}

func TestReadForms(t *testing.T) {
	want, faults := smooth.Read(text("deg,mm", body(36, ",")...), 0.002)
	if faults != nil {
		t.Fatal(faults)
	}
	if len(want.Angle) != 36 || want.Angle[35] != 350 || want.Lift[6] != 1.5 || want.Line[0] != 2 || want.Names != [2]string{"deg", "mm"} {
		t.Fatalf("read %v", want)
	}
	tabs := strings.Join(body(36, "\t"), "\n")
	for name, in := range map[string]string{
		"semicolons":           "deg;mm\n" + strings.Join(body(36, ";"), "\n"),
		"tabs":                 "deg\tmm\n" + tabs,
		"carriage returns":     "deg\tmm\r\n" + strings.ReplaceAll(tabs, "\n", "\r\n") + "\r\n",
		"carriage return only": "deg\tmm\r" + strings.ReplaceAll(tabs, "\n", "\r"),
		"byte order mark":      "\ufeffdeg\tmm\n" + tabs,
		"empty lines last":     "deg\tmm\n" + tabs + "\n\n \t \n\t\n",
		"blanks":               "  deg ,  mm \n" + strings.Join(body(36, "  ,\t "), " \n "),
		"quotes":               "\"deg\",\"mm\"\n" + strings.Join(body(36, ","), "\n"),
		"more columns":         "deg,mm,note\n" + strings.Join(body(36, ","), ",x\n") + ",",
		"closing row":          "deg\tmm\n" + tabs + "\n360\t0.002\n",
		"exponents and signs":  strings.Replace("deg\tmm\n"+tabs, "10\t0.250", "+1e1\t.25", 1),
	} {
		got, faults := smooth.Read([]byte(in), 0.002)
		if faults != nil {
			t.Errorf("%s: %v", name, faults)
			continue
		}
		if !slices.Equal(got.Angle, want.Angle) || !slices.Equal(got.Lift, want.Lift) || !slices.Equal(got.Line, want.Line) {
			t.Errorf("%s: %s", name, cmp.Diff(want, got))
		}
	}
}

func TestReadHeaderWithSeparatorInQuotes(t *testing.T) {
	table, faults := smooth.Read(text("\"angle, deg\",\"lift, mm\"", body(36, ",")...), 0)
	if faults != nil || table.Names != [2]string{"angle, deg", "lift, mm"} {
		t.Errorf("%v %v", table.Names, faults)
	}
}

// A negative start and one beyond a turn are the same turn.
func TestReadAnyStart(t *testing.T) {
	var rows []string
	for i := range 36 {
		rows = append(rows, fmt.Sprintf("%d,%d", 10*i-180, i%5))
	}
	if table, faults := smooth.Read(text("a,b", append(rows, "180,0")...), 0); faults != nil || len(table.Angle) != 36 || table.Angle[0] != -180 {
		t.Errorf("%v %v", table, faults)
	}
}

// Every fault, with its place. The row spoiled is the fourth, on line 5.
func TestReadFaults(t *testing.T) {
	spoiled := func(line string) []byte {
		rows := body(36, ",")
		rows[3] = line
		return text("deg,mm", rows...)
	}
	with := func(lines ...string) []byte { return text("deg,mm", append(body(36, ","), lines...)...) }
	for name, c := range map[string]struct {
		in           []byte
		line, column int
		found        string
		allowed      string
		advice       string
	}{
		"not a number":    {spoiled("30,1.2x"), 5, 4, `"1.2x"`, "finite number", "correct"},
		"decimal comma":   {spoiled(`30,"1,25"`), 5, 4, `"1,25"`, "decimal point", "write 1.25"},
		"too many":        {spoiled("30,0,1,25"), 5, 6, "4 columns", "the 2 of the header", "decimal point"},
		"NaN":             {spoiled("NaN,1"), 5, 1, `"NaN"`, "finite number", "correct"},
		"infinity":        {spoiled("30,-inf"), 5, 4, `"-inf"`, "finite number", "correct"},
		"hexadecimal":     {spoiled("0x1e,1"), 5, 1, `"0x1e"`, "finite number", "correct"},
		"overflow":        {spoiled("30,1e999"), 5, 4, `"1e999"`, "finite number", "correct"},
		"too large":       {spoiled("30,1e7"), 5, 4, `"1e7"`, "at most 1e+06", "correct"},
		"missing number":  {spoiled("30, "), 5, 4, "nothing", "lift", "fill in"},
		"missing angle":   {spoiled(",1"), 5, 1, "nothing", "cam angle", "fill in"},
		"one column":      {spoiled("30"), 5, 3, "one column", "cam angle and lift", "a comma"},
		"empty line":      {spoiled("  "), 5, 1, "an empty line", "a row", "take the line out"},
		"repeated":        {spoiled("20,1"), 5, 1, `cam angle "20" a second time`, "once", "take one"},
		"unsorted":        {spoiled(" 15,1"), 5, 2, `cam angle "15" after 20`, "increase", "sort"},
		"too near":        {spoiled("20.00001,1"), 5, 1, `cam angle "20.00001" after 20`, "0.001 degrees", "take one"},
		"accented before": {spoiled("é,1"), 5, 1, `"é"`, "finite number", "correct"},
		"beyond the turn": {with("361,0"), 38, 1, `"361"`, "from 0 to 360", "end the table"},
		"after closing":   {with("360,0", "360.0015,0"), 39, 1, `"360.0015"`, "from 0 to 360", "end the table"},
		"does not close":  {with("360, 0.01"), 38, 6, "lift 0.01 a turn after lift 0", "smoothing of 0.002", "correct one"},
		"few rows":        {text("deg,mm", body(19, ",")...), 20, 1, "19 rows", "20 to 20000 rows", "more cam angles"},
		"no rows":         {[]byte("deg,mm\n"), 1, 1, "0 rows", "20 to 20000 rows", "more cam angles"},
		"no header":       {text("-10,0", body(36, ",")...), 1, 1, `the number "-10"`, "header", "above the first row"},
		"unnamed column":  {text("deg,", body(36, ",")...), 1, 5, "a column without a name", "a name", "header"},
		"no separator":    {text("deg mm", body(36, " ")...), 1, 1, `one column: "deg mm"`, "semicolon or tab", "header"},
		"empty":           {nil, 1, 1, "an empty line", "header", "such as"},
		"not text":        {[]byte("deg,mm\n0,\xff\n"), 2, 1, "no UTF-8", "plain text", "UTF-8"},
		"long line":       {spoiled("30,1" + strings.Repeat(",0", 2050)), 5, 1, "a line of more than 4096 bytes", "a few numbers", "leave out"},
		"sixteen bits":    {[]byte("d\x00,\x00m\x00\n"), 1, 1, "no UTF-8", "plain text", "UTF-8"},
	} {
		_, faults := smooth.Read(c.in, 0.002)
		if len(faults) != 1 {
			t.Errorf("%s: %v", name, faults)
			continue
		}
		f := faults[0]
		if f.Line != c.line || f.Column != c.column || !strings.Contains(f.Found, c.found) || !strings.Contains(f.Allowed, c.allowed) || !strings.Contains(f.Advice, c.advice) {
			t.Errorf("%s: %v", name, f)
		}
		if want := fmt.Sprintf("%d:%d: found ", c.line, c.column); !strings.HasPrefix(f.Error(), want) {
			t.Errorf("%s: prints %q", name, f.Error())
		}
	}
}

func TestReadTooManyRows(t *testing.T) {
	var rows []string
	for i := range smooth.MostRows + 5 {
		rows = append(rows, fmt.Sprintf("%.4f,1", float64(i)/100))
	}
	_, faults := smooth.Read(text("deg,mm", rows[:smooth.MostRows]...), 0)
	if faults != nil {
		t.Error(faults)
	}
	for i := range rows { // within one turn
		rows[i] = fmt.Sprintf("%.4f,1", float64(i)/60)
	}
	if _, faults = smooth.Read(text("deg,mm", rows...), 0); len(faults) != 1 || faults[0].Line != smooth.MostRows+2 {
		t.Error(faults)
	}
}

// All faults at once, in order, and no more than twenty.
func TestReadAllFaults(t *testing.T) {
	rows := body(36, ",")
	rows[2], rows[5], rows[9] = "x,1", "50,", "80,2"
	_, faults := smooth.Read(text("deg,mm", rows...), 0)
	var lines []int
	for _, f := range faults {
		lines = append(lines, f.Line)
	}
	if want := []int{4, 7, 11}; !slices.Equal(lines, want) {
		t.Errorf("faults on lines %v, want %v", lines, want)
	}
	for i := range rows {
		rows[i] = "x,y"
	}
	if _, faults = smooth.Read(text("deg,mm", rows...), 0); len(faults) != smooth.MostFaults {
		t.Errorf("%d faults", len(faults))
	}
}

// Whatever the bytes: a table that Fit takes or faults with a place, never a panic.
func FuzzRead(f *testing.F) {
	f.Add(text("deg,mm", body(36, ",")...))
	f.Add(text("deg;mm", body(36, ";")...))
	f.Add([]byte("\ufeff\"a\"\t\"b\"\r\n0\t1\r\n"))
	f.Add(text("a,b", "0,1,2", "1e400,0x5", ",", "360,nan"))
	f.Fuzz(func(t *testing.T, in []byte) {
		table, faults := smooth.Read(in, 0.01)
		if len(faults) > smooth.MostFaults {
			t.Errorf("%d faults", len(faults))
		}
		lines := 1 + strings.Count(string(in), "\n") + strings.Count(string(in), "\r")
		for _, one := range faults {
			if one.Line < 1 || one.Line > lines || one.Column < 1 || one.Found == "" || one.Allowed == "" || one.Advice == "" {
				t.Errorf("fault %+v", one)
			}
		}
		if faults != nil {
			return
		}
		curve, _, err := smooth.Fit(table, 0.01)
		if err != nil {
			t.Fatal(err)
		}
		for i, deg := range table.Angle {
			if lift, _, _, _ := curve.At(deg); !(lift-table.Lift[i] <= 0.0101 && table.Lift[i]-lift <= 0.0101) {
				t.Errorf("row %d: lift %g became %g", i, table.Lift[i], lift)
			}
		}
	})
}
