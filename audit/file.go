package audit

import (
	"fmt"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/audit/whole"
	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/circuit/logged"
)

// Format is the first line of an audit file: `format: barlitre/1`.
const Format = "barlitre/1"

// File is an audit file: a machine's circuits, the duties they must do, and
// what energy costs. It is made by Read or Parse and changed by its methods only,
// which keep the text in step: an edit changes the text where it must, reads it again,
// and takes it if it reads no worse than before; else nothing is changed and the error
// says why. Values are changed by Set, Put, Clear and SetPoint; a sheet is drawn by
// AddBlock, Connect, Disconnect, Delete, Rename, Copy, Paste, Place, Rotate, Mirror,
// Bend, AddNote and AddGroup; ImportDuty and SetImport take duties from recordings, TakeIn those that were read; AddCircuit, CopyCircuit and SwapRoles make and exchange
// sheets; AddAxis, AddDuty, AddTrack, AddRow, SetTable and SetDuty say what the machine does;
// AddCalendar, SetCalendar, AddShift, SetShift, SetStop and AssignDuty when.
//
// # Format
//
// An audit file is YAML in UTF-8, without anchors, tags or a second document.
// Keys are as below; an unknown key is a fault. Comments, order and layout are
// kept when the program changes a value.
//
//	format: barlitre/1            needed
//	title: text
//	site: {name, customer, author, date, note: text, currency: EUR}
//	report: {owner, number, revision, approved: text}    for the title block of printed circuits
//	oil: ...                      needed, see below
//	air: {temperature: 30 C}      around the tank
//	heat: {tank_volume: 400 L, cooler: air, cooler_rate: 0.4 kW/K}   optional: tank, cooler, air and shifts
//	energy: {price: 0.18 EUR/kWh, co2: 0.35 kg/kWh, co2_year: 2024,
//	         co2_basis: location | market, credit_returned: no,
//	         fuel_price: 1.6 EUR/L, fuel_co2: 2.66 kg/L,
//	         fuel_density: 0.83 kg/L, fuel_heating_value: 43.0 MJ/kg}
//	axes: {ram: linear, drum: {kind: rotary, load: hook and container}}
//	duties:                       a list, needed
//	circuits:                     a list, needed
//
// What an engine burns is priced at fuel_price, by volume or mass, and counted with fuel_co2; what is not
// given of it, but for the price, is that of mineral diesel.
//
// A quantity is a number with a decimal point and a unit, "160 bar", as read by
// units.Parse; or a mapping, when more is known of it:
//
//	{value: 160 bar, origin: measured | name plate | data sheet | assumed,
//	 low: 150, high: 165 bar, note: text}
//
// low and high without a unit are in the unit of the value. A text that reads as
// a number ("2024") is written in quotes. yes, no, true and false are one thing.
//
// Oil is given in one of two ways. With its dynamic viscosity, which then holds
// at the working temperature, as does the density:
//
//	oil: {temperature: 50 C, density: 870 kg/m3, viscosity: 40 mPa s}
//
// or with its grade; density is then the one at 15 °C (optional), and the
// viscosity index, or the kinematic viscosities at 40 and 100 °C, may be given:
//
//	oil: {grade: ISO VG 46, temperature: 50 C, viscosity_index: 100}
//	oil: {grade: ISO VG 46, temperature: 50 C, viscosity_40: 46 mm2/s, viscosity_100: 6.8 mm2/s}
//
// "ISO VG 46 HV" stands for an oil whose viscosity changes less, of index 150 when none is given. Either way may add
//
//	specific_heat: 1.88 kJ/(kg K)      at 20 °C
//	bulk_modulus: 1.4 GPa              free of air
//	air: 1 %                           entrained, share of volume at atmospheric pressure; 0 when not given
//	start_temperature: 0 C             of the oil when the machine starts, for a check of its viscosity
//
// Where both a viscosity and a grade are given, the viscosity and the density
// hold at the working temperature, and the grade says how they change with it.
//
// The section heat says what stores and takes the heat, with the keys of HeatKeys; without it no oil temperature is worked out. A
// circuit may have a heat of its own, which says what is different there:
//
//	heat:
//	  tank_volume: {value: 400 L, origin: name plate}
//	  air_movement: still | ordinary | forced
//	  cooler: none | air | water
//	  cooler_place: return | case drain | flushing | off-line      when not given, where one is drawn
//	  cooler_rate: 0.4 kW/K          between entering oil and entering air or water
//	  cooler_flow: 60 L/min          at which that holds; or, in place of both,
//	  cooler_points: 20 L/min 0.2 kW/K, 60 L/min 0.4 kW/K
//	  thermostat_opens: 40 C
//	  fan_power: 0.55 kW             booked with what the machine draws, of every circuit
//	  fan: with the machine | by thermostat
//	  loop_flow: 30 L/min            of an off-line loop
//	  hot_day: 38 C                  mean air temperature
//	  shift_hours: 16 h              a day, from shift_start on, shift_days a week
//	  wanted: 55 C                   oil temperature that the cooler is sized for
//
// Duties and circuits are lists:
//
//	duties:
//	- name: day shift
//	  hours: 3000 h               a year; 0 when not given
//	  repeats: yes                the cycle follows itself without pause; yes when not given
//	  step: 10 ms                 between time steps; when not given a thousandth of the
//	                              cycle, rounded to 1, 2 or 5, at most 10 ms; 0 s: rows only,
//	                              and so for a recording of 100 rows or more that gives none
//	  points: {t: [0 s, 2 s], ram.speed: [0 m/s, 0.15 m/s], "ram.load [kN]": [5, 5]}
//	  phases: {approach: 0 s, press: 2.1 s}
//	  standstill: {ram: 1 mm/s}   speed up to which an axis counts as standing; when not
//	                              given 0.1 % of its highest speed in the duty
//	  note: text
//	circuits:
//	- name: As found
//	  role: as found | proposal   when not given the first is as found, others are proposals
//	  note: text
//	  pump_at_rest: keep | unload | stop
//	  standby: 30 W               drawn while off by this circuit, where it is not that of the calendar
//	  retrofit_cost: {low: 20000 EUR, likely: 26000 EUR, high: 35000 EUR, note: text}
//	  blocks:
//	    RV1: {kind: relief, crack: 160 bar, at: [12, 30], turn: 0, mirror: no}
//	  lines: [P1.P - V1.P - RV1.P]
//	  notes: [{text: "label not legible", at: [30, 4]}]
//	  groups: [{label: Power unit, blocks: [M1, P1, RV1]}]
//	  heat: {cooler_rate: 0.1 kW/K}
//	  bends: [{port: P1.P, runs: [[10, 20, 24, 20], [24, 20, 24, 30]]}]
//
// Hours of a year come from a calendar, or stand at the duties; a duty that has its own beside a calendar runs while the
// machine would be off. Work, idle, hold and off add up to 8760 h:
//
//	calendar:
//	  shifts:                     on the days that they begin; days Mon-Fri when not given
//	  - {name: early, from: 06:00, to: 14:00, days: Mon-Fri, breaks: [09:00 - 09:15, 12:00 - 12:30]}
//	  - {name: night, from: 22:00, to: 06:00, days: "Mon-Thu, Sun", breaks: [30 min]}
//	                              a break without times lies in the middle, several are spread evenly
//	  weeks: 48                   worked a year; all 52.14 when not given
//	  stops: {maintenance: 60 h}  planned, a year, out of the time that the shifts work
//	  in_breaks: idle | hold | off    idle where a duty is given for that, else off
//	  idle_time: 10 %             of the shifts without breaks and stops, or hours a year; hold_time likewise;
//	                              what is left is work
//	  work: {product A: 60 %, product B: 40 %}    duties: a share of the state, or hours a year;
//	  idle: {waiting: 100 %}                      shares are of what those with hours leave
//	  hold: {clamped: 100 %}
//	  standby: 80 W               drawn by the electric supply while the machine is off
//
// With a calendar the oil temperature follows its shifts, and those of the section heat are not used.
//
// In place of points may stand a list of phases, as a stop watch gives them. The tracks
// are computed from it (see duty.Build): an axis moves by stroke, or at speed, or stands;
// load_end is where the load goes until the end of the phase; a ramp that is not given is
// a tenth of the phase, at most 0.1 s:
//
//	phases:
//	- {name: approach, lasts: 2 s, ramp: 0.2 s, ram.stroke: 300 mm, ram.load: 5 kN}
//	- {name: press, lasts: 3 s, ram.speed: 30 mm/s, ram.load: 20 kN, ram.load_end: 60 kN}
//
// In place of points may stand "file: press.csv", a table beside the audit file (or
// in a folder below it) whose head has the same names with their units: see
// recording.ReadTable. A recording with names of its own is told by columns, track by
// track, with the unit where its head has none; columns not named are left out:
//
//	file: press.csv
//	columns: {t: "time [s]", ram.speed: "v1 [mm/s]", ram.load: "F1 [kN]"}
//
// What a data logger wrote as it came is taken by import, which says how it is read: the
// recipe that barlitre import prints (logger.Recipe). columns then name its channels, whose units the
// import says; derived works tracks out from channels. sha256 is that of the file as it was
// looked at; another file is told when the audit is opened:
//
//	file: press.csv
//	sha256: 976ca431...
//	import:
//	  encoding: UTF-8             or UTF-16 LE, UTF-16 BE, Windows-1252 (Latin-1 too)
//	  separator: ";"              or ",", tab, "|", space, fixed (with widths: [0, 10, 22])
//	  decimal: ","
//	  thousands: "."              or ",", "'", " "; none when not given
//	  head: 4                     line that names the columns, 0 = none; units_row: 5
//	  first: 6                    first line of numbers
//	  time: {columns: [Date, Time], form: dated, order: dmy}
//	                              form: elapsed or epoch (with unit), clock, dated, serial, or
//	                              spaced (with interval_s); counter: the column that counts records;
//	                              pauses_s: [42, 7.5] where the clock begins anew
//	  channels:
//	  - {column: p1, quantity: pressure, unit: bar}
//	  - {column: p2, quantity: pressure, unit: bar, absolute: yes,
//	     scaling: {signal: mA, from: [4, 20], to: [0, 400]}}
//	  - {column: E1, quantity: energy, unit: kWh, counter: yes}
//	  - {column: note, text: yes}
//	  choices: {"p1: zero offset": leave, out of order: drop}
//	  air_pa: 101300              of the air that absolute pressures stand above; else the standard atmosphere
//	columns: {X1.pressure: p1}
//	also:                       recordings of other loggers: their channels are set beside those of the first
//	- {file: meter.csv, sha256: 51ab..., import: {...}, offset: 12.3 s}
//	- {file: drive.csv, import: {...}, align: {channel: p1, with: "P main", within: 60 s}}
//	                            the offset is found: where channel of the first and with of this one agree best
//	file: [press_09h.csv, press_10h.csv]   in place of one file: those it was split into, in order
//	derived:
//	  ram.speed: {law: speed of position, position: x1, window: 0.2 s}
//	  ram.load: {law: chamber pressures, a: p1, b: p2, bore: 80 mm, rod: 56 mm,
//	             friction: 800 N, viscous: 1500 N s/m, mass: 0 kg, position: x1}
//	  drum.load: {law: motor pressures, a: p3, b: p4, displacement: 80 cm3/rev, gear: 12,
//	              efficiency: 0.92, inertia: 0 kg m2, speed: n1}
//	  drum.speed: {law: speed of flow, flow: q1, displacement: 80 cm3/rev, gear: 12, volumetric: 0.95}
//	  arm.load: {law: sign turned, column: F2}
//
// Friction and mass are those that the cylinder of the circuit has too: they are taken off
// here, for they are added there. Everything that the import finds or changes is told when
// the file is read, in the report and in the result.
//
// A track is axis.speed, axis.position, axis.load,
// axis.command, or block.command for a block that is commanded by itself. A track of a
// measuring point, X1.pressure or Q1.flow, or of what an electric motor takes from the mains,
// M1.power, is what was measured there: it changes nothing and is compared with what is computed (see Measurement).
//
// The measured points of a pump or motor stand in such a table too; its head may be written as the test bench does it, see
// machines.ReadPoints. A block names it as points: pump.csv.
//
// A block is its kind, the parameters of that kind (see circuit.Catalog), and its
// place on the sheet: at in modules, quarter turns, mirrored or not. Its id is
// made of letters, digits and _. A line joins the ports that it names. A
// retrofit_cost is for proposals; low and high go together. notes are texts on the
// sheet, at their upper left corner; groups are labelled boxes around blocks; bends say
// how the line at a port was laid by hand: pieces, each upright or level, from x, y to
// x, y. None of them changes what is computed.
//
// What was read at the machine in a site check stands last, by state, block and quantity (see Reading):
//
//	site_check:
//	  idling.M1.power: 5.2 kW
//	  working.P1.pressure: 150 bar
//
// It changes nothing that is computed.
//
// What Copy puts into the clipboard is an audit file with one circuit, of format, title
// and circuits alone; Paste takes the first circuit of any audit file.
type File struct {
	Path  string // where it was read from; "" when it has no file yet
	Title string
	Site  Site
	Issue Issue
	Oil   Oil

	Air    circuit.Value // K, around the tank
	HasAir bool

	Heat HeatSection // of tank, cooler and air, of all circuits

	Price          circuit.Value // money per J
	HasPrice       bool
	CO2            circuit.Value // kg per J
	HasCO2         bool
	CO2Year        int    // 0 = not given
	CO2Basis       string // "location", "market" or "" when not given
	CreditReturned bool   // energy returned to the mains is paid for

	FuelPrice, FuelCO2, FuelDensity, FuelHeating             circuit.Value // money per m³ or kg, kg/m³, kg/m³, J/kg
	HasFuelPrice, HasFuelCO2, HasFuelDensity, HasFuelHeating bool

	Axes     []duty.Axis
	Duties   []*duty.Duty
	Sources  []Source         // by duty; the zero Source where the points stand in the audit file
	Imports  []*Import        // by duty; nil where no recipe says how its recording is read
	Rates    [][]logged.Rated // by duty; how well a recording tells the energy of its axes
	Stages   [][]duty.Stage   // by duty: the phases that its tracks are computed from; nil where points are given
	Circuits []CircuitEntry
	Calendar *Calendar // shifts and states of the year; nil = hours stand at the duties
	Readings []Reading // of a site check

	data   []byte
	root   *yaml.Node // the top mapping, or nil
	open   Open
	tables map[string]*recorded // what was read of recordings, by file and recipe
	used   map[string]bool      // which of them this text needs
	how    Importing
	found  []circuit.Finding

	unreadAxes []string // that the file has, but of a kind that could not be read
}

