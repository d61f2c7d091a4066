package sheet

import (
	"fmt"
	"slices"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"

	"barlitre/audit"
)

// A drag from anywhere on a line pulls a branch; a label tells what a release would do.
func TestPullABranch(t *testing.T) {
	b := three(t)
	e := b.s.editors[0]
	if _, err := b.doc.AddBlock(e.name, "accumulator", [2]float64{0, -40}); err != nil {
		t.Fatal(err)
	}
	b.pump()
	b.s.fitAll()
	before := b.doc.File().Bytes()
	var free string
	for _, p := range e.ports {
		if strings.HasPrefix(p.Block, "A") {
			free = p.String()
		}
	}
	on, to := b.piece(0, "P1.P", true), b.port(0, free)
	e.MouseDown(event(on, desktop.MouseButtonPrimary, 0))
	b.dragOn(0, on, to)
	if got := e.hover.text(); !strings.HasPrefix(got, "Join ") || !strings.Contains(got, free) {
		t.Errorf("before the release the label says %q", got)
	}
	b.picture("pull-branch")
	e.DragEnd()
	b.pump()
	if got := b.line(0, free); len(got) != 4 {
		t.Fatalf("%s stands on %v; said %q", free, got, b.said)
	}
	b.undone(before, "Connect "+free)
}

// branches counts the pieces of lines that end at a point.
func (b *bench) branches(sheet int, at [2]float64) (n int) {
	e := b.s.editors[sheet]
	for net := range e.sheet.Nets() {
		for _, p := range e.sheet.Pieces(net) {
			if a, c, _ := e.sheet.PieceEnds(p); a == at || c == at {
				n++
			}
		}
	}
	return n
}

// A branch begins where it was pulled out of the line, and ends where it was let go on one:
// at the point of the grid there, wherever that is on the line. The line stays as it is; one
// undo takes all of it back, to the byte.
func TestBranchBeginsWhereItIsPulled(t *testing.T) {
	for _, from := range []func(*testing.T) *bench{drawing, three} {
		for _, back := range []bool{false, true} {
			b := from(t)
			e := b.s.editors[0]
			if b.line(0, "P1.P") == nil {
				if err := b.doc.Connect(e.name, "P1.P", "RV1.P"); err != nil {
					t.Fatal(err)
				}
			}
			id, err := b.doc.AddBlock(e.name, "accumulator", [2]float64{0, -40})
			if err != nil {
				t.Fatal(err)
			}
			b.pump()
			b.s.fitAll()
			free := ""
			for _, p := range e.ports {
				if p.Block == id {
					free = p.String()
				}
			}
			before := b.doc.File().Bytes()
			net, _ := b.lineOf(0, "P1.P")
			tried := 0
			for _, p := range e.sheet.Pieces(net) {
				a, c, _ := e.sheet.PieceEnds(p)
				for k := 1; k < 4; k++ {
					at, _ := e.sheet.OnLine(net, a[0]+(c[0]-a[0])*float64(k)/4, a[1]+(c[1]-a[1])*float64(k)/4)
					on := e.onSheet(at[0], at[1])
					if b.branches(0, at) != 0 || e.portAt(on) != nil {
						continue // a corner, or at a port
					}
					on = on.AddXY(0.2, -0.3) // nobody hits the grid
					to := b.port(0, free)
					if back {
						on, to = to, on
					}
					b.drag(0, on, to, desktop.MouseButtonPrimary, 0)
					if got := b.branches(0, at); got != 3 {
						t.Errorf("pulled at %v (back %v): %d pieces end there; bends %s", at, back, got, b.bends(0))
					}
					if tried++; tried == 3 {
						b.picture("branch-where-pulled")
					}
					b.undone(before, "Connect "+free)
				}
			}
			if tried < 4 {
				t.Errorf("only %d points of the line were tried", tried)
			}
		}
	}
}

// A second click on a line chooses the branch under it, and Del takes that alone away.
func TestDeleteABranch(t *testing.T) {
	for _, keys := range []bool{false, true} {
		b := three(t)
		e := b.s.editors[0]
		before := b.doc.File().Bytes()
		if keys {
			e.choose("RV2", false)
			b.typed(0, "l")
			for range 20 {
				if b.typed(0, "b"); e.piece != nil {
					if p, ok := e.sheet.Leaf(*e.piece); ok && p.Block == "RV2" {
						break
					}
				}
			}
		} else {
			at := b.port(0, "RV2.P").AddXY(0, -float32(1.5*e.zoom)) // just before the port
			for i := 0; i < 2; i++ {
				b.click(0, at, 0)
			}
		}
		if e.piece == nil || e.line < 0 {
			t.Fatalf("keys %v: no branch is chosen; said %q", keys, b.said)
		}
		b.key(0, fyne.KeyDelete)
		if got := b.line(0, "P1.P"); !slices.Equal(got, []string{"P1.P", "RV1.P"}) || b.line(0, "RV2.P") != nil {
			t.Errorf("keys %v: P1.P stands on %v, RV2.P on %v; said %q", keys, got, b.line(0, "RV2.P"), b.said)
		}
		b.undone(before, b.doc.UndoName())
	}
}

