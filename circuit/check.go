package circuit

import (
	"fmt"
	"maps"
	"math"
	"slices"
	"sort"
	"strings"

	"barlitre/circuit/duty"
)

// checker collects findings of one circuit.
type checker struct {
	c      *Circuit
	axes   []duty.Axis
	duties []*duty.Duty
	found  []Finding
	nets   []*net
	of     map[PortRef]*net
}

// Check lists what is wrong with a circuit and its duties, in words, before
// solving: everything at once. Findings of level Stops keep it from being
// solved. A circuit without those can be compiled for each of the duties.
func Check(c *Circuit, axes []duty.Axis, duties []*duty.Duty) []Finding {
	k := &checker{c: c, axes: axes, duties: duties}
	k.blocks()
	k.lines()
	whole := !AnyStops(k.found)
	if k.followed() {
		k.nets, k.of = netsOf(c)
		k.ports()
	}
	if whole {
		k.joints()
		k.shafts()
		k.islands()
	}
	k.rest()
	if whole { // the rest needs all values
		for _, d := range duties {
			k.dutyOf(d)
		}
		if !AnyStops(k.found) {
			k.safety()
		}
	}
	sort.SliceStable(k.found, func(i, j int) bool { return rank(k.found[i].Level) < rank(k.found[j].Level) })
	return k.found
}

// followed reports whether the drawing can be followed: what stops so far is of values alone.
func (k *checker) followed() bool {
	return !slices.ContainsFunc(k.found, func(f Finding) bool { return f.Level == Stops && (f.Parameter == "" || f.Parameter == "kind") })
}

func rank(l Level) int { return strings.Index("stops warns caution note", string(l)) }

// say adds a finding about a block, and returns it until the next is added.
func (k *checker) say(level Level, b *Block, param, format string, args ...any) *Finding {
	f := Finding{Level: level, Circuit: k.c.Name, Parameter: param, Text: fmt.Sprintf(format, args...), Line: k.c.Line}
	if b != nil {
		f.Block, f.Line = b.ID, b.Line
		if v, ok := b.Values[param]; ok && v.Line > 0 {
			f.Line = v.Line
		} else if w, ok := b.Words[param]; ok && w.Line > 0 {
			f.Line = w.Line
		}
		f.Text = b.ID + ": " + f.Text
	}
	k.found = append(k.found, f)
	return &k.found[len(k.found)-1]
}

// blocks checks each block for itself.
func (k *checker) blocks() {
	if len(k.c.Blocks) == 0 {
		k.say(Stops, nil, "", "circuit %q has no blocks; add at least a pump, a tank and an actuator", k.c.Name)
	}
	seen := map[string]*Block{}
	for i := range k.c.Blocks {
		b := &k.c.Blocks[i]
		if old := seen[b.ID]; old != nil {
			k.say(Stops, b, "", "another block has the same id (line %d); rename one of them", old.Line)
		}
		seen[b.ID] = b
		if b.ID == "" || strings.ContainsAny(b.ID, ". /-") {
			k.say(Stops, b, "", "an id may not be empty or hold a point, blank, slash or dash")
		}
		kind := KindNamed(b.Kind)
		if kind == nil {
			k.say(Stops, b, "kind", "there is no kind of block %q; `barlitre blocks` lists them", b.Kind)
			continue
		}
		k.parameters(b, kind)
	}
}

func (k *checker) parameters(b *Block, kind *Kind) {
	for _, key := range slices.Sorted(maps.Keys(b.Values)) {
		v := b.Values[key]
		switch p := kind.Param(key); {
		case p == nil || p.Type != Number:
			k.say(Stops, b, key, "this kind of block, %s, takes no number for %q", InSentence(kind.Title), key)
		default:
			if fault := p.CheckValue(v); fault != "" {
				k.say(Stops, b, key, "%s %s", p.InText(), fault)
			}
		}
	}
	for _, key := range slices.Sorted(maps.Keys(b.Words)) {
		w := b.Words[key]
		p := kind.Param(key)
		if p == nil || p.Type == Number {
			k.say(Stops, b, key, "this kind of block, %s, takes no word for %q", InSentence(kind.Title), key)
			continue
		}
		if fault := p.checkChoice(w.Text); fault != "" {
			k.say(Stops, b, key, "%s %s", p.InText(), fault)
		}
		if p.Type == AxisRef && k.axis(w.Text) == nil {
			k.say(Stops, b, key, "%s is %q, but there is no axis of that name; %s", p.InText(), w.Text, k.axesThere()).because(UnknownAxis, "")
			k.found[len(k.found)-1].Axis = w.Text
		}
	}
	for _, p := range kind.Params {
		_, v := b.Values[p.Key]
		if p.Need && !v && b.Word(p.Key) == "" {
			want := p.Text
			if p.Type == Choice {
				want += ": " + join(p.choicesInText(), "or")
			}
			k.say(Stops, b, p.Key, "%s is missing (%s)", p.InText(), want).because(MissingValue, "")
		}
	}
	if kind.check != nil {
		kind.check(kind, b, func(level Level, param, format string, args ...any) {
			f := k.say(level, b, param, format, args...)
			if p := kind.Param(param); p != nil && level == Stops && b.lacks(p.Key) {
				f.because(MissingValue, "")
			}
		})
	}
}