// Site says whose machine it is, for the report.
type Site struct {
	Name, Customer, Author, Date, Note string
	Currency                           string // three letters; that of the energy price when not given
}

// Issue says what a title block needs besides title, author and date: fields of ISO 7200.
type Issue struct {
	Owner    string // legal owner of the drawing; that of the site's customer when not given
	Number   string // identification number
	Revision string
	Approved string // who approved it
}

// Oil is what the file says of the oil.
type Oil struct {
	Grade                                                      string
	Temperature, Density, Viscosity, Viscosity40, Viscosity100 circuit.Value // K, kg/m³, Pa·s, m²/s, m²/s
	VI                                                         circuit.Value // viscosity index
	SpecificHeat, BulkModulus, Air, Start                      circuit.Value // J/(kg·K) at 20 °C, Pa, share of volume, K
	HasSpecificHeat, HasBulkModulus, HasAir, HasStart          bool
	HasTemperature, HasDensity                                 bool
	HasViscosity, HasViscosity40, HasViscosity100, HasVI       bool
}

// Source names the recording that a duty was taken from.
type Source struct {
	File, SHA256 string
	Rest         string // further files that it is read from, one a line
}

// Files lists all files of a source in their order; nil where a duty has none.
func (s Source) Files() []string {
	if s.File == "" {
		return nil
	}
	if s.Rest == "" {
		return []string{s.File}
	}
	return append([]string{s.File}, strings.Split(s.Rest, "\n")...)
}

