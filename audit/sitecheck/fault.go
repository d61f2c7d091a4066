package sitecheck

import (
	"context"
	"fmt"
	"runtime"
	"sync"

	"barlitre/audit"
	"barlitre/audit/fixfirst"
	"barlitre/audit/look"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// Fault is something that may be wrong, put into the circuit in one or more strengths.
type Fault struct {
	Name  string // "RV1 set below the compensator of P1"
	Point string // where it shows best
	Do    string
	edits []fixfirst.Cure
	model []Model // by strength; nil where the circuit cannot be solved so
}

// faults are what is likeliest to be wrong in a circuit, by what is in it.
func faults(p *look.Plant) []*Fault {
	var out []*Fault
	add := func(point, name, do string, cures ...fixfirst.Cure) {
		out = append(out, &Fault{Name: name, Point: point, Do: do, edits: cures})
	}
	on := func(b *circuit.Block, key, quantity string) fixfirst.Cure {
		return fixfirst.Cure{fixfirst.Set(p.C.Name+"/"+b.ID+"."+key, quantity)}
	}
	bars := func(x float64) string { return fmt.Sprintf("%.4g bar", x/units.Bar) }
	for _, b := range p.Blocks("pump") {
		at := b.ID + ".pressure"
		switch look.Word(b, "control") {
		case "pressure":
			ps := look.Value(b, "set_pressure")
			for _, rv := range p.ReliefsOf(b) {
				key := map[bool]string{true: "set", false: "crack"}[hasSet(rv)]
				add(at, fmt.Sprintf("%s set below the compensator of %s", rv.ID, b.ID), "Compare both settings with the name plate; measure the pipe at "+rv.ID+".T with an infrared or contact thermometer, and do not touch it.", on(rv, key, bars(0.88*ps)), on(rv, key, bars(0.95*ps)), on(rv, key, bars(0.75*ps)))
			}
			add(at, "compensator of "+b.ID+" turned up", "Compare its setting with the name plate.", on(b, "set_pressure", bars(1.08*ps)))
		case "load_sensing":
			add(at, "margin of "+b.ID+" turned up", "Read pump and signal pressure at work: their difference is the margin.", on(b, "margin", "45 bar"), on(b, "margin", "35 bar"))
		}
		if b.Word("points") == "" && b.Values["drain_flow"].SI == 0 {
			point := at
			if drains(p, b) {
				point = b.ID + ".drain"
			}
			add(point, b.ID+" worn", "Measure its drain again, warm and at full pressure; compare with the figure from when it was new.", on(b, "wear", "3"), on(b, "wear", "5"), on(b, "wear", "2"))
		}
	}
	for _, rv := range p.Blocks("relief") {
		if _, ok := rv.Values["vented"]; ok && p.C.PumpAtRest == circuit.Unload {
			for _, b := range p.Blocks("pump") {
				add(b.ID+".pressure", rv.ID+" is not vented at rest", "Check the solenoid of its vent line.", on(rv, "vented", "60 bar"))
			}
		}
	}
	for _, b := range p.Blocks("unloading") {
		for _, pump := range p.Blocks("pump") {
			add(pump.ID+".pressure", b.ID+" sticks and unloads at pressure", "Clean its pilot stage.", on(b, "unloaded_drop", "60 bar"))
		}
	}
	for _, b := range p.Blocks("accumulator") {
		add(b.ID+".pressure", "pre-charge of "+b.ID+" lost", "Have the nitrogen read with the filling set.", on(b, "precharge", bars(0.35*look.Value(b, "precharge"))))
	}
	for _, b := range p.Blocks("filter") {
		add(b.ID+".drop", "element of "+b.ID+" full", "Change the element, look into the old one.", on(b, "nominal_drop", bars(8*look.Value(b, "nominal_drop"))))
	}
	for _, b := range p.Blocks("charge_pump") {
		add(b.ID+".pressure", "charge relief valve of "+b.ID+" turned up", "Compare with the maker's figure.", on(b, "charge", "45 bar"))
	}
	for _, b := range p.Blocks("valve") {
		if c := look.Word(b, "centre"); c == "tandem" || c == "open" {
			for _, pump := range p.Blocks("pump") {
				add(pump.ID+".pressure", b.ID+" does not come to its centre", "Check springs and pilots of "+b.ID+".", on(b, "flow_centre", fmt.Sprintf("%.3g L/min", 0.3*centreFlow(b)/units.LitrePerMinute)))
				break
			}
		}
	}
	return out
}

func hasSet(rv *circuit.Block) bool { _, ok := rv.Values["set"]; return ok }

func centreFlow(b *circuit.Block) float64 {
	if v, ok := b.Values["flow_centre"]; ok {
		return v.SI
	}
	return look.Value(b, "nominal_flow")
}

// solve balances the circuit with each fault in it, on all processors.
func solve(ctx context.Context, f *audit.File, name string, pts []Point, fs []*Fault, system units.System, progress func(done, total int)) error {
	type task struct {
		fault    *Fault
		strength int
	}
	var tasks []task
	for _, x := range fs {
		x.model = make([]Model, len(x.edits))
		for i := range x.edits {
			tasks = append(tasks, task{x, i})
		}
	}
	room := make(chan struct{}, runtime.GOMAXPROCS(0))
	var mu sync.Mutex
	var wg sync.WaitGroup
	done := 0
	var failed error
	for _, t := range tasks {
		wg.Add(1)
		go func() {
			defer wg.Done()
			room <- struct{}{}
			defer func() { <-room }()
			m, err := t.fault.solved(ctx, f, name, t.strength, pts, system)
			mu.Lock()
			defer mu.Unlock()
			t.fault.model[t.strength] = m
			if err != nil {
				failed = err
			}
			if done++; progress != nil {
				progress(done, len(tasks))
			}
		}()
	}
	wg.Wait()
	return failed
}

func (x *Fault) solved(ctx context.Context, f *audit.File, name string, strength int, pts []Point, system units.System) (m Model, err error) {
	defer func() {
		if v := recover(); v != nil { // an error of the program in one model leaves the others
			m, err = nil, nil
		}
	}()
	g, err := fixfirst.Apply(f, x.edits[strength])
	if err != nil {
		return nil, nil // the drawing does not take the edit: this fault cannot be
	}
	s, run, err := fixfirst.SolveOne(ctx, g, name)
	if err != nil || run == nil {
		return nil, err
	}
	return modelOf(look.New(s, run, system), pts), nil
}
