package sheet

import (
	"slices"
	"sort"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/audit/pen"
	"barlitre/circuit"
)

// shelf is the list of kinds that a new block is chosen from, by typing or a click.
type shelf struct {
	e      *editor
	at     [2]float64 // where the block goes, in the circuit's coordinates
	search *keyed
	list   *widgets.Figure
	scroll *container.Scroll
	pop    *widget.PopUp
	kinds  []*circuit.Kind // that match what was typed
	heads  bool            // the groups stand above their kinds
	cursor int
}

// Sizes of the shelf [units at scale 1].
const (
	shelfWidth  = 380
	shelfHeight = 400
	shelfHead   = 24.0
	shelfRow    = 36.0
)

// openShelf lists what can be added to a sheet, at the pointer.
func (e *editor) openShelf() {
	w := e.s.ctx.Window()
	if w == nil || e.s.ctx.Doc().File() == nil {
		return
	}
	if e.index == 1 && e.s.editors[0].circuit < 0 { // a proposal stands beside something
		e = e.s.editors[0]
	}
	e.cancel()
	e.hover.hide()
	h := &shelf{e: e, at: e.target()}
	h.search = newKeyed(h.key)
	h.search.SetPlaceHolder("Type to search, such as relief")
	h.search.OnChanged = func(string) { h.filter() }
	h.list = widgets.NewFigure(fyne.NewSize(shelfWidth-16, shelfRow), h.draw)
	h.list.Tapped = func(p widgets.Part, _, _ float64) { h.choose(p.Name) }
	h.scroll = container.NewVScroll(h.list)
	widgets.Name(h.search, "shelf.search")
	widgets.Name(h.list, "shelf.list")
	h.pop = widget.NewPopUp(container.NewBorder(h.search, nil, nil, nil, h.scroll), w.Canvas())
	h.filter()
	k := widgets.Scale()
	e.s.popAt(h.pop, e.popPlace(), fyne.NewSize(shelfWidth*k, shelfHeight*k))
	w.Canvas().Focus(h.search)
	e.s.ctx.Say("Type a part of its name; arrow keys and Enter, or a click, put it on the sheet; Escape closes.")
}

// popPlace is where a small window of a sheet opens: at the pointer, or at its top.
func (e *editor) popPlace() fyne.Position {
	at := fyne.CurrentApp().Driver().AbsolutePositionForObject(e)
	if e.inside {
		return at.Add(e.pointer)
	}
	return at.AddXY(20, 20)
}

// popAt shows a small window inside the large one.
func (s *Station) popAt(pop *widget.PopUp, at fyne.Position, size fyne.Size) {
	room := s.ctx.Window().Canvas().Size()
	size = size.Min(room.SubtractWidthHeight(16, 16))
	pop.Resize(size)
	pop.ShowAtPosition(fyne.NewPos(max(0, min(at.X, room.Width-size.Width-8)), max(0, min(at.Y, room.Height-size.Height-8))))
	pop.Resize(size)
}

// key takes the keys that are not text.
func (h *shelf) key(k fyne.KeyName) bool {
	switch k {
	case fyne.KeyEscape:
		h.close()
	case fyne.KeyDown:
		h.goTo(h.cursor + 1)
	case fyne.KeyUp:
		h.goTo(h.cursor - 1)
	case fyne.KeyReturn, fyne.KeyEnter:
		if h.cursor < len(h.kinds) {
			h.choose(h.kinds[h.cursor].Name)
		}
	default:
		return false
	}
	return true
}

func (h *shelf) close() {
	h.pop.Hide()
	h.e.focus()
	h.e.s.ctx.Say("")
}

// choose puts a block of a kind on the sheet; "" is a place beside the rows.
func (h *shelf) choose(kind string) {
	if circuit.KindNamed(kind) == nil {
		return
	}
	h.close()
	h.e.add(kind, h.at)
}

// filter lists the kinds that have all words typed: those with them in the title first.
func (h *shelf) filter() {
	words := strings.Fields(strings.ToLower(h.search.Text))
	h.kinds, h.heads, h.cursor = slices.Clone(circuit.Catalog()), len(words) == 0, 0
	if len(words) > 0 {
		rank := map[*circuit.Kind]int{}
		h.kinds = slices.DeleteFunc(h.kinds, func(k *circuit.Kind) bool {
			rank[k] = rankOf(k, words)
			return rank[k] == noMatch
		})
		sort.SliceStable(h.kinds, func(i, j int) bool {
			a, b := h.kinds[i], h.kinds[j]
			if rank[a] != rank[b] {
				return rank[a] < rank[b]
			}
			return commonness(a) < commonness(b)
		})
	} else {
		groups := groupOrder()
		sort.SliceStable(h.kinds, func(i, j int) bool { return groups[h.kinds[i].Group] < groups[h.kinds[j].Group] })
	}
	_, _, height := h.place(len(h.kinds))
	h.list.SetMin(fyne.NewSize(shelfWidth-16, float32(max(height, shelfRow))))
	h.list.Refresh()
	h.scroll.ScrollToTop()
}

