package pdf

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"slices"

	"github.com/jung-kurt/gofpdf"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/circuit"
)

// View says what the sheets of circuits show: which circuits, at which instant of which
// duty, by which signs. The zero View shows all circuits at the start of the first duty.
type View struct {
	Circuits []string // by name, one page each, in this order; nil = all
	Duty     int
	At       float64       // s
	Cycle    bool          // discs show the heat of the cycle, not of the instant
	Hide     figures.Signs // results that are left out
	Marks    map[string]map[string]circuit.Level
	Paper    Paper                    // A4 when not given
	Local    func(text string) string // puts the reader's decimal sign into what is drawn; nil = a point
}

// Paper is a size of page, lying [mm].
type Paper struct {
	Name string
	W, H float64
}

// The sizes of ISO 216 that circuits are printed on.
var (
	A4 = Paper{"A4", 297, 210}
	A3 = Paper{"A3", 420, 297}
)

// Papers lists them.
var Papers = []Paper{A4, A3}

// BusiestView shows all circuits while the one as found draws most power in the duty that
// stands for the year, as the report does.
func BusiestView(s *audit.Solution) View {
	at := mostDrawn(s)
	return View{Duty: at.duty, At: at.t}
}

// WriteSheets writes the circuits of a file, each as it is drawn on its sheet and fitted
// on a page with a frame and a title block, to w. s may be nil, or lack a circuit: it is
// then drawn without results. The error is that of w, of the PDF library, or of a View
// that names what is not there; nothing is written in the last two cases.
func WriteSheets(w io.Writer, f *audit.File, s *audit.Solution, v View, opt Options) error {
	b, err := newBoards(f, s, v, opt)
	if err != nil {
		return fmt.Errorf("print circuits: %w", err)
	}
	doc := pen.NewPDF("L", opt.Date)
	doc.SetAutoPageBreak(false, 0)
	doc.SetTitle(pen.Clean(b.title), true)
	doc.SetAuthor(pen.Clean(b.author), true)
	doc.SetCreator("Barlitre", true)
	b.print(&document{doc: doc})
	var buf bytes.Buffer
	if err := doc.Output(&buf); err != nil {
		return fmt.Errorf("print circuits: %w", err)
	}
	if _, err := w.Write(buf.Bytes()); err != nil {
		return fmt.Errorf("print circuits: %w", err)
	}
	return nil
}

// lying begins a page of a size.
func (d *document) lying(p Paper) pen.Pen {
	d.doc.AddPageFormat("L", gofpdf.SizeType{Wd: p.H, Ht: p.W})
	return pen.NewPDFPen(d.doc)
}

func (r *recorders) lying(Paper) pen.Pen { return r.page() }

// boards are the pages of a View.
type boards struct {
	View
	f             *audit.File
	s             *audit.Solution
	opt           Options
	pal           figures.Palette
	title, author string
	duty          string
	scales        figures.SheetScales
	all           []board
	before, pages int // pages of a report before these, and in all; 0 = there is no report
}

// board is a page: one circuit at one instant.
type board struct {
	*figures.Sheet
	e     *audit.CircuitEntry
	run   *audit.DutyRun
	state *figures.SheetState
}

func newBoards(f *audit.File, s *audit.Solution, v View, opt Options) (*boards, error) {
	if f == nil || len(f.Circuits) == 0 {
		return nil, errors.New("there is no circuit in the file; draw one first")
	}
	b := &boards{View: v, f: f, s: s, opt: opt, pal: figures.Light, title: f.Title, author: first(opt.Author, f.Site.Author)}
	if b.title == "" {
		b.title = "Hydraulic circuit"
	}
	if b.Paper == (Paper{}) {
		b.Paper = A4
	}
	if len(f.Duties) > 0 {
		if v.Duty < 0 || v.Duty >= len(f.Duties) {
			return nil, fmt.Errorf("there is no duty number %d; the file has %d", v.Duty+1, len(f.Duties))
		}
		b.duty = f.Duties[v.Duty].Name
	}
	names := v.Circuits
	if names == nil {
		for _, e := range f.Circuits {
			names = append(names, e.Name)
		}
	}
	var runs []*audit.DutyRun
	for _, name := range names {
		e := f.Circuit(name)
		if e == nil {
			return nil, fmt.Errorf("there is no circuit %q in the file", name)
		}
		one := b.board(e)
		b.all, runs = append(b.all, one), append(runs, one.run)
	}
	b.scales = figures.ScalesOf(runs...)
	return b, nil
}

// board lays a circuit out with the results it has.
func (b *boards) board(e *audit.CircuitEntry) board {
	out := board{e: e, Sheet: figures.NewSheet(e.Circuit)}
	if b.s == nil {
		return out
	}
	i := slices.IndexFunc(b.s.Circuits, func(c *audit.CircuitRun) bool { return c.Circuit.Name == e.Name })
	if i < 0 {
		return out
	}
	c := b.s.Circuits[i]
	out.Sheet = out.Labelled(c.Duties...)
	if b.Duty < len(c.Duties) && c.Duties[b.Duty].Balance != nil && c.Duties[b.Duty].Plot != nil {
		out.run = c.Duties[b.Duty]
		out.state = figures.StateAt(out.run, b.At)
		if b.Cycle {
			out.state = figures.OverCycle(out.run, b.At)
		}
	}
	return out
}

// first is the first of some texts that says anything.
func first(texts ...string) string {
	for _, t := range texts {
		if t != "" {
			return t
		}
	}
	return ""
}
