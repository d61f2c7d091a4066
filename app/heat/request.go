package heat

import (
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/dialog"

	"barlitre/app/station"
	"barlitre/audit"
	"barlitre/audit/pdf"
)

// today is the date of the sheet.
var today = time.Now

// saveRequest asks for a name and writes the cooler request sheet: a page for each circuit, or with the ending .csv a table.
func (h *Heat) saveRequest() {
	name := strings.TrimSuffix(strings.TrimSuffix(h.ctx.Doc().Title(), "*"), " (sample)")
	name = strings.TrimSuffix(name, filepath.Ext(name)) + "-cooler"
	if dir := os.Getenv(station.SaveDirVariable); dir != "" {
		for _, ending := range []string{".pdf", ".csv"} {
			h.writeRequest(filepath.Join(dir, name+ending))
		}
		return
	}
	d := dialog.NewFileSave(func(w fyne.URIWriteCloser, err error) {
		switch {
		case err != nil:
			h.ctx.Fail(fmt.Errorf("save the cooler request sheet: %w; nothing was written", err))
		case w != nil:
			h.writeRequest(station.Chosen(w, ".pdf"))
		}
	}, h.ctx.Window())
	d.SetFileName(name + ".pdf")
	d.Resize(fyne.NewSize(760, 520))
	d.Show()
	h.ctx.Keep(d)
}

func (h *Heat) writeRequest(path string) {
	s := h.ctx.Solution()
	if s == nil {
		h.ctx.Fail(errors.New("save the cooler request sheet: the audit is not solved yet; nothing was written"))
		return
	}
	err := station.WriteWhole(path, func(w io.Writer) error {
		if strings.EqualFold(filepath.Ext(path), ".csv") {
			return audit.WriteRequestCSV(w, s.Requests(h.ctx.System()))
		}
		return pdf.WriteRequest(w, s, pdf.Options{System: h.ctx.System(), Date: today()})
	})
	if err != nil {
		h.ctx.Fail(fmt.Errorf("save the cooler request sheet to %s: %w; nothing was written there", path, err))
		return
	}
	h.ctx.Say("Saved the cooler request sheet: " + path)
}
