package circuit

import (
	"math"

	"barlitre/machines"
)

func (m *machine) evalMachine(e *eval) {
	set, w := e.val(m.e), e.val(m.speed)
	q := set * w * m.d // ideal flow, S to P
	e.add(m.S, q)
	e.add(m.P, -q)
	if !e.plain() && (m.e >= 0 || m.speed >= 0) {
		e.d(m.S, m.e, w*m.d)
		e.d(m.S, m.speed, set*m.d)
		e.d(m.P, m.e, -w*m.d)
		e.d(m.P, m.speed, -set*m.d)
	}
	if m.chart != nil {
		m.evalMapped(e)
	} else {
		m.evalSlip(e)
	}
	if m.free { // the torque row of the shaft sums them
		m.addTorque(e, m.row, 1, m.torque(e))
	}
}

// evalSlip adds the slip of the law.
func (m *machine) evalSlip(e *eval) {
	if m.across > 0 {
		e.conduct(m.P, m.S, m.across)
	}
	if m.drain > 0 {
		e.conduct(m.P, m.D, m.drain)
		e.conduct(m.S, m.D, m.drain)
	}
	if m.law.Cst > 0 {
		m.evalTurbulent(e, m.P, m.S, 1-m.kc)
		m.evalTurbulent(e, m.P, m.D, m.kc)
		m.evalTurbulent(e, m.S, m.D, m.kc)
	}
	if m.law.K > 0 || m.law.Kd > 0 {
		m.evalCompression(e)
	}
	if m.switched.on {
		m.evalSwitched(e)
	}
}

// turbulent is a share of the turbulent slip from a to b and its slope, scaled.
func (m *machine) turbulent(dp, share float64) (q, slope float64) {
	if m.law.Cst == 0 {
		return 0, 0
	}
	q, slope = m.law.TurbulentSlip(dp*m.scale.p, m.oil.Density)
	return share * q / m.scale.q, share * slope * m.scale.p / m.scale.q
}

func (m *machine) evalTurbulent(e *eval, a, b slot, share float64) {
	if share == 0 {
		return
	}
	q, k := m.turbulent(e.val(a)-e.val(b), share)
	e.pass(a, b, q, k)
}

// compression is the flow lost to compression from P to S and its slopes by drop, setting and speed, scaled.
func (m *machine) compression(set, w, dp float64) (q, byDP, byE, byW float64) {
	if m.law.K == 0 && m.law.Kd == 0 {
		return 0, 0, 0, 0
	}
	q, byDP, byE, byW = m.law.CompressionFlow(set, w*m.wPer, dp*m.scale.p, m.oil.bulk(), m.oil.Air)
	return q / m.scale.q, byDP * m.scale.p / m.scale.q, byE / m.scale.q, byW * m.wPer / m.scale.q
}

func (m *machine) evalCompression(e *eval) {
	q, k, byE, byW := m.compression(e.val(m.e), e.val(m.speed), e.val(m.P)-e.val(m.S))
	for _, side := range [...]struct {
		row  slot
		sign float64
	}{{m.P, 1}, {m.S, -1}} {
		e.add(side.row, side.sign*q)
		e.d(side.row, m.P, side.sign*k)
		e.d(side.row, m.S, -side.sign*k)
		e.d(side.row, m.e, side.sign*byE)
		e.d(side.row, m.speed, side.sign*byW)
	}
}

// factors are those of a map at a scaled state, their slopes scaled too; without a map the law itself.
func (m *machine) factors(set, w, dp float64) (slip, friction machines.Factor) {
	if m.chart == nil {
		return machines.Factor{V: 1}, machines.Factor{V: 1}
	}
	scaled := func(f machines.Factor) machines.Factor {
		f.ByW *= m.wPer
		f.ByDP *= m.scale.p
		return f
	}
	w, dp = w*m.wPer, dp*m.scale.p
	return scaled(m.chart.Slip(set, w, dp)), scaled(m.chart.Friction(set, w, dp))
}

// evalMapped adds the slip of a map: that of the law times a factor.
func (m *machine) evalMapped(e *eval) {
	set, w, dp := e.val(m.e), e.val(m.speed), e.val(m.P)-e.val(m.S)
	f, _ := m.factors(set, w, dp)
	path := func(a, b slot, q, byDP, byE, byW float64) {
		for _, side := range [...]struct {
			row  slot
			sign float64
		}{{a, 1}, {b, -1}} {
			e.add(side.row, side.sign*f.V*q)
			e.d(side.row, a, side.sign*f.V*byDP)
			e.d(side.row, b, -side.sign*f.V*byDP)
			e.d(side.row, m.P, side.sign*q*f.ByDP)
			e.d(side.row, m.S, -side.sign*q*f.ByDP)
			e.d(side.row, m.e, side.sign*(f.V*byE+q*f.ByE))
			e.d(side.row, m.speed, side.sign*(f.V*byW+q*f.ByW))
		}
	}
	leak := func(a, b slot, laminar, share float64) {
		drop := e.val(a) - e.val(b)
		q, k := m.turbulent(drop, share)
		path(a, b, laminar*drop+q, laminar+k, 0, 0)
	}
	leak(m.P, m.S, m.across, 1-m.kc)
	leak(m.P, m.D, m.drain, m.kc)
	leak(m.S, m.D, m.drain, m.kc)
	q, k, byE, byW := m.compression(set, w, dp)
	path(m.P, m.S, q, k, byE, byW)
}

// torque is what a machine needs from its shaft, scaled, and its slopes by setting,
// speed, pressure at P (at S the negative) and friction sign.
type torque struct{ need, e, w, p, sigma float64 }

func (m *machine) torque(e *eval) torque {
	set, w, dp := e.val(m.e), e.val(m.speed), e.val(m.P)-e.val(m.S)
	sg := machines.Sign(w)
	if m.free {
		sg = e.val(m.sigma)
	}
	dry, slope := m.cf1*math.Abs(dp)+m.tc1, m.cf1*machines.Sign(dp)
	rub := torque{sg*dry + m.visc*w, 0, m.visc, sg * slope, dry}
	if m.law.Ch > 0 {
		T, byE, byW := m.law.InertialTorque(set, w*m.wPer, m.oil.Density)
		rub.need += T / m.tPer
		rub.e = byE / m.tPer
		rub.w += byW * m.wPer / m.tPer
	}
	if m.switched.on {
		m.switchedTorque(&rub, set, dp, sg)
	}
	if m.chart != nil {
		_, g := m.factors(set, w, dp)
		rub = torque{g.V * rub.need, g.V*rub.e + rub.need*g.ByE, g.V*rub.w + rub.need*g.ByW, g.V*rub.p + rub.need*g.ByDP, g.V * rub.sigma}
	}
	return torque{set*m.d*dp + rub.need, m.d*dp + rub.e, rub.w, set*m.d + rub.p, rub.sigma}
}

// addTorque adds k times a torque of the machine to a row.
func (m *machine) addTorque(e *eval, row slot, k float64, t torque) {
	e.add(row, k*t.need)
	if e.plain() {
		return
	}
	e.d(row, m.e, k*t.e)
	e.d(row, m.speed, k*t.w)
	e.d(row, m.P, k*t.p)
	e.d(row, m.S, -k*t.p)
	if m.free {
		e.d(row, m.sigma, k*t.sigma)
	}
}
