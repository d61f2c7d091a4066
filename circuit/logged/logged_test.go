package logged

import (
	"context"
	"math"
	"slices"
	"testing"

	"barlitre/circuit/duty"
	"barlitre/circuit/recording/logger"
	"barlitre/machines/units"
)

// recordingOf reads a text as a logger's file, by the guess.
func recordingOf(t *testing.T, text string) *logger.Recording {
	t.Helper()
	f, err := logger.OpenBytes("test.csv", []byte(text))
	if err != nil {
		t.Fatal(err)
	}
	rec, err := f.Import(context.Background(), f.Guess(), nil)
	if err != nil {
		t.Fatal(err)
	}
	return rec
}

func TestSuggest(t *testing.T) {
	rec := recordingOf(t, "t_s,boom_F_N,boom_v_mps,swing_T_Nm,swing_w_radps,X1 [bar],oil [C]\n0,1,0.5,3,4,5,40\n0.1,2,0.5,3,4,5,40\n0.2,1,0.5,3,4,5,41\n")
	s := Suggest(rec.Series, Machine{Axes: []duty.Axis{{Name: "Boom"}}, Points: map[string]duty.What{"X1": duty.MeasuredPressure}})
	var names []string
	for _, x := range s.Tracks {
		names = append(names, x.Name)
	}
	if want := []string{"Boom.load", "Boom.speed", "swing.load", "swing.speed", "X1.pressure"}; !slices.Equal(names, want) {
		t.Errorf("%q, want %q", names, want)
	}
	if want := []duty.Axis{{Name: "swing", Kind: duty.Rotary}}; !slices.Equal(s.Axes, want) {
		t.Errorf("%v", s.Axes)
	}
	for column, want := range map[string]string{"v1": "axis1", "F1": "axis1", "Zylinder 2 Kraft": "zylinder_2", "force": "", "ram p_A": "ram"} {
		if got := stem(column); got != want {
			t.Errorf("stem of %q is %q, want %q", column, got, want)
		}
	}
}

// Chambers, position and pressure names make a speed of the position and a load of the pressures,
// with the sizes that a circuit has.
func TestSuggestDerived(t *testing.T) {
	rec := recordingOf(t, "t [s];ram_x [mm];ram_pA [bar];ram_pB [bar]\n0;1;50;5\n0,1;2;51;5\n0,2;4;50,5;5,5\n")
	s := Suggest(rec.Series, Machine{Sizes: map[string]map[string]string{"ram": {"bore": "80 mm", "rod": "56 mm"}}})
	if len(s.Tracks) != 2 || s.Tracks[0].Law != OfPosition || s.Tracks[1].Law != Chambers {
		t.Fatalf("%+v", s.Tracks)
	}
	says := s.Tracks[1].Says
	if says["a"] != "ram_pA" || says["b"] != "ram_pB" || says["bore"] != "80 mm" || says["position"] != "ram_x" {
		t.Error(says)
	}
}

// A part has its own ends, between rows, and starts at 0; what it is cut from stays.
func TestPart(t *testing.T) {
	v := []float64{0, 1, 4, 9}
	d := &duty.Duty{Time: []float64{0, 1, 2, 3}, Tracks: []duty.Track{{Of: "ram", What: duty.Speed, Values: v}}}
	if err := (Part{From: 0.5, To: 2.5}).Cut(d); err != nil {
		t.Fatal(err)
	}
	if !slices.Equal(d.Time, []float64{0, 0.5, 1.5, 2}) || !slices.Equal(d.Tracks[0].Values, []float64{0.5, 1, 4, 6.5}) {
		t.Errorf("%v %v", d.Time, d.Tracks[0].Values)
	}
	if !slices.Equal(v, []float64{0, 1, 4, 9}) {
		t.Error("the columns were changed")
	}
	if err := (Part{From: 9, To: 12}).Cut(d); err == nil {
		t.Error("a part beyond the end")
	}
}

// By hand: 10 N times 1, 1, -2 m/s at 0, 1, 2 s: +10·(1/2 + 1/2 + 1/2) J and -20/2 J.
func TestWorks(t *testing.T) {
	d := &duty.Duty{Time: []float64{0, 1, 2}, Tracks: []duty.Track{{Of: "ram", What: duty.Speed, Values: []float64{1, 1, -2}}, {Of: "ram", What: duty.Load, Values: []float64{10, 10, 10}}, {Of: "arm", What: duty.Speed, Values: []float64{1, 1, 1}}}}
	w := Works(d)
	if len(w) != 1 || math.Abs(w[0].Positive-15) > 1e-12 || math.Abs(w[0].Negative+10) > 1e-12 {
		t.Errorf("%+v", w)
	}
}

// The number that a law names as its usual one can be read in its unit.
func TestLawsAreSound(t *testing.T) {
	for _, kind := range []duty.AxisKind{duty.Linear, duty.Rotary} {
		for what := duty.Speed; what <= duty.MeasuredFlow; what++ {
			laws := Laws(what, kind)
			if laws[0].Word != AsMeasured {
				t.Errorf("%s: %s comes first", what, laws[0].Word)
			}
			for _, l := range laws {
				for _, n := range l.Numbers {
					if _, _, err := units.Parse(n.Default, n.Dim); err != nil && n.Default != "" && n.Default != "none" && n.Key != "window" {
						t.Errorf("%s: %v", l.Word, err)
					}
				}
			}
		}
	}
}
