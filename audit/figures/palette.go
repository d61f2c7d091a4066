package figures

import (
	"image/color"
	"math"
)

// Role is the meaning a colour carries. Heat and Danger always come with a
// second sign (a disc, a mark, words), because colour alone does not reach everyone.
type Role int

// The roles of colours in figures.
const (
	RoleInk Role = iota
	RoleGain
	RoleHeat
	RoleDanger
	RoleSecondary
	RoleBar
)

// Palette holds the colours of one theme by what they are for.
type Palette struct {
	Ground    color.NRGBA // behind cards
	Card      color.NRGBA // behind figures
	Edge      color.NRGBA // edges of cards, grid lines
	Ink       color.NRGBA // text and lines
	Secondary color.NRGBA // units, captions, axes
	Gain      color.NRGBA // useful work, saving, selection
	Heat      color.NRGBA // what ends as heat in the oil; never for text
	Danger    color.NRGBA // what needs attention, and the clock
	Bar       color.NRGBA // losses elsewhere, as-found bars
	Pale      color.NRGBA // what is drawn from the supply
	low, high color.NRGBA // ends of the pressure tint
}

func rgb(v uint32) color.NRGBA {
	return color.NRGBA{R: uint8(v >> 16), G: uint8(v >> 8), B: uint8(v), A: 255}
}

// Light is ink on paper, for the light theme and for print.
var Light = Palette{
	Ground: rgb(0xF6F4EF), Card: rgb(0xFFFFFF), Edge: rgb(0xD9D5CB), Ink: rgb(0x20303A), Secondary: rgb(0x71808A),
	Gain: rgb(0x0B7A75), Heat: rgb(0xD98200), Danger: rgb(0xC2412D), Bar: rgb(0x8A979F), Pale: rgb(0xCAD3D9),
	low: rgb(0xA3B1BD), high: rgb(0x2B1F6B),
}

// Dark has the same roles chosen again for contrast on a dark ground.
var Dark = Palette{
	Ground: rgb(0x141A1E), Card: rgb(0x1D252A), Edge: rgb(0x3A454C), Ink: rgb(0xE6EAEC), Secondary: rgb(0x9DABB3),
	Gain: rgb(0x3FBFB4), Heat: rgb(0xF2A93B), Danger: rgb(0xF27A63), Bar: rgb(0x82929C), Pale: rgb(0x46555F),
	low: rgb(0x566774), high: rgb(0xDED8FF),
}

// Color returns the colour of a role; Ink for an unknown one.
func (p Palette) Color(r Role) color.NRGBA {
	switch r {
	case RoleGain:
		return p.Gain
	case RoleHeat:
		return p.Heat
	case RoleDanger:
		return p.Danger
	case RoleSecondary:
		return p.Secondary
	case RoleBar:
		return p.Bar
	}
	return p.Ink
}

// Pressure returns the tint of a pressure given as a share (0…1) of the highest
// pressure shown. Lightness changes evenly and in one direction, so the order
// can be read without telling hues apart. A share outside 0…1 is limited to it,
// NaN (no pressure known) gives Secondary.
func (p Palette) Pressure(share float64) color.NRGBA {
	if math.IsNaN(share) {
		return p.Secondary
	}
	return mixLab(p.low, p.high, max(0, min(1, share)))
}

// On returns the text colour, Ink or Card, that reads better on a fill.
func (p Palette) On(fill color.NRGBA) color.NRGBA {
	if contrast(p.Ink, fill) >= contrast(p.Card, fill) {
		return p.Ink
	}
	return p.Card
}

// faded returns c with the given alpha.
func faded(c color.NRGBA, alpha uint8) color.NRGBA {
	c.A = alpha
	return c
}

// linear undoes the transfer curve of sRGB (IEC 61966-2-1).
func linear(v uint8) float64 { return linears[v] }

var linears = func() (list [256]float64) {
	for v := range list {
		if c := float64(v) / 255; c <= 0.04045 {
			list[v] = c / 12.92
		} else {
			list[v] = math.Pow((c+0.055)/1.055, 2.4)
		}
	}
	return list
}()

func encoded(c float64) uint8 {
	c = max(0, min(1, c))
	if c <= 0.0031308 {
		c *= 12.92
	} else {
		c = 1.055*math.Pow(c, 1/2.4) - 0.055
	}
	return uint8(math.Round(255 * c))
}

// luminance returns the relative luminance (0…1) of a colour (WCAG 2.1).
func luminance(c color.NRGBA) float64 {
	return 0.2126*linear(c.R) + 0.7152*linear(c.G) + 0.0722*linear(c.B)
}

// contrast returns the contrast ratio (1…21) of two colours (WCAG 2.1).
func contrast(a, b color.NRGBA) float64 {
	la, lb := luminance(a), luminance(b)
	return (max(la, lb) + 0.05) / (min(la, lb) + 0.05)
}

// mixLab mixes two colours in CIE L*a*b*, where equal steps look equal.
func mixLab(a, b color.NRGBA, t float64) color.NRGBA {
	la, lb := toLab(a), toLab(b)
	for i := range la {
		la[i] += t * (lb[i] - la[i])
	}
	return fromLab(la)
}

// white is the D65 white point of sRGB.
var white = [3]float64{0.95047, 1, 1.08883}

func toLab(c color.NRGBA) [3]float64 {
	r, g, b := linear(c.R), linear(c.G), linear(c.B)
	xyz := [3]float64{
		0.4124564*r + 0.3575761*g + 0.1804375*b,
		0.2126729*r + 0.7151522*g + 0.0721750*b,
		0.0193339*r + 0.1191920*g + 0.9503041*b,
	}
	var f [3]float64
	for i, v := range xyz {
		if v /= white[i]; v > 216.0/24389 {
			f[i] = math.Cbrt(v)
		} else {
			f[i] = (24389.0/27*v + 16) / 116
		}
	}
	return [3]float64{116*f[1] - 16, 500 * (f[0] - f[1]), 200 * (f[1] - f[2])}
}

func fromLab(l [3]float64) color.NRGBA {
	fy := (l[0] + 16) / 116
	var v [3]float64
	for i, f := range [3]float64{fy + l[1]/500, fy, fy - l[2]/200} {
		if f*f*f > 216.0/24389 {
			v[i] = f * f * f * white[i]
		} else {
			v[i] = (116*f - 16) * 27 / 24389 * white[i]
		}
	}
	return color.NRGBA{
		R: encoded(3.2404542*v[0] - 1.5371385*v[1] - 0.4985314*v[2]),
		G: encoded(-0.9692660*v[0] + 1.8760108*v[1] + 0.0415560*v[2]),
		B: encoded(0.0556434*v[0] - 0.2040259*v[1] + 1.0572252*v[2]),
		A: 255,
	}
}
