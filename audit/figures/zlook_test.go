package figures

import (
	"context"
	"fmt"
	"image"
	"image/png"
	"os"
	"path/filepath"
	"testing"

	"barlitre/audit"
	"barlitre/audit/pen"
	"barlitre/circuit"
)

func TestZAuto(t *testing.T) {
	dir := os.Getenv("LOOK")
	if dir == "" {
		t.Skip()
	}
	for _, name := range []string{"testdata/full", "testdata/trials/c1", "testdata/trials/c3", "testdata/trials/c5", "testdata/published/m17_stalled", "testdata/published/l10_chain"} {
		f, fs := audit.Read("../" + name + ".yaml")
		if f == nil {
			t.Fatal(fs)
		}
		sol, err := audit.Solve(context.Background(), f, audit.Options{})
		if err != nil {
			t.Fatal(err)
		}
		for ci, c := range sol.Circuits {
			s := NewSheet(c.Circuit).Labelled(c.Duties...)
			st := StateAt(c.Duties[0], c.Duties[0].Duty.Cycle()/3)
			w, h := s.Size()
			img := image.NewRGBA(image.Rect(0, 0, int(w*9), int((h+LegendHeight)*9)))
			r := pen.NewRaster(img)
			r.Clear(Light.Card)
			s.Draw(r, 0, 0, 9, st, SheetOptions{Palette: Light, Scales: ScalesOf(c.Duties...), Legend: true, Findings: map[string]circuit.Level{"P1": circuit.Warns, "V1": circuit.Stops}})
			out, _ := os.Create(fmt.Sprintf("%s/auto-%s-%d.png", dir, filepath.Base(name), ci))
			png.Encode(out, img)
			out.Close()
		}
	}
}

func TestZLook(t *testing.T) {
	dir := os.Getenv("LOOK")
	if dir == "" {
		t.Skip()
	}
	for _, name := range []string{"baling-press", "quayside-winch"} {
		f, fs := audit.Read("../../samples/" + name + ".yaml")
		if f == nil {
			t.Fatal(fs)
		}
		sol, err := audit.Solve(context.Background(), f, audit.Options{})
		if err != nil {
			t.Fatal(err)
		}
		sc := ScalesOf(sol.Circuits[0].Duties[0], sol.Circuits[1].Duties[0])
		times := map[string][]float64{"baling-press": {5, 17, 22.5, 28.5}, "quayside-winch": {6, 18, 28, 50}}[name]
		for ci, c := range sol.Circuits {
			s := NewSheet(c.Circuit).Labelled(c.Duties...)
			for _, pal := range []struct {
				n string
				p Palette
			}{{"light", Light}, {"dark", Dark}} {
				for k, tm := range append([]float64{-1, -2}, times...) {
					if pal.n == "dark" && k != 3 && k != 1 {
						continue
					}
					var st *SheetState
					if tm == -2 {
						st = OverCycle(c.Duties[0], times[0])
					} else if tm >= 0 {
						st = StateAt(c.Duties[0], tm)
					}
					w, h := s.Size()
					sx := 12.0
					img := image.NewRGBA(image.Rect(0, 0, int(w*sx), int((h+LegendHeight)*sx)))
					r := pen.NewRaster(img)
					r.Clear(pal.p.Card)
					opt := SheetOptions{Palette: pal.p, Scales: sc, Legend: true}
					s.Draw(r, 0, 0, sx, st, opt)
					out, _ := os.Create(fmt.Sprintf("%s/%s-%d-%s-%d.png", dir, name, ci, pal.n, k))
					png.Encode(out, img)
					out.Close()
				}
			}
			fmt.Println(s.Size())
		}
	}
}
