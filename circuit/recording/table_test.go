package recording

import (
	"bytes"
	"slices"
	"strings"
	"testing"
)

func TestReadTable(t *testing.T) {
	for name, text := range map[string]string{
		"semicolon, decimal comma": "t [s]; ram.speed [m/s]\n0;0\n0,5;-1,5e-1\n",
		"semicolon, point":         "t [s];ram.speed [m/s]\n0;0\n0.5;-0.15\n",
		"comma":                    "t [s],ram.speed [m/s]\n0,0\n.5,-0.15\n",
		"tab, decimal comma":       "t [s]\tram.speed [m/s]\n0\t0\n0,5\t-0,15\n",
		"CRLF and mark":            "\ufefft [s];ram.speed [m/s]\r\n0;0\r\n0,5;-0,15\r\n",
		"quotes":                   "\"t [s]\",\"ram.speed [m/s]\"\n\"0\",0\n0.5,\"-0.15\"\n",
		"remarks and blank lines":  "# logger 3, channel 1, 2\n\nt [s]; ram.speed [m/s]\n\n0; 0\n# pause\n  \n0,5 ; -0,15 ",
		"no space before unit":     "t[s];ram.speed [ m/s ]\n0;0\n+0,5;-0,15\n",
	} {
		tab, faults := ReadTable("x.csv", strings.NewReader(text))
		if len(faults) > 0 {
			t.Errorf("%s: %v", name, faults)
			continue
		}
		a, b := tab.Column("t"), tab.Column("ram.speed")
		if len(tab.Columns) != 2 || a == nil || b == nil || a.Unit != "s" || b.Unit != "m/s" ||
			!slices.Equal(a.Values, []float64{0, 0.5}) || !slices.Equal(b.Values, []float64{0, -0.15}) || tab.Rows() != 2 {
			t.Errorf("%s: got %+v", name, tab)
		}
	}
}

func TestReadTableNotes(t *testing.T) {
	tab, faults := ReadTable("x.csv", strings.NewReader("# a\nt [s];V1.command\n\n0;1\n1;0,5\n"))
	if len(faults) > 0 || tab.Columns[1].Unit != "" || !slices.Equal(tab.Lines(), []int32{4, 5}) {
		t.Errorf("got %+v, %v", tab, faults)
	}
	// printf 't [s]\n0\n' | sha256sum
	tab, _ = ReadTable("x.csv", strings.NewReader("t [s]\n0\n"))
	if want := "5666c362651c74a5ef39f387ab26138da517110442cdc439f0ce67f57a2921fd"; tab.SHA256 != want {
		t.Errorf("SHA-256 %s, want %s", tab.SHA256, want)
	}
}

func TestReadTableFaults(t *testing.T) {
	for text, want := range map[string]string{
		"":                              "x.csv: is empty",
		"# only a remark\n":             "x.csv: is empty",
		"t [s]; a [m]\n":                "x.csv: has a head but no rows",
		"t [s]; a [m]\n0;x\n":           `x.csv, line 2: column "a": "x" is not a number`,
		"t [s]; a [m]\n0;1\n\n1;\n":     `x.csv, line 4: column "a": the cell is empty`,
		"t [s]; a [m]\n0;1\n1\n":        "x.csv, line 3: has 1 cells, the head has 2",
		"t [s], a [m]\n0,1,5\n":         "x.csv, line 2: has 3 cells, the head has 2; where commas separate, the decimal sign is a point",
		"t [s], a [m]\n0,\"1,5\"\n":     `x.csv, line 2: column "a": "1,5": use a decimal point where commas separate`,
		"t [s]; a [m]\n0;1,5\n1;2.5\n":  `x.csv, line 3: column "a": "2.5" has a decimal point, line 2 a decimal comma`,
		"t [s]; a [m]\n0;1.5\n1;2,5\n":  `x.csv, line 3: column "a": "2,5" has a decimal comma, line 2 a decimal point`,
		"t [s]; a [m]\n0;1.234,5\n":     "has a point and a comma",
		"t [s]; a [m]\n0;1,234,5\n":     `"1.234,5" is not a number`,
		"t [s]; a [m]\n0;NaN\n":         `"NaN" is not a number`,
		"t [s]; a [m]\n0;0x10\n":        `"0x10" is not a number`,
		"t [s]; a [m]\n0;1e999\n":       `"1e999" is out of range`,
		"t [s]; a [m]\n0;5 kN\n":        `"5 kN" is not a number`,
		"t [s]; t [ms]\n0;0\n":          `x.csv, line 1: column "t" stands here twice`,
		"t [s]; \n0;0\n":                "x.csv, line 1: column 2 has no name",
		"t [s]; a [m\n0;0\n":            `x.csv, line 1: head "a [m": write the name and its unit between brackets`,
		"t [s]; a [m] x\n0;0\n":         "write the name and its unit between brackets",
		"0;0\n1;0\n":                    `x.csv, line 1: head "0" is a number; the first line names the columns`,
		"t [s]; a [m]\n0;\"1\n":         "x.csv, line",
		"t [\xb0C]; a [m]\n0;0\n":       "x.csv: is not UTF-8 text",
		"\xff\xfet\x00 \x00[\x00s\x00]": "x.csv: is not UTF-8 text",
	} {
		tab, faults := ReadTable("x.csv", strings.NewReader(text))
		if tab != nil || len(faults) == 0 || !strings.Contains(faults[0].Error(), want) {
			t.Errorf("%q: got %v, want %q", text, faults, want)
		}
	}
}

// All faults are listed, up to a limit that keeps the list readable.
func TestReadTableManyFaults(t *testing.T) {
	_, faults := ReadTable("x.csv", strings.NewReader("t [s]\n"+strings.Repeat("x\n", 500)))
	if len(faults) != maxFaults+1 || faults[9].Line != 11 || !strings.Contains(faults[maxFaults].Text, "more faults follow") {
		t.Errorf("got %d: %v", len(faults), faults)
	}
}

func FuzzReadTable(f *testing.F) {
	f.Add([]byte("t [s]; a [m]\n0;1,5\n"))
	f.Add([]byte("\ufefft [s],\"a [m]\"\r\n0,1.5\r\n"))
	f.Fuzz(func(t *testing.T, data []byte) {
		tab, faults := ReadTable("x.csv", bytes.NewReader(data))
		if (tab == nil) != (len(faults) > 0) {
			t.Fatal("a table and faults, or neither")
		}
		if tab == nil {
			return
		}
		for _, c := range tab.Columns {
			if len(c.Values) != tab.Rows() || c.Name == "" {
				t.Fatalf("column %+v of %d rows", c, tab.Rows())
			}
		}
	})
}
