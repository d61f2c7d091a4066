package frame

import (
	"context"
	"fmt"
	"io"
	"path/filepath"
	"strings"
	"time"

	"fyne.io/fyne/v2"

	"barlitre/app/document"
	"barlitre/app/station"
	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pdf"
	"barlitre/audit/whole"
	"barlitre/machines/units"
)

// today is the date on printed sheets.
var today = time.Now

// printItems offer the sheets on each size of paper.
func (f *Frame) printItems() *fyne.MenuItem {
	m := fyne.NewMenuItem("Sheets as PDF", nil)
	m.ChildMenu = fyne.NewMenu("")
	for _, p := range pdf.Papers {
		m.ChildMenu.Items = append(m.ChildMenu.Items, fyne.NewMenuItem(p.Name+" landscape…", func() {
			if !f.asking() {
				f.printSheets(p)
			}
		}))
	}
	return m
}

// seen is the view of the sheets as they stand in the window: the circuits shown, at the
// clock, by the signs that are on, with the marks of the findings.
func (f *Frame) seen(on pdf.Paper) pdf.View {
	file := f.doc.File()
	v := pdf.View{Duty: f.duty, At: f.clock, Cycle: f.view.Cycle, Hide: f.view.Hide, Paper: on, Marks: figures.Marks(f.doc.Findings())}
	if f.settings.comma {
		v.Local = units.DecimalComma
	}
	if base := file.Base(); base != nil {
		v.Circuits = append(v.Circuits, base.Name)
	}
	if beside := f.Beside(); beside != "" {
		v.Circuits = append(v.Circuits, beside)
	}
	return v
}

// printSheets asks for a name and writes the sheets there.
func (f *Frame) printSheets(on pdf.Paper) {
	if len(f.doc.File().Circuits) == 0 {
		f.Say("There is no circuit to print yet; draw one, or take one from File > New.")
		return
	}
	name := strings.TrimSuffix(f.suggestedName(), ".yaml") + "-sheets.pdf"
	f.PickPlace("Save the sheets as PDF", name, func(path string) { f.writeSheets(path, on) })
}

// writeSheets writes them behind the window: what is drawn is what is seen now, with the
// results of the audit as it stands; they are waited for.
func (f *Frame) writeSheets(path string, on pdf.Paper) {
	file, v, opt := f.doc.File(), f.seen(on), pdf.Options{System: f.settings.system, Date: today()}
	var unsolved error
	f.Perform("Printing "+filepath.Base(path), func(ctx context.Context, tell document.Progress) error {
		return station.WriteSettled(ctx, f.doc, path, tell, func(w io.Writer, s *audit.Solution, err error) error {
			if unsolved = err; err == nil {
				file = s.File
			}
			return pdf.WriteSheets(w, file, s, v, opt)
		})
	}, func(err error) {
		switch {
		case f.cancelled(err, "Nothing was written, and the audit is still open here."):
		case err != nil:
			f.Fail(fmt.Errorf("print the sheets to %s: %w; nothing was written there, and the audit is still open here", path, whole.Plain(err)))
		case unsolved != nil:
			f.Say("Saved the sheets without results, for they are not solved: " + path)
		default:
			f.Say("Saved the sheets: " + path)
		}
	})
}