func (k *checker) axis(name string) *duty.Axis {
	for i := range k.axes {
		if k.axes[i].Name == name {
			return &k.axes[i]
		}
	}
	return nil
}

// axesThere says which axes there are.
func (k *checker) axesThere() string {
	var names []string
	for _, a := range k.axes {
		names = append(names, a.Name)
	}
	switch len(names) {
	case 0:
		return "no axis is given yet"
	case 1:
		return "the only one is " + names[0]
	}
	return "the axes are " + join(names, "and")
}

// lines checks that every port named exists and stands in one line only.
func (k *checker) lines() {
	first := map[PortRef]int{}
	for _, l := range k.c.Lines {
		bad := func(block, format string, args ...any) {
			k.found = append(k.found, Finding{Level: Stops, Circuit: k.c.Name, Block: block, Text: fmt.Sprintf(format, args...), Line: l.Line})
		}
		if len(l.Ports) == 1 {
			bad(l.Ports[0].Block, "the line at %s leads nowhere; name the port at its other end", l.Ports[0])
			k.found[len(k.found)-1].because(OpenLine, l.Ports[0].Port)
		}
		for _, p := range l.Ports {
			b := k.c.Block(p.Block)
			if b == nil {
				bad("", "line names %s, but there is no block %s", p, p.Block)
				f := &k.found[len(k.found)-1]
				f.Cause, f.Port = UnknownBlock, p
				continue
			}
			kind := KindNamed(b.Kind)
			if kind == nil {
				continue
			}
			port := kind.Port(p.Port)
			if port == nil {
				bad(b.ID, "line names %s, but a %s has the ports %s", p, strings.ToLower(kind.Title), join(portNames(kind), "and"))
				continue
			}
			if old, twice := first[p]; twice && b.Kind != kindTank {
				bad(b.ID, "port %s stands in two lines (the other in line %d); write them as one line, or put a junction between", p, old)
			}
			first[p] = l.Line
		}
	}
}

func portNames(k *Kind) []string {
	var out []string
	for _, p := range k.Ports {
		out = append(out, p.Name)
	}
	return out
}

// rest checks what happens while everything stands.
func (k *checker) rest() {
	switch k.c.PumpAtRest {
	case Keep, Stop:
	case Unload:
		if !k.canUnload() {
			k.say(Stops, nil, "pump_at_rest", "circuit %q unloads at rest, but nothing in it can: give a relief valve a vented pressure, a pump an unloaded pressure (unloaded_pressure), a valve a tandem or open centre, or use open-centre sections", k.c.Name).because(RestNotSaid, "")
		}
	case "":
		k.say(Stops, nil, "pump_at_rest", "circuit %q does not say what its pumps do while everything stands: keep turning, turn unloaded or switched off (pump_at_rest: keep, unload or stop)", k.c.Name).because(RestNotSaid, "")
	default:
		k.say(Stops, nil, "pump_at_rest", "what its pumps do while everything stands (pump_at_rest) is %q, must be keep, unload or stop", k.c.PumpAtRest)
	}
}

func (k *checker) canUnload() bool {
	for i := range k.c.Blocks {
		b := &k.c.Blocks[i]
		_, vented := b.Values["vented"]
		_, unloaded := b.Values["unloaded_pressure"]
		centre := b.Word("centre")
		if vented || unloaded || centre == "tandem" || centre == "open" || b.Kind == kindSection63 {
			return true
		}
	}
	return false
}

