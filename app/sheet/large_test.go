//go:build unix

package sheet

import (
	"fmt"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"syscall"
	"testing"

	"gopkg.in/yaml.v3"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/samples"
)

// largeAudit is a sample whose circuit as found stands there several times, each copy with
// axes and tracks of its own: transfer-station has 30 blocks.
func largeAudit(t testing.TB, copies int) []byte {
	t.Helper()
	text, err := samples.Read("transfer-station.yaml")
	if err != nil {
		t.Fatal(err)
	}
	var root yaml.Node
	if err := yaml.Unmarshal(text, &root); err != nil {
		t.Fatal(err)
	}
	top := root.Content[0]
	axes := valueOf(top, "axes")
	circuits := valueOf(top, "circuits")
	circuits.Content = circuits.Content[:1]
	named := map[string]bool{}
	for i := 0; i < len(axes.Content); i += 2 {
		named[axes.Content[i].Value] = true
	}
	c := circuits.Content[0]
	blocks, lines := valueOf(c, "blocks"), valueOf(c, "lines")
	nb, nl, na := len(blocks.Content), len(lines.Content), len(axes.Content)
	for k := 1; k < copies; k++ {
		own := func(name string) string { return fmt.Sprintf("%s_%d", name, k) }
		for i := 0; i < na; i += 2 {
			axes.Content = append(axes.Content, scalar(own(axes.Content[i].Value)), axes.Content[i+1])
		}
		for _, d := range valueOf(top, "duties").Content {
			points := valueOf(d, "points")
			for i, n := 0, len(points.Content); i < n && points != nil; i += 2 {
				if axis, rest, ok := strings.Cut(points.Content[i].Value, "."); ok && named[axis] {
					points.Content = append(points.Content, scalar(own(axis)+"."+rest), points.Content[i+1])
				}
			}
		}
		for i := 0; i < nb; i += 2 {
			b := *blocks.Content[i+1]
			b.Content = append([]*yaml.Node(nil), b.Content...)
			for j := 0; j < len(b.Content); j += 2 {
				switch key := b.Content[j].Value; {
				case named[b.Content[j+1].Value]:
					b.Content[j+1] = scalar(own(b.Content[j+1].Value))
				case key == "at":
					x, _ := strconv.Atoi(b.Content[j+1].Content[0].Value)
					y, _ := strconv.Atoi(b.Content[j+1].Content[1].Value)
					at := *b.Content[j+1]
					at.Content = []*yaml.Node{scalar(strconv.Itoa(x + 90*(k%4))), scalar(strconv.Itoa(y + 75*(k/4)))}
					b.Content[j+1] = &at
				}
			}
			blocks.Content = append(blocks.Content, scalar(own(blocks.Content[i].Value)), &b)
		}
		for i := 0; i < nl; i++ {
			var ports []string
			for _, p := range strings.Split(lines.Content[i].Value, " - ") {
				block, port, _ := strings.Cut(strings.TrimSpace(p), ".")
				ports = append(ports, own(block)+"."+port)
			}
			lines.Content = append(lines.Content, scalar(strings.Join(ports, " - ")))
		}
	}
	out, err := yaml.Marshal(&root)
	if err != nil {
		t.Fatal(err)
	}
	return out
}

func scalar(s string) *yaml.Node { return &yaml.Node{Kind: yaml.ScalarNode, Value: s} }

func valueOf(m *yaml.Node, key string) *yaml.Node {
	for i := 0; i+1 < len(m.Content); i += 2 {
		if m.Content[i].Value == key {
			return m.Content[i+1]
		}
	}
	return nil
}

