package pdf

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"slices"

	"barlitre/audit"
	"barlitre/audit/pen"
)

// asks reports whether there is a sheet to print.
func (l *layout) asks() bool {
	return slices.ContainsFunc(l.r.Requests, func(r audit.Request) bool { return r.Missing == "" })
}

// requests prints the sheet of each circuit, on a page of its own where it fits; what needs none follows in a line.
func (l *layout) requests() {
	if !l.asks() {
		why := "No circuit was solved, so no cooler is asked for."
		if len(l.r.Requests) > 0 {
			why = l.r.Requests[0].Missing
		}
		l.para(why, l.body())
		return
	}
	first := true
	for _, r := range l.r.Requests {
		if !first && r.Missing == "" {
			l.newPage()
		}
		first = false
		l.fitted(func() {
			l.heading(2, r.Circuit, 12)
			if r.Missing != "" {
				l.para(r.Missing, l.body())
				return
			}
			l.request(r)
		})
	}
}

const requestNote = "Values are those of the audit; ______ is for whom the note names to fill in. Invented or assumed inputs stay what they are: see the notes."

func (l *layout) request(r audit.Request) {
	l.para(requestNote, l.small())
	t := table{cols: []column{{"", false}, {"", false}, {"", false}}}
	for _, g := range r.Groups {
		t.rows = append(t.rows, row{cells: []string{g.Title}, group: true})
		for _, x := range g.Rows {
			value := x.Value
			if x.Blank {
				value = "____________________"
			}
			t.rows = append(t.rows, row{cells: []string{x.Name, value, x.Note}})
		}
	}
	l.table(t)
	for _, c := range r.Cautions {
		st := l.small()
		st.c = l.pal.Ink
		l.need(2 * st.line())
		l.put(side, l.y+st.base(), "▲", style{st.size, false, l.pal.Danger}, pen.Left)
		l.lines(side+4, st.wrap(c, fullW-4), st)
		l.y += 0.6 * l.sheet.room
	}
}

// WriteRequest writes the cooler request sheets alone, a page for each circuit. It fails where there is none, and says why.
func WriteRequest(w io.Writer, s *audit.Solution, opt Options) error {
	if s == nil || s.File == nil {
		return errors.New("write cooler request sheet: there is no solved audit")
	}
	l := newLayout(s, opt)
	if !l.asks() {
		why := "no circuit was solved"
		if len(l.r.Requests) > 0 {
			why = l.r.Requests[0].Missing
		}
		return fmt.Errorf("write cooler request sheet: %s", why)
	}
	doc := pen.NewPDF("P", opt.Date)
	doc.SetAutoPageBreak(false, 0)
	doc.SetTitle(pen.Clean(string(Request)+": "+l.title()), true)
	doc.SetCreator("Barlitre", true)
	for _, to := range []paper{&recorders{}, &document{doc: doc}} { // the first counts the pages
		l.sheet = newSheet(to, 1, l.furniture(l.total))
		l.newPage()
		l.heading(1, string(Request), 30)
		l.para(l.title()+". "+l.site, l.body())
		l.requests()
		l.finish()
		l.total = l.number
	}
	var buf bytes.Buffer
	if err := doc.Output(&buf); err != nil {
		return fmt.Errorf("write cooler request sheet: %w", err)
	}
	_, err := w.Write(buf.Bytes())
	return err
}
