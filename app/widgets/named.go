package widgets

import (
	"fmt"
	"io"
	"sort"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/widget"
)

// names maps the names scripts know objects by. Used on the UI goroutine only.
var names = map[string]fyne.CanvasObject{}

// Name gives an object a name for the text dump and returns it. A later object of
// the same name takes it over.
func Name[T fyne.CanvasObject](o T, name string) T {
	names[name] = o
	return o
}

// Named returns the object of a name, or nil.
func Named(name string) fyne.CanvasObject { return names[name] }

// Dump writes every named object that is shown on c: name, text, and position and
// size in pixels of the window, one a line, separated by tabs. Parts of figures
// follow their figure as figure/part. Scripts find places by it instead of by pixels.
func Dump(w io.Writer, c fyne.Canvas) {
	driver := fyne.CurrentApp().Driver()
	all := make([]string, 0, len(names))
	for name := range names {
		all = append(all, name)
	}
	sort.Strings(all)
	for _, name := range all {
		o := names[name]
		at := driver.AbsolutePositionForObject(o)
		if at.IsZero() || driver.CanvasForObject(o) != c || !o.Visible() {
			continue // not shown: the driver finds only what is visible
		}
		line := func(name, text string, x, y, width, height float32) {
			text = strings.NewReplacer("\n", " ", "\t", " ").Replace(text)
			k := c.Scale()
			fmt.Fprintf(w, "%s\t%s\t%.0f\t%.0f\t%.0f\t%.0f\n", name, text, x*k, y*k, width*k, height*k)
		}
		line(name, textOf(o), at.X, at.Y, o.Size().Width, o.Size().Height)
		if f, ok := o.(interface{ Parts() []Part }); ok {
			for _, p := range f.Parts() {
				line(name+"/"+p.Name, p.Text, at.X+float32(p.X), at.Y+float32(p.Y), float32(p.W), float32(p.H))
			}
		}
	}
}

func textOf(o fyne.CanvasObject) string {
	switch o := o.(type) {
	case interface{ DumpText() string }:
		return o.DumpText()
	case *widget.Label:
		return o.Text
	case *widget.Button:
		return o.Text
	case *widget.Entry:
		return o.Text
	case *widget.Check:
		return fmt.Sprintf("%s=%v", o.Text, o.Checked)
	case *widget.Select:
		return o.Selected
	case *canvas.Text:
		return o.Text
	}
	return ""
}
