package audit

import (
	"bytes"
	"context"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"math"
	"os"
	"reflect"
	"runtime"
	"slices"
	"strconv"
	"strings"
	"sync"
	"testing"

	"barlitre/circuit"
	"barlitre/circuit/duty"
)

// longText is an audit file with a circuit of twelve blocks; its duty is put in by longFile.
const longText = `format: barlitre/1
title: Long duty
oil: {grade: ISO VG 46, temperature: 50 C}
air: {temperature: 25 C}
energy: {price: 0.2 EUR/kWh}
axes: {ram: linear}
duties:
- {name: day, hours: 2000 h, repeats: no, instants: no, points: {t: [0 s, 1 s], ram.speed: [0 m/s, 0 m/s], ram.load: [5 kN, 5 kN]}}
circuits:
- name: As found
  role: as found
  pump_at_rest: keep
  blocks:
    TK: {kind: tank}
    M1: {kind: electric_motor, rated_power: 22 kW, efficiency: 0.93, speed: 1480 rpm}
    P1: {kind: pump, displacement: 45 cm3/rev}
    CV1: {kind: check}
    RV1: {kind: relief, crack: 160 bar}
    V1: {kind: valve, follows: ram, nominal_flow: 60 L/min, nominal_drop: 5 bar}
    RV2: {kind: relief, crack: 200 bar}
    RV3: {kind: relief, crack: 200 bar}
    L1: {kind: line, length: 6 m, diameter: 25 mm}
    CL1: {kind: cooler, nominal_flow: 60 L/min, nominal_drop: 0.5 bar}
    F1: {kind: filter, nominal_flow: 60 L/min, nominal_drop: 1 bar}
    C1: {kind: cylinder, axis: ram, hold: valve, bore: 80 mm, rod: 56 mm, stroke: 900 mm, friction: 800 N}
  lines:
  - M1.shaft - P1.shaft
  - P1.S - TK.T
  - P1.P - CV1.in
  - CV1.out - RV1.P - V1.P
  - RV1.T - TK.T
  - V1.A - C1.A - RV2.P
  - V1.B - C1.B - RV3.P
  - RV2.T - TK.T
  - RV3.T - TK.T
  - V1.T - L1.A
  - L1.B - CL1.A
  - CL1.B - F1.A
  - F1.B - TK.T
`

// longDuty lays strokes of 12 s out at 100 Hz, no two rows alike; load is that of the
// pressing part of the stroke [N].
func longDuty(d *duty.Duty, rows int, load float64) {
	d.Sampled, d.Step = true, 0
	d.Time = make([]float64, rows)
	speeds, loads := make([]float64, rows), make([]float64, rows)
	at := []float64{0, 0.5, 1.5, 2, 5, 5.5, 6.5, 7, 8.85, 9.35, 12}
	v := []float64{0, .15, .15, .03, .03, 0, 0, -.2, -.2, 0, 0}
	f := []float64{5e3, 5e3, 5e3, .2 * load, load, load, 5e3, 5e3, 5e3, 5e3, 5e3}
	for k := range rows {
		t := 0.01 * float64(k)
		in, i := math.Mod(t, 12), 0
		for in > at[i+1] {
			i++
		}
		s := (in - at[i]) / (at[i+1] - at[i])
		d.Time[k] = t
		speeds[k] = (v[i] + s*(v[i+1]-v[i])) * (1 + 0.05*math.Sin(2*math.Pi*2.3*t))
		loads[k] = (f[i] + s*(f[i+1]-f[i])) * (1 + 0.05*math.Sin(2*math.Pi*1.7*t))
	}
	d.Tracks = []duty.Track{{Of: "ram", What: duty.Speed, Values: speeds}, {Of: "ram", What: duty.Load, Values: loads}}
}

// longFile is a file with a duty of so many rows.
func longFile(t testing.TB, rows int) *File {
	t.Helper()
	f, found := Parse([]byte(longText), nil, "long.yaml")
	if f == nil || circuit.AnyStops(found) {
		t.Fatal(found)
	}
	longDuty(f.Duties[0], rows, 60e3)
	return f
}

// kept is all that an audit keeps of a run.
type kept struct {
	balance    *Balance
	plot       *Plot
	findings   []circuit.Finding
	shortfalls []circuit.Shortfall
	peak       circuit.Peak
	table      string
}

