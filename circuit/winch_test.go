package circuit

import "barlitre/circuit/duty"

var drumAxis = []duty.Axis{{Name: "drum", Kind: duty.Rotary}}

// winchOn is a winch in a closed circuit without losses but those of the electric side: the pump goes over centre.
const winchOn = `
%s
P1 pump; displacement: 71 cm3/rev; case_share: 0; slip: 0; friction: 0; viscous: 0; drag: 0 N m; follows: drum; both_directions: yes
LP1 pressure_source; pressure: 20 bar
CV1 check; opens: 0 bar; nominal_drop: 0 bar
CV2 check; opens: 0 bar; nominal_drop: 0 bar
HM1 motor; axis: drum; hold: pump; displacement: 80 cm3/rev; case_share: 0; slip: 0; friction: 0; viscous: 0; drag: 0 N m
- M1.shaft P1.shaft
- LP1.P CV1.in CV2.in
- P1.P HM1.A CV1.out
- P1.S HM1.B CV2.out
`

func lowering(speed float64) *duty.Duty {
	return points("drum", 0.5, []float64{0, 1},
		duty.Track{Of: "drum", What: duty.Speed, Values: []float64{speed, speed}},
		duty.Track{Of: "drum", What: duty.Load, Values: []float64{150, 150}})
}