// dutyOf checks one duty against the circuit.
func (k *checker) dutyOf(d *duty.Duty) {
	for _, p := range d.Check() {
		k.found = append(k.found, Finding{Level: Stops, Circuit: k.c.Name, Duty: d.Name, Text: p.Error()})
	}
	if AnyStops(k.found) {
		return
	}
	for _, tr := range d.Tracks {
		if k.axis(tr.Of) != nil {
			continue
		}
		b := k.c.Block(tr.Of)
		if b == nil {
			continue // of another circuit
		}
		k.takes(d, b, tr.What)
	}
	for i := range k.c.Blocks {
		k.setPoints(d, &k.c.Blocks[i])
	}
	for _, a := range k.axes {
		k.axisOf(d, a)
	}
	if d.Repeats {
		k.closes(d)
	}
}

// takes refuses a track that a block has no use for.
func (k *checker) takes(d *duty.Duty, b *Block, w duty.What) {
	control := KindNamed(b.Kind).WordOf(b, "control")
	switch {
	case w.Measured():
		if kind := map[duty.What]string{duty.MeasuredPressure: kindPressurePoint, duty.MeasuredFlow: kindFlowPoint, duty.MeasuredPower: kindElectricMotor}[w]; b.Kind != kind {
			k.say(Stops, b, "", "duty %q has a measured track %s.%s, but %s is a %s; put a %s there and name that", d.Name, b.ID, w, b.ID, strings.ToLower(KindNamed(b.Kind).Title), strings.ToLower(KindNamed(kind).Title))
		}
	case w == duty.SetPressure || w == duty.SetFlow:
		if !isPQ(b) {
			k.say(Stops, b, "control", "duty %q has a track %s.%s, but only a pump with p/Q control takes one (control: pq); set that, or drop the track", d.Name, b.ID, w)
		}
	case w != duty.Command || (!isValve(b) && control != "commanded") || follows(b) != "":
		k.say(Stops, b, "control", "duty %q has a track %s.%s, but %s does not take commands; let its control be commanded (control: commanded), or drop the track", d.Name, b.ID, w, b.ID)
	}
}

// isPump reports whether a block is a pump or a service that its shaft drives alike.
func isPump(b *Block) bool { return b.Kind == kindPump || b.Kind == kindSwitched }

// delivers reports whether a block raises the pressure of oil: a pump, also one for charge.
func delivers(b *Block) bool { return isPump(b) || b.Kind == kindChargePump }

// displaces reports whether a block passes oil by turning, as all that has a displacement does.
func displaces(b *Block) bool { return KindNamed(b.Kind).Param("displacement") != nil }

// onShaft reports whether a block is such a machine and passes power through a shaft port.
func onShaft(b *Block) bool { return displaces(b) && KindNamed(b.Kind).Port("shaft") != nil }

// isPQ reports whether a block is a pump that takes set pressure and set flow.
func isPQ(b *Block) bool {
	return b.Kind == kindPump && follows(b) == "" && KindNamed(b.Kind).WordOf(b, "control") == "pq"
}

// setPoints asks for set pressure and set flow of a pq pump, as tracks or numbers.
func (k *checker) setPoints(d *duty.Duty, b *Block) {
	if !isPQ(b) {
		return
	}
	for _, w := range []duty.What{duty.SetPressure, duty.SetFlow} {
		if _, ok := b.Values[w.String()]; !ok && d.Track(b.ID, w) == nil {
			k.say(Stops, b, w.String(), "a pump with p/Q control needs its %s: give it a number, or duty %q a track %s.%s", KindNamed(b.Kind).Param(w.String()).InText(), d.Name, b.ID, w)
		}
	}
}

// closes notes how far an axis drifts with every cycle.
func (k *checker) closes(d *duty.Duty) {
	for _, a := range k.axes {
		tr := d.Track(a.Name, duty.Speed)
		if tr == nil || k.actuator(a.Name) == nil {
			continue
		}
		s, way := 0.0, 0.0
		for i := 1; i < len(d.Time); i++ {
			h := (d.Time[i] - d.Time[i-1]) / 2
			s += h * (tr.Values[i] + tr.Values[i-1])
			way += h * (math.Abs(tr.Values[i]) + math.Abs(tr.Values[i-1]))
		}
		if math.Abs(s) > 1e-6*way && way > 0 && a.Kind == duty.Linear {
			k.found = append(k.found, Finding{Level: Note, Circuit: k.c.Name, Duty: d.Name, Text: fmt.Sprintf(
				"duty %q: axis %s ends %s from where it began; each cycle adds that much. Close the strokes", d.Name, a.Name, mm(s))})
		}
	}
}
