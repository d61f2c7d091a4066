package figures

import (
	"math"

	"barlitre/audit"
	"barlitre/audit/thermal"
	"barlitre/machines/units"
)

// TemperatureCourse is the oil temperature of one circuit over time.
type TemperatureCourse struct {
	Name   string
	Course *thermal.Course
	Role   Role
}

// TemperatureLane holds the courses of one case, such as a hot day.
type TemperatureLane struct {
	Title   string
	Courses []TemperatureCourse
	Air     bool // of the first course is drawn too
}

// HeatLimit is a temperature that is drawn across.
type HeatLimit struct {
	Name  string
	Theta float64 // K
	Role  Role
}

// HeatLimits returns what the oil temperatures of a study are to be read against: the temperature wanted and the alarm, where the oil
// gets ready to work and where it is thin, and where seals age fast (82 °C, common practice). write prints a temperature [K].
func HeatLimits(h *audit.HeatStudy, write func(theta float64) string) []HeatLimit {
	out := []HeatLimit{{"wanted " + write(h.Wanted), h.Wanted, RoleInk}, {"alarm " + write(h.Alarm), h.Alarm, RoleDanger}}
	if t := h.TemperatureOf(h.WorkViscosity); !math.IsNaN(t) {
		out = append(out, HeatLimit{"ready from " + write(t), t, RoleSecondary})
	}
	if t := h.TemperatureOf(thinOil); !math.IsNaN(t) {
		out = append(out, HeatLimit{"thin (16 mm²/s) " + write(t), t, RoleSecondary})
	}
	return append(out, HeatLimit{"seals age " + write(sealsAge), sealsAge, RoleSecondary})
}

const (
	thinOil  = 16e-6                  // m²/s, lower end of what machines like best; common practice
	sealsAge = units.ZeroCelsius + 82 // K, common practice
	limitGap = 8.0                    // K: limits further from all curves are left out, so that the curves fill the figure
)

// TemperaturePlot draws oil temperatures over time in hours from the first instant on, all lanes on one scale, with the limits near
// them.
func TemperaturePlot(lanes []TemperatureLane, limits []HeatLimit, u units.Unit, from, to float64) Plot {
	f := Plot{Axis: "time", AxisUnit: "h", From: 0, To: (to - from) / units.Hour}
	low, high := math.Inf(1), math.Inf(-1)
	for _, l := range lanes {
		lane := Lane{Title: l.Title, Unit: u.Label()}
		add := func(name string, t, v []float64, role Role) {
			s := Series{Name: name, Role: role}
			for i := range t {
				if t[i] >= from && t[i] <= to {
					s.X, s.Y = append(s.X, (t[i]-from)/units.Hour), append(s.Y, u.FromSI(v[i]))
					low, high = math.Min(low, v[i]), math.Max(high, v[i])
				}
			}
			lane.Series = append(lane.Series, s)
		}
		for _, c := range l.Courses {
			add(c.Name, c.Course.T, c.Course.Oil, c.Role)
		}
		if l.Air && len(l.Courses) > 0 {
			add("air", l.Courses[0].Course.T, l.Courses[0].Course.Air, RoleSecondary)
		}
		f.Lanes = append(f.Lanes, lane)
	}
	bottom, top := low-2, high+2
	for _, l := range limits {
		if l.Theta < low-limitGap || l.Theta > high+2*limitGap {
			continue
		}
		bottom, top = math.Min(bottom, l.Theta-1), math.Max(top, l.Theta+2)
		y := u.FromSI(l.Theta)
		for i := range f.Lanes {
			f.Lanes[i].Series = append(f.Lanes[i].Series, Series{Name: l.Name, X: []float64{0, f.To}, Y: []float64{y, y}, Role: l.Role, Dash: true})
		}
	}
	for i := range f.Lanes {
		f.Lanes[i].Range = [2]float64{u.FromSI(bottom), u.FromSI(top)}
	}
	return f
}

// StudyLanes are the days of all circuits that were studied: an ordinary week, and a hot one.
func StudyLanes(circuits []*audit.CircuitRun) (days []TemperatureLane, start TemperatureLane) {
	days = []TemperatureLane{{Title: "ordinary", Air: true}, {Title: "hot days", Air: true}}
	start.Title = "winter start"
	for _, c := range circuits {
		if h := c.Warmth; h != nil && h.Week != nil {
			for lane, course := range map[*TemperatureLane]*thermal.Course{&days[0]: h.Week, &days[1]: h.Hot, &start: h.Start} {
				lane.Courses = append(lane.Courses, CourseOf(c, course))
			}
		}
	}
	return days, start
}

// CourseOf is the course of a circuit in its colour.
func CourseOf(c *audit.CircuitRun, course *thermal.Course) TemperatureCourse {
	return TemperatureCourse{c.Circuit.Name, course, temperatureRole(c)}
}

// temperatureRole is the colour of a circuit.
func temperatureRole(c *audit.CircuitRun) Role {
	if c.Proposal {
		return RoleGain
	}
	return RoleHeat
}

// Weekdays names the days of a week that begins on Monday 0:00, in hours.
func Weekdays() []Phase {
	var out []Phase
	for i, name := range []string{"Mon", "Tue", "Wed", "Thu", "Fri", "Sat", "Sun"} {
		out = append(out, Phase{Name: name, From: 24 * float64(i), To: 24 * float64(i+1)})
	}
	return out
}
