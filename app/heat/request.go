package heat

import (
	"context"
	"errors"
	"fmt"
	"io"
	"path/filepath"
	"strings"
	"time"

	"barlitre/app/document"
	"barlitre/app/station"
	"barlitre/audit"
	"barlitre/audit/pdf"
	"barlitre/audit/whole"
)

// today is the date of the sheet.
var today = time.Now

// saveRequest asks for a name and writes the cooler request sheet.
func (h *Heat) saveRequest() {
	name := strings.TrimSuffix(strings.TrimSuffix(h.ctx.Doc().Title(), "*"), " (sample)")
	name = strings.TrimSuffix(name, filepath.Ext(name)) + "-cooler.pdf"
	h.ctx.PickPlace("Save the cooler request sheet", name, h.writeRequest)
}

// writeRequest writes it behind the window, for the audit as it stands: a page for each of the
// circuits shown, or with the ending .csv a table.
func (h *Heat) writeRequest(path string) {
	beside, opt := h.ctx.Beside(), pdf.Options{System: h.ctx.System(), Date: today()}
	h.ctx.Perform("Writing "+filepath.Base(path), func(ctx context.Context, tell document.Progress) error {
		return station.WriteSettled(ctx, h.ctx.Doc(), path, tell, func(w io.Writer, s *audit.Solution, unsolved error) error {
			if unsolved != nil {
				return unsolved
			}
			if s = s.Beside(beside); strings.EqualFold(filepath.Ext(path), ".csv") {
				return audit.WriteRequestCSV(w, s.Requests(opt.System))
			}
			return pdf.WriteRequest(w, s, opt)
		})
	}, func(err error) {
		switch {
		case errors.Is(err, context.Canceled):
			h.ctx.Say("Cancelled. No cooler request sheet was written.")
		case err != nil:
			h.ctx.Fail(fmt.Errorf("save the cooler request sheet to %s: %w; nothing was written there", path, whole.Plain(err)))
		default:
			h.ctx.Say("Saved the cooler request sheet: " + path)
		}
	})
}
