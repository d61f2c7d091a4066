package samples

import (
	"math"
	"testing"

	"barlitre/audit"
	"barlitre/circuit"
)

// The power of every starter while it waits, by hand from the numbers in its file:
// the pump against what its oil has to pass.
func TestStarterIdlePower(t *testing.T) {
	eachStarter(t, func(t *testing.T, st Starter, s *audit.Solution) {
		h := &byHand{t: t, c: s.Circuits[0].Circuit, mu: s.Conditions.Viscosity}
		var want float64
		switch shaft, electric := idleShaft[st.Name], idleElectric[st.Name]; {
		case electric != nil:
			want = electric(h)
		case shaft != nil:
			want = h.electric(shaft(h))
		default:
			t.Fatal("nobody worked it out")
		}
		b := s.Circuits[0].Duties[1].Balance
		if got := b.SupplyIn.Total() / b.Cycle; math.Abs(got-want) > 1e-3*want {
			t.Errorf("waiting %.1f W, by hand %.1f W", got, want)
		}
	})
}

// byHand works a circuit at rest out from its values.
type byHand struct {
	t  *testing.T
	c  *circuit.Circuit
	mu float64 // Pa·s
}

// v returns a value of a block, typed or default.
func (h *byHand) v(block, key string) float64 {
	h.t.Helper()
	b := h.c.Block(block)
	v, _, ok := circuit.KindNamed(b.Kind).Value(b, key)
	if !ok {
		h.t.Fatalf("%s has no %s", block, key)
	}
	return v.SI
}

func (h *byHand) speed() float64 { return h.v("M1", "speed") }

func (h *byHand) disp(pump string) float64 { return h.v(pump, "displacement") } // m³/rad

// rub is the friction power of a machine at the speed of the motor [W].
func (h *byHand) rub(pump string, p float64) float64 {
	D, w := h.disp(pump), h.speed()
	return (h.v(pump, "friction")*D*p + h.v(pump, "viscous")*D*h.mu*w + h.v(pump, "drag")) * w
}

// slip is the leakage of a machine [m³/s].
func (h *byHand) slip(pump string, p float64) float64 {
	return h.v(pump, "slip") * h.disp(pump) * p / h.mu
}

// fixed is the shaft power of a fixed pump whose flow meets the pressure at(q), found
// by repeating: the slip is small.
func (h *byHand) fixed(pump string, at func(q float64) float64) float64 {
	p := 0.0
	for range 50 {
		p = at(h.disp(pump)*h.speed() - h.slip(pump, p))
	}
	return h.disp(pump)*p*h.speed() + h.rub(pump, p)
}

// holding is that of a pump which makes up its own slip at a pressure.
func (h *byHand) holding(pump string, p float64) float64 {
	return h.slip(pump, p)*p + h.rub(pump, p)
}

// electric adds the loss of the motor.
func (h *byHand) electric(shaft float64) float64 {
	const kf = 0.35
	N := h.v("M1", "rated_power")
	return shaft + N*(1/h.v("M1", "efficiency")-1)*(kf+(1-kf)*math.Pow(shaft/N, 2))
}

// relief is its pressure at a flow, from where it cracks or is vented to.
func (h *byHand) relief(id, opens string) func(q float64) float64 {
	p := h.v(id, opens)
	if opens == "set" {
		p -= h.v(id, "override") * h.v(id, "set_flow")
	}
	return func(q float64) float64 { return p + h.v(id, "override")*q }
}

// square is the drop of an edge from its nominal point.
func square(q, qN, dN float64) float64 { return dN * math.Pow(q/qN, 2) }

func (h *byHand) filter(q float64) float64 {
	x, s := q/h.v("F1", "nominal_flow"), h.v("F1", "linear_share")
	return h.v("F1", "nominal_drop") * (s*x + (1-s)*x*x)
}

// tandem is the drop of a valve's centre and the filter behind it.
func (h *byHand) tandem(q float64) float64 {
	return square(q, h.v("V1", "flow_centre"), h.v("V1", "nominal_drop")) + h.filter(q)
}