// Role says what a circuit stands for.
type Role string

// The two roles.
const (
	AsFound  Role = "as found"
	Proposal Role = "proposal"
)

// Cost is what a proposal costs to build, once.
type Cost struct {
	Low, Likely, High circuit.Value // money; all alike when no range was given
	Given             bool
	Note              string
}

// CircuitEntry is a circuit with its part in the audit.
type CircuitEntry struct {
	*circuit.Circuit
	Role Role
	Cost Cost
	Heat HeatSection // where it differs from that of all circuits

	Standby    float64 // W, drawn by its electric supply while the machine is off, in place of that of the calendar
	HasStandby bool

	unreadLine bool // it has lines that could not be read
}

// Circuit returns a circuit by name, or nil.
func (f *File) Circuit(name string) *CircuitEntry {
	if i := f.circuitIndex(name); i >= 0 {
		return &f.Circuits[i]
	}
	return nil
}

// Findings returns what reading the file found, as Read did; after an edit, what
// reading the edited file finds.
func (f *File) Findings() []circuit.Finding { return slices.Clone(f.found) }

// Bytes returns the file as it would be saved. Until something is set it is
// what was read, byte for byte.
func (f *File) Bytes() []byte { return slices.Clone(f.data) }

// Save writes the file. An existing file is replaced at once or not at all, and
// keeps its permissions. Recordings are not copied along.
func (f *File) Save(path string) error {
	if err := whole.Write(path, whole.Bytes(f.data)); err != nil {
		return fmt.Errorf("save %s: %w; the file is as it was", path, err)
	}
	return nil
}
