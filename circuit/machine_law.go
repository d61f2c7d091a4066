package circuit

import (
	"fmt"
	"strings"

	"barlitre/machines"
)

// familyWords are the families as files write them.
func familyWords() []string {
	var out []string
	for _, f := range machines.Families {
		out = append(out, strings.ReplaceAll(f.Name, " ", "_"))
	}
	return out
}

// usualFamily stands in where a best point is given without a family.
const usualFamily = "axial_piston"

// familyOf returns the family of a machine, or the usual one.
func familyOf(b *Block) machines.Family {
	word := b.Word("family")
	if word == "" {
		word = usualFamily
	}
	f, _ := machines.FindFamily(strings.ReplaceAll(word, "_", " "))
	return f
}

// bestKeys are the parameters of a best point.
var bestKeys = []string{"best_volumetric", "best_hydromechanical", "best_pressure", "best_speed", "best_viscosity"}

// estimated reports whether a machine says what its coefficients follow from.
func estimated(b *Block) bool {
	if b.Word("family") != "" {
		return true
	}
	for _, k := range bestKeys {
		if _, ok := b.Values[k]; ok {
			return true
		}
	}
	return false
}

// bestPoint is the family's best point with what the block says of it.
func bestPoint(b *Block) machines.Family {
	f := familyOf(b)
	for i, to := range []*float64{&f.EtaV, &f.EtaHM, &f.DP, &f.Speed, &f.Mu} {
		if v, ok := b.Values[bestKeys[i]]; ok {
			*to = v.SI
			if i < 2 { // an efficiency that is typed is that of the machine at hand
				f.Motor = b.Kind == kindHydraulicMotor
			}
		}
	}
	return f
}

// deriveMachine returns what a machine has for a parameter that is not given, from its measured points, its best point
// or its family; ok = false where the default of the catalog holds.
func deriveMachine(k *Kind, b *Block, key string) (Value, bool) {
	if p := k.Param(key); p == nil || p.Type != Number {
		return Value{}, false
	}
	f := bestPoint(b)
	if v, ok := ofBestPoint(f, key); ok && estimated(b) {
		return derived(k.Param(key), v, Assumed, f.Name+", "+f.Origin), true
	}
	d, ok := b.Values["displacement"]
	if !ok || d.SI <= 0 {
		return Value{}, false
	}
	if b.Fit != nil {
		if v, ok := coefficient(b.Fit.Law, key); ok {
			return derived(k.Param(key), v, Measured, fmt.Sprintf("fitted to %d points of %s", len(b.Fit.Points), b.Word("points"))), true
		}
		return Value{}, false
	}
	if !estimated(b) {
		return Value{}, false
	}
	law, err := f.Displacement(d.SI)
	v, ok := coefficient(law, key)
	if err != nil || !ok {
		return Value{}, false
	}
	return derived(k.Param(key), v, Assumed, "of the best point: "+f.BestPoint()), true
}

// ofBestPoint returns a number of a family or its best point by the key of its parameter.
func ofBestPoint(f machines.Family, key string) (float64, bool) {
	if key == "starting_torque" {
		return f.StartingFraction, true
	}
	for i, v := range []float64{f.EtaV, f.EtaHM, f.DP, f.Speed, f.Mu} {
		if key == bestKeys[i] {
			return v, true
		}
	}
	return 0, false
}

// coefficient returns a coefficient of a law by the key of its parameter.
func coefficient(m machines.Displacement, key string) (float64, bool) {
	switch key {
	case "slip":
		return m.Cs, true
	case "turbulent_slip":
		return m.Cst, true
	case "compression":
		return m.K, true
	case "dead_volume":
		return m.Kd, true
	case "friction":
		return m.Cf, true
	case "viscous":
		return m.Cv, true
	case "hydrodynamic":
		return m.Ch, true
	case "drag":
		return m.Tc, true
	}
	return 0, false
}

