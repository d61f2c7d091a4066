package audit_test

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"testing"
)

// Node values at chosen times, independent calculation with scipy, trial circuits C1,
// C2, C4 and C5. Each row: the signal, its unit, the values. x: not determined (chambers
// behind a closed valve at standstill). Flows go into a block, hence the signs.
var trialNodes = map[string]string{
	"c1": `
t          s      0.05       1          2.05       3.5        6        8
P1.P.p     bar    164.134    161.875    163.682    165.489    166.392  163.321
C1.A.p     bar    29.6242    29.6073    42.7915    89.9145    x        80.507
C1.B.p     bar    35.0229    34.5508    31.4968    19.6627    x        142.644
F1.A.p     bar    0.036966   0.147864   0.0532311  0.00591456 0        1.01065
|V1.u      1      0.0726842  0.146595   0.0920029  0.0387873  0        0.252122
-P1.P.q    L/min  63.9551    63.9915    63.9624    63.9332    63.9187  63.9682
RV1.P.q    L/min  41.3356    18.7525    36.819     54.8855    63.9187  33.2057
C1.A.q     L/min  22.6195    45.2389    27.1434    9.04779    0        -60.3186
-C1.B.q    L/min  11.5359    23.0719    13.8431    4.61437    0        -30.7625
F1.A.q     L/min  11.5359    23.0719    13.8431    4.61437    0        60.3186
M1.T       Nm     125.465    123.799    125.131    126.464    127.13   124.865
P1.e       1      1          1          1          1          1        1
M1.w       rad/s  154.985    154.985    154.985    154.985    154.985  154.985
C1.v       m/s    0.075      0.15       0.09       0.03       0        -0.2
C1.F       N      5000       5000       12500      39310.3    60000    5000
M1.shaft   W      19445.2    19187      19393.5    19600.1    19703.3  19352.2
M1.electric W     20865.6    20585.2    20809.5    21034      21146.3  20764.6`,
	"c2": `
t          s      0.05       1          2.05       3.5        6        8
P1.P.p     bar    160        160        160        160        160      160
C1.A.p     bar    29.1401    29.3876    42.3603    89.2717    x        79.0119
C1.B.p     bar    34.0736    34.1201    30.6513    18.4023    x        139.712
F1.A.p     bar    0.036966   0.147864   0.0532311  0.00591456 0        1.01065
|V1.u      1      0.0736907  0.147521   0.0932654  0.040094   0        0.254527
-P1.P.q    L/min  22.6195    45.2389    27.1434    9.04779    0        30.7625
RV1.P.q    L/min  0          0          0          0          0        0
C1.A.q     L/min  22.6195    45.2389    27.1434    9.04779    0        -60.3186
-C1.B.q    L/min  11.5359    23.0719    13.8431    4.61437    0        -30.7625
F1.A.q     L/min  11.5359    23.0719    13.8431    4.61437    0        60.3186
M1.T       Nm     51.1789    90.0978    58.9627    27.8275    12.26    65.1897
P1.e       1      0.378345   0.717977   0.446271   0.174566   0.0387134 0.500612
M1.w       rad/s  154.985    154.985    154.985    154.985    154.985  154.985
C1.v       m/s    0.075      0.15       0.09       0.03       0        -0.2
C1.F       N      5000       5000       12500      39310.3    60000    5000
M1.shaft   W      7931.97    13963.8    9138.34    4312.86    1900.11  10103.4
M1.electric W     8651.46    14977      9903.63    4933.79    2487.71  10910`,
	"c4": `
t          s      0.5        4          8.5        10         12.5     16
HM1.A.p    bar    167.763    168.567    167.763    161.372    155.353  154.596
HM1.B.p    bar    20         20         20         20         20       20
HM1.A.p-HM1.B.p bar 147.763  148.567    147.763    141.372    135.353  134.596
P1.e       1      0.29414    0.512658   0.29414    0.0727481  -0.148452 -0.366946
-P1.P.q    L/min  27.1514    50.0927    27.1514    4.05       -19.0407 -41.9807
HM1.A.q    L/min  27.1514    50.0927    27.1514    4.05       -19.0407 -41.9807
CP1.S.q    L/min  23.5654    23.5654    23.5654    23.5654    23.5654  23.5654
-CP1.T.q   L/min  23.5654    23.5654    23.5654    23.5654    23.5654  23.5654
P1.T       Nm     60.1758    97.1551    60.1758    22.4675    -12.0637 -45.1937
CP1.T      Nm     7.77188    7.77188    7.77188    7.77188    7.77188  7.77188
M1.T       Nm     67.9476    104.927    67.9476    30.2394    -4.29182 -37.4218
M1.w       rad/s  154.985    154.985    154.985    154.985    154.985  154.985
HM1.w      rad/s  30         60         30         0          -30      -60
M1.shaft   W      10530.9    16262.1    10530.9    4686.65    -665.169 -5799.82
M1.electric W     11357.1    17429.8    11357.1    5315.07    -84.6156 -5145.45`,
	"c5": `
t          s      0.05       1          2.05       3.5        6        8
C1.A.p     bar    14.3125    14.5364    29.2781    82.4365    121.916  10.3088
C1.B.p     bar    5          5          5          5          5        5
P1.P.p-P1.S.p bar 9.31255    9.53636    24.2781    77.4365    116.916  5.3088
M1.w       rad/s  52.9871    105.633    64.0759    23.959     4.38436  -140.169
M1.w       rpm    505.99     1008.72    611.88     228.792    41.8675  -1338.51
M1.T       Nm     9.35639    10.5018    20.6027    59.0698    87.8288  -0.422012
-P1.P.q    L/min  22.6195    45.2389    27.1434    9.04779    0        -60.3186
-LP1.P.q   L/min  11.0835    22.1671    13.3002    4.43342    0        -29.5561
C1.A.q     L/min  22.6195    45.2389    27.1434    9.04779    0        -60.3186
-C1.B.q    L/min  11.5359    23.0719    13.8431    4.61437    0        -30.7625
C1.v       m/s    0.075      0.15       0.09       0.03       0        -0.2
C1.F       N      5000       5000       12500      39310.3    60000    5000
M1.shaft   W      495.768    1109.34    1320.14    1415.25    385.073  59.1529
M1.electric W     859.388    1478.44    1692.08    1788.64    748.151  421.426`,
}

