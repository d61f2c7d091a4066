package circuit

import (
	"math"

	"barlitre/machines"
)

// bookMachine books slip and friction and returns the torque needed at the shaft.
func (m *machine) bookMachine(k *booking) {
	set, ws := k.val(m.e), k.val(m.speed)
	w := ws * m.wPer
	pP, pS := k.val(m.P), k.val(m.S)
	q := set * ws * m.d
	slip, rub := 1.0, 1.0
	if m.chart != nil {
		s, r := m.factors(set, ws, pP-pS)
		slip, rub = s.V, r.V
	}
	across, drain := m.laminar(set)
	a := m.bookSlip(k, pP-pS, slip*across, slip*(1-m.kc))
	dP, dS := 0.0, 0.0
	if m.kc > 0 {
		pD := k.val(m.D)
		dP, dS = m.bookSlip(k, pP-pD, slip*drain, slip*m.kc), m.bookSlip(k, pS-pD, slip*drain, slip*m.kc)
	}
	c, _, _, _ := m.compression(set, ws, pP-pS)
	c *= slip
	k.lose(m.comp, k.watts(c*(pP-pS)))
	k.put(m.qP, k.m3s(-q+a+c+dP))
	k.put(m.qS, k.m3s(q-a-c+dS))
	k.put(m.qD, k.m3s(-dP-dS))
	dp := (pP - pS) * k.scales.p
	dir := machines.Sign(w)
	if m.free {
		dir = k.val(m.sigma)
	}
	friction := (m.law.Cf*m.law.D*math.Abs(dp)+m.law.Tc)*dir + m.law.Cv*m.law.D*k.cond.Viscosity*w
	friction *= rub
	T := set*m.law.D*dp + friction
	if m.law.Ch > 0 {
		inertial, _, _ := m.law.InertialTorque(set, w, k.cond.Density)
		inertial *= rub
		T += inertial
		k.lose(m.inert, inertial*w)
	}
	if m.switched.on {
		T += m.bookSwitched(k, set, dp, dir, w)
	}
	k.lose(m.rub, friction*w)
	k.put(m.sigW, w)
	k.put(m.sigT, T)
	k.put(m.sigP, T*w)
	k.put(m.sigE, set)
	k.shaft[m.shaft].torque += T
	k.shaft[m.shaft].speed = w
}

// bookSlip books the slip along a path with a drop, and returns its flow, scaled: a laminar conductance, and a share
// of the turbulent slip.
func (m *machine) bookSlip(k *booking, dp, laminar, share float64) float64 {
	t, _ := m.turbulent(dp, share)
	k.lose(m.slip, k.watts(laminar*dp*dp))
	k.lose(m.turb, k.watts(t*dp))
	return laminar*dp + t
}