// receive hands a run the receivers of an audit.
func receive(t *testing.T, f *File, run func(*circuit.Compiled, *duty.Series, circuit.Receiver) error) kept {
	t.Helper()
	c, found := circuit.Compile(f.Circuits[0].Circuit, f.Axes, f.Duties[0])
	if c == nil {
		t.Fatal(found)
	}
	s := c.Series(f.Duties[0])
	l := NewLedger(c.Channels(), ShaftSignals(f.Circuits[0].Circuit, c.Signals()), len(s.T))
	w, r := c.NewWatch(c.Defaults(), s), newRecorder(c.Signals(), c.Channels(), len(s.T))
	var buf bytes.Buffer
	table, err := NewStepTable(&buf, c.Signals())
	if err != nil {
		t.Fatal(err)
	}
	if err := errors.Join(run(c, s, circuit.Receivers{l, w, r, table}), table.Close()); err != nil {
		t.Fatal(err)
	}
	return kept{l.Balance(false), r.done(), w.Findings(), w.Shortfalls(1), w.PeakPressure(), buf.String()}
}

// What an audit keeps of a long duty does not hang on how many goroutines balanced it, to
// the last bit, and is that of a run in one go.
func TestLongDutyInParts(t *testing.T) {
	f := longFile(t, 17_000)
	longDuty(f.Duties[0], 17_000, 84e3) // more than the relief valve lets it press: there are shortfalls
	cond, err := f.Conditions()
	if err != nil {
		t.Fatal(err)
	}
	whole := receive(t, f, func(c *circuit.Compiled, s *duty.Series, r circuit.Receiver) error {
		_, _, err := circuit.Run(context.Background(), c, c.Defaults(), s, cond, circuit.State{}, r)
		return err
	})
	if len(whole.shortfalls) == 0 || len(whole.findings) < 2 {
		t.Fatalf("too little to compare: %+v, %v", whole.shortfalls, whole.findings)
	}
	var first kept
	for _, workers := range []int{1, 2, 3} {
		got := receive(t, f, func(c *circuit.Compiled, s *duty.Series, r circuit.Receiver) error {
			_, _, err := circuit.RunParallel(context.Background(), c, c.Defaults(), s, cond, workers, r)
			return err
		})
		if workers == 1 {
			first = got
			sameKept(t, whole, got)
		} else if !reflect.DeepEqual(first, got) {
			t.Errorf("%d goroutines keep something else than one", workers)
		}
	}
}

// sameKept compares what two runs kept, to 1e-9 of what there is of each quantity.
func sameKept(t *testing.T, a, b kept) {
	t.Helper()
	b.balance.WorstGap, b.balance.WorstGapAt = a.balance.WorstGap, a.balance.WorstGapAt // of rounding alone
	var p, q []map[string]float64
	for _, k := range []struct {
		kept
		to *[]map[string]float64
	}{{a, &p}, {b, &q}} {
		row := map[string]float64{}
		flatten(row, "balance", reflect.ValueOf(*k.balance))
		flatten(row, "shortfall", reflect.ValueOf(k.shortfalls))
		flatten(row, "peak", reflect.ValueOf(k.peak))
		*k.to = append(*k.to, row)
		row = map[string]float64{}
		for _, c := range k.plot.Signals { // which of many equal points a plot keeps, rounding decides
			row[c.Name+" least"], row[c.Name+" most"] = slices.Min(c.V), slices.Max(c.V)
		}
		*k.to = append(*k.to, row)
		rows, err := csv.NewReader(strings.NewReader(k.table)).ReadAll()
		if err != nil {
			t.Fatal(err)
		}
		for _, cells := range rows[1:] {
			row := map[string]float64{}
			for i, cell := range cells {
				if row[rows[0][i]], err = strconv.ParseFloat(cell, 64); err != nil {
					t.Fatal(err)
				}
			}
			*k.to = append(*k.to, row)
		}
	}
	if len(p) != len(q) {
		t.Fatalf("%d rows against %d", len(p), len(q))
	}
	scale, off := map[string]float64{}, map[string]float64{}
	for i := range p {
		for name, v := range p[i] {
			scale[name] = math.Max(scale[name], math.Abs(v))
			off[name] = math.Max(off[name], math.Abs(v-q[i][name]))
		}
	}
	for name, x := range off {
		if x > 1e-9*scale[name] && x > 1e-12 {
			t.Errorf("%s differs by %g of %g from one go", name, x, scale[name])
		}
	}
	if !reflect.DeepEqual(a.findings, b.findings) {
		t.Errorf("findings %v\nagainst %v", a.findings, b.findings)
	}
}

// flatten names every number of a value.
func flatten(to map[string]float64, name string, v reflect.Value) {
	switch v.Kind() {
	case reflect.Float64:
		to[name] = v.Float()
	case reflect.Int:
		to[name] = float64(v.Int())
	case reflect.Struct:
		for i := range v.NumField() {
			flatten(to, name+" "+v.Type().Field(i).Name, v.Field(i))
		}
	case reflect.Slice:
		for i := range v.Len() {
			flatten(to, fmt.Sprint(name, " ", i), v.Index(i))
		}
	}
}

