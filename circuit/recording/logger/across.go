package logger

import (
	"fmt"
	"math"
	"regexp"
	"strings"

	"barlitre/machines/units"
)

var phaseDigit = regexp.MustCompile(`(?i)([1-3]|[rst])([^0-9a-z]*)$`)

// across looks at channels side by side.
func (im *importer) across() {
	im.phases()
	im.unsigned()
}

// sparse is a series at up to so many rows, evenly spaced.
func (s *Series) sparse(rows int) []float64 {
	n := len(s.time)
	stride := max(1, n/rows)
	var out []float64
	for i := 0; i < n; i += stride {
		row := i
		if s.index != nil {
			row = int(s.index[i])
		}
		out = append(out, s.raw.at(row))
	}
	return out
}

// phases finds one of three phases of a motor whose power counts the other way.
func (im *importer) phases() {
	groups := map[string][]*Series{}
	for _, s := range im.Series {
		if s.Dim == units.Power && s.Kind == "" && phaseDigit.MatchString(s.Column) {
			stem := phaseDigit.ReplaceAllString(s.Column, "·$2")
			groups[stem] = append(groups[stem], s)
		}
	}
	for _, g := range groups {
		if len(g) != 3 {
			continue
		}
		var mean [3]float64
		for k, s := range g {
			for _, x := range s.sparse(5000) {
				if x == x {
					mean[k] += x
				}
			}
		}
		for k, s := range g {
			a, b := mean[(k+1)%3], mean[(k+2)%3]
			if mean[k]*(a+b) >= 0 || a*b <= 0 || math.Abs(mean[k]) < 0.5*math.Abs(a+b)/2 {
				continue
			}
			key := s.Column + ": sign"
			c := Correction{Key: key, Channel: s.Column, Count: len(s.time), Warns: true, Choices: []string{"turn", "leave"}, Choice: im.choice(key, "turn", "leave"),
				Text: "counts against the other two phases, as with a clamp put on the wrong way round"}
			if c.Choice == "turn" {
				s.sign = -s.sign
				c.Done = "its sign is turned"
			}
			im.Corrections = append(im.Corrections, c)
		}
	}
}

// unsigned finds flows that never turn while a speed does.
func (im *importer) unsigned() {
	turns := ""
	for _, s := range im.Series {
		if s.Dim != units.Velocity && s.Dim != units.AngularSpeed {
			continue
		}
		low, high := ends(s.sparse(5000))
		if low < -0.1*high && high > 0 {
			turns = s.Column
		}
	}
	for _, s := range im.Series {
		if low, high := ends(s.sparse(5000)); turns != "" && s.Dim == units.Flow && high > 0 && low >= -0.02*high && !strings.Contains(strings.ToLower(s.Column), "pump") {
			im.Corrections = append(im.Corrections, Correction{Key: s.Column + ": unsigned flow", Channel: s.Column, Count: len(s.time), Warns: true,
				Text: fmt.Sprintf("never turns, while %s does: a meter that does not tell the direction, or the flow of the pump", turns)})
		}
	}
}

func ends(v []float64) (low, high float64) {
	for _, x := range v {
		if x == x {
			low, high = math.Min(low, x), math.Max(high, x)
		}
	}
	return
}
