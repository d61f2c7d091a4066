package widgets

import (
	"bytes"
	"encoding/binary"
	"image/color"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/theme"

	"barlitre/assets"
	"barlitre/audit/figures"
)

// Theme is the program's look: calm paper and ink, one family for screen and
// paper, small steps. Scale enlarges everything, 1 to 2.
type Theme struct {
	Dark  bool
	Scale float32
}

// Palette is the theme's palette for figures.
func (t Theme) Palette() figures.Palette {
	if t.Dark {
		return figures.Dark
	}
	return figures.Light
}

// Color returns the colour of a role.
func (t Theme) Color(name fyne.ThemeColorName, _ fyne.ThemeVariant) color.Color {
	p := t.Palette()
	switch name {
	case theme.ColorNameBackground, theme.ColorNameHeaderBackground:
		return p.Ground
	case theme.ColorNameInputBackground, theme.ColorNameMenuBackground, theme.ColorNameOverlayBackground:
		return p.Card
	case theme.ColorNameForeground:
		return p.Ink
	case theme.ColorNamePlaceHolder, theme.ColorNameDisabled:
		return p.Secondary
	case theme.ColorNamePrimary, theme.ColorNameHyperlink, theme.ColorNameSuccess:
		return p.Gain
	case theme.ColorNameError:
		return p.Danger
	case theme.ColorNameWarning:
		return p.Heat
	case theme.ColorNameSeparator, theme.ColorNameInputBorder:
		return p.Edge
	case theme.ColorNameFocus:
		return faint(p.Ink, 60) // to be seen on buttons in the colour of gain, too
	case theme.ColorNameSelection:
		return faint(p.Gain, 70)
	case theme.ColorNameHover:
		return faint(p.Ink, 18)
	case theme.ColorNamePressed:
		return faint(p.Ink, 40)
	case theme.ColorNameShadow:
		return faint(p.Ink, 12) // also the ground of split bars
	case theme.ColorNameScrollBar:
		return faint(p.Ink, 80)
	case theme.ColorNameScrollBarBackground:
		return color.Transparent
	case theme.ColorNameButton:
		return p.Card
	case theme.ColorNameDisabledButton:
		return p.Ground
	case theme.ColorNameForegroundOnPrimary, theme.ColorNameForegroundOnError, theme.ColorNameForegroundOnWarning, theme.ColorNameForegroundOnSuccess:
		return p.Card
	}
	variant := theme.VariantLight
	if t.Dark {
		variant = theme.VariantDark
	}
	return theme.DefaultTheme().Color(name, variant)
}

func faint(c color.NRGBA, alpha uint8) color.NRGBA {
	c.A = alpha
	return c
}

var (
	regular = fyne.NewStaticResource("regular.ttf", roomy(assets.FontRegular))
	bold    = fyne.NewStaticResource("bold.ttf", roomy(assets.FontBold))
	oblique = fyne.NewStaticResource("oblique.ttf", roomy(assets.FontOblique))
)

// roomy returns a font whose line is one part in thirteen deeper. The toolkit rounds
// the base line of a text down to a whole pixel but not the height of its picture,
// which cuts the lowest pixels off letters such as y and all of an underscore.
func roomy(font []byte) []byte {
	const tableRecord, header, descender = 16, 12, 6 // sizes and place in the font file
	out := bytes.Clone(font)
	for i := range int(binary.BigEndian.Uint16(out[4:])) {
		r := out[header+tableRecord*i:]
		if string(r[:4]) != "hhea" {
			continue
		}
		at := out[binary.BigEndian.Uint32(r[8:])+descender:]
		old := int16(binary.BigEndian.Uint16(at))
		binary.BigEndian.PutUint16(at, uint16(old-unitsPerEm/13))
	}
	return out
}

// unitsPerEm is the grid of the embedded fonts.
const unitsPerEm = 2048

// Font returns the embedded family.
func (t Theme) Font(s fyne.TextStyle) fyne.Resource {
	switch {
	case s.Symbol:
		return theme.DefaultTheme().Font(s)
	case s.Bold:
		return bold
	case s.Italic:
		return oblique
	}
	return regular
}

// Icon returns the toolkit's icons.
func (t Theme) Icon(n fyne.ThemeIconName) fyne.Resource { return theme.DefaultTheme().Icon(n) }

// Size returns sizes of a desktop, not of a phone.
func (t Theme) Size(n fyne.ThemeSizeName) float32 { return t.scale() * sizes[n] }

// sizes are those at scale 1; the toolkit asks for one with every text it measures.
var sizes = map[fyne.ThemeSizeName]float32{
	theme.SizeNameText:                 12.5,
	theme.SizeNameCaptionText:          11,
	theme.SizeNameSubHeadingText:       14,
	theme.SizeNameHeadingText:          17,
	theme.SizeNamePadding:              4,
	theme.SizeNameInnerPadding:         6,
	theme.SizeNameInlineIcon:           16,
	theme.SizeNameLineSpacing:          3,
	theme.SizeNameSeparatorThickness:   1,
	theme.SizeNameInputBorder:          1,
	theme.SizeNameInputRadius:          4,
	theme.SizeNameSelectionRadius:      4,
	theme.SizeNameScrollBar:            10,
	theme.SizeNameScrollBarSmall:       4,
	theme.SizeNameScrollBarRadius:      4,
	theme.SizeNameWindowButtonHeight:   16,
	theme.SizeNameWindowButtonRadius:   8,
	theme.SizeNameWindowButtonIcon:     14,
	theme.SizeNameWindowTitleBarHeight: 26,
}

func (t Theme) scale() float32 {
	if t.Scale <= 0 {
		return 1
	}
	return t.Scale
}

// Scale is the scale of the theme in force: figures are drawn with it, since their
// text has sizes of its own.
func Scale() float32 {
	if app := fyne.CurrentApp(); app != nil {
		if t, ok := app.Settings().Theme().(Theme); ok {
			return t.scale()
		}
	}
	return 1
}