// slowDisk fails after so many bytes.
type slowDisk struct{ left int }

func (d *slowDisk) Write(p []byte) (int, error) {
	if d.left -= len(p); d.left < 0 {
		return 0, errors.New("disk full")
	}
	return len(p), nil
}

func (d *slowDisk) Close() error { return nil }

// A long audit can be given up on its way, tells how far it is, and says when its table
// cannot be written.
func TestLongDutyEnds(t *testing.T) {
	f := longFile(t, 60_000)
	ctx, cancel := context.WithCancel(context.Background())
	defer cancel()
	told := 0
	_, err := Solve(ctx, f, Options{Progress: func(done, total int) {
		if told = done; done > total/4 {
			cancel()
		}
	}})
	if !errors.Is(err, context.Canceled) || told > 60 {
		t.Errorf("given up at %d of 100: %v", told, err)
	}
	_, err = Solve(context.Background(), f, Options{CSV: func(string) (io.WriteCloser, error) { return &slowDisk{20e6}, nil }})
	if err == nil || !strings.Contains(err.Error(), "disk full") {
		t.Errorf("table: %v", err)
	}
}

// A circuit that remembers is balanced in one go, and the certificate says what it remembers.
func TestLongDutyThatRemembers(t *testing.T) {
	for _, c := range []struct{ extra, want string }{{"", ""}, {"    AC1: {kind: accumulator, volume: 4 L, precharge: 90 bar}\n", "AC1"}} {
		data := strings.Replace(longText, "  lines:\n", c.extra+"  lines:\n", 1)
		if c.extra != "" {
			data = strings.Replace(data, "- CV1.out - RV1.P", "- CV1.out - AC1.P - RV1.P", 1)
		}
		f, found := Parse([]byte(data), nil, "long.yaml")
		if f == nil {
			t.Fatal(found)
		}
		longDuty(f.Duties[0], 20_000, 60e3)
		s, err := Solve(context.Background(), f, Options{})
		if err != nil {
			t.Fatal(err)
		}
		d := s.Circuits[0].Duties[0]
		if d.Balance == nil || !strings.Contains(d.Certificate.Sequential, c.want) || (c.want == "") != (d.Certificate.Sequential == "") {
			t.Fatalf("%q, findings %v", d.Certificate.Sequential, s.Circuits[0].Findings)
		}
		said := false
		for _, f := range s.Circuits[0].Findings {
			said = said || strings.Contains(f.Text, "one after another")
		}
		if said != (c.want != "") {
			t.Errorf("findings: %v", s.Circuits[0].Findings)
		}
		for _, k := range d.Plot.Signals {
			if len(k.T) > PlotPoints+200 {
				t.Errorf("%s keeps %d points", k.Name, len(k.T))
			}
		}
	}
}

// BenchmarkDay measures the audit of a day at 100 Hz, 8.64 million rows, on a circuit of
// twelve blocks, with one and with two processors, and the most memory that the process
// has taken from the system up to then (runtime.MemStats.Sys), the duty included. It runs
// only with BARLITRE_LONG set.
func BenchmarkDay(b *testing.B) {
	if os.Getenv("BARLITRE_LONG") == "" {
		b.Skip("set BARLITRE_LONG to measure a day")
	}
	const rows = 8_620_000
	f := longFile(b, rows)
	for _, k := range []struct {
		name string
		cpus int
		csv  func(string) (io.WriteCloser, error)
	}{{"two", 2, nil}, {"one", 1, nil}, {"two-with-table", 2, func(string) (io.WriteCloser, error) { return &counted{}, nil }}} {
		b.Run(k.name, func(b *testing.B) {
			defer runtime.GOMAXPROCS(runtime.GOMAXPROCS(k.cpus))
			for range b.N {
				s, err := Solve(context.Background(), f, Options{CSV: k.csv})
				if err != nil || s.Circuits[0].Duties[0].Balance == nil {
					b.Fatal(err, s)
				}
			}
			var m runtime.MemStats
			runtime.ReadMemStats(&m)
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/rows, "ns/row")
			b.ReportMetric(float64(m.Sys)/1e6, "MB-peak")
		})
	}
}

// counted takes a table and keeps none of it.
type counted struct {
	mu    sync.Mutex
	bytes int
}

func (c *counted) Write(p []byte) (int, error) {
	c.mu.Lock()
	defer c.mu.Unlock()
	c.bytes += len(p)
	return len(p), nil
}

func (c *counted) Close() error { return nil }
