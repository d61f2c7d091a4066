package audit

import (
	"bytes"
	"strings"
	"testing"
)

func TestConnectWrites(t *testing.T) {
	for name, c := range map[string]struct {
		do    func(f *File) error
		pairs []string
	}{
		"new line":           {func(f *File) error { return f.Connect("As found", "P1.D", "T1.T") }, []string{"  - V1.T - T1.T\n", "  - V1.T - T1.T\n  - P1.D - T1.T\n"}},
		"on a line":          {func(f *File) error { return f.Connect("As found", "P1.LS", "V1.P") }, []string{`"CK1.out - V1.P"`, `"CK1.out - V1.P - P1.LS"`}},
		"on a line, turned":  {func(f *File) error { return f.Connect("As found", "F1.A", "P1.LS") }, []string{"P1.P - F1.A", "P1.P - F1.A - P1.LS"}},
		"on a line by place": {func(f *File) error { return f.ConnectLine("As found", "P1.LS", 3) }, []string{`"CK1.out - V1.P"`, `"CK1.out - V1.P - P1.LS"`}},
		"two lines": {func(f *File) error { return f.Connect("As found", "V1.P", "P1.P") },
			[]string{"P1.P - F1.A", "P1.P - F1.A - CK1.out - V1.P", "  - \"CK1.out - V1.P\"\n", ""}},
		"two lines by place": {func(f *File) error { return f.JoinLines("As found", 2, 1) },
			[]string{"P1.P - F1.A", "P1.P - F1.A - F1.B - CK1.in", "- F1.B - CK1.in   # clean", "# clean"}},
		"junction": {func(f *File) error { _, err := f.AddJunction("As found", 1, [2]float64{7, 8}); return err },
			[]string{"P1.P - F1.A", "P1.P - F1.A - J1.1", "turn: 1}\n", "turn: 1}\n    J1: {kind: junction, at: [7, 8]}\n"}},
		"off a line":       {func(f *File) error { return f.Disconnect("As found", "P1.S") }, []string{"- T1.T - P1.S # suction", "# suction"}},
		"a tank":           {func(f *File) error { return f.Disconnect("As found", "T1.T") }, []string{"- T1.T - P1.S # suction", "# suction", "  - V1.T - T1.T\n", ""}},
		"a tank, one line": {func(f *File) error { return f.DisconnectFrom("As found", "T1.T", 4) }, []string{"  - V1.T - T1.T\n", ""}},
		"a line":           {func(f *File) error { return f.DeleteLine("As found", 1) }, []string{"  - P1.P - F1.A\n", ""}},
	} {
		t.Run(name, func(t *testing.T) {
			f := sheetFile(t)
			becomes(t, f, c.do(f), c.pairs...)
		})
	}
}

func TestConnectRefuses(t *testing.T) {
	f := sheetFile(t)
	for _, kind := range []string{"electric_motor", "shuttle", "cylinder", "pressure_source", "shuttle"} {
		if _, err := f.AddBlock("As found", kind, [2]float64{}, ""); err != nil {
			t.Fatal(err)
		}
	}
	if err := f.Connect("As found", "SV1.A", "SV2.X"); err != nil {
		t.Fatal(err)
	}
	for _, c := range [][3]string{
		{"M1.shaft", "P1.P", "M1.shaft is a shaft, which turns, P1.P is an oil line; they cannot be connected. Choose another shaft for M1.shaft"},
		{"M1.shaft", "SV1.X", "SV1.X is a pilot line"},
		{"M1.E", "P1.shaft", "M1.E is a motor's electric feed, P1.shaft is a shaft"},
		{"SV2.A", "P1.P", "signal outlet SV2.A stands on an oil line"},
		{"SV1.A", "SV2.A", "two signals meet at SV1.A and SV2.A"},
		{"LP1.P", "T1.T", "hold one line at pressures of their own"},
		{"P1.P", "F1.A", "on one line already"},
		{"P1.P", "P1.P", "to itself"},
		{"P1.P", "P1.S", "of one block"},
		{"C1.A", "C1.B", "of one block"},
		{"P1.X", "T1.T", `no port "X"; it has shaft, S, P, D and LS`},
		{"P7.P", "T1.T", "there is no block P7"},
		{"P1", "T1.T", "write block.port"},
	} {
		before := f.Bytes()
		if err := f.Connect("As found", c[0], c[1]); err == nil || !strings.Contains(err.Error(), c[2]) {
			t.Errorf("%v: got %v", c, err)
		}
		if !bytes.Equal(before, f.Bytes()) {
			t.Errorf("%v: refused, but the text changed", c)
		}
	}
	if err := f.Connect("As found", "M1.shaft", "P1.shaft"); err != nil {
		t.Fatal(err)
	}
	if _, err := f.AddJunction("As found", len(f.Circuits[0].Lines)-1, [2]float64{}); err == nil || !strings.Contains(err.Error(), "line of type shaft") {
		t.Errorf("a junction on a shaft: %v", err)
	}
	if err := f.Disconnect("As found", "C1.A"); err == nil {
		t.Error("disconnected what stands on no line")
	}
}

// Lines of the two sides of a junction are one node already.
func TestConnectThroughJunction(t *testing.T) {
	f := sheetFile(t)
	if _, err := f.AddJunction("As found", 1, [2]float64{}); err != nil {
		t.Fatal(err)
	}
	if err := f.Connect("As found", "J1.2", "P1.LS"); err != nil {
		t.Fatal(err)
	}
	if err := f.Connect("As found", "P1.LS", "F1.A"); err == nil || !strings.Contains(err.Error(), "joined already, by a junction") {
		t.Errorf("got %v", err)
	}
}