// What one printed unit is in SI, and what counts as zero in it.
var nodeUnits = map[string]struct{ si, zero float64 }{
	"bar": {1e5, 0.01}, "L/min": {1e-3 / 60, 0.01}, "1": {1, 1e-6}, "Nm": {1, 1e-6}, "rad/s": {1, 1e-6},
	"rpm": {math.Pi / 30, 1e-6}, "m/s": {1, 1e-6}, "N": {1, 1e-6}, "W": {1, 1e-6},
}

func TestTrialNodeValues(t *testing.T) {
	for name, table := range trialNodes {
		t.Run(name, func(t *testing.T) {
			_, _, r := trialRun(t, text(t, "trials/"+name+".yaml"))
			rows := strings.Split(strings.TrimSpace(table), "\n")
			times := numbers(t, strings.Fields(rows[0])[2:])
			for _, row := range rows[1:] {
				f := strings.Fields(row)
				u, ok := nodeUnits[f[1]]
				if !ok || len(f) != len(times)+2 {
					t.Fatalf("row %q", row)
				}
				for i, want := range numbers(t, f[2:]) {
					if math.IsNaN(want) {
						continue
					}
					expr, magnitude := strings.CutPrefix(f[0], "|")
					got := r.at(t, expr, times[i]) / u.si
					if magnitude {
						got = math.Abs(got)
					}
					abs := 0.0
					if want == 0 {
						abs = u.zero
					}
					near(t, fmt.Sprintf("%s at %g s [%s]", f[0], times[i], f[1]), got, want, 1e-3, abs)
				}
			}
		})
	}
}

// numbers reads a row; x is NaN.
func numbers(t *testing.T, fields []string) []float64 {
	t.Helper()
	var out []float64
	for _, s := range fields {
		v, err := strconv.ParseFloat(s, 64)
		if err != nil && s != "x" {
			t.Fatal(err)
		}
		if s == "x" {
			v = math.NaN()
		}
		out = append(out, v)
	}
	return out
}