// openLarge opens a circuit of at least so many blocks, alone and in full width.
func openLarge(t testing.TB, least int) *bench {
	text := largeAudit(t, (least+29)/30)
	path := filepath.Join(t.TempDir(), "large.yaml")
	if dir := os.Getenv("BARLITRE_PICTURES"); dir != "" { // to be opened in the window
		path = filepath.Join(dir, fmt.Sprintf("large-%d.yaml", least))
	}
	if err := os.WriteFile(path, text, 0o644); err != nil {
		t.Fatal(err)
	}
	f, found := audit.Parse(text, nil, path)
	if f == nil || len(f.Circuits[0].Blocks) < least {
		t.Fatal(found)
	}
	b := newBench(t, "", window)
	if problems, err := b.doc.Open(path); err != nil {
		t.Fatal(err, problems)
	}
	b.pump()
	b.s.setWide(true)
	b.warmed()
	return b
}

// frames tells the time of the processor that a frame takes, which other programs that run
// at the same time change little.
func frames(b *testing.B) func() {
	var from, to syscall.Rusage
	_ = syscall.Getrusage(syscall.RUSAGE_SELF, &from)
	return func() {
		_ = syscall.Getrusage(syscall.RUSAGE_SELF, &to)
		ms := func(t syscall.Timeval) float64 { return float64(t.Sec)*1e3 + float64(t.Usec)/1e3 }
		b.ReportMetric((ms(to.Utime)+ms(to.Stime)-ms(from.Utime)-ms(from.Stime))/float64(b.N), "cpu-ms/op")
	}
}

// Frames of a circuit of 200 blocks in a window of 1200 by 590: what a drag, the clock and
// the wheel cost each.
func BenchmarkLargeDrag(b *testing.B) {
	bench := openLarge(b, 200)
	e := bench.s.editors[0]
	from := bench.middle(0, "V2")
	e.MouseDown(event(from, 1, 0))
	w, h := int(e.Size().Width), int(e.Size().Height)
	bench.dragOn(0, from, from.AddXY(30, 30))
	b.ResetTimer()
	defer frames(b)()
	for i := 0; b.Loop(); i++ {
		at := from.AddXY(float32(8*(i%20)), float32(6*(i%15)))
		bench.dragOn(0, at, at)
		e.paint(w, h)
	}
}

func BenchmarkLargePlay(b *testing.B) {
	bench := openLarge(b, 200)
	e := bench.s.editors[0]
	w, h := int(e.Size().Width), int(e.Size().Height)
	e.paint(w, h)
	bench.SetClock(0.05)
	b.ResetTimer()
	defer frames(b)()
	for i := 0; b.Loop(); i++ {
		if bench.SetClock(float64(i%400) / 10); e.film.made != nil {
			(<-bench.posted)() // each step is drawn
		}
		e.paint(w, h)
	}
}

func BenchmarkLargeZoom(b *testing.B) {
	bench := openLarge(b, 200)
	e := bench.s.editors[0]
	w, h := int(e.Size().Width), int(e.Size().Height)
	b.ResetTimer()
	defer frames(b)()
	for i := 0; b.Loop(); i++ {
		f := 1.1
		if i%20 >= 10 {
			f = 1 / f
		}
		e.zoomAt(float64(w)/2, float64(h)/2, f)
		e.paint(w, h)
	}
}

func BenchmarkLargeSheet(b *testing.B) {
	bench := openLarge(b, 200)
	e := bench.s.editors[0]
	defer frames(b)()
	for b.Loop() {
		e.plain.Labelled(e.labels.Duties...)
	}
}

// BenchmarkLargeLayout is all of a sheet laid anew, as after a block was moved;
// BenchmarkLargeValue as after a value was changed.
func BenchmarkLargeLayout(b *testing.B) {
	bench := openLarge(b, 200)
	e := bench.s.editors[0]
	defer frames(b)()
	for b.Loop() {
		figures.NewSheet(e.drawn)
	}
}

func BenchmarkLargeValue(b *testing.B) {
	bench := openLarge(b, 200)
	e := bench.s.editors[0]
	defer frames(b)()
	for b.Loop() {
		e.plain.Next(e.drawn)
	}
}
