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
	slip, rub := m.factors(set, ws, pP-pS)
	flow := func(a, b slot, share, laminar float64) float64 { // along a path of slip, booked
		dp := k.val(a) - k.val(b)
		t, _ := m.turbulent(dp, share)
		laminar, t = slip.V*laminar, slip.V*t
		k.lose(m.slip, k.watts(laminar*dp*dp))
		k.lose(m.turb, k.watts(t*dp))
		return laminar*dp + t
	}
	across, drain := m.laminar(set)
	a, dP, dS := flow(m.P, m.S, 1-m.kc, across), flow(m.P, m.D, m.kc, drain), flow(m.S, m.D, m.kc, drain)
	c, _, _, _ := m.compression(set, ws, pP-pS)
	c *= slip.V
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
	inertial, _, _ := m.law.InertialTorque(set, w, k.cond.Density)
	friction, inertial = rub.V*friction, rub.V*inertial
	T := set*m.law.D*dp + friction + inertial + m.bookSwitched(k, set, dp, dir, w)
	k.lose(m.rub, friction*w)
	k.lose(m.inert, inertial*w)
	k.put(m.sigW, w)
	k.put(m.sigT, T)
	k.put(m.sigP, T*w)
	k.put(m.sigE, set)
	k.shaft[m.shaft].torque += T
	k.shaft[m.shaft].speed = w
}
