package main

import (
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/circuit/duty"
)

// twoLoggers are a speed and, from another logger whose clock is 2 s behind, the force of the
// same time in two files; both have a pressure whose steps never come again.
func twoLoggers(t *testing.T) (dir string) {
	t.Helper()
	dir = t.TempDir()
	p := func(s float64) float64 { return 50 + 20*math.Sin(1.7*math.Pow(math.Floor(1.3*s+9), 2)) }
	write := func(name, head string, from, to int, row func(s float64) string) {
		text := head + "\n"
		for i := from; i < to; i++ {
			text += row(0.1*float64(i)) + "\n"
		}
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	write("day.csv", "t [s],ram_v [m/s],p [bar]", 0, 300, func(s float64) string { return fmt.Sprintf("%.1f,%.4f,%.4f", s, 0.1*math.Sin(s/3), p(s)) })
	force := func(s float64) string { return fmt.Sprintf("%.1f,%.4f,%.4f", s, 3*(s+2), p(s+2)) }
	write("force_1.csv", "t [s],ram_F [kN],p [bar]", -20, 150, force)
	write("force_2.csv", "t [s],ram_F [kN],p [bar]", 150, 300, force)
	return dir
}

// Another logger is set beside the recording, its clock found by what both logged or given;
// what is printed for a duty reads back, with the channels of both at the rows of the first.
func TestImportWithAnotherLogger(t *testing.T) {
	dir := twoLoggers(t)
	forces := filepath.Join(dir, "force_1.csv") + "," + filepath.Join(dir, "force_2.csv")
	for _, clock := range [][]string{nil, {"-clock", "p=p"}, {"-clock", "2 s"}} {
		code, out, errs := called(append(append([]string{"import", filepath.Join(dir, "day.csv"), "-also", forces}, clock...), "-yaml")...)
		if code != exitOK {
			t.Fatalf("%v: exit %d: %s", clock, code, errs)
		}
		_, keys, _ := strings.Cut(out, "For a duty of an audit file\n")
		text := "format: barlitre/1\noil: {grade: ISO VG 46, temperature: 50 C}\naxes: {ram: linear}\ncircuits: []\nduties:\n- name: day\n  repeats: no\n"
		n := 0
		for _, line := range strings.Split(keys, "\n") {
			if key, _, ok := strings.Cut(line, ": "); ok && !strings.HasPrefix(line, " ") {
				text += "  " + line + "\n"
				if key == "also" {
					n++
				}
			}
		}
		if n != 1 || !strings.Contains(out, "Beside the first") || !strings.Contains(out, "0 h to a duty") {
			t.Errorf("%v: %d also lines in\n%s", clock, n, out)
		}
		text += "  columns: {ram.speed: ram_v, ram.load: ram_F}\n"
		path := filepath.Join(dir, "audit.yaml")
		if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
		f, found := audit.Read(path)
		if f == nil || len(f.Duties) != 1 || len(f.Duties[0].Time) != 300 {
			t.Fatalf("%v: it does not read back: %v", clock, found)
		}
		for _, x := range found {
			if x.Level == circuit.Stops && strings.Contains(x.Text, "day") {
				t.Errorf("%v: %s", clock, x.Text)
			}
		}
		for _, i := range []int{50, 200} { // 3 kN a second
			if got, want := f.Duties[0].Track("ram", duty.Load).Values[i], 3000*f.Duties[0].Time[i]; math.Abs(got-want) > 60 {
				t.Errorf("%v: %.5g N at %g s, want %.5g", clock, got, f.Duties[0].Time[i], want)
			}
		}
	}
	for _, c := range []struct {
		args []string
		want string
	}{
		{[]string{"-clock", "2 s", "-also", forces}, "after the -also"},
		{[]string{"-also", filepath.Join(dir, "none.csv")}, "no such file"},
		{[]string{"-also", forces, "-clock", "p=q"}, "names no channel of each"},
		{[]string{"-also", forces, "-clock", "soon"}, "soon"},
	} {
		if code, _, errs := called(append([]string{"import", filepath.Join(dir, "day.csv")}, c.args...)...); code != exitUnreadable || !strings.Contains(errs, c.want) {
			t.Errorf("%v: exit %d: %s, want %q", c.args, code, errs, c.want)
		}
	}
}
