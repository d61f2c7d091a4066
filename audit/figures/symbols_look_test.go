package figures

import (
	"fmt"
	"image"
	"image/png"
	"math"
	"os"
	"path/filepath"
	"testing"

	"barlitre/audit/pen"
	"barlitre/circuit"
)

// Each kind of block large, light and dark, where BARLITRE_PICTURES names a folder: on
// every one something is drawn, and nothing beyond the room it takes.
func TestEveryKindLarge(t *testing.T) {
	const cell, scale, across = 24.0, 8.0, 7
	kinds := circuit.Catalog()
	rows := (len(kinds) + across - 1) / across
	for name, pal := range map[string]Palette{"light": Light, "dark": Dark} {
		img := image.NewRGBA(image.Rect(0, 0, int(cell*scale)*across, int(cell*scale)*rows))
		p := pen.NewRaster(img)
		p.Clear(pal.Card)
		for i, k := range kinds {
			s := NewSheet(&circuit.Circuit{Blocks: []circuit.Block{{ID: k.Letter + "1", Kind: k.Name, At: &[2]float64{}}}})
			w, h := s.Size()
			x, y := float64(i%across)*cell*scale, float64(i/across)*cell*scale
			at := math.Min(scale, math.Min(cell/w, (cell-3)/h)*scale)
			s.Draw(p, x+(cell*scale-w*at)/2, y+(cell*scale-h*at)/2, at, nil, SheetOptions{Palette: pal})
			p.Text(pen.Pt{X: x + 6, Y: y + 14}, k.Name, 12, pal.Secondary, pen.Left, false)
			if b := s.parts[0].symbol.Box(); b.Max.X-b.Min.X < 0.5 || !around(s.box, b) {
				t.Errorf("%s: symbol %v on a sheet %v", k.Name, b, s.box)
			}
		}
		if dir := os.Getenv("BARLITRE_PICTURES"); dir != "" {
			f, err := os.Create(filepath.Join(dir, fmt.Sprintf("kinds-%s.png", name)))
			if err != nil {
				t.Fatal(err)
			}
			defer f.Close()
			if err := png.Encode(f, img); err != nil {
				t.Fatal(err)
			}
		}
	}
}
