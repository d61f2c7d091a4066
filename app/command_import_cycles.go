package main

import (
	"fmt"
	"io"
	"strings"

	"barlitre/circuit/recording/cycles"
	"barlitre/circuit/recording/logger"
	"barlitre/circuit/recording/rate"
)

// channelsOf returns the values of channels by their names.
func channelsOf(rec *logger.Recording, names []string) (out [][]float64, err error) {
	for _, n := range names {
		s := rec.Find(strings.TrimSpace(n))
		if s == nil {
			return nil, fmt.Errorf("%s has no channel %q", rec.Name, n)
		}
		out = append(out, s.Values())
	}
	return out, nil
}

func printRate(w io.Writer, rec *logger.Recording, names []string) error {
	v, err := channelsOf(rec, names)
	if err != nil {
		return err
	}
	means := rec.Find(strings.TrimSpace(names[0])).Kind == logger.Mean
	c := rate.Of(rec.Time, v[0], v[1], means, 0)
	heading(w, "Rate")
	for _, text := range c.Remarks {
		wrap(w, text)
	}
	rows := [][]string{{"logged every", "means, then multiplied", "instants, at worst"}}
	for _, x := range c.Coarser {
		rows = append(rows, []string{fmt.Sprintf("%g s", x.Interval), fmt.Sprintf("%+.2f %%", 100*x.Means), fmt.Sprintf("%+.1f %%", 100*x.Spot)})
	}
	table(w, rows)
	return nil
}

func printCycles(w io.Writer, rec *logger.Recording, moving, held, power []string) error {
	motion, err := channelsOf(rec, moving)
	if err != nil {
		return err
	}
	level, err := channelsOf(rec, held)
	if err != nil {
		return err
	}
	in := cycles.Input{T: rec.Time, Motion: motion, Level: level}
	if len(power) == 2 {
		v, err := channelsOf(rec, power)
		if err != nil {
			return err
		}
		in.Power = make([]float64, len(rec.Time))
		for i := range in.Power {
			in.Power[i] = v[0][i] * v[1][i]
		}
	}
	r, err := cycles.Find(in, cycles.Options{})
	if err != nil {
		return err
	}
	heading(w, "Cycles")
	if r.Period == 0 {
		wrap(w, "nothing repeats")
	} else {
		at := func(i int) string {
			return fmt.Sprintf("number %d, from %.6g s to %.6g s", i+1, r.Cycles[i].From, r.Cycles[i].To)
		}
		rows := [][]string{{"cycles", fmt.Sprintf("%d of %.4g s in the mean, %.4g to %.4g s; likeness %.2f", len(r.Cycles), r.Period, r.Length.Least, r.Length.Most, r.Height)},
			{"typical", at(r.Typical)}, {"least like it", at(r.Odd)}}
		if in.Power != nil {
			e := r.Energy
			rows = append(rows, []string{"takes the most", at(r.Extreme)}, []string{"energy a cycle", fmt.Sprintf("%.4g kJ ± %.2g (least %.4g, P10 %.4g, P50 %.4g, P90 %.4g, most %.4g)", e.Mean/1e3, e.Deviation/1e3, e.Least/1e3, e.P10/1e3, e.P50/1e3, e.P90/1e3, e.Most/1e3)})
		}
		table(w, rows)
	}
	var rows [][]string
	total := rec.Time[len(rec.Time)-1] - rec.Time[0]
	for _, s := range r.Shares {
		rows = append(rows, []string{string(s.State), fmt.Sprintf("%.4g s, %.3g %%", s.Time, 100*s.Time/total), fmt.Sprintf("in %d stretches", s.Times)})
	}
	table(w, rows)
	return nil
}
