package logger

import (
	"fmt"
	"slices"
	"strings"

	"barlitre/machines/units"
)

// Recipe says how a file is read. Its tags are the keys under which an audit file keeps it.
type Recipe struct {
	Encoding  string    `yaml:"encoding"`              // one of Encodings
	Separator string    `yaml:"separator"`             // one of Separators
	Widths    []int     `yaml:"widths,omitempty,flow"` // fixed width: where columns begin, in characters from 0
	Decimal   string    `yaml:"decimal"`               // "." or ","
	Thousands string    `yaml:"thousands,omitempty"`   // "", ".", ",", "'" or " " for any kind of space
	Head      int       `yaml:"head"`                  // line that names the columns, from 1; 0 = none
	UnitsRow  int       `yaml:"units_row,omitempty"`   // line with their units; 0 = none
	First     int       `yaml:"first"`                 // first line of numbers
	Time      Time      `yaml:"time"`
	Air       float64   `yaml:"air_pa,omitempty"` // Pa, of the air, which absolute pressures stand above; 0 = the standard atmosphere
	Channels  []Channel `yaml:"channels"`
	// Choices answers corrections otherwise than by default, by Correction.Key.
	Choices map[string]string `yaml:"choices,omitempty"`

	Questions []Question `yaml:"-"` // what must be answered before the import
	Reasons   []string   `yaml:"-"` // why the guess is what it is, for people
}

// Question is something that the file leaves open. It is answered by setting Field of the
// recipe to one of Choices and taking the question out; see Recipe.Answer.
type Question struct {
	Field   string
	Text    string
	Choices []string
}

// Encodings and Separators list what a recipe may say.
var (
	Encodings  = []string{"UTF-8", "UTF-16 LE", "UTF-16 BE", "Windows-1252"} // the last reads Latin-1 too
	Separators = []string{";", ",", "tab", "|", "space", "fixed"}
)

// Form is a way to write time stamps.
type Form string

// The forms of time stamps.
const (
	Elapsed Form = "elapsed" // numbers, in Unit
	Clock   Form = "clock"   // hh:mm:ss.fff, with or without AM and PM; wraps at midnight
	Dated   Form = "dated"   // date and clock, in one column or two
	Serial  Form = "serial"  // days, as spreadsheets count them
	Epoch   Form = "epoch"   // since 1970, in Unit
	Spaced  Form = "spaced"  // no stamps: rows follow each other by Interval
)

// Time says where the time stamps are and how they are written.
type Time struct {
	Columns  []string `yaml:"columns,omitempty,flow"` // one, or a date and a clock
	Form     Form     `yaml:"form"`
	Order    string   `yaml:"order,omitempty"`      // of a date: "ymd", "dmy" or "mdy"
	Unit     string   `yaml:"unit,omitempty"`       // of elapsed and epoch stamps
	Interval float64  `yaml:"interval_s,omitempty"` // s, of rows without stamps, or of records where Counter counts them
	Counter  string   `yaml:"counter,omitempty"`    // column that counts records
	// Pauses are how long [s] the file pauses at each place where the clock begins anew,
	// from the last row before to the first after, where somebody knows it.
	Pauses []float64 `yaml:"pauses_s,omitempty,flow"`
}

// Channel says what a column holds. Columns that no channel names are left out.
type Channel struct {
	Column   string   `yaml:"column"`             // its name in the head, or "column 3"
	Quantity string   `yaml:"quantity,omitempty"` // as units.Dim names it; "" = a plain number
	Unit     string   `yaml:"unit,omitempty"`     // as in units.Find
	Scaling  *Scaling `yaml:"scaling,omitempty,flow"`
	Absolute bool     `yaml:"absolute,omitempty"` // a pressure against vacuum, not against the air
	Counter  bool     `yaml:"counter,omitempty"`  // counts up, such as a meter of energy
	Kind     Kind     `yaml:"kind,omitempty"`     // what a row tells of its interval
	Text     bool     `yaml:"text,omitempty"`     // remarks and marks of events
	Leave    bool     `yaml:"leave,omitempty"`    // left out
}

// Scaling turns a signal into a quantity: From[0] is To[0], From[1] is To[1]. The
// signal is in mA or V; To is in the unit of the channel.
type Scaling struct {
	Signal string     `yaml:"signal"` // "mA" or "V"
	From   [2]float64 `yaml:"from,flow"`
	To     [2]float64 `yaml:"to,flow"`
}

