package figures

import (
	"context"
	"errors"
	"fmt"
	"image"
	"image/png"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/audit/pen"
	"barlitre/circuit"
	"barlitre/circuit/drawing"
)

// drawings are the files of all samples and starters.
func drawings(t *testing.T) []string {
	t.Helper()
	var paths []string
	for _, pattern := range []string{"../../samples/*.yaml", "../../samples/starters/*.yaml"} {
		found, _ := filepath.Glob(pattern)
		if len(found) == 0 {
			t.Fatalf("nothing in %s", pattern)
		}
		paths = append(paths, found...)
	}
	return paths
}

// eachDrawing lays every circuit of every sample and starter out; with loose set as if no
// block had a place.
func eachDrawing(t *testing.T, loose bool, do func(what string, s *Sheet)) {
	t.Helper()
	for _, path := range drawings(t) {
		f, found := audit.Read(path)
		if f == nil {
			t.Fatalf("%s: %v", path, found)
		}
		for _, run := range f.Circuits {
			c := *run.Circuit
			if loose {
				c.Blocks = append([]circuit.Block(nil), c.Blocks...)
				for i := range c.Blocks {
					c.Blocks[i].At = nil
				}
			}
			do(strings.TrimSuffix(filepath.Base(path), ".yaml")+", "+c.Name, NewSheet(&c))
		}
	}
}

// tidiness is what can be counted of how the lines of sheets lie.
type tidiness struct {
	lines, bends, crossings, dots int
	cuts                          int     // lines that cross the drawing of a symbol
	jogs                          int     // short pieces by which a line steps aside and goes on as before
	length                        float64 // [M]
	round                         float64 // of lines between two ports: length beyond the plain way [M]
	onText                        float64 // length under a label [M]
	shared                        float64 // length on the line of another net [M]
}

func (a *tidiness) add(b tidiness) {
	a.lines += b.lines
	a.bends += b.bends
	a.crossings += b.crossings
	a.dots += b.dots
	a.jogs += b.jogs
	a.length += b.length
	a.round += b.round
	a.cuts += b.cuts
	a.onText += b.onText
	a.shared += b.shared
}

func (a tidiness) String() string {
	return fmt.Sprintf("%3d lines %6.0f M, %4d bends, %3d crossings, %3d dots, %2d jogs, %4.0f M round about, %2d cuts, %5.1f M on text, %2.0f M shared",
		a.lines, a.length, a.bends, a.crossings, a.dots, a.jogs, a.round, a.cuts, a.onText, a.shared)
}

// longestJog is how long a piece may be that counts as a jog [M].
const longestJog = 4

// tidinessOf measures a sheet.
func tidinessOf(s *Sheet) tidiness {
	m := tidiness{lines: len(s.nets), crossings: len(s.crossings)}
	owner := map[drawing.Pt]int{}
	for i := range s.nets {
		n := &s.nets[i]
		m.dots += len(n.route.Dots)
		length := 0.0
		for _, g := range n.route.Segments {
			length += distance(g[0], g[1])
			for _, q := range halves(g) {
				if o, taken := owner[q]; taken && o != i {
					m.shared++
				}
				owner[q] = i
			}
			for k := range s.parts {
				m.cuts += boolInt(cutsSymbol(&s.parts[k], g))
			}
			for _, l := range s.labels {
				b := grown(l.box, -0.1)
				m.onText += math.Max(0, math.Min(b.Max.X, math.Max(g[0].X, g[1].X))-math.Max(b.Min.X, math.Min(g[0].X, g[1].X))) * inBand(g[0].Y, b.Min.Y, b.Max.Y)
				m.onText += math.Max(0, math.Min(b.Max.Y, math.Max(g[0].Y, g[1].Y))-math.Max(b.Min.Y, math.Min(g[0].Y, g[1].Y))) * inBand(g[0].X, b.Min.X, b.Max.X)
			}
		}
		m.length += length
		if len(n.ends) == 2 && len(n.junctions) == 0 {
			a, b := s.endPoint(n.ends[0]), s.endPoint(n.ends[1])
			m.round += length - math.Abs(a.X-b.X) - math.Abs(a.Y-b.Y)
		}
	}
	for _, st := range s.stretches {
		b, j := turns(st.pts)
		m.bends, m.jogs = m.bends+b, m.jogs+j
	}
	return m
}

func inBand(v, lo, hi float64) float64 {
	if v > lo && v < hi {
		return 1
	}
	return 0
}

