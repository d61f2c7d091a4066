package assets

import (
	"bytes"
	"encoding/xml"
	"errors"
	"image/png"
	"io"
	"strings"
	"testing"

	"golang.org/x/image/font/sfnt"
)

// signs are the runes labels and reports use beyond plain Latin text. The last
// two are the thin spaces that group digits.
const signs = "Δpηωμ\u00b5ΩΣπρτφθ·²³⁻¹⁰₀₁₂₃ᵢ≤≥≈≠±°√∑∫→←↑↓⇒⌀∞×÷−–—…€½✓⚠▲▼▶◀●■�\u202f\u2009"

func TestFontsHaveEverySign(t *testing.T) {
	for name, data := range map[string][]byte{"regular": FontRegular, "bold": FontBold, "oblique": FontOblique} {
		f, err := sfnt.Parse(data)
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		var buf sfnt.Buffer
		for _, r := range signs {
			if g, err := f.GlyphIndex(&buf, r); err != nil || g == 0 {
				t.Errorf("%s has no glyph for %q (%U), error %v", name, r, r, err)
			}
		}
	}
}

func TestDigitsAreTabular(t *testing.T) {
	for name, data := range map[string][]byte{"regular": FontRegular, "bold": FontBold} {
		f, err := sfnt.Parse(data)
		if err != nil {
			t.Fatal(err)
		}
		var buf sfnt.Buffer
		want := -1
		for _, r := range "0123456789" {
			g, _ := f.GlyphIndex(&buf, r)
			a, err := f.GlyphAdvance(&buf, g, 2048<<6, 0)
			if err != nil {
				t.Fatal(err)
			}
			if want < 0 {
				want = int(a)
			}
			if int(a) != want {
				t.Errorf("%s: digit %q is %v wide, 0 is %v", name, r, a, want)
			}
		}
	}
}

func TestIcon(t *testing.T) {
	img, err := png.Decode(bytes.NewReader(Icon))
	if err != nil {
		t.Fatal(err)
	}
	if b := img.Bounds(); b.Dx() != 256 || b.Dy() != 256 {
		t.Errorf("icon is %d × %d, want 256 × 256", b.Dx(), b.Dy())
	}
	if _, _, _, a := img.At(0, 0).RGBA(); a != 0 {
		t.Error("the corner of the icon is not transparent")
	}
	if _, _, _, a := img.At(128, 128).RGBA(); a != 0xffff {
		t.Error("the middle of the icon is not opaque")
	}
}

func TestIconSourceIsWellFormed(t *testing.T) {
	d := xml.NewDecoder(bytes.NewReader(IconSVG))
	for {
		_, err := d.Token()
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			t.Fatal(err)
		}
	}
	for _, colour := range []string{"#0B7A75", "#D98200", "#F6F4EF"} {
		if !strings.Contains(string(IconSVG), colour) {
			t.Errorf("icon.svg does not use %s", colour)
		}
	}
}
