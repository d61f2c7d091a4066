package circuit

import (
	"math"

	"barlitre/machines"
	"barlitre/machines/units"
)

// isServo reports whether an electric motor is a permanent-magnet one.
func isServo(b *Block) bool { return b.Word("type") == "permanent_magnet" }

// slips reports whether a motor's speed falls with its torque.
func slips(b *Block) bool { return b.Kind == kindElectricMotor && b.Word("slip") == "yes" }

// commandsTorque reports whether a motor's torque is commanded and its speed found.
func commandsTorque(b *Block) bool {
	return b.Kind == kindElectricMotor && b.Word("commands") == "torque"
}

// varies reports whether a motor's speed is found or commanded.
func varies(b *Block) bool { return follows(b) != "" || b.Word("control") == "commanded" }

// number is a value of a motor, typed or default.
func number(b *Block, key string) (float64, bool) {
	v, _, ok := KindNamed(b.Kind).Value(b, key)
	return v.SI, ok
}

// polesOf is the number of poles of a motor.
func polesOf(b *Block) int {
	p, _ := number(b, "poles")
	return int(math.Round(p))
}

// fieldSpeed is the synchronous speed of a motor [rad/s].
func fieldSpeed(b *Block) float64 {
	f, _ := number(b, "frequency")
	return machines.SynchronousSpeed(f, polesOf(b))
}

// usualSlip is the slip at rated load that a motor of unknown name plate is given: 1480 of 1500 rpm.
const usualSlip = 20.0 / 1500

// electricMotorDefault is the derive of electricMotorKind.
func electricMotorDefault(k *Kind, b *Block, key string) (Value, bool) {
	rated := b.Values["rated_power"].SI
	switch key {
	case "efficiency":
		if class := b.Word("efficiency_class"); class != "" {
			eta, origin, err := machines.EfficiencyClass(class, roundRating(rated), polesOf(b))
			return derived(k.Param(key), eta, DataSheet, class+": "+origin), err == nil
		}
	case "speed":
		_, poles := b.Values["poles"]
		if _, f := b.Values["frequency"]; poles || f {
			return derived(k.Param(key), fieldSpeed(b)*(1-usualSlip), Assumed, "1.3 % slip at rated load, common practice"), polesOf(b) > 0
		}
	case "starts_per_hour":
		return derived(k.Param(key), machines.StartsPerHour(rated, polesOf(b)), Assumed, "by size and poles, NEMA MG 10 from memory; ask its maker"), rated > 0
	case "inertia":
		return derived(k.Param(key), machines.Inertia(rated, polesOf(b)), Assumed, "by size and poles, from memory; good to a factor of 1.5"), rated > 0
	case "speed_loss":
		return servoSpeedLoss(k.Param(key), b, rated)
	}
	return Value{}, false
}

// roundRating is a rating [W] in kW as the standard lists it: what arithmetic left is taken off.
func roundRating(w float64) float64 { return math.Round(w/units.Kilowatt*1e6) / 1e6 }

// servoSpeedLoss is what the rated loss of a servo motor leaves beside its copper.
func servoSpeedLoss(p *Param, b *Block, rated float64) (Value, bool) {
	eta, okE := number(b, "efficiency")
	kT, okK := b.Values["torque_constant"]
	R, okR := b.Values["resistance"]
	n, _ := number(b, "speed")
	if !okE || !okK || !okR || eta <= 0 || n <= 0 || kT.SI <= 0 {
		return Value{}, false
	}
	i := rated / n / kT.SI
	return derived(p, math.Max(0, rated*(1/eta-1)-3*R.SI*i*i), Assumed, "rated loss less that of the copper"), true
}

func checkElectricMotor(k *Kind, b *Block, bad func(Level, string, string, ...any)) {
	if follows(b) != "" && b.Word("control") != "" {
		bad(Stops, "control", "it follows an axis and has a control of its own; keep one of the two (follows, control)")
	}
	checkMotorEfficiency(b, bad)
	checkMotorSlip(b, bad)
	if p := polesOf(b); p%2 != 0 {
		bad(Stops, "poles", "a motor has an even number of poles, not %d", p)
	}
	if commandsTorque(b) && !varies(b) {
		bad(Stops, "commands", "no command reaches it: where a torque is commanded (commands: torque) it follows an axis (follows) or a track (control: commanded)")
	}
	idle, ok := b.Values["idle_speed"]
	n, _ := number(b, "speed")
	switch {
	case ok && varies(b):
		bad(Stops, "idle_speed", "its speed is found or commanded, so it has no idle speed; command it, or drop its soft idle speed (idle_speed)")
	case ok && idle.SI > n:
		bad(Stops, "idle_speed", "its idle speed is above its speed of %s", show(n, units.AngularSpeed))
	}
}

func checkMotorEfficiency(b *Block, bad func(Level, string, string, ...any)) {
	_, typed := b.Values["efficiency"]
	_, kT := b.Values["torque_constant"]
	_, R := b.Values["resistance"]
	_, P0 := b.Values["speed_loss"]
	class := b.Word("efficiency_class")
	f, _ := number(b, "frequency")
	switch {
	case isServo(b) && class != "":
		bad(Stops, "efficiency_class", "the classes are those of induction motors; type the efficiency of a servo motor, or its torque constant, resistance and loss at speed (torque_constant, resistance, speed_loss)")
	case kT != R || (!isServo(b) && (kT || P0)):
		bad(Stops, "torque_constant", "torque constant and resistance (torque_constant, resistance) go together, on a permanent-magnet motor")
	case isServo(b) && kT && (typed || P0):
	case class != "" && !typed:
		if _, _, err := machines.EfficiencyClass(class, roundRating(b.Values["rated_power"].SI), polesOf(b)); err != nil {
			bad(Stops, "efficiency_class", "%v", err)
		} else if f != 50 {
			bad(Stops, "efficiency_class", "efficiency classes are known at 50 Hz; type the name-plate efficiency")
		}
	case !typed:
		bad(Stops, "efficiency", "efficiency is missing (on the name plate; or give its efficiency class, efficiency_class)")
	}
	if class != "" && typed {
		bad(Note, "efficiency_class", "its efficiency is typed, which is used; its class is not")
	}
}

func checkMotorSlip(b *Block, bad func(Level, string, string, ...any)) {
	if !slips(b) {
		return
	}
	_, limit := b.Values["torque_limit"]
	n, _ := number(b, "speed")
	switch ws := fieldSpeed(b); {
	case isServo(b):
		bad(Stops, "slip", "a permanent-magnet motor turns without slip; drop it")
	case varies(b):
		bad(Stops, "slip", "its speed is found or commanded, so a converter makes up for slip; drop it")
	case limit:
		bad(Stops, "torque_limit", "with slip its speed falls with torque already; drop the torque limit, and give its breakdown torque")
	case !(n < ws && n > 0.8*ws):
		bad(Stops, "speed", "its rated speed of %s does not belong to a field of %s (%d poles); correct speed, poles or frequency", show(n, units.AngularSpeed), show(ws, units.AngularSpeed), polesOf(b))
	}
}