// noMatch is the rank of a kind that does not have what was typed.
const noMatch = 4

// rankOf tells how well a kind goes with words: 0 its title begins with a whole one, 1 with
// a part of one, 2 they stand in title or name, 3 in its group or text.
func rankOf(k *circuit.Kind, words []string) int {
	rank := 0
	title := strings.ToLower(k.Title)
	first, _, _ := strings.Cut(strings.ReplaceAll(title, ",", " "), " ") // "cylinder-switched" is one word
	for _, w := range words {
		switch {
		case first == strings.TrimSuffix(w, ","):
		case strings.HasPrefix(title, w):
			rank = max(rank, 1)
		case strings.Contains(title+" "+k.Name, w):
			rank = max(rank, 2)
		case strings.Contains(strings.ToLower(k.Group+" "+k.Text), w):
			rank = max(rank, 3)
		default:
			return noMatch
		}
	}
	return rank
}

// common lists the kinds that most circuits have, the commonest of like words first (common
// practice, no source).
var common = []string{"tank", "pump", "cylinder", "motor", "electric_motor", "valve", "relief", "check", "filter", "cooler", "line"}

// commonness is the place of a kind in common; the others come after.
func commonness(k *circuit.Kind) int {
	if i := slices.Index(common, k.Name); i >= 0 {
		return i
	}
	return len(common)
}

// groupOrder numbers the groups in the order of the catalog.
func groupOrder() map[string]int {
	out := map[string]int{}
	for _, k := range circuit.Catalog() {
		if _, known := out[k.Group]; !known {
			out[k.Group] = len(out)
		}
	}
	return out
}

// place returns where row i stands, whether a group begins above it, and where the row ends.
func (h *shelf) place(i int) (y float64, begins bool, end float64) {
	for j := 0; j <= i && j < len(h.kinds); j++ {
		if begins = h.heads && (j == 0 || h.kinds[j].Group != h.kinds[j-1].Group); begins {
			end += shelfHead
		}
		y, end = end, end+shelfRow
	}
	return y, begins, end
}

// goTo moves the cursor and keeps it in sight.
func (h *shelf) goTo(i int) {
	if i < 0 || i >= len(h.kinds) {
		return
	}
	h.cursor = i
	y, _, end := h.place(i)
	k := widgets.Scale()
	h.scroll.Offset.Y = max(min(h.scroll.Offset.Y, float32(y-shelfHead)*k), float32(end)*k-h.scroll.Size().Height, 0)
	h.scroll.Refresh()
	h.list.Refresh()
}

func (h *shelf) draw(p pen.Pen, w, _ float64) []widgets.Part {
	pal := h.e.s.ctx.Palette()
	const gap = 10.0
	var parts []widgets.Part
	for i, k := range h.kinds {
		y, begins, _ := h.place(i)
		if begins {
			p.Text(pen.Pt{X: gap, Y: y - 6}, strings.ToUpper(k.Group[:1])+k.Group[1:], 11, pal.Secondary, pen.Left, true)
		}
		if i == h.cursor {
			fill := pal.Gain
			fill.A = 34
			pen.RoundRect(p, 2, y+1, w-4, shelfRow-2, 4, fill, pen.Stroke{W: 1, C: pal.Gain})
		}
		p.Text(pen.Pt{X: gap, Y: y + 15}, k.Title, 12.5, pal.Ink, pen.Left, false)
		p.Text(pen.Pt{X: gap, Y: y + 30}, pen.Shorten(strings.ReplaceAll(k.Text, "`", ""), 11, false, w-2*gap), 11, pal.Secondary, pen.Left, false)
		parts = append(parts, widgets.Part{Name: k.Name, Text: k.Title, Y: y, W: w, H: shelfRow, Click: true})
	}
	if len(h.kinds) == 0 {
		p.Text(pen.Pt{X: gap, Y: 22}, "No kind of block has these words.", 12.5, pal.Secondary, pen.Left, false)
	}
	return parts
}

// keyed is an entry whose keys are offered to its owner first.
type keyed struct {
	widget.Entry
	key func(k fyne.KeyName) bool
}

func newKeyed(key func(k fyne.KeyName) bool) *keyed {
	e := &keyed{key: key}
	e.ExtendBaseWidget(e)
	return e
}

// Typing keeps undo in the entry.
func (e *keyed) Typing() bool { return true }

// TypedKey offers a key, then lets the entry have it.
func (e *keyed) TypedKey(k *fyne.KeyEvent) {
	if !e.key(k.Name) {
		e.Entry.TypedKey(k)
	}
}
