package pen

import (
	"math"
	"strings"
	"sync"

	"golang.org/x/image/font"
	"golang.org/x/image/font/sfnt"
	"golang.org/x/image/math/fixed"

	"barlitre/assets"
)

// Heights above and below the baseline that a line of text takes, in em: the
// tallest Latin letter with its accent and the deepest descender of the font.
const (
	Ascent  = 0.93
	Descent = 0.24
)

// Replacement stands for whatever the font cannot show.
const Replacement = '\uFFFD'

// face is one parsed font with the advance widths met so far.
type face struct {
	mu      sync.Mutex
	font    *sfnt.Font
	buf     sfnt.Buffer
	units   float64 // font units an em
	advance map[rune]float64
	index   map[rune]sfnt.GlyphIndex
	masks   map[maskKey]mask
	widths  map[string]float64 // of cleaned texts
	cleaned map[string]string  // of texts that are more than plain ones
}

// mostTexts is how many texts a face remembers, then it forgets all; longText is from how many
// bytes on it remembers none.
const mostTexts, longText = 4000, 200

// faces holds the regular and the bold face, parsed on first use. The embedded
// fonts are checked by the tests of assets, so a parse error is a broken build.
var faces = [2]func() *face{
	sync.OnceValue(func() *face { return parse(assets.FontRegular) }),
	sync.OnceValue(func() *face { return parse(assets.FontBold) }),
}

func faceOf(bold bool) *face {
	if bold {
		return faces[1]()
	}
	return faces[0]()
}

func parse(data []byte) *face {
	f, err := sfnt.Parse(data)
	if err != nil {
		panic("pen: embedded font: " + err.Error())
	}
	return &face{font: f, units: float64(f.UnitsPerEm()), advance: map[rune]float64{},
		index: map[rune]sfnt.GlyphIndex{}, masks: map[maskKey]mask{}, widths: map[string]float64{}, cleaned: map[string]string{}}
}

// glyph returns the index of a rune, 0 if the font lacks it. The caller holds mu.
func (f *face) glyph(r rune) sfnt.GlyphIndex {
	if g, ok := f.index[r]; ok {
		return g
	}
	g, err := f.font.GlyphIndex(&f.buf, r)
	if err != nil {
		g = 0
	}
	f.index[r] = g
	return g
}

// width returns the advance of a rune in em, without hinting. The caller holds mu.
func (f *face) width(r rune) float64 {
	if w, ok := f.advance[r]; ok {
		return w
	}
	// Asked for at one pixel a font unit, the advance comes back exact.
	a, err := f.font.GlyphAdvance(&f.buf, f.glyph(r), fixed.I(int(f.units)), font.HintingNone)
	w := 0.0
	if err == nil {
		w = float64(a) / 64 / f.units
	}
	f.advance[r] = w
	return w
}

// textWidth returns the width of a cleaned text in em. There is no kerning on
// any back end, so the sum of advances is the width.
func (f *face) textWidth(s string) float64 {
	f.mu.Lock()
	defer f.mu.Unlock()
	w, ok := f.widths[s]
	if ok {
		return w
	}
	for _, r := range s {
		w += f.width(r)
	}
	remember(f.widths, s, w)
	return w
}

// remember keeps what was found of a text.
func remember[V any](of map[string]V, s string, v V) {
	if len(s) >= longText {
		return
	}
	if len(of) >= mostTexts {
		clear(of)
	}
	of[strings.Clone(s)] = v
}

// plain reports whether a text has printable ASCII alone, which the font has.
func plain(s string) bool {
	for i := 0; i < len(s); i++ {
		if s[i] < ' ' || s[i] > '~' {
			return false
		}
	}
	return true
}

// Clean returns s as every pen writes it, and as any text that goes straight
// into a PDF document must be: valid UTF-8, no control characters (they become
// spaces), and U+FFFD for what the font cannot show, which includes all runes
// above U+FFFF; the PDF library panics on those. Invisible joiners and direction
// marks are dropped. Never fails.
func Clean(s string) string {
	if plain(s) {
		return s
	}
	f := faceOf(false)
	f.mu.Lock()
	defer f.mu.Unlock()
	out, ok := f.cleaned[s]
	if !ok {
		out = strings.Clone(f.clean(s)) // or it may keep all of a long text
		remember(f.cleaned, s, out)
	}
	return out
}

// clean does the work of Clean. The caller holds mu.
func (f *face) clean(s string) string {
	return strings.Map(func(r rune) rune {
		switch {
		case r < ' ' || r >= 0x7f && r < 0xa0 || r == 0x2028 || r == 0x2029:
			return ' '
		case r >= 0x200b && r <= 0x200f, r >= 0x202a && r <= 0x202e, r >= 0xfe00 && r <= 0xfe0f, r == 0xfeff, r == 0xad:
			return -1
		case r > 0xffff || f.glyph(r) == 0:
			return Replacement
		}
		return r
	}, strings.ToValidUTF8(s, string(Replacement)))
}

// TextWidth returns the width of s at the given size in the units of size, as
// all pens measure it. 0 for a size that is not finite.
func TextWidth(s string, size float64, bold bool) float64 {
	w := faceOf(bold).textWidth(Clean(s)) * size
	if math.IsNaN(w) || math.IsInf(w, 0) {
		return 0
	}
	return w
}

// Shorten returns s if it is not wider than width at this size, else as much of
// its beginning as fits with an ellipsis, "…" alone if nothing else fits, and
// the empty string if not even that does.
func Shorten(s string, size float64, bold bool, width float64) string {
	s = Clean(s)
	if TextWidth(s, size, bold) <= width {
		return s
	}
	room := width - TextWidth("…", size, bold)
	if !(room >= 0) {
		return ""
	}
	end, used := 0, 0.0
	for i, r := range s {
		used += TextWidth(string(r), size, bold)
		if used > room {
			break
		}
		end = i + len(string(r))
	}
	return strings.TrimRight(s[:end], " ,;·") + "…"
}

// Wrap breaks a text between words into lines of a width; a word that is longer is shortened.
func Wrap(text string, size, w float64) []string {
	var out []string
	line := ""
	for _, word := range strings.Fields(text) {
		if next := strings.TrimSpace(line + " " + word); line == "" || TextWidth(next, size, false) <= w {
			line = next
			continue
		}
		out, line = append(out, Shorten(line, size, false, w)), word
	}
	if line != "" {
		out = append(out, Shorten(line, size, false, w))
	}
	return out
}