// Kind says what a row tells of the interval that it ends.
type Kind string

// The kinds of channel; "" is not known, and taken as an instant.
const (
	Mean    Kind = "mean"
	Minimum Kind = "minimum"
	Maximum Kind = "maximum"
)

// Channel returns the channel of a column, or nil.
func (r *Recipe) Channel(column string) *Channel {
	for i := range r.Channels {
		if r.Channels[i].Column == column {
			return &r.Channels[i]
		}
	}
	return nil
}

// Open returns the questions that neither an answer nor the recipe itself has settled.
func (r *Recipe) Open() (out []Question) {
	for _, q := range r.Questions {
		column, scaled := strings.CutSuffix(q.Field, ScalingField)
		c := r.Channel(column)
		switch {
		case scaled && c != nil && (c.Scaling != nil || c.Leave || c.Text || c.Quantity != units.Current.Name()):
		case q.Field == "interval" && (r.Time.Interval > 0 || r.Time.Form != Spaced):
		default:
			out = append(out, q)
		}
	}
	return out
}

// ScalingField ends the Field of a question on what a signal means.
const ScalingField = ": scaling"

// scaled answers what a signal of 4 to 20 mA means: its ends as in "0 to 250 bar", or "mA" to keep it as it is.
func (r *Recipe) scaled(column, choice string) error {
	c := r.Channel(column)
	switch k, unit, ok := scalingIn("4-20 mA = " + choice); {
	case c == nil:
		return fmt.Errorf("there is no channel %q", column)
	case choice == "mA":
	case !ok:
		return fmt.Errorf("%s: %q is no scaling; write what 4 and 20\u202fmA mean, as in \"0 to 250 bar\", or mA", column, choice)
	default:
		to, _ := unitOf(unit)
		c.Scaling, c.Unit, c.Quantity, c.Absolute = k, to.Symbol, to.Dim.Name(), to.absolute
	}
	return nil
}

// Answer answers a question.
func (r *Recipe) Answer(field, choice string) error {
	i := slices.IndexFunc(r.Questions, func(q Question) bool { return q.Field == field })
	if i < 0 {
		return fmt.Errorf("no question is open on %q", field)
	}
	if q := r.Questions[i]; len(q.Choices) > 0 && !slices.Contains(q.Choices, choice) {
		return fmt.Errorf("%s: %q is none of %s", field, choice, strings.Join(q.Choices, ", "))
	}
	if column, ok := strings.CutSuffix(field, ScalingField); ok {
		if err := r.scaled(column, choice); err != nil {
			return err
		}
		r.Questions = slices.Delete(r.Questions, i, i+1)
		return nil
	}
	switch field {
	case "names":
	case "decimal":
		r.Decimal, r.Thousands = ".", ","
		if choice == "," {
			r.Decimal, r.Thousands = ",", "."
		}
	case "order":
		r.Time.Order = choice
	case "interval":
		if _, err := fmt.Sscanf(choice, "%g s", &r.Time.Interval); err != nil || !(r.Time.Interval > 0) {
			return fmt.Errorf("interval: %q is not a time above 0, such as \"0.01 s\"", choice)
		}
	default:
		return fmt.Errorf("no question is open on %q", field)
	}
	r.Questions = slices.Delete(r.Questions, i, i+1)
	return nil
}

// Correction is one thing that an import found in the data, and what it did about it.
type Correction struct {
	Key     string   // names it in Recipe.Choices: "doubled rows", "p1: zero offset"
	Channel string   // "" = the rows as a whole
	Count   int      // rows or cells
	Line    int      // of the file, of the first; 0 = nowhere in particular
	File    string   // that Line is of, where several are joined
	T       float64  // s, of the first
	Text    string   // what was found, with its numbers
	Done    string   // what was done; "" = nothing, the data are as they were
	Choice  string   // which of Choices that is
	Choices []string // what may be done; nil = it can only be told
	Warns   bool     // likely to falsify results
}

// String is a line for a list.
func (c Correction) String() string {
	s := c.Text
	if c.Channel != "" {
		s = c.Channel + ": " + s
	}
	if c.Line > 0 && c.Count > 1 {
		s += fmt.Sprintf(", first in line %d", c.Line)
	} else if c.Line > 0 {
		s += fmt.Sprintf(", line %d", c.Line)
	}
	if c.File != "" {
		s += " of " + c.File
	}
	if c.Done != "" {
		return s + "; " + c.Done
	}
	return s + "; left as it is"
}
