package cure

import (
	"fmt"
	"math"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// set is a cure that sets one value.
func (p *patient) set(name, key, text string) *Cure {
	return &Cure{Name: name, Mend: func(f *audit.File) error { return f.Set(p.target(key), text) }}
}

// missingValue leads to the field of a number; of what holds an axis it takes the first
// that leaves nothing to stop at.
func missingValue(p *patient) *Cure {
	q := circuit.KindNamed(p.b.Kind).Param(p.Parameter)
	if q == nil {
		return nil
	}
	switch {
	case q.Type == circuit.AxisRef && len(p.file.Axes) == 1:
		axis := p.file.Axes[0].Name
		return p.set(fmt.Sprintf("Set %s of %s: %s", circuit.InSentence(q.Title), p.Block, axis), q.Key, axis)
	case q.Key == "axis" && len(p.file.Axes) == 0:
		name, kind, _ := p.file.NewAxis(p.b)
		return &Cure{Name: fmt.Sprintf("Make axis %s for %s", name, p.Block), Told: "Its name can be changed, and its motion said, on the page Duty.",
			Mend: func(f *audit.File) error { return f.GiveAxis(p.target(q.Key), name, kind) }}
	case q.Key != "hold" && q.Type != circuit.Number:
		return &Cure{Name: "Choose " + circuit.InSentence(q.Title), Field: q.Key}
	case q.Key != "hold":
		return &Cure{Name: "Type " + circuit.InSentence(q.Title), Field: q.Key}
	}
	for _, word := range q.Choices {
		c := p.set("Let the "+word+" hold it", "hold", word)
		c.Told = fmt.Sprintf("%s is held by the %s; correct that if the machine has something else.", p.Block, word)
		if mended := *p.file; c.Mend(&mended) == nil && !p.stopsAt(&mended) {
			return c
		}
	}
	return &Cure{Name: "Choose what holds it", Field: q.Key}
}

// noFollower lets the one control that can answer for an axis follow it.
func noFollower(p *patient) *Cure {
	if p.b == nil || p.Parameter == "" {
		return nil
	}
	for _, a := range p.file.Axes {
		if c := p.set(fmt.Sprintf("Let %s follow axis %s", p.Block, a.Name), p.Parameter, a.Name); a.Name == p.Axis {
			return c
		}
	}
	return nil
}

// stopsAt reports whether a file has a finding that stops about the block's parameter.
func (p *patient) stopsAt(f *audit.File) bool {
	for _, g := range f.Check() {
		if g.Level == circuit.Stops && g.Circuit == p.e.Name && g.Block == p.Block && g.Parameter == p.Parameter {
			return true
		}
	}
	return false
}

// needsNoValue drops a value.
func needsNoValue(p *patient) *Cure {
	q := circuit.KindNamed(p.b.Kind).Param(p.Parameter)
	if q == nil || q.Need {
		return nil
	}
	return &Cure{Name: fmt.Sprintf("Take out of %s: %s", p.Block, circuit.InSentence(q.Title)), Mend: func(f *audit.File) error { return f.Drop(p.target(p.Parameter)) }}
}

func heldByValve(p *patient) *Cure { return p.set("Let the valve hold "+p.Block, "hold", "valve") }

// heldOtherwise takes what the first actuator of the same axis is held by.
func heldOtherwise(p *patient) *Cure {
	for i := range p.e.Blocks {
		b := &p.e.Blocks[i]
		if b.ID != p.Block && b.Word("axis") == p.b.Word("axis") && b.Word("hold") != "" {
			return p.set(fmt.Sprintf("Let the %s hold %s", b.Word("hold"), p.Block), "hold", b.Word("hold"))
		}
	}
	return nil
}

// restNotSaid lets the pumps go on turning, which leaves out nothing that they draw.
func restNotSaid(p *patient) *Cure {
	return &Cure{Name: "Let its pumps keep turning at rest", Told: "They keep turning while every axis stands; say switched off or unloaded where the machine does so.",
		Mend: func(f *audit.File) error { return f.Set(p.e.Name+"/pump_at_rest", string(circuit.Keep)) }}
}

// reliefTooLow raises a relief valve over the pressure that a pump holds.
func reliefTooLow(p *patient) *Cure {
	pump := p.e.Block(p.Port.Block)
	if pump == nil {
		return nil
	}
	held, ok := circuit.HoldsPressure(pump)
	crack, known := circuit.ReliefOpens(p.b)
	now, given := p.b.Values[p.Parameter]
	if !ok || !known || !given {
		return nil
	}
	text := settingText(circuit.ReliefAbove(held) + now.SI - crack)
	return &Cure{Name: fmt.Sprintf("Raise %s: %s %s", p.Block, circuit.InSentence(circuit.KindNamed(p.b.Kind).Param(p.Parameter).Title), text),
		Told: p.Block + " is raised on paper only: no relief valve of a machine may be set so before its ratings and its maker permit it.",
		Mend: func(f *audit.File) error { return f.Set(p.target(p.Parameter), text) }}
}

// settingText writes a pressure as a setting: to the next 5 bar above.
func settingText(p float64) string {
	return fmt.Sprintf("%.0f bar", 5*math.Ceil(p/(5*units.Bar)-1e-9))
}