// checkMachine says what does not go together in a displacement machine.
func checkMachine(k *Kind, b *Block, bad func(Level, string, string, ...any)) {
	value := func(key string) (float64, bool) { v, ok := b.Values[key]; return v.SI, ok }
	_, flow := value("drain_flow")
	_, pressure := value("drain_pressure")
	_, theta := value("drain_temperature")
	_, worn := value("wear")
	share, _, _ := k.Value(b, "case_share")
	switch {
	case flow && worn:
		bad(Stops, "wear", "wear and measured case-drain flow (wear, drain_flow) both set the slip; keep one")
	case flow && !pressure:
		bad(Stops, "drain_pressure", "a measured case-drain flow needs the pressure it was measured at (drain_pressure)")
	case !flow && (pressure || theta):
		bad(Stops, "drain_flow", "pressure and temperature of the case drain (drain_pressure, drain_temperature) belong to a measured case-drain flow (drain_flow); give that, or drop them")
	case flow && share.SI == 0:
		bad(Stops, "case_share", "with no share of the slip to the case (case_share) none leaves by the drain, so a measured case-drain flow says nothing; set the share above 0")
	}
	if b.Word("points") != "" && estimated(b) {
		bad(Stops, "points", "points and a family or best point both set the coefficients; keep one")
	}
	if b.Word("points") == "" && (b.Word("points_as") != "" || hasValue(b, "points_viscosity")) {
		bad(Stops, "points", "use and viscosity of the points (points_as, points_viscosity) belong to measured points; name their file, or drop them")
	}
	from, ok1 := value("optimum_viscosity_from")
	to, ok2 := value("optimum_viscosity_to")
	if ok1 && ok2 && from >= to {
		bad(Stops, "optimum_viscosity_to", "the range of optimum viscosity must end (optimum_viscosity_to) above where it begins (optimum_viscosity_from)")
	}
	if b.Fit != nil {
		for _, w := range b.Fit.Warnings {
			bad(Warns, "points", "%s", w)
		}
	}
}

func hasValue(b *Block, key string) bool {
	_, ok := b.Values[key]
	return ok
}

// wear is what is known of a machine's wear: a factor, or, where drain > 0, a measured case drain.
type wear struct{ factor, share, drain, pressure, theta float64 }

// of multiplies the slip of a law by the factor, or makes it that of the measured drain.
func (w wear) of(law machines.Displacement, oil *Conditions) machines.Displacement {
	factor := w.factor
	if w.drain > 0 {
		mu := oil.ViscosityAt(w.theta)
		turbulent, _ := law.TurbulentSlip(w.pressure, oil.Density)
		if fresh := w.share * (law.Cs*law.D*w.pressure/mu + turbulent); fresh > 0 {
			factor = w.drain / fresh
		} else {
			law, factor = law.WithLeakage(w.drain/w.share, w.pressure, mu), 1
		}
	}
	law.Cs, law.Cst = factor*law.Cs, factor*law.Cst
	return law
}

// MachineLaw returns the loss law of a displacement machine as it goes into the balance; ok is false for other blocks.
func MachineLaw(b *Block, oil Conditions) (law machines.Displacement, ok bool) {
	k := KindNamed(b.Kind)
	if k == nil || k.derive == nil {
		return law, false
	}
	get := func(key string) float64 { v, _, _ := k.Value(b, key); return v.SI }
	law = machines.Displacement{D: get("displacement"), Cs: get("slip"), Cst: get("turbulent_slip"), K: get("compression"), Kd: get("dead_volume"),
		Cf: get("friction"), Cv: get("viscous"), Ch: get("hydrodynamic"), Tc: get("drag")}
	w := wear{factor: get("wear"), share: get("case_share"), drain: get("drain_flow"), pressure: get("drain_pressure"), theta: get("drain_temperature")}
	if w.theta == 0 {
		w.theta = oil.Temperature
	}
	return w.of(law, &oil), law.Check() == nil
}

// MachinePorts names outlet and inlet of a displacement machine that turns forwards as a pump, between which its pressure
// difference lies; ok is false for other blocks.
func MachinePorts(b *Block) (outlet, inlet string, ok bool) {
	switch b.Kind {
	case kindPump, kindChargePump:
		return "P", "S", true
	case kindHydraulicMotor:
		return "A", "B", true
	}
	return "", "", false
}
