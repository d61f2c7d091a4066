package machines

import (
	"cmp"
	"errors"
	"math"
	"slices"
)

// Terms names terms of the loss law.
type Terms uint

// The terms, in the order of equations (1) and (3).
const (
	TermLaminar Terms = 1 << iota
	TermTurbulent
	TermCompression
	TermDead
	TermPressure
	TermViscous
	TermInertial
	TermConstant
	AllTerms = 1<<iota - 1
)

const flowTerms = 4 // of the terms, the first ones

// termNames are the terms in words.
var termNames = [...]string{"laminar slip Cs", "turbulent slip Cst", "compression kB", "dead volume kV", "pressure friction Cf", "viscous friction Cv", "hydrodynamic torque Ch", "constant friction Tc"}

// FitOptions says how measured points are fitted.
type FitOptions struct {
	D     float64 // displacement at full setting, m³/rad, > 0
	Fluid Fluid   // oil of the measurement
	Terms Terms   // that the law may have; 0 = AllTerms
	// Plain weighs all flows alike and all torques alike. Else each counts by what it does to the overall efficiency.
	Plain bool
}

// Fit is a loss law fitted to measured points.
type Fit struct {
	Law       Displacement
	Fluid     Fluid
	Points    []Point
	Residual  []float64  // by point: overall efficiency of the law less that measured; NaN where one has none
	RMS       float64    // of the residuals
	Worst     int        // the point of the largest residual
	HeldOut   float64    // rms of points at speeds the law was not fitted to, each speed held out in turn; NaN for fewer than 3 speeds
	Condition [2]float64 // how badly the terms of flow and of torque can be told apart, 1 = perfectly
	Warnings  []string
}

// Errors of FitPoints: there is nothing to fit.
var (
	ErrNoPoints = errors.New("there are fewer points than terms of the loss law")
	ErrNoPower  = errors.New("no point has an overall efficiency between 0 and 1; check the columns, their units and signs")
)

// FitPoints finds the coefficients, none negative, that come closest to measured points: slip and friction each by
// linear least squares, weighted by what they do to the overall efficiency η = Q·Δp/(T·ω) (of a motor its inverse),
//
//	δη = δQ·Δp/(T·ω) − η·δT/T
//
// It fails when there are too few points, and when D is not above 0.
func FitPoints(points []Point, opt FitOptions) (*Fit, error) {
	if opt.Terms == 0 {
		opt.Terms = AllTerms
	}
	f := &Fit{Fluid: opt.Fluid, Points: points, Law: Displacement{D: opt.D}}
	if err := f.Law.Check(); err != nil {
		return nil, err
	}
	if len(points) < len(termNames) {
		return nil, ErrNoPoints
	}
	if !slices.ContainsFunc(points, func(p Point) bool { eta := p.Overall(); return eta > 0 && eta < 1 }) {
		return nil, ErrNoPower
	}
	flow, torque := opt.problems(points)
	xq, xt := flow.solve(), torque.solve()
	f.Law = Displacement{D: opt.D, Cs: xq[0], Cst: xq[1], K: xq[2], Kd: xq[3], Cf: xt[0], Cv: xt[1], Ch: xt[2], Tc: xt[3]}
	f.judge()
	var apart [2][]int
	f.Condition[0], apart[0] = flow.entangled(xq)
	f.Condition[1], apart[1] = torque.entangled(xt)
	for i := range apart[1] {
		apart[1][i] += flowTerms
	}
	f.HeldOut = heldOut(points, opt)
	f.warn(apart)
	return f, nil
}

// problems sets up slip and friction of the points.
func (o FitOptions) problems(points []Point) (flow, torque least) {
	unit := [...]Displacement{{Cs: 1}, {Cst: 1}, {K: 1}, {Kd: 1}, {Cf: 1}, {Cv: 1}, {Ch: 1}, {Tc: 1}}
	for _, p := range points {
		fluid := o.Fluid.at(p)
		wq, wt := 1.0, 1.0
		if !o.Plain {
			wq, wt = p.weights()
		}
		var rq, rt []float64
		for i, m := range unit {
			m.D = o.D
			used := 0.0
			if o.Terms&(1<<i) != 0 {
				used = 1
			}
			if i < flowTerms {
				rq = append(rq, used*wq*m.Slip(p.E, p.W, p.DP, fluid.Mu, fluid.Rho, fluid.modulus(p.DP)))
			} else {
				rt = append(rt, used*wt*m.FrictionTorque(p.E, p.W, p.DP, fluid.Mu, fluid.Rho))
			}
		}
		flow.rows, flow.right = append(flow.rows, rq), append(flow.right, wq*(p.E*o.D*p.W-p.Q))
		torque.rows, torque.right = append(torque.rows, rt), append(torque.right, wt*Sign(p.W)*(p.T-p.E*o.D*p.DP))
	}
	return flow, torque
}

// weights are what a unit of flow and of torque does to the overall efficiency of a point; 0 where it has none.
func (p Point) weights() (flow, torque float64) {
	eta := p.Overall()
	if math.IsNaN(eta) {
		return 0, 0
	}
	return eta / math.Abs(p.Q), eta / math.Abs(p.T)
}

// judge compares the law with the points.
func (f *Fit) judge() {
	f.Residual = f.Law.residuals(f.Points, f.Fluid)
	f.RMS = rms(f.Residual)
	for i, r := range f.Residual {
		if math.Abs(r) > math.Abs(f.Residual[f.Worst]) || math.IsNaN(f.Residual[f.Worst]) {
			f.Worst = i
		}
	}
}

func (m Displacement) residuals(points []Point, fluid Fluid) []float64 {
	out := make([]float64, len(points))
	for i, p := range points {
		out[i] = m.EfficiencyIn(p.E, p.W, p.DP, fluid.at(p)) - p.Overall()
	}
	return out
}

// rms is the root mean square of the numbers there are, NaN without any.
func rms(v []float64) float64 {
	sum, n := 0.0, 0
	for _, x := range v {
		if !math.IsNaN(x) {
			sum += x * x
			n++
		}
	}
	return math.Sqrt(sum / float64(n))
}

// Speeds groups points by speed, those within 2 % together; each holds the places of its points.
func Speeds(points []Point) [][]int {
	order := make([]int, len(points))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(a, b int) int { return cmp.Compare(points[a].W, points[b].W) })
	var out [][]int
	for _, i := range order {
		if n := len(out); n > 0 && math.Abs(points[i].W-points[out[n-1][0]].W) <= 0.02*math.Abs(points[i].W) {
			out[n-1] = append(out[n-1], i)
			continue
		}
		out = append(out, []int{i})
	}
	return out
}

// heldOut fits without each speed in turn and returns the rms of the residuals at the speeds left out.
func heldOut(points []Point, opt FitOptions) float64 {
	speeds := Speeds(points)
	if len(speeds) < 3 {
		return math.NaN()
	}
	var all []float64
	for _, out := range speeds {
		var rest, held []Point
		for i, p := range points {
			if slices.Contains(out, i) {
				held = append(held, p)
			} else {
				rest = append(rest, p)
			}
		}
		if len(rest) < len(termNames) {
			return math.NaN()
		}
		flow, torque := opt.problems(rest)
		xq, xt := flow.solve(), torque.solve()
		law := Displacement{D: opt.D, Cs: xq[0], Cst: xq[1], K: xq[2], Kd: xq[3], Cf: xt[0], Cv: xt[1], Ch: xt[2], Tc: xt[3]}
		all = append(all, law.residuals(held, opt.Fluid)...)
	}
	return rms(all)
}
