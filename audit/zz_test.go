package audit_test
import ("testing";"barlitre/circuit")
func TestZZ(t *testing.T) {
	f := parsed(t, c1(t, "displacement: 45 cm3/rev", "displacement: 20 cm3/rev"))
	d := solved(t, f).Circuits[0].Duties[0]
	t.Log(d.Balance.WorstGap, d.Balance.WorstGapAt, d.Certificate)
	r := ran(t, f, f.Circuits[0].Circuit, f.Duties[0])
	for k := range r.t {
		gap := 0.0
		for i, c := range r.c.Channels() { if c.Role == circuit.Supply { gap += r.powers[k][i] } else { gap -= r.powers[k][i] } }
		if gap > 1 || gap < -1 { t.Log(r.t[k], gap, r.axes[k], r.at(t,"V1.u",r.t[k]), r.at(t,"C1.A.p",r.t[k]), r.at(t,"C1.B.p",r.t[k]), r.at(t,"P1.P.p",r.t[k]), r.at(t,"C1.A.q",r.t[k]), r.at(t,"V1.A.q",r.t[k]), r.void[k], r.powers[k]) }
	}
}
