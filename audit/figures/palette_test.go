package figures

import (
	"fmt"
	"math"
	"testing"
)

// TestContrast holds text to 4.5 and shapes to 3, the levels of WCAG 2.1
// success criteria 1.4.3 and 1.4.11. Light's Secondary (captions only) and Heat
// (never text, always with a disc or a filled curve) are below by choice of colour.
func TestContrast(t *testing.T) {
	for name, p := range map[string]Palette{"light": Light, "dark": Dark} {
		for _, c := range []struct {
			what      string
			got, need float64
		}{
			{"ink on card", contrast(p.Ink, p.Card), 7}, {"ink on ground", contrast(p.Ink, p.Ground), 7},
			{"gain on card", contrast(p.Gain, p.Card), 4.5}, {"danger on card", contrast(p.Danger, p.Card), 4.5},
			{"bar on card", contrast(p.Bar, p.Card), 3}, {"text in supply bar", contrast(p.On(p.Pale), p.Pale), 4.5},
			{"text in heat bar", contrast(p.On(p.Heat), p.Heat), 4.5}, {"text in loss bar", contrast(p.On(p.Bar), p.Bar), 4.5},
		} {
			// Two decimals, as contrast ratios are given.
			if math.Round(c.got*100)/100 < c.need {
				t.Errorf("%s: %s has contrast %.2f, needs %v", name, c.what, c.got, c.need)
			}
		}
	}
}

// TestContrastFormula uses the end points WCAG 2.1 gives: 21 for black on
// white, 1 for equal colours; #777777 on white, 4.48, is a widely published example.
func TestContrastFormula(t *testing.T) {
	black, paper := rgb(0), rgb(0xFFFFFF)
	for _, c := range []struct{ got, want float64 }{{contrast(black, paper), 21}, {contrast(paper, paper), 1}, {contrast(rgb(0x777777), paper), 4.48}} {
		if math.Abs(c.got-c.want) > 0.005 {
			t.Errorf("contrast %.3f, want %v", c.got, c.want)
		}
	}
}

func TestPressureTintIsEvenInLightness(t *testing.T) {
	for name, p := range map[string]Palette{"light": Light, "dark": Dark} {
		ends := toLab(p.Pressure(1))[0] - toLab(p.Pressure(0))[0]
		if (ends < 0) != (name == "light") || math.Abs(ends) < 40 {
			t.Errorf("%s: lightness changes by %.1f", name, ends)
		}
		for i := range 20 {
			step := toLab(p.Pressure(float64(i+1) / 20))[0] - toLab(p.Pressure(float64(i) / 20))[0]
			if math.Abs(step-ends/20) > 0.6 { // rounding to 8 bits
				t.Errorf("%s: step %d is %.2f, want %.2f", name, i, step, ends/20)
			}
		}
		if p.Pressure(-3) != p.Pressure(0) || p.Pressure(7) != p.Pressure(1) || p.Pressure(math.NaN()) != p.Secondary {
			t.Errorf("%s: shares outside 0…1", name)
		}
	}
}

// TestLab checks against the published L*a*b* values (D65) of the sRGB primaries.
func TestLab(t *testing.T) {
	for c, want := range map[uint32][3]float64{0xFF0000: {53.24, 80.09, 67.20}, 0x00FF00: {87.73, -86.18, 83.18}, 0x0000FF: {32.30, 79.19, -107.86}} {
		got := toLab(rgb(c))
		for i := range want {
			if math.Abs(got[i]-want[i]) > 0.02 {
				t.Errorf("%06X: %.2f, want %v", c, got, want)
				break
			}
		}
		if fromLab(got) != rgb(c) {
			t.Errorf("%06X comes back as %v", c, fromLab(got))
		}
	}
}

func TestTicks(t *testing.T) {
	for _, c := range []struct {
		lo, hi float64
		n      int
		want   string
	}{
		{0, 12, 6, "[0 2 4 6 8 10 12] 0"}, {0, 1, 5, "[0 0.2 0.4 0.6 0.8 1] 1"}, {-0.21, 0.16, 5, "[-0.2 -0.1 0 0.1] 1"},
		{3, 97, 2, "[50] 0"}, {1, 1, 5, "[] 0"}, {math.NaN(), 1, 5, "[] 0"}, {0, math.Inf(1), 5, "[] 0"}, {0, 1e-3, 4, "[0 0.0005 0.001] 4"},
	} {
		at, dec := ticks(c.lo, c.hi, c.n)
		for i, v := range at { // without the last bits of i·step
			at[i] = math.Round(v*1e9) / 1e9
		}
		if got := fmt.Sprint(at, dec); got != c.want {
			t.Errorf("ticks(%v, %v, %d) = %s, want %s", c.lo, c.hi, c.n, got, c.want)
		}
	}
}

func TestNumbers(t *testing.T) {
	for got, want := range map[string]string{
		number(-1234567.25, 1): "−1\u202f234\u202f567.2", number(0, 0): "0", number(-0.04, 1): "0.0", number(999, 0): "999",
		threeDigits(162.24): "162", threeDigits(44.66): "44.7", threeDigits(0.8): "0.800", threeDigits(-5.126): "−5.13",
		threeDigits(1.5e9): "1.50·10⁹", threeDigits(2e-7): "200·10⁻⁹", threeDigits(12345): "12\u202f345",
		scaledUnit(6, "Pa"): "10⁶ Pa", scaledUnit(-3, "m"): "10⁻³ m", scaledUnit(0, "bar"): "bar",
	} {
		if got != want {
			t.Errorf("%q, want %q", got, want)
		}
	}
}