func setPressure(h *byHand) float64 { return h.holding("P1", h.v("P1", "set_pressure")) }

func margin(h *byHand) float64 { return h.holding("P1", h.v("P1", "margin")) }

func vented(h *byHand) float64 { return h.fixed("P1", h.relief("RV1", "vented")) }

func tandem(h *byHand) float64 { return h.fixed("P1", h.tandem) }

// idleElectric holds the electric power at rest where the motor stands [W].
var idleElectric = map[string]func(h *byHand) float64{
	"float-driven-rig.yaml": func(h *byHand) float64 { return h.v("U1", "rated_power") * h.v("U1", "no_load") }, // nothing turns
}

// idleShaft holds the shaft power at rest [W].
var idleShaft = map[string]func(h *byHand) float64{
	"throttled-constant-flow.yaml":   func(h *byHand) float64 { return h.fixed("P1", h.relief("RV1", "set")) },
	"pressure-compensated-pump.yaml": setPressure,
	"reducing-clamp.yaml":            setPressure,
	"load-sensing-one.yaml":          margin,
	"load-sensing-two.yaml":          margin,
	"counterbalance-lift.yaml":       vented,
	"sequence-clamp-press.yaml":      vented,
	"regenerative-extension.yaml":    tandem,
	"meter-out-flow-control.yaml":    tandem,
	"open-centre.yaml": func(h *byHand) float64 { // both channels and the filter
		return h.fixed("P1", func(q float64) float64 {
			return 2*square(q, h.v("S1", "flow_bypass"), h.v("S1", "nominal_drop")) + h.filter(q)
		})
	},
	"high-low-pumps.yaml": func(h *byHand) float64 { // both over the vented relief valve, the large one through its check valve
		p, p1 := 0.0, 0.0
		for range 50 {
			q1 := h.disp("P1")*h.speed() - h.slip("P1", p1)
			q2 := h.disp("P2")*h.speed() - h.slip("P2", p)
			p = h.relief("RV1", "vented")(q1 + q2)
			p1 = p + h.v("CK1", "opens") + square(q1, h.v("CK1", "nominal_flow"), h.v("CK1", "nominal_drop"))
		}
		return (h.disp("P1")*p1+h.disp("P2")*p)*h.speed() + h.rub("P1", p1) + h.rub("P2", p)
	},
	"accumulator-unloading.yaml": func(h *byHand) float64 { // round through the unloading valve
		return h.fixed("P1", func(q float64) float64 {
			return square(q, h.v("UV1", "nominal_flow"), h.v("UV1", "unloaded_drop"))
		})
	},
	"flow-divider.yaml": func(h *byHand) float64 { // half through each tandem centre, the divider's friction before them
		return h.fixed("P1", func(q float64) float64 {
			D, dp := h.disp("FD1"), 0.0
			for range 50 {
				w := (q - h.slip("FD1", dp)) / D
				dp = (h.v("FD1", "viscous")*D*h.mu*w + h.v("FD1", "drag")) / (D * (1 - h.v("FD1", "friction")))
			}
			return dp + square(q/2, h.v("V1", "flow_centre"), h.v("V1", "nominal_drop")) + h.filter(q)
		})
	},
	// The charge pump over its relief valve; the loop stands at its pressure less the
	// make-up checks and leaks to the cases, which the pump in the loop only churns in.
	"closed-circuit-winch.yaml": func(h *byHand) float64 {
		leak, charge := 0.0, 0.0
		for range 50 {
			q := h.disp("CP1")*h.speed() - h.slip("CP1", charge) - leak
			charge = h.v("CP1", "charge") + h.v("CP1", "override")*q
			one := leak / 2 // through each check valve
			low := charge - h.v("CK1", "opens") - square(one, h.v("CK1", "nominal_flow"), h.v("CK1", "nominal_drop"))
			leak = 2 * 0.5 * (h.slip("P1", low) + h.slip("HM1", low)) // half the slip of each port goes to the case
		}
		return h.disp("CP1")*charge*h.speed() + h.rub("CP1", charge) + h.rub("P1", 0)
	},
}
