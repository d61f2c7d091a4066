//go:build unix

package sheet

import (
	"strings"
	"testing"

	"fyne.io/fyne/v2"

	"barlitre/audit/figures"
	"barlitre/audit/pen"
)

// Drawn is what a sheet tells of itself: where its lines and blocks are.
func drawn(sh *figures.Sheet) (out [][2][2]float64) {
	for n := range sh.Nets() {
		for _, p := range sh.Pieces(n) {
			a, b, _ := sh.PieceEnds(p)
			out = append(out, [2][2]float64{a, b})
		}
	}
	return out
}

// A block of a large circuit moves at once, with plain elbows at its ports alone; the lines
// there are laid first, and all that are laid then are those of the file opened anew.
func TestLargeMoveLaysBehind(t *testing.T) {
	b := openLarge(t, 90)
	e := b.s.editors[0]
	was := e.sheet
	x, y, _ := was.At("V2")
	b.drop(0, b.middle(0, "V2"), b.middle(0, "V2").AddXY(float32(5*e.zoom), float32(3*e.zoom)), 1, 0)
	for len(b.queue) > 0 { // but not what is laid behind the window, which may be quick
		b.told(<-b.queue)
	}
	if !e.laying.busy || e.sheet == was {
		t.Fatal("nothing is laid behind the window")
	}
	if nx, ny, _ := e.sheet.At("V2"); nx != x+5 || ny != y+3 {
		t.Errorf("V2 is at %g, %g while the lines are laid, was at %g, %g", nx, ny, x, y)
	}
	if n := e.sheet.Nets(); n != was.Nets() {
		t.Errorf("%d lines while they are laid, were %d", n, was.Nets())
	}
	if hit, _, _ := e.hit(b.middle(0, "V2")); hit != "V2" {
		t.Errorf("at V2 lies %q", hit)
	}
	stayed, before := drawn(e.sheet), map[[2][2]float64]bool{}
	for _, p := range drawn(was) {
		before[p] = true
	}
	same := 0
	for _, p := range stayed {
		if before[p] {
			same++
		}
	}
	if same == len(stayed) || same < len(stayed)*9/10 {
		t.Errorf("%d of %d pieces of line stayed", same, len(stayed))
	}
	rough := e.sheet
	for e.sheet == rough { // the lines at V2 are laid first
		(<-b.posted)()
	}
	if !e.laying.busy {
		t.Error("all was laid before the lines at V2 were shown")
	}
	for _, p := range drawn(e.sheet) { // they keep out of the blocks, as all lines do
		for _, box := range e.boxes {
			level, upright := p[0][1] == p[1][1], p[0][0] == p[1][0]
			in := func(v, from, size float64) bool { return v > from+1 && v < from+size-1 }
			if x0, x1 := min(p[0][0], p[1][0]), max(p[0][0], p[1][0]); !before[p] && level && in(p[0][1], box.y, box.h) && x1 > box.x+1 && x0 < box.x+box.w-1 {
				t.Errorf("the line at %v runs through %s", p, box.id)
			}
			if y0, y1 := min(p[0][1], p[1][1]), max(p[0][1], p[1][1]); !before[p] && upright && in(p[0][0], box.x, box.w) && y1 > box.y+1 && y0 < box.y+box.h-1 {
				t.Errorf("the line at %v runs through %s", p, box.id)
			}
		}
	}
	b.solved()
	want := figures.NewSheet(e.drawn).Labelled(e.labels.Duties...)
	if got, full := drawn(e.sheet), drawn(want); len(got) != len(full) {
		t.Fatalf("%d pieces of line, laid anew %d", len(got), len(full))
	} else {
		for i := range got {
			if got[i] != full[i] {
				t.Fatalf("piece %d is %v, laid anew %v", i, got[i], full[i])
			}
		}
	}
}

// A large circuit that was just opened has its blocks, and says that its lines are being laid,
// until they are; no plain elbow is ever seen then.
func TestLargeOpensWithoutLines(t *testing.T) {
	b := openLarge(t, 90)
	e := b.s.editors[0]
	shapes := func() (lines int, says bool) {
		r := pen.NewRecorder()
		e.picture(e.sheet, false).inUnits(r)
		for _, t := range r.Boxes() {
			says = says || strings.HasPrefix(t.Text, "Laying the lines")
		}
		return len(r.Shapes()), says
	}
	all, says := shapes()
	if says || e.laying.bare != nil {
		t.Error("laid lines are said to be laid")
	}
	c := e.drawn
	e.show(-1, nil)
	e.show(0, c)
	bare, says := shapes()
	if !says || bare == 0 || bare > all-e.sheet.Nets() {
		t.Errorf("opened: %d shapes of %d, says so: %v", bare, all, says)
	}
	b.picture("large-opening")
	b.solved()
	if now, says := shapes(); says || now < all-5 {
		t.Errorf("laid: %d shapes of %d, says that it is being laid: %v", now, all, says)
	}
}

// What is laid during a gesture is shown when it ends.
func TestLaidDuringGesture(t *testing.T) {
	b := openLarge(t, 90)
	e := b.s.editors[0]
	at := b.middle(0, "V2")
	b.drag(0, at, at.AddXY(float32(5*e.zoom), 0), 1, 0)
	e.MouseDown(event(b.middle(0, "C1"), 1, 0))
	b.dragOn(0, b.middle(0, "C1"), b.middle(0, "C1").AddXY(float32(4*e.zoom), 0))
	rough := e.sheet
	b.solved()
	if e.sheet != rough || e.laying.ready == nil {
		t.Fatal("the sheet changed under a drag")
	}
	e.TypedKey(&fyne.KeyEvent{Name: fyne.KeyEscape})
	e.DragEnd()
	if e.sheet == rough || e.laying.ready != nil {
		t.Error("what was laid is not shown after the drag")
	}
}
