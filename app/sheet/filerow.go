package sheet

import (
	"fmt"
	"path/filepath"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/dialog"
	"fyne.io/fyne/v2/storage"

	"barlitre/app/widgets"
	"barlitre/circuit"
)

// fileRow is the row of a file beside the audit file: its name, typed or chosen.
type fileRow struct {
	*fieldRow
	param  *circuit.Param
	choose *link
	drop   *link
}

func (r *fileRow) key() string { return r.param.Key }

func newFileRow(p *panel, circuitName, block string, q *circuit.Param, target string) *fileRow {
	r := &fileRow{param: q}
	r.fieldRow = newFieldRow(p, q.Title, "field."+q.Key, target, r.take)
	r.field.Scroll = container.ScrollHorizontalOnly
	r.value = func() (text, hint, placeholder, unit string) {
		b := p.block(circuitName, block)
		if b == nil {
			return "", "", "", ""
		}
		word := b.Word(q.Key)
		show(r.drop, word != "")
		return word, q.Text, "name of a file beside the audit", ""
	}
	r.choose = widgets.Name(newLink("choose", r.ask), "field."+q.Key+".choose")
	r.drop = widgets.Name(newLink("drop", func() { r.handed(p.drop(target)) }), "field."+q.Key+".drop")
	r.head.Add(r.choose)
	r.head.Add(r.drop)
	r.stack(r.field)
	return r
}

// take hands a name over; none takes the file out.
func (r *fileRow) take(name string) error {
	doc := r.p.s.ctx.Doc()
	if name == "" {
		return r.p.drop(r.target)
	}
	if doc.Path() == "" {
		return fmt.Errorf("save the audit first (File > Save): %s must lie beside its file", name)
	}
	return r.p.set(r.target, name)
}

// handed shows what became of a name that was not typed.
func (r *fileRow) handed(err error) {
	r.fill()
	if err != nil {
		r.say(err.Error(), true)
	}
	r.p.relay()
}

// ask lets a file be chosen.
func (r *fileRow) ask() {
	ctx := r.p.s.ctx
	if ctx.Doc().Path() == "" {
		r.handed(r.take("the table of points"))
		return
	}
	d := dialog.NewFileOpen(func(f fyne.URIReadCloser, err error) {
		if err != nil {
			ctx.Fail(err)
		} else if f != nil {
			path := f.URI().Path()
			f.Close()
			r.handed(r.chosen(path))
		}
	}, ctx.Window())
	d.SetFilter(storage.NewExtensionFileFilter([]string{".csv", ".txt"}))
	d.SetTitleText("Choose measured points")
	d.SetConfirmText("Choose")
	d.SetView(dialog.ListView)
	if l, err := storage.ListerForURI(storage.NewFileURI(filepath.Dir(ctx.Doc().Path()))); err == nil {
		d.SetLocation(l)
	}
	k, room := widgets.Scale(), ctx.Window().Canvas().Size()
	d.Resize(fyne.NewSize(min(760*k, room.Width-40), min(520*k, room.Height-40)))
	d.Show()
	ctx.Keep(d)
}

// chosen takes a file that lies beside the audit file, or in a folder there.
func (r *fileRow) chosen(path string) error {
	dir := filepath.Dir(r.p.s.ctx.Doc().Path())
	name, err := filepath.Rel(dir, path)
	if err != nil || !filepath.IsLocal(name) {
		return fmt.Errorf("%s lies in %s. It must lie beside the audit file, which goes nowhere without it: copy it to %s and choose it there", filepath.Base(path), filepath.Dir(path), dir)
	}
	return r.take(filepath.ToSlash(name))
}