// A branch that was pulled out of a line and is deleted again leaves the line as it was: its
// other ports, the way it is laid, and no piece laid by hand that only the branch needed.
func TestDeleteAPulledBranch(t *testing.T) {
	for _, from := range []func(*testing.T) *bench{drawing, three} {
		b := from(t)
		e := b.s.editors[0]
		if b.line(0, "P1.P") == nil {
			if err := b.doc.Connect(e.name, "P1.P", "RV1.P"); err != nil {
				t.Fatal(err)
			}
		}
		if _, err := b.doc.AddBlock(e.name, "accumulator", [2]float64{0, -40}); err != nil {
			t.Fatal(err)
		}
		b.pump()
		b.s.fitAll()
		before := b.doc.File().Bytes()
		net, _ := b.lineOf(0, "P1.P")
		ports, way := b.line(0, "P1.P"), b.ends(0, net)
		tried := 0
		for _, p := range e.sheet.Pieces(net) {
			a, c, _ := e.sheet.PieceEnds(p)
			at, _ := e.sheet.OnLine(net, (a[0]+c[0])/2, (a[1]+c[1])/2)
			on := e.onSheet(at[0], at[1])
			if b.branches(0, at) != 0 || e.portAt(on) != nil {
				continue
			}
			b.drag(0, on, b.port(0, "AC1.P"), desktop.MouseButtonPrimary, 0)
			net, _ := b.lineOf(0, "AC1.P")
			for _, q := range e.sheet.Pieces(net) {
				if leaf, ok := e.sheet.Leaf(q); ok && leaf.Block == "AC1" {
					b.click(0, b.port(0, "P1.P").AddXY(0, -float32(1.5*e.zoom)), 0)
					e.selectPiece(q)
				}
			}
			if e.piece == nil {
				t.Fatalf("no branch is chosen; said %q", b.said)
			}
			pulled := b.doc.File().Bytes()
			b.key(0, fyne.KeyDelete)
			net, _ = b.lineOf(0, "P1.P")
			if got := b.line(0, "P1.P"); !slices.Equal(got, ports) || b.line(0, "AC1.P") != nil {
				t.Errorf("pulled at %v, deleted: P1.P stands on %v", at, got)
			}
			if got := b.ends(0, net); !slices.Equal(got, way) || strings.Trim(b.bends(0), "[]") != "" {
				t.Errorf("pulled at %v, deleted: the line lies as %v, before as %v; bends %q", at, got, way, b.bends(0))
			}
			b.undone(pulled, "Delete branch")
			b.undone(before, "Connect AC1.P")
			tried++
		}
		if tried == 0 {
			t.Error("no point of the line was tried")
		}
	}
}

// The only branch of a bent line that leads to no tank is deleted like any other.
func TestDeleteABranchAmongTanks(t *testing.T) {
	b := three(t)
	e := b.s.editors[0]
	for i, at := range [][2]float64{{20, 60}, {50, 60}} {
		id, err := b.doc.AddBlock(e.name, "tank", at)
		if err != nil {
			t.Fatal(err)
		}
		if err := b.doc.Connect(e.name, []string{"RV1.T", "RV1.T"}[i], id+".T"); err != nil {
			t.Fatal(err)
		}
	}
	b.pump()
	net, _ := b.lineOf(0, "RV1.T")
	lines, _ := e.sheet.Lines(net)
	runs := e.sheet.Bend(e.sheet.Pieces(net)[len(e.sheet.Pieces(net))-1], 3)
	if err := b.doc.Edit("Bend line", func(f *audit.File) error { return f.Bend(e.name, lines, runs) }); err != nil {
		t.Fatal(err)
	}
	b.pump()
	net, _ = b.lineOf(0, "RV1.T")
	b.click(0, b.port(0, "P1.P").AddXY(0, -float32(1.5*e.zoom)), 0)
	for _, q := range e.sheet.Pieces(net) {
		if leaf, ok := e.sheet.Leaf(q); ok && leaf.Block == "RV1" {
			e.selectPiece(q)
		}
	}
	before := b.doc.File().Bytes()
	if e.piece == nil || len(runs) == 0 {
		t.Fatalf("no branch is chosen of %v", e.sheet.Net(net))
	}
	b.key(0, fyne.KeyDelete)
	if b.line(0, "RV1.T") != nil {
		t.Errorf("RV1.T stands on %v; said %q", b.line(0, "RV1.T"), b.said)
	}
	b.undone(before, "Delete")
}

// ends lists the pieces of a line, each from its lesser end, in order.
func (b *bench) ends(sheet, net int) (out []string) {
	e := b.s.editors[sheet]
	for _, p := range e.sheet.Pieces(net) {
		a, c, _ := e.sheet.PieceEnds(p)
		if a[0] > c[0] || a[1] > c[1] {
			a, c = c, a
		}
		out = append(out, fmt.Sprint(a, c))
	}
	slices.Sort(out)
	return out
}