// cutsSymbol tells whether a segment, but for its very ends, touches what is drawn of a symbol.
func cutsSymbol(p *part, g [2]drawing.Pt) bool {
	const end, half = 0.3, 0.05
	line := grown(union(drawing.Box{Min: g[0], Max: g[0]}, drawing.Box{Min: g[1], Max: g[1]}), half)
	if g[0].Y == g[1].Y {
		line.Min.X, line.Max.X = line.Min.X+end, line.Max.X-end
	} else {
		line.Min.Y, line.Max.Y = line.Min.Y+end, line.Max.Y-end
	}
	if p.isJunction() || shared(line, p.symbol.Box()) == 0 {
		return false
	}
	for _, q := range p.symbol.Prims {
		if q.Kind == drawing.Line { // leg by leg
			for k := 1; k < len(q.Pts); k++ {
				leg := grown(union(drawing.Box{Min: q.Pts[k-1], Max: q.Pts[k-1]}, drawing.Box{Min: q.Pts[k], Max: q.Pts[k]}), half)
				if shared(line, leg) > 0 {
					return true
				}
			}
		} else if shared(line, primBox(q)) > 0 {
			return true
		}
	}
	return false
}

// halves are the middles of the modules of a segment.
func halves(g [2]drawing.Pt) []drawing.Pt {
	var out []drawing.Pt
	l := distance(g[0], g[1])
	for k := 0.5; k < l; k++ {
		out = append(out, drawing.Pt{X: g[0].X + (g[1].X-g[0].X)*k/l, Y: g[0].Y + (g[1].Y-g[0].Y)*k/l})
	}
	return out
}

// turns counts the bends of a stretch, and its jogs.
func turns(pts []drawing.Pt) (bends, jogs int) {
	was, at := 0.0, -1
	for k := 1; k+1 < len(pts); k++ {
		a, b, c := pts[k-1], pts[k], pts[k+1]
		turn := (b.X-a.X)*(c.Y-b.Y) - (b.Y-a.Y)*(c.X-b.X)
		if turn == 0 {
			continue
		}
		bends++
		if at == k-1 && turn*was < 0 && distance(a, b) <= longestJog {
			jogs++
		}
		was, at = turn, k
	}
	return bends, jogs
}

// TestDrawingsAreTidy measures the lines of all samples and starters as they are placed, and as
// they would be placed without.
func TestDrawingsAreTidy(t *testing.T) {
	for _, loose := range []bool{false, true} {
		var all tidiness
		eachDrawing(t, loose, func(what string, s *Sheet) {
			m := tidinessOf(s)
			all.add(m)
			t.Logf("%-50s %v", what, m)
			if m.cuts > 0 || m.shared > 0 {
				t.Errorf("%s: %d lines run through symbols, and %g M on other lines", what, m.cuts, m.shared)
			}
		})
		t.Logf("%-50s %v", map[bool]string{false: "all, as placed", true: "all, placed by the program"}[loose], all)
	}
}

// TestDrawingsLook draws all samples and starters with their results in the middle of the first
// duty, light and dark, into the folder that BARLITRE_PICTURES names.
func TestDrawingsLook(t *testing.T) {
	dir := os.Getenv("BARLITRE_PICTURES")
	if dir == "" {
		t.Skip("set BARLITRE_PICTURES to a folder for pictures")
	}
	for _, path := range drawings(t) {
		f, found := audit.Read(path)
		if f == nil {
			t.Fatalf("%s: %v", path, found)
		}
		solution, err := audit.SolveEnergy(context.Background(), f, audit.Options{})
		if err != nil {
			t.Fatal(err)
		}
		for i, c := range solution.Circuits {
			s, run := NewSheet(c.Circuit).Labelled(c.Duties...), c.Duties[0]
			for name, pal := range map[string]Palette{"light": Light, "dark": Dark} {
				w, h := s.Size()
				const scale = 12
				img := image.NewRGBA(image.Rect(0, 0, int(w*scale), int(h*scale)))
				p := pen.NewRaster(img)
				p.Clear(pal.Card)
				s.Draw(p, 0, 0, scale, StateAt(run, run.Duty.Cycle()/2), SheetOptions{Palette: pal, Scales: ScalesOf(c.Duties...)})
				out, err := os.Create(filepath.Join(dir, fmt.Sprintf("%s-%d-%s.png", strings.TrimSuffix(filepath.Base(path), ".yaml"), i, name)))
				if err != nil {
					t.Fatal(err)
				}
				if err := errors.Join(png.Encode(out, img), out.Close()); err != nil {
					t.Fatal(err)
				}
			}
		}
	}
}
